//! Laws that must hold for every shock into a thermally perfect gas, on generated cases with a fixed seed.

mod common;

use common::property::check;
use common::thermal::{air, names, portions, pure};
use endwall::gas::species::{Coefficient, Shape, Species, SpeciesRange, table};
use endwall::gas::{Fill, Gas, HeatCapacityModel, HeatCapacityRatio, Portion, ThermallyPerfectGas, molar_gas_constant};
use endwall::number::{Ball, Elementary, Enclosure, Known, Rational, Semifield};
use endwall::shock::{Entry, Incident, Output, State, ThermalFill, ThermalShock};
use endwall_tests::tolerances::{CONSERVATION_ROUNDINGS, PLAIN_THERMAL};
use proptest::prelude::Strategy;
use proptest::prop_assert;
use proptest::sample::select;
use proptest::test_runner::TestCaseError;

/// Species and fractions: a pure gas, or two of them.
fn gas() -> impl Strategy<Value = Vec<(&'static str, String)>> {
    (select(names()), select(names()), 0u32..=100).prop_map(|(one, two, hundredths)| {
        if one == two {
            return pure(one);
        }
        vec![(one, format!("{}e-2", 100 - hundredths)), (two, format!("{hundredths}e-2"))]
    })
}

/// Gas, p1, T1 and M − 1.
fn inputs() -> impl Strategy<Value = (Vec<(&'static str, String)>, f64, f64, f64)> {
    (gas(), 100.0f64..2e5, 300.0f64..900.0, (-2.0f64..0.8).prop_map(|power| 10f64.powf(power)))
}

/// The shock, where the data reach far enough.
fn shock<'a>(
    gas: &ThermallyPerfectGas<'a>,
    model: HeatCapacityModel,
    pressure: f64,
    temperature: f64,
    excess: f64,
) -> Option<ThermalShock<'a>> {
    let fill = ThermalFill::new(*gas, model, pressure, temperature).expect("a fill");
    ThermalShock::new(&fill, Entry::MachExcess, excess).ok()
}

/// Σ x f(range) over the species, each with the range of its data that a temperature belongs to.
fn mean(portions: &[Portion<'_>], temperature: f64, f: impl Fn(&SpeciesRange) -> Ball) -> Ball {
    portions.iter().fold(Ball::whole(0), |sum, portion| {
        let range = portion.species.ranges.iter().find(|range| temperature <= range.high).expect("in the data");
        sum + Ball::from(portion.fraction) * f(range)
    })
}

/// h/R in K, from the polynomials as the data file states them, over all temperatures of an enclosure that lies in one range.
fn enthalpy(portions: &[Portion<'_>], temperature: Enclosure) -> Ball {
    let t = Ball::around(temperature);
    mean(portions, temperature.middle(), |range| {
        let [a1, a2, a3, a4, a5, a6, a7] = range.heat_capacity.map(Coefficient::ball);
        let over = |a: Ball, n: u32| a / Ball::whole(n);
        let powers = a3 + t * (over(a4, 2) + t * (over(a5, 3) + t * (over(a6, 4) + t * over(a7, 5))));
        a2 * t.ln() + t * powers - a1 / t + range.enthalpy.ball()
    })
}

/// ∫ `c_p`/(R T) dT between two temperatures, range by range.
fn entropy_rise(portions: &[Portion<'_>], from: Enclosure, to: Enclosure) -> Ball {
    let joints = [1000.0, 6000.0].into_iter().filter(|joint| from.middle() < *joint && *joint < to.middle());
    let mut ends = vec![Ball::around(from)];
    ends.extend(joints.map(Ball::from));
    ends.push(Ball::around(to));
    ends.windows(2).fold(Ball::whole(0), |sum, pair| {
        let middle = f64::midpoint(pair[0].nearest(), pair[1].nearest());
        let at = |t: Ball| {
            mean(portions, middle, |range| {
                let [a1, a2, a3, a4, a5, a6, a7] = range.heat_capacity.map(Coefficient::ball);
                let over = |a: Ball, n: u32| a / Ball::whole(n);
                let powers = t * (a4 + t * (over(a5, 2) + t * (over(a6, 3) + t * over(a7, 4))));
                a3 * t.ln() + powers - a2 / t - over(a1, 2) / (t * t)
            })
        };
        sum + at(pair[1]) - at(pair[0])
    })
}

/// That an enclosure of left less right holds zero, and that plain numbers at the middles agree as their roundings allow.
fn balanced(name: &str, left: Enclosure, right: Enclosure, scale: f64) -> Result<(), TestCaseError> {
    let zero = left - right;
    prop_assert!(zero.is_proven() && zero.contains(0.0), "{name}: {left:?} {right:?}");
    let bound = CONSERVATION_ROUNDINGS * f64::EPSILON * scale.max(left.high().abs()).max(right.high().abs());
    prop_assert!((left.middle() - right.middle()).abs() <= bound, "{name}: {left:?} {right:?}");
    Ok(())
}

#[test]
fn mass_momentum_and_energy_are_conserved() {
    check(11, 1_500, &inputs(), |(names, pressure, temperature, excess)| {
        let portions = portions(&names);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        let specific = molar_gas_constant::<Ball>() / gas.molar_mass();
        for model in HeatCapacityModel::ALL {
            let Some(shock) = shock(&gas, model, pressure, temperature, excess) else { continue };
            let [one, two, five] = [shock.state_1(), shock.state_2(), shock.state_5()];
            let speed = shock.output(Output::ShockSpeed);
            let back = shock.output(Output::ReflectedSpeed);
            let t1 = Ball::from(temperature);
            // c (T2 − T1) or h(T2) − h(T1), times R/W.
            let rise = |c: Ball, from: Enclosure, to: Enclosure| c * (Ball::around(to) - Ball::around(from));
            let full = |from: Enclosure, to: Enclosure| enthalpy(&portions, to) - enthalpy(&portions, from);
            let frozen = gas.frozen_heat_capacity(t1);
            let constant = Ball::around(gas.heat_capacity_at(temperature).expect("in the data"));
            let incident = match model {
                HeatCapacityModel::Constant => rise(constant, one.temperature, two.temperature),
                HeatCapacityModel::Equilibrium => full(one.temperature, two.temperature),
                _ => rise(frozen, one.temperature, two.temperature),
            };
            let reflected = match model {
                HeatCapacityModel::Constant => rise(constant, two.temperature, five.temperature),
                HeatCapacityModel::Equilibrium => full(two.temperature, five.temperature),
                HeatCapacityModel::Frozen => rise(frozen, two.temperature, five.temperature),
                HeatCapacityModel::FrozenThenEquilibrium => full(one.temperature, five.temperature) - incident,
            };
            let half = |x: Enclosure| x / Enclosure::whole(2);
            let volume = |state: State| Enclosure::whole(1) / state.density;
            for (ahead, behind, gained) in [(one, two, incident), (two, five, reflected)] {
                let work = half((behind.pressure - ahead.pressure) * (volume(ahead) + volume(behind)));
                // The roundings of the middles are those of the enthalpies themselves, and of p/ρ.
                let parts = enthalpy(&portions, one.temperature).enclosure().high().abs() + 1e4 + 10.0 * behind.temperature.high();
                let scale = specific.nearest() * parts + (behind.pressure * (volume(ahead) + volume(behind))).high();
                balanced("energy", (gained * specific).enclosure(), work, scale)?;
                let change = (behind.pressure - ahead.pressure) * (volume(ahead) - volume(behind));
                balanced("momentum", two.gas_speed.squared(), change, (behind.pressure * volume(ahead)).high())?;
                balanced("state", behind.pressure, behind.density * behind.temperature * specific.enclosure(), 0.0)?;
            }
            balanced("mass ahead", one.density * speed, two.density * (speed - two.gas_speed), 0.0)?;
            balanced("mass at the wall", two.density * (two.gas_speed + back), five.density * back, 0.0)?;
        }
        Ok(())
    });
}

#[test]
fn entropy_rises_and_the_end_wall_is_hot() {
    check(12, 1_000, &inputs(), |(names, pressure, temperature, excess)| {
        let portions = portions(&names);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        for model in HeatCapacityModel::ALL {
            let Some(shock) = shock(&gas, model, pressure, temperature, excess) else { continue };
            let [one, two, five] = [shock.state_1(), shock.state_2(), shock.state_5()];
            prop_assert!(one.temperature.certainly_less(five.temperature) && one.temperature.certainly_less(two.temperature));
            prop_assert!(one.pressure.certainly_less(two.pressure) && two.pressure.certainly_less(five.pressure));
            prop_assert!(one.density.certainly_less(two.density) && two.density.certainly_less(five.density));
            prop_assert!(shock.output(Output::MachBehind).high() < 1.0);
            // Where vibration takes up energy behind a weak reflected shock only, that runs slower than the frozen sound speed.
            prop_assert!(model == HeatCapacityModel::FrozenThenEquilibrium || shock.output(Output::ReflectedMach).low() > 1.0);
            let ln = |x: Enclosure| Ball::around(x).ln();
            let pressures = |a: State, b: State| ln(b.pressure) - ln(a.pressure);
            let warming = |c: Ball, a: State, b: State| c * (ln(b.temperature) - ln(a.temperature));
            let full = |a: State, b: State| entropy_rise(&portions, a.temperature, b.temperature);
            let frozen = gas.frozen_heat_capacity(Ball::from(temperature));
            let constant = Ball::around(gas.heat_capacity_at(temperature).expect("in the data"));
            let rises = match model {
                HeatCapacityModel::Constant => {
                    [warming(constant, one, two) - pressures(one, two), warming(constant, two, five) - pressures(two, five)]
                }
                HeatCapacityModel::Frozen => {
                    [warming(frozen, one, two) - pressures(one, two), warming(frozen, two, five) - pressures(two, five)]
                }
                HeatCapacityModel::Equilibrium => [full(one, two) - pressures(one, two), full(two, five) - pressures(two, five)],
                // Across the reflected shock vibration is brought to equilibrium too: the entropy of all modes counts from the fill.
                HeatCapacityModel::FrozenThenEquilibrium => {
                    let incident = warming(frozen, one, two) - pressures(one, two);
                    [incident, full(one, five) - pressures(one, five) - incident]
                }
            };
            for rise in rises {
                prop_assert!(rise.is_certainly_positive(), "{model:?}: {rise:?}");
            }
        }
        Ok(())
    });
}

#[test]
fn models_are_in_order_where_heat_capacity_grows() {
    // c_p of these gases grows with temperature from 280 K to 5000 K, so that less of the energy of a strong shock shows as temperature the fuller the
    // model is. (A weak one is the weaker at a given speed, the higher the sound speed, which is that of the model.)
    let gases = select(vec![pure("N2"), pure("O2"), pure("CO2"), pure("CO"), air()]);
    check(13, 500, &(gases, 280.0f64..400.0, 1.0f64..3.0), |(names, temperature, excess)| {
        let portions = portions(&names);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        let fill = |model| ThermalFill::new(gas, model, 1e4, temperature).expect("a fill");
        let first = ThermalShock::new(&fill(HeatCapacityModel::Equilibrium), Entry::MachExcess, excess).expect("a shock");
        let speed = first.nearest(Output::ShockSpeed);
        let at = |model| ThermalShock::new(&fill(model), Entry::ShockSpeed, speed).expect("a shock");
        let [constant, equilibrium, frozen, lagging] = HeatCapacityModel::ALL.map(at);
        let falls =
            |output: Output, hot: &ThermalShock<'_>, cold: &ThermalShock<'_>| cold.output(output).certainly_less(hot.output(output));
        for output in [Output::Temperature2, Output::Temperature5] {
            prop_assert!(falls(output, &frozen, &constant) && falls(output, &constant, &equilibrium), "{output:?}");
        }
        prop_assert!(falls(Output::Temperature5, &frozen, &lagging));
        prop_assert!(falls(Output::Density5, &equilibrium, &constant));
        for output in [Output::Temperature2, Output::Pressure2, Output::GasSpeed2, Output::SoundSpeed2] {
            prop_assert!(frozen.output(output) == lagging.output(output), "{output:?}: the incident shock is the same");
        }
        Ok(())
    });
}

/// All outputs of both overlap.
fn same(shock: &ThermalShock<'_>, closed: &Incident) -> Result<(), TestCaseError> {
    for output in Output::ALL {
        let (a, b) = (shock.output(output), closed.output(output));
        prop_assert!(a.is_proven() && a.overlaps(b), "{output:?}: {a:?} {b:?}");
    }
    Ok(())
}

/// The shock into a gas of constant heat capacity.
fn closed_form(ratio: impl Into<Known>, gas: &ThermallyPerfectGas<'_>, pressure: f64, temperature: f64, excess: f64) -> Incident {
    let gamma = HeatCapacityRatio::new(ratio).expect("in the domain");
    let mass = Known::from(gas.molar_mass().enclosure());
    let fill = Fill::new(Gas::new(gamma, mass).expect("in the domain"), pressure, temperature).expect("a fill");
    Incident::new(&fill, Entry::MachExcess, excess).expect("a shock")
}

#[test]
fn constant_heat_capacity_is_the_closed_form() {
    let strength = (-9.0f64..1.0).prop_map(|power| 10f64.powf(power));
    check(14, 1_500, &(gas(), 100.0f64..2e5, 300.0f64..900.0, strength), |(names, pressure, temperature, excess)| {
        let portions = portions(&names);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        let found = shock(&gas, HeatCapacityModel::Constant, pressure, temperature, excess);
        let found = found.ok_or_else(|| TestCaseError::fail("constant heat capacity has no range to leave"))?;
        let index = gas.heat_capacity().index_at(temperature);
        let c = gas.heat_capacity().value(index, Ball::from(temperature));
        let gamma = (c / (c - Ball::whole(1))).enclosure();
        same(&found, &closed_form(gamma, &gas, pressure, temperature, excess))
    });
}

#[test]
fn species_of_constant_heat_capacity_have_the_closed_form_in_every_model() {
    let strength = (-9.0f64..1.0).prop_map(|power| 10f64.powf(power));
    let kind = select(vec![(5i64, Shape::Atom), (7, Shape::Linear), (8, Shape::Other)]);
    check(15, 500, &(kind, 10_000i64..200_000, 100.0f64..2e5, 200.0f64..900.0, strength), |(kind, mass, pressure, temperature, excess)| {
        let (twice, shape) = kind;
        let zero = Coefficient::new(0, 0);
        let mut heat_capacity = [zero; 7];
        heat_capacity[2] = Coefficient::new(5 * twice, -1);
        // Where two ranges of one polynomial meet, nothing happens.
        let range = |low, high| SpeciesRange { low, high, heat_capacity, enthalpy: Coefficient::new(-7_453_750, -4) };
        let ranges = [range(100.0, 700.0), range(700.0, 1e6)];
        let own = Species { name: "own", molar_mass: Coefficient::new(mass, -6), shape, ranges: &ranges };
        prop_assert!(own.check().is_ok());
        let portions = [Portion { species: &own, fraction: Rational::ONE }];
        let gas = ThermallyPerfectGas::new(&portions).expect("a gas");
        let gamma = Rational::ratio(twice as u128, twice as u128 - 2).expect("not zero");
        let closed = closed_form(gamma, &gas, pressure, temperature, excess);
        for model in HeatCapacityModel::ALL {
            let found = shock(&gas, model, pressure, temperature, excess);
            same(&found.ok_or_else(|| TestCaseError::fail(format!("{model:?} refused")))?, &closed)?;
        }
        Ok(())
    });
}

#[test]
fn noble_gases_have_five_thirds() {
    let strength = (-6.0f64..1.0).prop_map(|power| 10f64.powf(power));
    check(16, 300, &(select(vec![&table::HE, &table::NE, &table::AR]), 250.0f64..900.0, strength), |(species, temperature, excess)| {
        let portions = [Portion { species, fraction: Rational::ONE }];
        let gas = ThermallyPerfectGas::new(&portions).expect("a gas");
        let five_thirds = Rational::ratio(5, 3).expect("not zero");
        let closed = closed_form(five_thirds, &gas, 1e4, temperature, excess);
        for model in HeatCapacityModel::ALL {
            // None where the data end.
            let Some(found) = shock(&gas, model, 1e4, temperature, excess) else {
                prop_assert!(closed.output(Output::Temperature5).high() > gas.range().1 || excess < 1e-5, "{model:?} refused");
                continue;
            };
            // The polynomials leave 5/2: argon's above 1000 K by 1e-6 and more, those of helium and neon above 6000 K.
            let exact_below = if species.name == "Ar" { 1000.0 } else { 6000.0 };
            let hottest = closed.output(Output::Temperature5).high();
            if hottest < exact_below || matches!(model, HeatCapacityModel::Constant | HeatCapacityModel::Frozen) {
                same(&found, &closed)?;
            } else if hottest < 6000.0 {
                let ratio = found.nearest(Output::Temperature5) / closed.output(Output::Temperature5).middle();
                prop_assert!((ratio - 1.0).abs() < 1e-4, "{ratio}");
            }
        }
        Ok(())
    });
}

#[test]
fn everything_is_linear_in_the_pressure() {
    const PROPORTIONAL: [Output; 8] = [
        Output::Density1,
        Output::Pressure2,
        Output::PressureRise,
        Output::Density2,
        Output::Pressure5,
        Output::Step,
        Output::Density5,
        Output::Pressure2,
    ];
    check(17, 500, &inputs(), |(names, pressure, temperature, excess)| {
        let portions = portions(&names);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        for model in HeatCapacityModel::ALL {
            let Some(base) = shock(&gas, model, pressure, temperature, excess) else { continue };
            for factor in [0.25, 3.0] {
                let other = shock(&gas, model, pressure * factor, temperature, excess).expect("as before");
                // 3 p1 is rounded.
                let factor = Enclosure::from(pressure * factor) / Enclosure::from(pressure);
                for output in Output::ALL {
                    let (a, b) = (base.output(output), other.output(output));
                    let as_before = if PROPORTIONAL.contains(&output) { (a * factor).overlaps(b) } else { a == b };
                    prop_assert!(as_before, "{model:?} {output:?}: {a:?} {b:?}");
                }
            }
        }
        Ok(())
    });
}

#[test]
fn plain_doubles_agree_to_some_units_in_the_last_place() {
    check(18, 2_000, &inputs(), |(names, pressure, temperature, excess)| {
        let portions = portions(&names);
        let gas = ThermallyPerfectGas::new(&portions).expect("a mixture");
        for model in HeatCapacityModel::ALL {
            let fill = ThermalFill::new(gas, model, pressure, temperature).expect("a fill");
            let Ok(first) = ThermalShock::new(&fill, Entry::MachExcess, excess) else { continue };
            let speed = first.nearest(Output::ShockSpeed);
            let Ok(found) = ThermalShock::new(&fill, Entry::ShockSpeed, speed) else { continue };
            let plain = fill.plain(|x| x).reflected(speed, 0.0);
            let plain = plain.ok_or_else(|| TestCaseError::fail(format!("{model:?}: no plain answer")))?;
            for output in [
                Output::Temperature2,
                Output::Pressure2,
                Output::GasSpeed2,
                Output::Temperature5,
                Output::Pressure5,
                Output::ReflectedSpeed,
            ] {
                let (a, b) = (plain.flow().evaluate(output), found.nearest(output));
                // At a given speed, M − 1 carries the roundings of the speed and of the sound speed.
                let bound = PLAIN_THERMAL * (1.0 + 1.0 / excess);
                prop_assert!(
                    (a / b - 1.0).abs() <= bound * f64::EPSILON,
                    "{model:?} {output:?}: {a:e} {b:e} {}",
                    (a / b - 1.0) / f64::EPSILON
                );
            }
        }
        Ok(())
    });
}
