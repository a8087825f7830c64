//! A whole plan: with proof, and in plain doubles.

use endwall::gas::{DRY_AIR, Fill, Gas, HeatCapacityModel, HeatCapacityRatio, ThermallyPerfectGas};
use endwall::number::{Ball, Enclosure, Rational};
use endwall::shock::{Entry, Incident, Output, State, ThermalFill, ThermalShock};
use endwall::tube::{
    BehindShock, Contact, ContactReturn, Drive, Driver, DriverPressureBand, Efficiency, Interaction, Lengths, TestGas, TestTime, Tube,
    Wave, WaveDiagram,
};
use endwall_tests::plain_plan::{PlainGas, PlainPlan, Wanted};

/// T1, T4, K.
const TEMPERATURES: [f64; 2] = [295.0, 300.0];
/// p5, Pa.
const PRESSURE: f64 = 2e5;
/// L1, L4, m.
const LENGTHS: [f64; 2] = [6.2, 2.6];
/// Measured over ideal Mach number, and its standard uncertainty.
const EFFICIENCY: [f64; 2] = [0.93, 0.02];

/// Helium into nitrogen, and into air, for many T5.
#[derive(Clone, Debug)]
pub struct Planner {
    gas: Gas,
    air: ThermallyPerfectGas<'static>,
    driver: Driver<'static>,
    efficiency: Efficiency,
    wanted: Wanted,
}

/// What a plan tells.
#[derive(Clone, Debug)]
pub struct Told {
    fill_pressure: Enclosure,
    shock_speed: Enclosure,
    states: [State; 2],
    drive: Drive<'static>,
    band: DriverPressureBand,
    /// `None` for a thermally perfect gas.
    met: Option<Interaction>,
    time: TestTime,
    shortest_driver: Enclosure,
    waves: Vec<Wave>,
}

/// T5, K: Mach 1.4 to 3.3.
fn target(turn: usize) -> f64 {
    500.0 + ((turn * 7919) % 1024) as f64
}

impl Planner {
    /// Both gases.
    pub fn new() -> Self {
        let exact = |text: &str| text.parse::<Rational>().expect("a decimal");
        let built = |n, d, mass| Gas::new(HeatCapacityRatio::ratio(n, d).expect("a ratio"), exact(mass)).expect("a gas");
        let driver = Driver::new(built(5, 3, "0.004002602"), TEMPERATURES[1]).expect("a driver");
        let wanted = Wanted {
            test_gas: (PlainGas { gamma: 1.4, molar_mass: 0.028_013_4 }, TEMPERATURES[0]),
            target: [1000.0, PRESSURE],
            driver: (PlainGas { gamma: 5.0 / 3.0, molar_mass: 0.004_002_602 }, TEMPERATURES[1]),
            lengths: LENGTHS,
            efficiency: EFFICIENCY,
        };
        Self {
            gas: built(7, 5, "0.0280134"),
            air: ThermallyPerfectGas::new(&DRY_AIR).expect("air"),
            driver,
            efficiency: Efficiency::new(EFFICIENCY[0], EFFICIENCY[1]).expect("an efficiency"),
            wanted,
        }
    }

    /// In plain doubles.
    pub fn plain(&self, turn: usize) -> PlainPlan {
        Wanted { target: [target(turn), PRESSURE], ..self.wanted }.plan()
    }

    /// With proof, constant heat capacity.
    pub fn proven(&self, turn: usize) -> Told {
        let trial = Fill::new(self.gas, PRESSURE, TEMPERATURES[0]).expect("a fill");
        let shock = Incident::new(&trial, Entry::ReflectedTemperature, target(turn)).expect("a shock");
        let fill_pressure = Enclosure::from(PRESSURE) / shock.output(Output::ReflectedPressureRatio);
        let shock_speed = shock.output(Output::ShockSpeed);
        let speed = shock.nearest(Output::ShockSpeed);
        let fill = Fill::new(self.gas, fill_pressure.middle(), TEMPERATURES[0]).expect("a fill");
        let shock = Incident::new(&fill, Entry::ShockSpeed, speed).expect("a shock");
        let states = [shock.state_2(), shock.state_5()];
        self.told(fill_pressure, shock_speed, states, &BehindShock::from(&shock))
    }

    /// With proof, heat capacity of T.
    pub fn thermal(&self, turn: usize) -> Told {
        let fill = |pressure: f64| ThermalFill::new(self.air, HeatCapacityModel::Equilibrium, pressure, TEMPERATURES[0]).expect("a fill");
        let trial = fill(PRESSURE);
        let shock = ThermalShock::new(&trial, Entry::ReflectedTemperature, target(turn)).expect("a shock");
        let fill_pressure = Enclosure::from(PRESSURE) / shock.output(Output::ReflectedPressureRatio);
        let shock_speed = shock.output(Output::ShockSpeed);
        let filled = fill(fill_pressure.middle());
        let shock = ThermalShock::new(&filled, Entry::ShockSpeed, shock.nearest(Output::ShockSpeed)).expect("a shock");
        let states = [shock.state_2(), shock.state_5()];
        self.told(fill_pressure, shock_speed, states, &BehindShock::from(&shock))
    }

    /// Driver, contact surface and waves.
    fn told(&self, fill_pressure: Enclosure, shock_speed: Enclosure, states: [State; 2], behind: &BehindShock<'_>) -> Told {
        let drive = self.driver.for_shock(behind).expect("a driver pressure");
        let gas: TestGas = behind.test_gas();
        let band = self.driver.pressure_for_mach(gas, behind.mach().nearest(), self.efficiency).expect("a driver pressure");
        let contact = Contact::new(behind, &drive);
        let waves_there = contact.meet().ok();
        let met = waves_there.map(|waves| waves.interaction());
        let speeds = self.driver.speeds(behind).expect("equal areas");
        let returned = waves_there.map_or(ContactReturn::Wave { speed: speeds.sound_speed_5 }, |waves| waves.contact_return());
        let [driven, driver] = LENGTHS.map(Ball::from);
        let diagram = WaveDiagram::new(Tube { speeds, lengths: Lengths { driven, driver }, contact: returned }).expect("a tube");
        let time = diagram.test_time(0.0).expect("a time");
        let shortest_driver = diagram.shortest_driver(0.0).expect("a length");
        let waves = diagram.waves().into_iter().flatten().collect();
        Told { fill_pressure, shock_speed, states, drive, band, met, time, shortest_driver, waves }
    }
}
