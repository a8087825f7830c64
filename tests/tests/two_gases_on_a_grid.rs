//! Whole shots of two gases, from the opening of the diaphragm to the end of the uniform time, against a scheme that knows the conservation laws only:
//! the driver pressure for a Mach number, the arrival of the shock, p5, the contact surface, and when, how and by which wave the plateau ends.
//!
//! The wave is told by what nothing but that wave does: the pressure falls or rises, at the contact surface a shock or an expansion came first, and a
//! longer driver moves the end by what the reflected head is later, or not at all.

mod common;

use common::long;
use endwall::gas::{Fill, Gas, HeatCapacityRatio};
use endwall::number::{Ball, Enclosure, Rational};
use endwall::shock::{Entry, Incident, Output};
use endwall::tube::{
    BehindShock, Contact, ContactReturn, Driver, Interaction, Lengths, Limit, Tailoring, TestGas, TestTime, Tube, WaveDiagram,
};
use endwall_tests::lagrangian::{Sample, Section, fire};
use endwall_tests::tolerances::{
    EULER_CONVERGENCE, TWO_GASES_CONTACT_TIMES_CELLS, TWO_GASES_DRIVER_LENGTH_TIMES_CELLS, TWO_GASES_NOTCH_TIMES_CELLS,
    TWO_GASES_PRESSURE_TIMES_CELLS, TWO_GASES_TAIL_TIMES_CELLS, TWO_GASES_TIME_TIMES_CELLS,
};

/// R, J/(mol K), of the SI.
const GAS_CONSTANT: f64 = 8.314_462_618_153_24;
/// Of both fills, K, and of the driven one, Pa.
const TEMPERATURE: f64 = 295.0;
const FILL_PRESSURE: f64 = 10e3;
/// Of the driven section, m.
const DRIVEN_LENGTH: f64 = 6.0;

/// γ as a ratio, and molar mass, kg/mol.
#[derive(Clone, Copy)]
struct Species((u32, u32), &'static str);

const HELIUM: Species = Species((5, 3), "0.004002602");
const NITROGEN: Species = Species((7, 5), "0.0280134");
const ARGON: Species = Species((5, 3), "0.039948");

impl Species {
    fn gas(self) -> Gas {
        let ratio = HeatCapacityRatio::ratio(self.0.0, self.0.1).expect("a ratio");
        Gas::new(ratio, self.1.parse::<Rational>().expect("a decimal")).expect("a gas")
    }

    /// The fill of a section, for the scheme.
    fn section(self, length: f64, pressure: f64) -> Section {
        let molar_mass: f64 = self.1.parse().expect("a decimal");
        let heat_capacity_ratio = f64::from(self.0.0) / f64::from(self.0.1);
        Section { length, heat_capacity_ratio, density: pressure * molar_mass / (GAS_CONSTANT * TEMPERATURE), pressure }
    }
}

/// How the pressure leaves the plateau, in shares of p5.
#[derive(Clone, Copy)]
enum Change {
    /// By a bend: the times at which it has changed by this and by twice this tell when it began.
    Bend(f64),
    /// By a step, of which this is about half.
    Step(f64),
}

/// A shot, driven by helium.
#[derive(Clone, Copy)]
struct Shot {
    test_gas: Species,
    /// `None` for the tailored Mach number.
    mach: Option<f64>,
    /// m.
    driver_length: f64,
    /// What is to end the plateau.
    limit: Limit,
    /// How the pressure leaves the plateau.
    change: Change,
}

/// What the library says of a shot.
struct Predicted {
    pressures: [f64; 3],
    tube: Tube,
    time: TestTime,
    /// The end if the wave of the contact surface ended it.
    by_contact: f64,
    met: Interaction,
}

/// What the scheme shows.
struct Found {
    arrival: f64,
    plateau: f64,
    end: f64,
}

impl Shot {
    fn predict(self) -> Predicted {
        let fill = Fill::new(self.test_gas.gas(), FILL_PRESSURE, TEMPERATURE).expect("a fill");
        let driver = Driver::new(HELIUM.gas(), TEMPERATURE).expect("a driver");
        let tailored = || driver.tailored_mach(TestGas::from(&fill)).expect("a tailored Mach number").mach_excess.middle();
        let shock = Incident::new(&fill, Entry::MachExcess, self.mach.map_or_else(tailored, |mach| mach - 1.0)).expect("a shock");
        let behind = BehindShock::from(&shock);
        let drive = driver.for_shock(&behind).expect("a driver pressure");
        let contact = Contact::new(&behind, &drive);
        let met = contact.interaction().expect("two waves");
        let returned = contact.contact_return().expect("two waves");
        // The double nearest to the tailored Mach number returns a wave of no strength.
        let through = |enclosure: Enclosure| Ball::from(enclosure.middle());
        let contact = match self.mach {
            Some(_) => returned,
            None => ContactReturn::Tailored {
                transmitted_shock: through(met.transmitted_speed),
                sound_speed: through(met.transmitted_sound_speed),
            },
        };
        let lengths = Lengths { driven: Ball::from(DRIVEN_LENGTH), driver: Ball::from(self.driver_length) };
        let tube = Tube { speeds: driver.speeds(&behind).expect("equal areas"), lengths, contact };
        let end = |tube| WaveDiagram::new(tube).and_then(|diagram| diagram.test_time(0.0)).expect("a tube");
        let pressures = [Output::Pressure2, Output::Pressure5].map(|output| shock.output(output).middle());
        Predicted {
            pressures: [drive.pressure.middle(), pressures[0], pressures[1]],
            tube,
            time: end(tube),
            by_contact: end(Tube { contact: returned, ..tube }).end.middle(),
            met,
        }
    }

    fn run(self, predicted: &Predicted, cells: usize) -> (Found, Vec<Sample>) {
        let [p4, _, p5] = predicted.pressures;
        let [start, end, duration] = [predicted.time.start, predicted.time.end, predicted.time.duration].map(Enclosure::middle);
        let sections = [HELIUM.section(self.driver_length, p4), self.test_gas.section(DRIVEN_LENGTH, FILL_PRESSURE)];
        let samples = fire(sections, cells, end + 0.35 * duration);
        let arrival = samples.iter().find(|sample| sample.end_wall_pressure > 0.5 * p5).expect("the shock arrives").time;
        let plateau = predicted.by_contact.min(end) - start;
        let plateau = mean_between(&samples, start + 0.3 * plateau, start + 0.7 * plateau);
        // The last time at which it has not changed by so much: the gas next to the contact surface, which bears the marks of the opening, makes a
        // narrow notch before.
        let passed = |change: f64| {
            let not_yet = |sample: &&Sample| (sample.end_wall_pressure / plateau - 1.0) / change < 1.0;
            let last = samples.iter().rev().find(not_yet).expect("a plateau").time;
            assert!(last < samples[samples.len() - 1].time, "the pressure does not change by {change}");
            last
        };
        let end = match self.change {
            Change::Bend(change) => 2.0 * passed(change) - passed(2.0 * change),
            Change::Step(half) => passed(half),
        };
        (Found { arrival, plateau, end }, samples)
    }

    /// Arrival, p5 and end on three grids; the finest run is for more.
    fn check(self, grids: [usize; 3]) -> Finest {
        let predicted = self.predict();
        assert_eq!(predicted.time.limit, self.limit);
        let (start, end) = (predicted.time.start.middle(), predicted.time.end.middle());
        let scale = if long() { 4 } else { 1 };
        let of_end = if self.limit == Limit::FanTail { TWO_GASES_TAIL_TIMES_CELLS } else { TWO_GASES_TIME_TIMES_CELLS };
        let (mut errors, mut finest) = (Vec::new(), Vec::new());
        for cells in grids.map(|cells| cells * scale) {
            let (found, samples) = self.run(&predicted, cells);
            let relative = [found.arrival / start - 1.0, found.plateau / predicted.pressures[2] - 1.0, found.end / end - 1.0];
            let of_cells = relative.map(|error| error * cells as f64);
            println!("{:?}, {cells} cells: errors of arrival, p5 and end times cells {of_cells:.3?}", self.limit);
            assert!(of_cells[0].abs() < TWO_GASES_TIME_TIMES_CELLS, "the shock arrives at {} and not {start}", found.arrival);
            assert!(of_cells[1].abs() < TWO_GASES_PRESSURE_TIMES_CELLS, "p5 is {} and not {}", found.plateau, predicted.pressures[2]);
            assert!(of_cells[2].abs() < of_end, "the plateau ends at {} and not {end}", found.end);
            errors.push(relative[2].abs());
            finest = samples;
        }
        assert!(errors[2] < EULER_CONVERGENCE * errors[0], "no convergence: {errors:?}");
        Finest { predicted, samples: finest, cells: (grids[2] * scale) as f64 }
    }

    /// With a longer driver the plateau lasts as much longer as predicted.
    fn lengthen(self, driver_length: f64, limit: Limit, cells: usize) {
        let longer = Self { driver_length, limit, ..self };
        let [short, long] = [self, longer].map(|shot| {
            let predicted = shot.predict();
            assert_eq!(predicted.time.limit, shot.limit);
            (predicted.time.end.middle(), shot.run(&predicted, cells).0.end)
        });
        let (expected, found) = (long.0 - short.0, long.1 - short.1);
        let error = (found - expected) / short.0 * cells as f64;
        println!(
            "{:?} {} m: later by {found:.6} s, predicted {expected:.6} s, relative error times cells {error:.3}",
            self.limit, driver_length
        );
        assert!(error.abs() < TWO_GASES_DRIVER_LENGTH_TIMES_CELLS, "later by {found} and not {expected}");
    }
}

/// The mean pressure at the end wall between two times.
fn mean_between(samples: &[Sample], from: f64, until: f64) -> f64 {
    let inside: Vec<f64> = samples.iter().filter(|s| (from..until).contains(&s.time)).map(|s| s.end_wall_pressure).collect();
    inside.iter().sum::<f64>() / inside.len() as f64
}

/// The finest run of a shot.
struct Finest {
    predicted: Predicted,
    samples: Vec<Sample>,
    cells: f64,
}

impl Finest {
    /// The reflected shock meets the contact surface where and when it should, and leaves it with the pressure and the speed that it should have.
    fn contact_surface(&self) {
        let Predicted { met, tube, pressures: [_, p2, _], by_contact, .. } = &self.predicted;
        let meeting = tube.contact_meeting();
        let halfway = 0.5 * (p2 + met.pressure.middle());
        let early = 0.5 * meeting.time.nearest();
        let place = self.samples.iter().position(|s| s.time > early && s.contact_pressure > halfway).expect("a shock");
        let then = self.samples[place];
        // Until the end wall sees the wave, nothing else has come to the contact surface.
        let settled = self.samples[place..].iter().take_while(|s| s.time < *by_contact).last().expect("later than the meeting");
        let errors = [
            then.time / meeting.time.nearest() - 1.0,
            then.contact_position / meeting.position.nearest() - 1.0,
            settled.contact_pressure / met.pressure.middle() - 1.0,
            (settled.contact_speed - met.contact_speed.middle()) / tube.speeds.gas_speed.nearest(),
        ];
        let errors = errors.map(|error| error * self.cells);
        println!("contact surface: errors of time, place, pressure and speed times cells {errors:.3?}");
        assert!(errors.iter().all(|error| error.abs() < TWO_GASES_CONTACT_TIMES_CELLS), "{errors:?}");
    }

    /// The pressure at the end wall once the returned wave has reflected there.
    fn after_returned_wave(&self) {
        let Predicted { met, time, .. } = &self.predicted;
        let at = |part: f64| time.end.middle() + part * time.duration.middle();
        let found = mean_between(&self.samples, at(0.2), at(0.34));
        let error = (found / met.end_wall_pressure.middle() - 1.0) * self.cells;
        println!("end wall after the returned wave: relative error times cells {error:.3}");
        assert!(error.abs() < TWO_GASES_CONTACT_TIMES_CELLS, "{found} and not {}", met.end_wall_pressure);
    }

    /// At the time when the contact surface would end the plateau nothing happens but a notch as narrow as the cells, and afterwards the pressure is p5
    /// again.
    fn nothing_returned(&self) {
        let Predicted { time, by_contact, pressures: [_, _, p5], .. } = self.predicted;
        let at = |part: f64| by_contact + part * (time.end.middle() - by_contact);
        let changes = [-0.1, 0.2].map(|from| (mean_between(&self.samples, at(from), at(0.6)) / p5 - 1.0) * self.cells);
        println!("tailored: change of the pressure times cells {changes:.3?}, with the notch and after it");
        assert!(changes[0].abs() < TWO_GASES_NOTCH_TIMES_CELLS, "{changes:?}");
        assert!(changes[1].abs() < TWO_GASES_PRESSURE_TIMES_CELLS, "{changes:?}");
    }

    /// The head comes to the contact surface, where the pressure begins to fall, before the reflected shock.
    fn head_at_contact_surface(&self) {
        let Predicted { tube, pressures: [_, p2, _], .. } = &self.predicted;
        let expected = tube.head_meets_contact().time.nearest();
        assert!(expected < tube.contact_meeting().time.nearest());
        let later = || self.samples.iter().filter(|s| s.time > 0.5 * expected);
        let fallen = |to: f64| later().find(|s| s.contact_pressure < to * p2).expect("an expansion").time;
        let times = [0.96, 0.92].map(fallen);
        assert!(later().take_while(|s| s.time < times[1]).all(|s| s.contact_pressure < 1.05 * p2), "a shock comes before the expansion");
        let error = ((2.0 * times[0] - times[1]) / expected - 1.0) * self.cells;
        println!("contact surface: error of the time of the head times cells {error:.3}");
        assert!(error.abs() < TWO_GASES_TIME_TIMES_CELLS, "{error}");
    }
}

const UNDER_TAILORED: Shot =
    Shot { test_gas: NITROGEN, mach: Some(2.5), driver_length: 4.0, limit: Limit::ContactReturn, change: Change::Bend(-0.05) };
const TAILORED: Shot =
    Shot { test_gas: NITROGEN, mach: None, driver_length: 3.0, limit: Limit::ExpansionHead, change: Change::Bend(-0.02) };
const LONG: Shot = Shot { driver_length: 9.0, limit: Limit::FanTail, change: Change::Bend(0.004), ..TAILORED };
const OVER_TAILORED: Shot =
    Shot { test_gas: NITROGEN, mach: Some(4.5), driver_length: 2.0, limit: Limit::ContactReturn, change: Change::Step(0.4) };
const SHORT: Shot = Shot { test_gas: ARGON, mach: Some(3.0), driver_length: 1.5, limit: Limit::ExpansionHead, change: Change::Bend(-0.02) };

#[test]
fn an_expansion_returns_from_an_under_tailored_contact_surface() {
    let finest = UNDER_TAILORED.check([100, 200, 400]);
    assert_eq!(finest.predicted.met.returned, Tailoring::Expansion);
    finest.contact_surface();
    finest.after_returned_wave();
    UNDER_TAILORED.lengthen(5.0, Limit::ContactReturn, 200);
}

#[test]
fn a_shock_returns_from_an_over_tailored_contact_surface() {
    let finest = OVER_TAILORED.check([200, 400, 800]);
    assert_eq!(finest.predicted.met.returned, Tailoring::Shock);
    finest.contact_surface();
    finest.after_returned_wave();
    OVER_TAILORED.lengthen(2.5, Limit::ContactReturn, 200);
}

#[test]
fn nothing_returns_from_a_tailored_contact_surface() {
    let finest = TAILORED.check([100, 200, 400]);
    finest.contact_surface();
    finest.nothing_returned();
    TAILORED.lengthen(3.6, Limit::ExpansionHead, 200);
}

/// The end is a slow rise here: the pressure has risen by 1.7 % when a fifth more of the time has passed.
#[test]
fn the_tail_of_the_fan_ends_the_plateau_of_a_long_driver() {
    LONG.check([75, 150, 300]).nothing_returned();
    LONG.lengthen(10.0, Limit::FanTail, 150);
}

#[test]
fn the_head_ends_the_plateau_of_a_short_driver() {
    SHORT.check([100, 200, 400]).head_at_contact_surface();
    SHORT.lengthen(1.8, Limit::ExpansionHead, 200);
}
