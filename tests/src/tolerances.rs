//! Every tolerance of the tests, each with its reason. A number that is not here is an equality.

/// Normal-shock table of NACA Report 1135, in units of the last printed digit: half a unit by rounding, and a little
/// because the table was rounded by hand from more digits.
pub const TABLE_LAST_DIGITS: f64 = 0.6;

/// Results printed in JCGM 100, annex H, in units of the last printed digit: the printed u(X) = 0.295 of H.2 comes
/// from rounded intermediate values (0.2956 from its data).
pub const JCGM_LAST_DIGITS: f64 = 1.0;

/// Printed star states of Riemann problems, relative: six figures, some of them truncated.
pub const RIEMANN_PRINTED: f64 = 1e-5;

/// Calculated star states of Riemann problems, relative: ten digits are given of each wave speed.
pub const RIEMANN_CALCULATED: f64 = 1e-10;

/// Exact values compared in arbitrary precision, relative: far above the 2^-450 of the oracle (10^-135), far below any
/// mistake in a formula.
pub const ORACLE_SELF: f64 = 1e-60;

/// Strong-shock limits, relative, times 1/M²: the next term of each expansion has a coefficient below 20 for γ 7/5 and
/// 5/3 (largest: p5/p1).
pub const STRONG_LIMIT_NEXT_TERM: f64 = 20.0;

/// Weak-shock ratio of the steps, relative, times M − 1: the next term is 2 (M − 1) on 2.
pub const WEAK_LIMIT_NEXT_TERM: f64 = 4.0;

/// Finite-volume run, plateau pressure near the wall, relative, times the number of cells: the shock is captured over
/// two to three cells and its arrival at the wall leaves a first-order error. Largest seen on 100 to 400 cells: 0.18.
pub const EULER_PRESSURE_TIMES_CELLS: f64 = 0.3;

/// The same for temperature and density, which also carry the heating at the wall. Largest seen: 0.62.
pub const EULER_TEMPERATURE_TIMES_CELLS: f64 = 1.0;

/// The same for the speeds of both shocks and for the speed of the gas at the wall. Largest seen: 0.36.
pub const EULER_SPEED_TIMES_CELLS: f64 = 1.0;

/// Ratio of the summed errors on 400 and on 100 cells: a quarter at first order, with room for scatter.
pub const EULER_CONVERGENCE: f64 = 0.5;

/// Bounds of bifurcation, relative: ten digits are given.
pub const BIFURCATION_ROOT: f64 = 1e-9;

/// Tailored Mach numbers, relative: the molar masses behind the calculated values are not stated to more digits.
pub const TAILORING: f64 = 1e-4;

/// Width of a proven enclosure of what has no integer test, in ulp: an answer nearer to a double than the error of a
/// ball (about 2^-95) leaves both neighbours of that double.
pub const ALGEBRAIC_WIDTH: u64 = 2;

/// Share of such enclosures that must have one ulp or none: only answers very near to a double may have two.
pub const ALGEBRAIC_AT_ONE_ULP: f64 = 0.99;

/// Relative distance from a double below which an enclosure of two ulp is accepted: the error of a ball after some
/// twenty operations stays below 2^-92.
pub const NEAR_A_DOUBLE: f64 = f64::from_bits((1023 - 90) << 52);

/// Over-width of the range of a box: what the library states.
pub const BOX_OVER_WIDTH: f64 = 0.01;

/// Error of the plain arithmetic with which a box is searched, relative: a few dozen roundings, and the loss in M² − 1 at
/// the weakest shock of the boxes (M 1.02).
pub const BOX_PLAIN_ERROR: f64 = 1e-13;

/// Half-width of the bracket in which the conservation laws are solved, relative to the volume ratio and to what is left
/// to 1: below one half, where the energy equation is level.
pub const FIRST_PRINCIPLES_BRACKET: f64 = 0.2;

/// Shock speed fitted to exact arrival times, relative: what the fit states.
pub const SHOCK_SPEED: f64 = 1e-9;

/// Attenuation fitted to exact arrival times, 1/m: what the fit states.
pub const ATTENUATION: f64 = 1e-8;

/// A value printed with a few digits, in units of the last: half by rounding, and a little for binary fractions.
pub const LAST_DIGIT: f64 = 0.51;

/// Standard uncertainty of a Monte Carlo run against the linear one, relative: with 10^5 trials or more the scatter is
/// below 0.25 %, and the curvature of the relations over 0.2 % inputs is below 0.1 %.
pub const MONTE_CARLO_UNCERTAINTY: f64 = 0.01;

/// Slopes in plain double arithmetic against exact or proven ones, relative: some fifty roundings of numbers of one size.
pub const SLOPE: f64 = 1e-12;

/// Conservation laws in plain doubles at the middles of the enclosures, in units of 2^-52 of the largest term: each middle
/// is off by half an ulp, enters squared or in a product of three, and is added to its like.
pub const CONSERVATION_ROUNDINGS: f64 = 16.0;

/// Slopes against difference quotients over 10^-5 of the input, relative: the third derivative gives about 10^-10 of
/// some tens.
pub const DIFFERENCE_QUOTIENT: f64 = 1e-7;

/// Relative distance of a temperature from a joint of the data below which either polynomial may be taken: a proven compression is known
/// to 1e-21, and the temperature to a few times that.
pub const JOINT_SIDE: f64 = 1e-20;

/// Heat capacity and enthalpy against other property libraries, relative: other spectroscopic or calorimetric data and other fits. Largest seen
/// among what is not listed as known to differ: 0.40 % (propane at 400 K).
pub const HEAT_CAPACITY_LIBRARY: f64 = 5e-3;

/// Heat capacity of N2, O2, CO and CO2 from 300 K to 2000 K against a rigid rotor and harmonic oscillator, relative: neither anharmonic terms nor
/// the coupling of rotation and vibration. Largest seen: 1.6 % (O2 at 2000 K).
pub const HARMONIC: f64 = 0.02;

/// Shock into a thermally perfect gas in plain doubles, relative, in units of 2^-52 times 1 + 1/(M − 1): some dozens of roundings in polynomials
/// of alternating signs.
pub const PLAIN_THERMAL: f64 = 100.0;

/// Viscosity of dilute gases at 300 K, relative: what the library states of its parameters, which were fitted near there. Largest seen: 2.5 % (SF6).
pub const VISCOSITY_AT_300: f64 = 0.03;

/// The same from 250 K to 1000 K: the older data behind the parameters are low at high temperatures. Largest seen: 6.3 % (argon at 1000 K).
pub const VISCOSITY: f64 = 0.07;

/// The same for water, whose molecules are polar, which the potential ignores. Largest seen: 10.1 %.
pub const VISCOSITY_OF_WATER: f64 = 0.11;

/// Collision integral against another fit, relative: its authors state an accuracy of 0.16 % at worst. Largest seen: 0.159 %.
pub const COLLISION_INTEGRAL: f64 = 0.0017;

/// Arrival of a wave at the end wall in a finite-volume run, relative, times the number of cells: the kink in the pressure is smeared over a few cells,
/// and found from two levels behind it. Largest seen on 500 to 1500 cells: 5.8.
pub const EULER_ARRIVAL_TIMES_CELLS: f64 = 8.0;

/// Times of waves in a run of two gases whose cells move with the gas, relative, times the number of cells in the driven section: shocks are captured over
/// two to three cells, bends smeared over a few, and the gas next to the contact surface keeps what the opening of the diaphragm left in a few cells, where
/// waves run faster or slower. Largest seen on 100 to 400 cells: 2.7.
pub const TWO_GASES_TIME_TIMES_CELLS: f64 = 4.0;

/// The same for the slow rise that the tail of the fan brings, whose beginning is told from the first per cent. Largest seen on 75 to 300 cells: 4.4.
pub const TWO_GASES_TAIL_TIMES_CELLS: f64 = 8.0;

/// Plateau pressure in such a run, relative, times cells. Largest seen: 0.075.
pub const TWO_GASES_PRESSURE_TIMES_CELLS: f64 = 0.15;

/// Place of the contact surface, and pressure and speed after the reflected shock has passed it, relative, times cells: the same few cells around it send
/// echoes. Largest seen: 1.8 (behind a shock of Mach 4.5).
pub const TWO_GASES_CONTACT_TIMES_CELLS: f64 = 3.0;

/// How much later the plateau ends with a longer driver, relative to the time at which it ends, times cells: most of the error is that of both runs.
/// Largest seen: 0.06.
pub const TWO_GASES_DRIVER_LENGTH_TIMES_CELLS: f64 = 0.2;

/// Mean change of p5 while the reflected shock crosses those few cells around a tailored contact surface, relative, times cells. Largest seen: 1.3.
pub const TWO_GASES_NOTCH_TIMES_CELLS: f64 = 2.5;

/// A plan in plain doubles against a proven one, relative: some dozens of roundings, and what a fifth or seventh power and the distance to the limit of the
/// driver make of them.
pub const PLAIN_PLAN: f64 = 1e-12;

/// Target and reduced planned shot, relative: fill pressure and shock speed are rounded to doubles, or enclosed by a few.
pub const PLANNED_SHOT: f64 = 1e-13;

/// Vapour pressure above 1 kPa, relative: other data and fits with four constants. Largest seen: 1.42 % (SF6 at 230 K), then 0.84 % (CF4 at 220 K).
pub const VAPOUR_PRESSURE: f64 = 0.015;

/// The same below 1 kPa, where a liquid is colder than any fill: ethane and propane at 100 K (0.03 Pa) are 3 % and 14 % off.
pub const VAPOUR_PRESSURE_COLD: f64 = 0.15;

/// Critical temperatures of the same, K. Largest seen: 0.157 K (SF6).
pub const CRITICAL_TEMPERATURE: f64 = 0.2;
