//! The wave diagram as SVG, for screens and for printers without colours.

use std::fmt::Write;

use endwall::record::{Plan, PlanReport, PlannedWave, Quantity};

/// Everything in user units; a printer scales them to its page.
const WIDTH: f64 = 760.0;
const LEFT: f64 = 64.0;
const RIGHT: f64 = 736.0;
const TOP: f64 = 48.0;
const BOTTOM: f64 = 448.0;
/// Height of a line of the key.
const LINE: f64 = 20.0;

const STYLE: &str = "\
text { font: 13px sans-serif; fill: #000 } .title { font-size: 16px; font-weight: bold } .middle { text-anchor: middle } .end { text-anchor: end }
path, line, rect, circle { fill: none; stroke: #000 } .frame { stroke-width: 1 } .wall { stroke-width: 4 } .tick { stroke: #bbb; stroke-width: 0.5 }
.shock { stroke-width: 2 } .contact { stroke-width: 1.6; stroke-dasharray: 9 5 } .expansion { stroke-width: 1.8; stroke-dasharray: 1.6 4; stroke-linecap: round }
.returned { stroke-width: 1.6; stroke-dasharray: 10 4 2 4 } .uniform { stroke-width: 9; stroke: #999 } .number { fill: #fff; stroke: #000; stroke-width: 0.8 }
.digit { font-size: 11px; text-anchor: middle }";

/// The drawing: a frame with axes, the waves with their numbers, and a key.
pub fn svg(plan: &Plan, report: &PlanReport) -> String {
    let frame = Frame::around(plan, report);
    let remarks = remarks(report);
    let lines = report.waves.len() + remarks.len();
    let height = BOTTOM + 64.0 + LINE * lines as f64;
    let title = escaped(&super::title(plan));
    let mut out = Drawing(String::new());
    out.put(&format!("<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {WIDTH} {height}\" role=\"img\">"));
    out.put(&format!("<title>{title}</title>"));
    out.put(&format!("<style>{STYLE}</style>"));
    out.put(&format!("<rect width=\"{WIDTH}\" height=\"{height}\" style=\"fill: #fff; stroke: none\"/>"));
    out.text(LEFT, 24.0, "title", &title);
    axes(&mut out, &frame);
    tube(&mut out, &frame, report);
    for (at, wave) in report.waves.iter().enumerate() {
        out.put(&format!("<path class=\"{}\" d=\"{}\"/>", style(&wave.name), path(&frame, wave)));
        // Not all in the middle, where waves cross.
        let part = [0.5, 0.4, 0.62][at % 3];
        let [x, y] = frame.point(along(wave, part));
        out.number(x, y, at + 1);
    }
    key(&mut out, report, &remarks);
    out.put("</svg>");
    out.0
}

/// The style says what kind of wave it is.
fn style(name: &str) -> &'static str {
    match name {
        "contact surface" => "contact",
        _ if name.ends_with("shock") => "shock",
        // Shock or expansion: that depends on the gases.
        _ if name.starts_with("wave returned") => "returned",
        _ => "expansion",
    }
}

/// From distance (m) and time (s) to the page.
struct Frame {
    first: f64,
    last: f64,
    end_wall: f64,
    latest: f64,
}

impl Frame {
    fn around(plan: &Plan, report: &PlanReport) -> Self {
        let tube = plan.tube.as_ref();
        let length = |of: Option<&Quantity>| of.map_or(0.0, |length| length.value().to_f64());
        let driver = length(tube.and_then(|tube| tube.driver_length.as_ref()));
        let end_wall = length(tube.and_then(|tube| tube.driven_length.as_ref()));
        let latest = report.waves.iter().map(|wave| wave.to[1]).fold(0.0, f64::max);
        Self { first: -driver, last: end_wall, end_wall, latest: latest * 1.04 }
    }

    fn point(&self, [x, t]: [f64; 2]) -> [f64; 2] {
        let across = LEFT + (x - self.first) / (self.last - self.first) * (RIGHT - LEFT);
        [across, BOTTOM - t / self.latest * (BOTTOM - TOP)]
    }
}

/// The text of the file as it grows.
struct Drawing(String);

impl Drawing {
    fn put(&mut self, element: &str) {
        self.0.push_str(element);
        self.0.push('\n');
    }

    fn line(&mut self, class: &str, from: [f64; 2], to: [f64; 2]) {
        let [[x1, y1], [x2, y2]] = [from, to];
        self.put(&format!("<line class=\"{class}\" x1=\"{x1:.1}\" y1=\"{y1:.1}\" x2=\"{x2:.1}\" y2=\"{y2:.1}\"/>"));
    }

    /// The text must be escaped.
    fn text(&mut self, x: f64, y: f64, class: &str, text: &str) {
        self.put(&format!("<text class=\"{class}\" x=\"{x:.1}\" y=\"{y:.1}\">{text}</text>"));
    }

    fn number(&mut self, x: f64, y: f64, number: usize) {
        self.put(&format!("<circle class=\"number\" cx=\"{x:.1}\" cy=\"{y:.1}\" r=\"8\"/>"));
        self.text(x, y + 4.0, "digit", &number.to_string());
    }
}

fn axes(out: &mut Drawing, frame: &Frame) {
    for (x, label) in ticks(frame.first, frame.last) {
        let [across, _] = frame.point([x, 0.0]);
        out.line("tick", [across, TOP], [across, BOTTOM]);
        out.text(across, BOTTOM + 18.0, "middle", &label);
    }
    for (t, label) in ticks(0.0, frame.latest * 1e3) {
        let [_, up] = frame.point([0.0, t / 1e3]);
        out.line("tick", [LEFT, up], [RIGHT, up]);
        out.text(LEFT - 8.0, up + 4.5, "end", &label);
    }
    let (width, height) = (RIGHT - LEFT, BOTTOM - TOP);
    out.put(&format!("<rect class=\"frame\" x=\"{LEFT}\" y=\"{TOP}\" width=\"{width}\" height=\"{height}\"/>"));
    out.text(f64::midpoint(LEFT, RIGHT), BOTTOM + 38.0, "middle", "distance from the diaphragm, m");
    let middle = f64::midpoint(TOP, BOTTOM);
    out.put(&format!(
        "<text class=\"middle\" transform=\"translate(18 {middle}) rotate(-90)\">time from the opening of the diaphragm, ms</text>"
    ));
}

/// Walls, diaphragm, and the uniform time beside the end wall.
fn tube(out: &mut Drawing, frame: &Frame, report: &PlanReport) {
    let upright = |x: f64| [frame.point([x, 0.0]), frame.point([x, frame.latest])];
    let arrival = report.waves.iter().find(|wave| wave.name == "incident shock").map_or(0.0, |wave| wave.to[1]);
    if let Some(time) = report.test_time.as_ref().filter(|time| time.end_wall.value > 0.0) {
        let [from, to] = [arrival, arrival + time.end_wall.value].map(|t| frame.point([frame.end_wall, t]));
        out.line("uniform", [from[0] + 8.0, from[1]], [to[0] + 8.0, to[1]]);
    }
    for x in [frame.first, frame.end_wall] {
        let [foot, head] = upright(x);
        out.line("wall", foot, head);
    }
    let [foot, head] = upright(0.0);
    out.line("frame", foot, head);
    for (x, class, label) in [(frame.first, "", "driver end wall"), (0.0, "middle", "diaphragm"), (frame.end_wall, "end", "end wall")] {
        let [across, _] = frame.point([x, 0.0]);
        // Beside a short driver there is no room for the name of its wall.
        if x >= 0.0 || frame.point([0.0, 0.0])[0] - across > 150.0 {
            out.text(across, TOP - 8.0, class, label);
        }
    }
}

/// Lines under the key; the first belongs to the bar of the uniform time where there is one.
fn remarks(report: &PlanReport) -> Vec<String> {
    let mut lines = Vec::new();
    if let Some(time) = &report.test_time {
        lines.push(format!("uniform time at the end wall: {} ms,", super::milliseconds(time.end_wall.value)));
        lines.push(format!("ended when {}", time.cause));
    }
    if report.flags.iter().any(|flag| flag.code == "rating-exceeded") {
        lines.push("A MARKED RATING IS EXCEEDED: DO NOT FIRE THIS SHOT".to_string());
    }
    lines.push("ideal tube: the diaphragm opens at once, no boundary layers; for screening only".to_string());
    lines
}

fn key(out: &mut Drawing, report: &PlanReport, remarks: &[String]) {
    let mut y = BOTTOM + 68.0;
    for (at, wave) in report.waves.iter().enumerate() {
        out.number(LEFT + 8.0, y - 4.0, at + 1);
        out.line(style(&wave.name), [LEFT + 26.0, y - 4.0], [LEFT + 86.0, y - 4.0]);
        let [x, t] = wave.to;
        out.text(LEFT + 98.0, y, "", &escaped(&format!("{}, to {x:.3} m at {} ms", wave.name, super::milliseconds(t))));
        y += LINE;
    }
    if report.test_time.is_some() {
        out.line("uniform", [LEFT + 26.0, y - 4.0], [LEFT + 86.0, y - 4.0]);
    }
    for remark in remarks {
        out.text(LEFT + 98.0, y, "", &escaped(remark));
        y += LINE;
    }
}

/// The points of a wave, its ends among them.
fn points(wave: &PlannedWave) -> Vec<[f64; 2]> {
    let mut points = vec![wave.from];
    points.extend(&wave.between);
    points.push(wave.to);
    points
}

fn path(frame: &Frame, wave: &PlannedWave) -> String {
    let mut path = String::new();
    for (at, point) in points(wave).into_iter().enumerate() {
        let [x, y] = frame.point(point);
        // A String takes every text.
        let _ = write!(path, "{}{x:.1} {y:.1}", if at == 0 { "M" } else { " L" });
    }
    path
}

/// A point on the wave, at a part of its time.
fn along(wave: &PlannedWave, part: f64) -> [f64; 2] {
    let t = wave.from[1] + (wave.to[1] - wave.from[1]) * part;
    let points = points(wave);
    let piece = points.windows(2).find(|pair| t <= pair[1][1]);
    piece.map_or(wave.to, |pair| {
        let [[x0, t0], [x1, t1]] = [pair[0], pair[1]];
        [x0 + (x1 - x0) * (t - t0) / (t1 - t0), t]
    })
}

/// Round numbers of one, two or five, at most eight of them between two ends, with their labels.
fn ticks(first: f64, last: f64) -> Vec<(f64, String)> {
    let least = (last - first) / 8.0;
    let power = 10f64.powf(least.log10().floor());
    let step = [1.0, 2.0, 5.0, 10.0].map(|factor| factor * power).into_iter().find(|step| *step >= least).unwrap_or(least);
    let decimals = (-step.log10().floor()).max(0.0) as usize;
    let (from, to) = ((first / step).ceil() as i64, (last / step).floor() as i64);
    // −0 would be labelled so.
    (from..=to).map(|number| (number as f64 * step + 0.0, format!("{:.decimals$}", number as f64 * step + 0.0))).collect()
}

fn escaped(text: &str) -> String {
    let plain: String = text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect();
    plain.replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ticks_are_round_and_inside() {
        let labels = |first, last| ticks(first, last).into_iter().map(|(_, label)| label).collect::<Vec<_>>();
        assert_eq!(labels(-2.6, 6.2), ["-2", "0", "2", "4", "6"]);
        assert_eq!(labels(0.0, 0.83), ["0.0", "0.2", "0.4", "0.6", "0.8"]);
        assert_eq!(labels(0.0, 8.0), ["0", "1", "2", "3", "4", "5", "6", "7", "8"]);
    }

    #[test]
    fn names_cannot_close_an_element() {
        assert_eq!(escaped("a<b> & \u{1b}c"), "a&lt;b&gt; &amp;  c");
    }
}
