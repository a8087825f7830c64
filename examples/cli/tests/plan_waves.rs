//! The waves of a plan as a table and as a drawing.

mod common;

use common::{Run, changed, endwall};

const PLAN: &str = include_str!("../../records/plan-k0300.json");

fn waves(record: &str, options: &[&str]) -> Run {
    endwall(&[&["waves", "-"], options].concat(), record.as_bytes())
}

#[test]
fn the_table_has_the_waves_of_the_plan() {
    let text = waves(PLAN, &[]).good();
    let report: serde_json::Value = serde_json::from_str(&endwall(&["plan", "-", "--json"], PLAN.as_bytes()).good()).unwrap();
    for wave in report["waves"].as_array().unwrap() {
        let name = wave["name"].as_str().unwrap();
        let line = text.lines().find(|line| line.starts_with(&format!("{name}  "))).unwrap_or_else(|| panic!("{name}: {text}"));
        let printed: Vec<f64> = line[name.len()..].split_whitespace().map(|cell| cell.parse().unwrap()).collect();
        let number = |end: &str, at: usize, unit: f64| wave[end][at].as_f64().unwrap() / unit;
        let wanted = [number("from", 0, 1.0), number("from", 1, 1e-3), number("to", 0, 1.0), number("to", 1, 1e-3)];
        assert!(printed.len() == 4 && printed.iter().zip(wanted).all(|(a, b)| (a - b).abs() <= 0.000_500_1), "{line} {wanted:?}");
    }
    assert!(text.contains("uniform time at the end wall is 2.443 ms") && text.contains("[ideal-waves]"), "{text}");
}

/// Numbers of an attribute of all elements that begin so.
fn attribute<'a>(svg: &'a str, element: &str, name: &str) -> Vec<&'a str> {
    let start = format!("{name}=\"");
    let elements = svg.lines().filter(|line| line.starts_with(element));
    elements.filter_map(|line| line.split_once(&start)?.1.split_once('"')).map(|(value, _)| value).collect()
}

#[test]
fn the_drawing_is_plain_svg_for_black_and_white() {
    let svg = waves(PLAN, &["--svg"]).good();
    assert!(svg.starts_with("<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=") && svg.ends_with("</svg>\n"), "{svg}");
    assert_eq!(svg.matches("<text").count(), svg.matches("</text>").count());
    assert_eq!(svg.matches("<style>").count(), 1);
    // Nothing from elsewhere, no script.
    assert!(!svg.contains("href") && !svg.contains("<script") && svg.matches("http").count() == 1);
    // One path for each wave; kinds differ in their dashes.
    let classes = attribute(&svg, "<path", "class");
    assert_eq!(classes.len(), 9);
    for (class, number) in [("shock", 2), ("contact", 1), ("expansion", 6)] {
        assert_eq!(classes.iter().filter(|found| **found == class).count(), number, "{class}");
    }
    let dashes = |class: &str| {
        svg.split_once(&format!(".{class} {{")).unwrap().1.split_once('}').unwrap().0.split_once("dasharray: ").map(|it| it.1)
    };
    assert_eq!(dashes("shock"), None);
    assert!(dashes("contact").is_some() && dashes("expansion").is_some() && dashes("contact") != dashes("expansion"));
    for words in [
        "distance from the diaphragm, m",
        "time from the opening of the diaphragm, ms",
        "incident shock, to 6.200 m",
        "end wall",
        "ended when",
    ] {
        assert!(svg.contains(words), "{words}");
    }
    // Time upward from the diaphragm: the incident shock goes up and to the right, the expansion up and to the left.
    let paths = attribute(&svg, "<path", "d");
    let ends = |path: &str| -> Vec<f64> {
        path.split(['M', 'L', ' ']).filter(|part| !part.is_empty()).map(|part| part.parse().unwrap()).collect()
    };
    let (shock, head) = (ends(paths[0]), ends(paths[2]));
    assert!(shock[2] > shock[0] && shock[3] < shock[1] && head[2] < head[0] && head[3] < head[1]);
    assert_eq!(shock[..2], head[..2]);
    // x from −2.6 m to 6.2 m across the frame: the diaphragm divides it so.
    assert!(((shock[0] - head[2]) / (shock[2] - head[2]) - 2.6 / 8.8).abs() < 1e-3, "{shock:?} {head:?}");
    // The reflected head crosses the expansion on a curve.
    assert!(ends(paths[4]).len() > 20);
}

#[test]
fn a_name_is_only_a_name() {
    let svg = waves(&changed(PLAN, "K-0300", "<b> & K"), &["--svg"]).good();
    assert!(svg.contains("&lt;b&gt; &amp; K") && !svg.contains("<b>"));
}

#[test]
fn an_exceeded_rating_is_said_here_too() {
    let record = changed(PLAN, "70 bar(g)", "0.9 bar(g)");
    assert!(waves(&record, &[]).good().contains("[rating-exceeded]"));
    assert!(waves(&record, &["--svg"]).good().contains("DO NOT FIRE"));
}

#[test]
fn a_plan_without_waves_says_what_is_missing() {
    let missing = ["standard input", "driver_length", "\"gas\": { \"He\": \"balance\" }"];
    waves(&changed(PLAN, "\"driver_length\": \"2.60 m\",", ""), &["--svg"]).refused(&missing);
    let bare: String = PLAN.lines().filter(|line| !line.starts_with("  \"driver\":")).collect();
    waves(&bare, &[]).refused(&missing);
    // Beyond equal bores the waves are another problem.
    waves(&changed(PLAN, "\"driver_bore\": \"81.0 mm\"", "\"driver_bore\": \"120 mm\""), &[]).refused(&["no wave diagram", "endwall plan"]);
}
