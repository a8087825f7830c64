//! A shock that reflects off a closed end, by a finite-volume solution of the one-dimensional Euler equations.
//!
//! Knows the conservation laws, the caloric equation of a perfect gas and a wall, and nothing of reflected shocks.
//! Second order in smooth flow: piecewise linear primitive variables with the minmod limiter, the HLLC flux
//! (E. F. Toro, M. Spruce and W. Speares, Shock Waves 4 (1994) 25), two-stage strong-stability-preserving Runge-Kutta
//! (C.-W. Shu and S. Osher, J. Comput. Phys. 77 (1988) 439; both from memory).

/// Density, velocity and pressure in any consistent units.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Primitive {
    /// Density.
    pub density: f64,
    /// Velocity towards the closed end.
    pub velocity: f64,
    /// Pressure.
    pub pressure: f64,
}

/// Conserved densities: mass, momentum, total energy.
type Conserved = [f64; 3];

/// What a run shows.
#[derive(Clone, Copy, Debug)]
pub struct Plateau {
    /// Mean pressure between the wall and the reflected shock.
    pub pressure: f64,
    /// Mean density there.
    pub density: f64,
    /// Mean of p/ρ there: the temperature in units in which the specific gas constant is one.
    pub temperature: f64,
    /// Mean speed of the gas there (zero for a perfect run).
    pub velocity: f64,
    /// Speed of the reflected shock away from the wall, laboratory frame.
    pub reflected_speed: f64,
    /// Speed of the incident shock before it reaches the wall.
    pub incident_speed: f64,
}

/// A tube of unit length with a closed right end; its left end is closed too, or gas flows in there.
#[derive(Clone, Debug)]
struct Tube {
    heat_capacity_ratio: f64,
    inflow: Option<Primitive>,
    cells: Vec<Conserved>,
    width: f64,
}

/// Position of the shock at the start. Its sharp initial profile leaves a small entropy wave, which follows the gas;
/// the run ends well before the reflected shock meets it.
const START: f64 = 0.1;

/// Largest Courant number: the scheme is stable to 1, one half keeps the limiter monotone.
const COURANT: f64 = 0.45;

/// Runs a shock from state `ahead` (at rest) to `behind` into the closed end on a grid of `cells` cells.
///
/// `behind` must be the state behind a shock that runs into `ahead`; the incident speed in the result tells.
#[must_use]
pub fn reflect(heat_capacity_ratio: f64, ahead: Primitive, behind: Primitive, cells: usize) -> Plateau {
    let mut tube = Tube::new(heat_capacity_ratio, ahead, behind, START, cells);
    let mut time = 0.0;
    let (mut incoming, mut outgoing) = (Vec::new(), Vec::new());
    let incident_level = 0.5 * (ahead.pressure + behind.pressure);
    loop {
        time += tube.step();
        let wall_pressure = tube.primitive(cells - 1).pressure;
        if wall_pressure < incident_level {
            incoming.push((time, tube.crossing(incident_level)));
            continue;
        }
        // The gas that met the sharp start has come this far.
        let marked = START + behind.velocity * time;
        // Past the incident pressure at the wall, the reflected shock is where half of the rise is reached.
        let position = tube.crossing(0.5 * (behind.pressure + wall_pressure));
        let clear = 1.0 - position;
        if wall_pressure > behind.pressure {
            outgoing.push((time, clear));
        }
        if clear > 0.55 * (1.0 - marked) {
            let [pressure, density, temperature, velocity] = tube.mean(position);
            // The first half of each way still remembers the start and the wall.
            let reflected_speed = slope(&outgoing[outgoing.len() / 2..]);
            let incident_speed = slope(&incoming[incoming.len() / 2..]);
            return Plateau { pressure, density, temperature, velocity, reflected_speed, incident_speed };
        }
    }
}

/// Times and pressures at the right end of a tube that is closed at both ends, after a diaphragm at `diaphragm` between two states of one gas opens
/// at once; in a tube of unit length, up to a time.
#[must_use]
pub fn end_wall_pressure(
    heat_capacity_ratio: f64,
    [left, right]: [Primitive; 2],
    diaphragm: f64,
    cells: usize,
    until: f64,
) -> Vec<(f64, f64)> {
    let mut tube = Tube::new(heat_capacity_ratio, right, left, diaphragm, cells);
    tube.inflow = None;
    let (mut time, mut history) = (0.0, Vec::new());
    while time < until {
        time += tube.step();
        history.push((time, tube.primitive(cells - 1).pressure));
    }
    history
}

impl Tube {
    fn new(heat_capacity_ratio: f64, ahead: Primitive, behind: Primitive, start: f64, count: usize) -> Self {
        let width = 1.0 / count as f64;
        let mut tube = Self { heat_capacity_ratio, inflow: Some(behind), cells: Vec::with_capacity(count), width };
        for place in 0..count {
            let state = if tube.centre(place) < start { behind } else { ahead };
            tube.cells.push(conserved(heat_capacity_ratio, state));
        }
        tube
    }

    fn centre(&self, place: usize) -> f64 {
        (place as f64 + 0.5) * self.width
    }

    fn primitive(&self, place: usize) -> Primitive {
        primitive(self.heat_capacity_ratio, self.cells[place])
    }

    /// One time step; returns its length.
    fn step(&mut self) -> f64 {
        let fastest = (0..self.cells.len())
            .map(|place| self.primitive(place))
            .map(|state| state.velocity.abs() + sound_speed(self.heat_capacity_ratio, state))
            .fold(0.0, f64::max);
        let length = COURANT * self.width / fastest;
        let start = self.cells.clone();
        self.advance(length);
        self.advance(length);
        for (cell, before) in self.cells.iter_mut().zip(start) {
            *cell = core::array::from_fn(|k| 0.5 * (cell[k] + before[k]));
        }
        length
    }

    /// One explicit Euler stage.
    fn advance(&mut self, length: f64) {
        let gamma = self.heat_capacity_ratio;
        let states = self.with_ghosts();
        let slopes: Vec<[f64; 3]> =
            states.windows(3).map(|near| core::array::from_fn(|k| minmod(near[1][k] - near[0][k], near[2][k] - near[1][k]))).collect();
        let face = |cell: usize, side: f64| {
            let [density, velocity, pressure] = core::array::from_fn(|k| 0.5f64.mul_add(side * slopes[cell - 1][k], states[cell][k]));
            Primitive { density, velocity, pressure }
        };
        // Ghost cells are 0, 1 and the last two; face f lies between cells f + 1 and f + 2.
        let fluxes: Vec<Conserved> = (0..=self.cells.len()).map(|f| hllc(gamma, face(f + 1, 1.0), face(f + 2, -1.0))).collect();
        let ratio = length / self.width;
        for (cell, flux) in self.cells.iter_mut().zip(fluxes.windows(2)) {
            for k in 0..3 {
                cell[k] -= ratio * (flux[1][k] - flux[0][k]);
            }
        }
    }

    /// Primitive variables with two inflow cells on the left, or two mirrored ones, and two mirrored cells behind the wall.
    fn with_ghosts(&self) -> Vec<[f64; 3]> {
        let list = |state: Primitive| [state.density, state.velocity, state.pressure];
        let count = self.cells.len();
        let mirrored = |place: usize| {
            let [density, velocity, pressure] = list(self.primitive(place));
            [density, -velocity, pressure]
        };
        let mut states = self.inflow.map_or_else(|| vec![mirrored(1), mirrored(0)], |inflow| vec![list(inflow); 2]);
        states.extend((0..count).map(|place| list(self.primitive(place))));
        states.extend([count - 1, count - 2].map(mirrored));
        states
    }

    /// Where the pressure crosses `level`, looked for from the wall; linear between cell centres.
    fn crossing(&self, level: f64) -> f64 {
        let pressure = |place: usize| self.primitive(place).pressure - level;
        for place in (1..self.cells.len()).rev() {
            let (left, right) = (pressure(place - 1), pressure(place));
            if (left > 0.0) != (right > 0.0) {
                return self.centre(place - 1) + self.width * left / (left - right);
            }
        }
        1.0
    }

    /// Mean pressure, density, p/ρ and velocity between a quarter and three quarters of the way from the wall to
    /// `shock`: away from the heated cells at the wall and from the shock.
    fn mean(&self, shock: f64) -> [f64; 4] {
        let clear = 1.0 - shock;
        let (low, high) = (1.0 - 0.75 * clear, 1.0 - 0.25 * clear);
        let (mut sum, mut count) = ([0.0; 4], 0.0);
        for place in (0..self.cells.len()).filter(|place| (low..high).contains(&self.centre(*place))) {
            let state = self.primitive(place);
            let values = [state.pressure, state.density, state.pressure / state.density, state.velocity];
            sum = core::array::from_fn(|k| sum[k] + values[k]);
            count += 1.0;
        }
        sum.map(|total| total / count)
    }
}

fn conserved(gamma: f64, state: Primitive) -> Conserved {
    let momentum = state.density * state.velocity;
    [state.density, momentum, state.pressure / (gamma - 1.0) + 0.5 * momentum * state.velocity]
}

fn primitive(gamma: f64, [density, momentum, energy]: Conserved) -> Primitive {
    let velocity = momentum / density;
    Primitive { density, velocity, pressure: (gamma - 1.0) * (energy - 0.5 * momentum * velocity) }
}

fn sound_speed(gamma: f64, state: Primitive) -> f64 {
    (gamma * state.pressure / state.density).sqrt()
}

fn minmod(a: f64, b: f64) -> f64 {
    if a * b <= 0.0 {
        0.0
    } else if a.abs() < b.abs() {
        a
    } else {
        b
    }
}

fn flux(state: Primitive, conserved: Conserved) -> Conserved {
    let Primitive { velocity, pressure, .. } = state;
    [conserved[1], conserved[1] * velocity + pressure, (conserved[2] + pressure) * velocity]
}

/// Flux between two states by the HLLC solver, with the pressure estimate and wave speeds of Toro's book (section 10.5).
fn hllc(gamma: f64, left: Primitive, right: Primitive) -> Conserved {
    let (a_left, a_right) = (sound_speed(gamma, left), sound_speed(gamma, right));
    let mean = 0.25 * (left.density + right.density) * (a_left + a_right);
    let guess = 0.5 * (left.pressure + right.pressure) - 0.5 * (right.velocity - left.velocity) * mean;
    let stretch = |pressure: f64| {
        let over = (guess / pressure - 1.0).max(0.0);
        (1.0 + 0.5 * (gamma + 1.0) / gamma * over).sqrt()
    };
    let slowest = left.velocity - a_left * stretch(left.pressure);
    let fastest = right.velocity + a_right * stretch(right.pressure);
    let (from_left, from_right) = (left.density * (slowest - left.velocity), right.density * (fastest - right.velocity));
    let contact = (right.pressure - left.pressure + from_left * left.velocity - from_right * right.velocity) / (from_left - from_right);

    let (state, wave) = if contact >= 0.0 { (left, slowest) } else { (right, fastest) };
    let outer = conserved(gamma, state);
    let plain = flux(state, outer);
    if (contact >= 0.0) == (wave >= 0.0) {
        return plain;
    }
    let Primitive { density, velocity, pressure } = state;
    let inner_density = density * (wave - velocity) / (wave - contact);
    let energy = outer[2] / density + (contact - velocity) * (contact + pressure / (density * (wave - velocity)));
    let inner = [inner_density, inner_density * contact, inner_density * energy];
    core::array::from_fn(|k| plain[k] + wave * (inner[k] - outer[k]))
}

/// Slope of the least-squares line through the points.
fn slope(points: &[(f64, f64)]) -> f64 {
    let count = points.len() as f64;
    let mean = |pick: fn(&(f64, f64)) -> f64| points.iter().map(pick).sum::<f64>() / count;
    let (x, y) = (mean(|p| p.0), mean(|p| p.1));
    let product: f64 = points.iter().map(|p| (p.0 - x) * (p.1 - y)).sum();
    product / points.iter().map(|p| (p.0 - x).powi(2)).sum::<f64>()
}
