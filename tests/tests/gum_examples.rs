//! Worked examples of JCGM 100:2008, annex H, with the library's propagation of uncertainty.
//! All values are from memory of the guide; each test first shows that the printed inputs belong together.

use endwall::shot::{Inputs, coverage_factor, effective_degrees_of_freedom};

/// Rounds to a number of decimals, as the guide prints.
fn rounded(value: f64, decimals: i32) -> f64 {
    let unit = 10_f64.powi(decimals);
    (value * unit).round() / unit
}

/// Five simultaneous readings of voltage (V), current (A) and phase angle (rad), table H.2 (from memory).
const READINGS: [[f64; 5]; 3] = [
    [5.007, 4.994, 5.005, 4.990, 4.999],
    [19.663e-3, 19.639e-3, 19.640e-3, 19.685e-3, 19.678e-3],
    [1.0456, 1.0438, 1.0468, 1.0428, 1.0433],
];

struct Means {
    mean: [f64; 3],
    uncertainty: [f64; 3],
    correlation: [f64; 9],
}

/// Means, their standard uncertainties and correlations (JCGM 100, equations (3), (5), (17)).
fn means() -> Means {
    let mean = READINGS.map(|r| r.iter().sum::<f64>() / 5.0);
    let mut covariance = [[0.0; 3]; 3];
    for i in 0..3 {
        for j in 0..3 {
            let sum: f64 = (0..5).map(|k| (READINGS[i][k] - mean[i]) * (READINGS[j][k] - mean[j])).sum();
            covariance[i][j] = sum / 20.0;
        }
    }
    let uncertainty = [0, 1, 2].map(|i| covariance[i][i].sqrt());
    let mut correlation = [1.0; 9];
    for i in 0..3 {
        for j in 0..3 {
            if i != j {
                correlation[3 * i + j] = covariance[i][j] / (uncertainty[i] * uncertainty[j]);
            }
        }
    }
    Means { mean, uncertainty, correlation }
}

/// Values and sensitivities to (V, I, phi) of resistance, reactance and impedance, from the means.
fn impedance(mean: [f64; 3]) -> [(f64, [f64; 3]); 3] {
    let [v, i, phi] = mean;
    let z = v / i;
    let (r, x) = (z * phi.cos(), z * phi.sin());
    [(r, [r / v, -r / i, -x]), (x, [x / v, -x / i, r]), (z, [z / v, -z / i, 0.0])]
}

/// H.2.3, table H.2: the means, their standard uncertainties and correlations as printed.
#[test]
fn h2_inputs_as_printed() {
    let m = means();
    assert_eq!(rounded(m.mean[0], 4), 4.9990);
    assert_eq!(rounded(m.mean[1] * 1e3, 4), 19.6610);
    assert_eq!(rounded(m.mean[2], 5), 1.04446);
    assert_eq!(rounded(m.uncertainty[0], 4), 0.0032);
    assert_eq!(rounded(m.uncertainty[1] * 1e3, 4), 0.0095);
    assert_eq!(rounded(m.uncertainty[2], 5), 0.00075);
    assert_eq!(rounded(m.correlation[1], 2), -0.36);
    assert_eq!(rounded(m.correlation[2], 2), 0.86);
    assert_eq!(rounded(m.correlation[5], 2), -0.65);
}

/// H.2.3, table H.3: resistance, reactance, impedance with uncertainties and correlations, from correlated inputs.
#[test]
fn h2_resistance_and_reactance() {
    let m = means();
    let inputs = Inputs::new(&m.uncertainty, Some(&m.correlation)).unwrap();
    let [(r, c_r), (x, c_x), (z, c_z)] = impedance(m.mean);
    assert_eq!(rounded(r, 3), 127.732);
    assert_eq!(rounded(x, 3), 219.847);
    assert_eq!(rounded(z, 3), 254.260);
    assert_eq!(rounded(inputs.standard_uncertainty(&c_r).unwrap(), 3), 0.071);
    // The guide prints 0.295. Its readings give 0.29558 by this approach and 0.29549 by the second one (below): the last digit printed is
    // that of the second approach, or of rounded intermediate values.
    assert_eq!(rounded(inputs.standard_uncertainty(&c_x).unwrap(), 5), 0.29558);
    assert_eq!(rounded(inputs.standard_uncertainty(&c_z).unwrap(), 3), 0.236);
    assert_eq!(rounded(inputs.correlation(&c_r, &c_x).unwrap().unwrap(), 3), -0.588);
    assert_eq!(rounded(inputs.correlation(&c_r, &c_z).unwrap().unwrap(), 3), -0.485);
    assert_eq!(rounded(inputs.correlation(&c_x, &c_z).unwrap().unwrap(), 3), 0.993);
}

/// H.2.4, table H.4, the second approach: each set of readings gives its own R, X, Z, whose scatter is printed as 0.071, 0.295, 0.236. The
/// propagation differs by what the model departs from a linear one over the readings, 0.3 % of the uncertainty of R.
#[test]
fn h2_second_approach_agrees() {
    let m = means();
    let inputs = Inputs::new(&m.uncertainty, Some(&m.correlation)).unwrap();
    let each = [0, 1, 2, 3, 4].map(|k| impedance([READINGS[0][k], READINGS[1][k], READINGS[2][k]]).map(|(value, _)| value));
    for (output, printed) in [0.071, 0.295, 0.236].into_iter().enumerate() {
        let mean = each.iter().map(|set| set[output]).sum::<f64>() / 5.0;
        let scatter = (each.iter().map(|set| (set[output] - mean).powi(2)).sum::<f64>() / 20.0).sqrt();
        assert_eq!(rounded(scatter, 3), printed);
        let (_, c) = impedance(m.mean)[output];
        let propagated = inputs.standard_uncertainty(&c).unwrap();
        assert!((scatter / propagated - 1.0).abs() < 0.004, "{output}: {scatter} {propagated}");
    }
}

/// Ignoring the correlations changes the uncertainty of the resistance several times: the test above is one of the correlated law.
#[test]
fn h2_correlations_matter() {
    let m = means();
    let independent = Inputs::new(&m.uncertainty, None).unwrap();
    let [(_, c_r), ..] = impedance(m.mean);
    assert!(independent.standard_uncertainty(&c_r).unwrap() > 2.0 * 0.071);
}

/// H.1, calibration of an end gauge, table H.1 (from memory): contributions in nm and their degrees of freedom. The inputs behind them:
/// 25 nm standard (18), 9.7 nm difference (25.6), 2.9 nm difference of expansion (50), 16.6 nm difference of temperature (2).
#[test]
fn h1_end_gauge() {
    // Self-consistency: l_s theta-bar u(delta alpha) = 0.05 m * 0.1 degC * 0.58e-6/degC; l_s alpha_s u(delta theta) = 0.05 m * 11.5e-6/degC * 0.029 degC.
    assert_eq!(rounded(0.05e9 * 0.1 * 0.58e-6, 1), 2.9);
    assert!((0.05e9 * 11.5e-6 * 0.029 - 16.6_f64).abs() < 0.1);
    let components = [(25.0, 18.0), (9.7, 25.6), (2.9, 50.0), (16.6, 2.0)];
    let contributions = components.map(|(u, _)| u);
    let u_c = Inputs::new(&contributions, None).unwrap().standard_uncertainty(&[1.0; 4]).unwrap();
    assert_eq!(u_c.round(), 32.0);
    let degrees = effective_degrees_of_freedom(&components).unwrap();
    // Printed as 16.7, truncated to 16.
    assert!((degrees - 16.7).abs() < 0.1, "{degrees}");
    assert_eq!(degrees.floor(), 16.0);
    let k = coverage_factor(0.99, degrees.floor()).unwrap();
    assert_eq!(rounded(k, 2), 2.92);
    assert_eq!((k * 32.0).round(), 93.0);
    // Interpolating instead of truncating prints the same expanded uncertainty.
    assert_eq!((coverage_factor(0.99, degrees).unwrap() * 32.0).round(), 93.0);
}

/// H.1.7: with the second-order terms (11.7 nm) the combined standard uncertainty is 34 nm.
#[test]
fn h1_second_order_terms() {
    let u = [25.0, 9.7, 2.9, 16.6, 11.7];
    let combined = Inputs::new(&u, None).unwrap().standard_uncertainty(&[1.0; 5]).unwrap();
    assert_eq!(combined.round(), 34.0);
}

/// G.4.1, example (values from memory): the product of three inputs with 0.25 %, 0.57 % and
/// 0.82 % from 10, 5 and 15 readings: 1.03 %, 19 effective degrees of freedom, U95 = 2.2 %.
#[test]
fn g4_product_of_three_inputs() {
    let u = [0.25, 0.57, 0.82];
    let combined = Inputs::new(&u, None).unwrap().standard_uncertainty(&[1.0; 3]).unwrap();
    assert_eq!(rounded(combined, 2), 1.03);
    let degrees = effective_degrees_of_freedom(&[(0.25, 9.0), (0.57, 4.0), (0.82, 14.0)]).unwrap();
    assert_eq!(rounded(degrees, 1), 19.0);
    // 18.97, printed as 19.0.
    let k = coverage_factor(0.95, degrees).unwrap();
    assert_eq!(rounded(k, 2), 2.09);
    assert_eq!(rounded(k * combined, 1), 2.2);
}
