//! A whole plan in plain doubles: careful forms that keep their digits, and no proof. What the proven plan is timed against, and compared with.
//!
//! Constant heat capacities. Relations of a normal shock and of its reflection (J. D. Anderson, Modern Compressible Flow, chapters 3 and 7), of a simple wave
//! and of two waves that meet (E. F. Toro, Riemann Solvers and Numerical Methods for Fluid Dynamics, chapter 4), crossings of straight lines; all from memory,
//! in M² − 1 and p/p5 − 1, so that weak waves keep their digits.

/// R, J/(mol K), of the SI.
const GAS_CONSTANT: f64 = 8.314_462_618_153_24;

/// A gas of constant heat capacity.
#[derive(Clone, Copy, Debug)]
pub struct PlainGas {
    /// γ.
    pub gamma: f64,
    /// kg/mol.
    pub molar_mass: f64,
}

/// What a plan starts from: SI units.
#[derive(Clone, Copy, Debug)]
pub struct Wanted {
    /// Test gas and T1.
    pub test_gas: (PlainGas, f64),
    /// T5 and p5.
    pub target: [f64; 2],
    /// Driver gas and T4.
    pub driver: (PlainGas, f64),
    /// L1 and L4.
    pub lengths: [f64; 2],
    /// Measured over ideal Mach number, and its standard uncertainty.
    pub efficiency: [f64; 2],
}

/// Pressure, temperature, density, sound speed.
#[derive(Clone, Copy, Debug)]
pub struct PlainState {
    /// Pa.
    pub pressure: f64,
    /// K.
    pub temperature: f64,
    /// kg/m³.
    pub density: f64,
    /// m/s.
    pub sound_speed: f64,
}

/// After the reflected shock has met the contact surface.
#[derive(Clone, Copy, Debug)]
pub struct PlainMeeting {
    /// Right over left side of the condition of tailoring, less 1.
    pub mismatch: f64,
    /// At the contact surface.
    pub pressure: f64,
    /// Of the contact surface, toward the end wall.
    pub contact_speed: f64,
    /// Of the shock into the driver gas: Mach number, speed, and the sound speed behind it.
    pub transmitted: [f64; 3],
    /// Of the returned wave: Mach number and speed.
    pub returned: [f64; 2],
    /// Once the returned wave has reflected.
    pub end_wall_pressure: f64,
}

/// The whole plan.
#[derive(Clone, Copy, Debug)]
pub struct PlainPlan {
    /// p1.
    pub fill_pressure: f64,
    /// `U_S`, M, u2 and `U_R`.
    pub speeds: [f64; 4],
    /// States 2, 5 and 3.
    pub states: [PlainState; 3],
    /// Ideal p4; p4 at the efficiency plus its uncertainty, at the efficiency, and at that less its uncertainty.
    pub driver_pressures: [f64; 4],
    /// The contact surface.
    pub meeting: PlainMeeting,
    /// Beginning and end of the uniform time at the end wall.
    pub uniform: [f64; 2],
    /// Whether the contact surface ends it.
    pub by_contact: bool,
    /// The shortest driver whose length does not.
    pub shortest_driver: f64,
    /// Where and when: the reflected shock meets the contact surface, the head leaves the fan, meets the contact surface, meets the reflected shock.
    pub crossings: [[f64; 2]; 4],
}

impl PlainGas {
    fn sound_speed(self, temperature: f64) -> f64 {
        (self.gamma * GAS_CONSTANT * temperature / self.molar_mass).sqrt()
    }

    fn state(self, pressure: f64, temperature: f64) -> PlainState {
        let density = pressure * self.molar_mass / (GAS_CONSTANT * temperature);
        PlainState { pressure, temperature, density, sound_speed: self.sound_speed(temperature) }
    }

    /// z = M² − 1 of the shock for which T5/T1 − 1 is `excess`: 2(γ−1)(3γ−1)z² + (γ+1)[4(γ−1) − (γ+1)e]z − (γ+1)²e = 0.
    fn strength(self, excess: f64) -> f64 {
        let g = self.gamma;
        let a = 2.0 * (g - 1.0) * (3.0 * g - 1.0);
        let b = (g + 1.0) * (4.0 * (g - 1.0) - (g + 1.0) * excess);
        let c = (g + 1.0).powi(2) * excess;
        let root = (b * b + 4.0 * a * c).sqrt();
        if b > 0.0 { 2.0 * c / (b + root) } else { (root - b) / (2.0 * a) }
    }

    /// p2/p1 and T2/T1.
    fn jump(self, z: f64) -> [f64; 2] {
        let g = self.gamma;
        let pressure = 1.0 + 2.0 * g / (g + 1.0) * z;
        [pressure, pressure * ((g - 1.0) * z + g + 1.0) / ((g + 1.0) * (1.0 + z))]
    }

    /// u2/a1.
    fn gas_speed(self, z: f64) -> f64 {
        2.0 * z / ((self.gamma + 1.0) * (1.0 + z).sqrt())
    }

    /// z of the shock that takes the pressure up by this share.
    fn strength_of_pressure(self, excess: f64) -> f64 {
        0.5 * (self.gamma + 1.0) / self.gamma * excess
    }
}

impl Wanted {
    /// p4/p2 and a3/a4 for gas of this speed; no pressure where the driver gas does not reach it.
    fn expansion(&self, gas_speed: f64, sound_speed_4: f64) -> [f64; 2] {
        let g = self.driver.0.gamma;
        let ratio = 1.0 - 0.5 * (g - 1.0) * gas_speed / sound_speed_4;
        [if ratio > 0.0 { ratio.powf(-2.0 * g / (g - 1.0)) } else { f64::NAN }, ratio]
    }

    /// The plan.
    #[must_use]
    pub fn plan(&self) -> PlainPlan {
        let (gas, temperature) = self.test_gas;
        let g = gas.gamma;
        let [temperature_5, pressure_5] = self.target;
        let z = gas.strength((temperature_5 - temperature) / temperature);
        let mach = (1.0 + z).sqrt();
        let sound_speed = gas.sound_speed(temperature);
        let [p21, t21] = gas.jump(z);
        let reflected_excess = 2.0 * g * z / ((g - 1.0) * z + g + 1.0);
        let fill_pressure = pressure_5 / (p21 * (1.0 + reflected_excess));
        let gas_speed = sound_speed * gas.gas_speed(z);
        let reflected_speed = sound_speed * (2.0 * (g - 1.0) * z + g + 1.0) / ((g + 1.0) * mach);
        let state_2 = gas.state(fill_pressure * p21, temperature * t21);
        let state_5 = gas.state(pressure_5, temperature_5);
        let speeds = [sound_speed * mach, mach, gas_speed, reflected_speed];

        let (driver, temperature_4) = self.driver;
        let sound_speed_4 = driver.sound_speed(temperature_4);
        let [p42, ratio] = self.expansion(gas_speed, sound_speed_4);
        let state_3 = driver.state(state_2.pressure, temperature_4 * ratio * ratio);
        let [efficiency, uncertainty] = self.efficiency;
        let at = |efficiency: f64| {
            let z = (mach / efficiency).powi(2) - 1.0;
            fill_pressure * gas.jump(z)[0] * self.expansion(sound_speed * gas.gas_speed(z), sound_speed_4)[0]
        };
        let driver_pressures = [state_2.pressure * p42, at(efficiency + uncertainty), at(efficiency), at(efficiency - uncertainty)];

        let meeting = self.meeting(gas_speed, reflected_excess, &state_3, &state_5);
        let waves = Waves { speeds, sound_speeds: [state_2.sound_speed, state_3.sound_speed, sound_speed_4, state_5.sound_speed] };
        let (uniform, by_contact, shortest_driver, crossings) = waves.cross(self.lengths, meeting.returned[1], driver.gamma, ratio);
        let states = [state_2, state_5, state_3];
        PlainPlan { fill_pressure, speeds, states, driver_pressures, meeting, uniform, by_contact, shortest_driver, crossings }
    }

    /// The reflected shock meets the contact surface: y = p/p5 − 1 by Newton's iteration.
    fn meeting(&self, gas_speed: f64, reflected_excess: f64, state_3: &PlainState, state_5: &PlainState) -> PlainMeeting {
        let (gas, driver) = (self.test_gas.0, self.driver.0);
        let (g, g3) = (gas.gamma, driver.gamma);
        let (a3, a5) = (state_3.sound_speed, state_5.sound_speed);
        let p52 = 1.0 + reflected_excess;
        let sides = g3 * ((g3 + 1.0) * p52 + g3 - 1.0) / 2.0 * (gas_speed / (a3 * reflected_excess)).powi(2);
        let mismatch = sides - 1.0;
        // Speed of the gas behind a shock of this excess of pressure, over the sound speed ahead, and its slope.
        let stopped = |g: f64, x: f64| {
            let under = g * (2.0 * g + (g + 1.0) * x);
            let factor = (2.0 / under).sqrt();
            [x * factor, factor * (1.0 - 0.5 * x * g * (g + 1.0) / under)]
        };
        let power = 0.5 * (g - 1.0) / g;
        let expanded = |y: f64| (power * y.ln_1p()).exp_m1();
        let is_shock = mismatch > 0.0;
        let mut y = 0.0f64;
        for _ in 0..50 {
            let [f3, slope_3] = stopped(g3, reflected_excess + p52 * y);
            let [f5, slope_5] = if is_shock {
                stopped(g, y)
            } else {
                let excess = expanded(y);
                [2.0 / (g - 1.0) * excess, (1.0 + excess) / (g * (1.0 + y))]
            };
            let step = (a3 * f3 + a5 * f5 - gas_speed) / (a3 * slope_3 * p52 + a5 * slope_5);
            // Not below p2, from where the iteration rises to the root without fail.
            let next = (y - step).max(1.0 / p52 - 1.0);
            let done = (next - y).abs() <= 1e-15 * (1.0 + y);
            y = next;
            if done {
                break;
            }
        }
        let pressure = state_5.pressure * (1.0 + y);
        let z3 = driver.strength_of_pressure(reflected_excess + p52 * y);
        let transmitted_mach = (1.0 + z3).sqrt();
        let transmitted = [transmitted_mach, transmitted_mach * a3 - gas_speed, a3 * driver.jump(z3)[1].sqrt()];
        let (contact_speed, returned_mach, end_wall_pressure) = if is_shock {
            let z = gas.strength_of_pressure(y);
            let contact_speed = a5 * stopped(g, y)[0];
            let s = 0.25 * (g + 1.0) * contact_speed / (a5 * gas.jump(z)[1].sqrt());
            let mach = s + (1.0 + s * s).sqrt();
            (contact_speed, (1.0 + z).sqrt(), pressure * gas.jump(2.0 * s * mach)[0])
        } else {
            let excess = expanded(y);
            (a5 * 2.0 / (g - 1.0) * excess, 1.0, state_5.pressure * (1.0 + 2.0 * excess).powf(1.0 / power))
        };
        let returned = [returned_mach, returned_mach * a5];
        PlainMeeting { mismatch, pressure, contact_speed, transmitted, returned, end_wall_pressure }
    }
}

/// The speeds of a wave diagram.
struct Waves {
    /// `U_S`, M, u2, `U_R`.
    speeds: [f64; 4],
    /// a2, a3, a4, a5.
    sound_speeds: [f64; 4],
}

impl Waves {
    /// Uniform time, whether the contact surface ends it, the shortest driver that does not, and where waves cross.
    fn cross(&self, [driven, driver]: [f64; 2], returned: f64, g4: f64, ratio: f64) -> ([f64; 2], bool, f64, [[f64; 2]; 4]) {
        let [shock, _, u2, reflected] = self.speeds;
        let [a2, a3, a4, a5] = self.sound_speeds;
        let wall = driven / shock;
        let contact_delay = driven * (shock - u2) / (shock * (u2 + reflected));
        let contact_distance = reflected * contact_delay;
        let met = driven * (shock + reflected) / (shock * (u2 + reflected));
        let stretch = ratio.powf(-0.5 * (g4 + 1.0) / (g4 - 1.0));
        let leaves = driver / a4 * stretch;
        let overtaking = u2 + a2 - shock;
        let way = u2 + a2 + reflected;
        let head_delay = (2.0 * a2 * leaves - overtaking * wall) / way;
        let head_distance = reflected * head_delay;
        let slowness = 1.0 / reflected + 1.0 / a5;
        let by_contact = contact_distance * (1.0 / reflected + 1.0 / returned);
        let by_head = head_distance * slowness;
        let distance = by_contact / slowness;
        let shortest = (way * distance / reflected + overtaking * wall) / (2.0 * a2) * a4 / stretch;
        let crossings =
            [[u2 * met, met], [(u2 - a3) * leaves, leaves], [2.0 * u2 * leaves, 2.0 * leaves], [driven - head_distance, wall + head_delay]];
        ([wall, wall + by_contact.min(by_head)], by_contact < by_head, shortest, crossings)
    }
}
