//! A whole shot of two gases, closed at both ends, by a Godunov scheme whose cells move with the gas.
//!
//! Knows the conservation laws and the caloric equation of two perfect gases, and nothing of wave diagrams: no closed form for a shock, an expansion, a
//! reflection or the contact surface enters. Since no gas leaves its cell the contact surface stays sharp, and cells crowd behind the shocks.
//!
//! Second order in smooth flow: velocity and pressure are linear in each cell with the limiter of B. van Leer (J. Comput. Phys. 32 (1979) 101); at a face
//! the velocity and pressure at which two waves that conserve mass, momentum and energy meet, found by plain iteration (the same article, and E. F. Toro,
//! Riemann Solvers and Numerical Methods for Fluid Dynamics, 3rd ed. (2009), section 9.4.2: the two-shock approximation); two-stage Runge-Kutta as in
//! [`euler`](crate::euler). All from memory.

/// The fill of a section of the tube: a perfect gas at rest.
#[derive(Clone, Copy, Debug)]
pub struct Section {
    /// Length, m.
    pub length: f64,
    /// γ.
    pub heat_capacity_ratio: f64,
    /// Density, kg/m³.
    pub density: f64,
    /// Pressure, Pa.
    pub pressure: f64,
}

/// What a run shows at one time.
#[derive(Clone, Copy, Debug)]
pub struct Sample {
    /// Since the diaphragm vanished, s.
    pub time: f64,
    /// At the end wall of the driven section, Pa.
    pub end_wall_pressure: f64,
    /// Where the two gases meet, m from the diaphragm.
    pub contact_position: f64,
    /// How fast that place moves toward the end wall, m/s.
    pub contact_speed: f64,
    /// The pressure there, Pa.
    pub contact_pressure: f64,
}

/// Cells of the driver per length, over those of the driven section: the driver gas expands where the driven gas is compressed.
const DRIVER_CELLS: f64 = 2.0;

/// Largest Courant number: one half keeps the limiter monotone.
const COURANT: f64 = 0.45;

/// Relative change of the pressure at a face with which its iteration ends: far below the error of the scheme.
const ITERATED: f64 = 1e-9;
/// More iterations than any face takes.
const MOST_ITERATIONS: usize = 100;

/// Fires a shot on a grid with so many cells in the driven section, and follows it for some time (s).
#[must_use]
pub fn fire([driver, driven]: [Section; 2], cells: usize, until: f64) -> Vec<Sample> {
    let mut tube = Tube::new([driver, driven], cells);
    let (mut time, mut samples) = (0.0, Vec::new());
    while time < until {
        time += tube.step();
        let (faces, contact) = (&tube.star, tube.contact);
        samples.push(Sample {
            time,
            end_wall_pressure: faces[faces.len() - 1][1],
            contact_position: tube.moving.faces[contact],
            contact_speed: faces[contact][0],
            contact_pressure: faces[contact][1],
        });
    }
    samples
}

/// What changes with time.
#[derive(Clone, Debug)]
struct Moving {
    /// Positions of the faces; one more than cells.
    faces: Vec<f64>,
    /// Velocity of each cell.
    velocity: Vec<f64>,
    /// Total energy of each cell for its mass.
    energy: Vec<f64>,
}

/// Density and pressure of a cell, the slopes of velocity and pressure over half of it.
#[derive(Clone, Copy, Debug, Default)]
struct Cell {
    density: f64,
    velocity: f64,
    pressure: f64,
    slopes: [f64; 2],
}

#[derive(Clone, Debug)]
struct Tube {
    mass: Vec<f64>,
    gamma: Vec<f64>,
    moving: Moving,
    /// The face between the gases.
    contact: usize,
    cells: Vec<Cell>,
    /// Velocity and pressure at each face in the last stage.
    star: Vec<[f64; 2]>,
}

impl Tube {
    fn new([driver, driven]: [Section; 2], count: usize) -> Self {
        let driven_width = driven.length / count as f64;
        let contact = (DRIVER_CELLS * driver.length / driven_width).round() as usize;
        let total = contact + count;
        let driver_width = driver.length / contact as f64;
        let faces = (0..=total).map(|face| {
            if face < contact { driver_width * (face as f64 - contact as f64) } else { driven_width * (face - contact) as f64 }
        });
        let cells = |of: &dyn Fn(Section, f64) -> f64| {
            let (left, right) = (of(driver, driver_width), of(driven, driven_width));
            (0..total).map(|cell| if cell < contact { left } else { right }).collect::<Vec<_>>()
        };
        Self {
            mass: cells(&|section, width| section.density * width),
            gamma: cells(&|section, _| section.heat_capacity_ratio),
            moving: Moving {
                faces: faces.collect(),
                velocity: vec![0.0; total],
                energy: cells(&|section, _| section.pressure / ((section.heat_capacity_ratio - 1.0) * section.density)),
            },
            contact,
            cells: vec![Cell::default(); total],
            star: vec![[0.0; 2]; total + 1],
        }
    }

    /// One time step; returns its length.
    fn step(&mut self) -> f64 {
        self.read();
        let crossing = |(place, cell): (usize, &Cell)| self.width(place) / (self.gamma[place] * cell.pressure / cell.density).sqrt();
        let length = COURANT * self.cells.iter().enumerate().map(crossing).fold(f64::INFINITY, f64::min);
        let start = self.moving.clone();
        self.advance(length);
        self.read();
        self.advance(length);
        let Moving { faces, velocity, energy } = &mut self.moving;
        for (now, before) in [(faces, start.faces), (velocity, start.velocity), (energy, start.energy)] {
            for (now, before) in now.iter_mut().zip(before) {
                *now = 0.5 * (*now + before);
            }
        }
        length
    }

    fn width(&self, cell: usize) -> f64 {
        self.moving.faces[cell + 1] - self.moving.faces[cell]
    }

    /// The state of each cell from what is conserved.
    fn read(&mut self) {
        for place in 0..self.cells.len() {
            let velocity = self.moving.velocity[place];
            let density = self.mass[place] / self.width(place);
            let pressure = (self.gamma[place] - 1.0) * density * (self.moving.energy[place] - 0.5 * velocity * velocity);
            self.cells[place] = Cell { density, velocity, pressure, slopes: [0.0; 2] };
        }
        // Velocity and pressure are steady across the contact surface too; at the walls the cells next to them stay level.
        for place in 1..self.cells.len() - 1 {
            let [before, here, after] = [place - 1, place, place + 1].map(|near| (self.width(near), self.cells[near]));
            let slope = |pick: fn(&Cell) -> f64| {
                let rise = |left: &(f64, Cell), right: &(f64, Cell)| (pick(&right.1) - pick(&left.1)) / (left.0 + right.0);
                here.0 * limited(rise(&before, &here), rise(&here, &after))
            };
            self.cells[place].slopes = [slope(|cell| cell.velocity), slope(|cell| cell.pressure)];
        }
    }

    /// One explicit Euler stage.
    fn advance(&mut self, length: f64) {
        let count = self.cells.len();
        for face in 0..=count {
            // A wall is the plane of a mirror.
            let left = if face == 0 { self.side(0, -1.0).mirrored() } else { self.side(face - 1, 1.0) };
            let right = if face == count { self.side(count - 1, 1.0).mirrored() } else { self.side(face, -1.0) };
            self.star[face] = meeting(left, right);
        }
        for (position, [velocity, _]) in self.moving.faces.iter_mut().zip(&self.star) {
            *position += length * velocity;
        }
        for (place, star) in self.star.windows(2).enumerate() {
            let [[left_velocity, left_pressure], [right_velocity, right_pressure]] = [star[0], star[1]];
            let ratio = length / self.mass[place];
            self.moving.velocity[place] -= ratio * (right_pressure - left_pressure);
            self.moving.energy[place] -= ratio * (right_pressure * right_velocity - left_pressure * left_velocity);
        }
    }

    /// The gas at the left (−1) or right (1) side of a cell. Its density only weighs a difference that is of second order itself.
    fn side(&self, place: usize, side: f64) -> Side {
        let Cell { density, velocity, pressure, slopes } = self.cells[place];
        Side { gamma: self.gamma[place], density, velocity: velocity + side * slopes[0], pressure: pressure + side * slopes[1] }
    }
}

/// Gas at a face.
#[derive(Clone, Copy, Debug)]
struct Side {
    gamma: f64,
    density: f64,
    velocity: f64,
    pressure: f64,
}

impl Side {
    fn mirrored(self) -> Self {
        Self { velocity: -self.velocity, ..self }
    }

    /// Mass that a wave to this pressure takes up in a second, for a square metre: the three conservation laws.
    fn mass_flow(self, pressure: f64) -> f64 {
        (self.density * (self.gamma * self.pressure + 0.5 * (self.gamma + 1.0) * (pressure - self.pressure))).sqrt()
    }
}

/// Velocity and pressure at which the waves into both sides meet.
fn meeting(left: Side, right: Side) -> [f64; 2] {
    let mut pressure = 0.5 * (left.pressure + right.pressure);
    for _ in 0..MOST_ITERATIONS {
        let flows = [left.mass_flow(pressure), right.mass_flow(pressure)];
        let sum = flows[0] + flows[1];
        let next = (flows[1] * left.pressure + flows[0] * right.pressure + flows[0] * flows[1] * (left.velocity - right.velocity)) / sum;
        let done = (next - pressure).abs() <= ITERATED * pressure;
        pressure = next;
        if done {
            let velocity = (flows[0] * left.velocity + flows[1] * right.velocity + left.pressure - right.pressure) / sum;
            return [velocity, pressure];
        }
    }
    panic!("no meeting of {left:?} and {right:?}");
}

/// The harmonic mean of two slopes of one sign, zero at an extreme.
fn limited(a: f64, b: f64) -> f64 {
    if a * b <= 0.0 { 0.0 } else { 2.0 * a * b / (a + b) }
}
