//! Runs the built command.

#![allow(dead_code, reason = "each test file uses some of it")]

use std::io::Write;
use std::process::{Command, Stdio};

/// The demo record of an argon shot.
pub const ARGON: &str = include_str!("../../../records/argon-b0412.json");
/// The demo record of a sensor calibration.
pub const SENSOR: &str = include_str!("../../../records/sensor-step-c17.json");

/// The demo record of a mixture that burns.
pub const KINETICS: &str = include_str!("../../../records/kinetics-k0207.json");
/// The demo record of nitrogen with its vibration frozen.
pub const NITROGEN: &str = include_str!("../../../records/nitrogen-n0703.json");

/// What a run left behind.
#[derive(Debug)]
pub struct Run {
    /// The exit code.
    pub code: i32,
    /// Standard output.
    pub out: String,
    /// Standard error.
    pub err: String,
}

impl Run {
    /// Asserts success and hands out what was printed.
    pub fn good(self) -> String {
        assert_eq!((self.code, self.err.as_str()), (0, ""), "{}", self.out);
        self.out
    }

    /// Asserts a refusal that prints no result and names each of these.
    pub fn refused(self, names: &[&str]) {
        self.failed(2, names);
    }

    /// Asserts an end with this code that prints no result and names each of these.
    pub fn failed(self, code: i32, names: &[&str]) {
        assert_eq!((self.code, self.out.as_str()), (code, ""), "{}", self.err);
        for name in names {
            assert!(self.err.contains(name), "\"{name}\" is not in: {}", self.err);
        }
    }
}

/// Runs `endwall` with these arguments and this standard input.
pub fn endwall(arguments: &[&str], input: &[u8]) -> Run {
    let mut command = Command::new(env!("CARGO_BIN_EXE_endwall"));
    let mut child = command.args(arguments).stdin(Stdio::piped()).stdout(Stdio::piped()).stderr(Stdio::piped()).spawn().unwrap();
    let mut stdin = child.stdin.take().unwrap();
    let input = input.to_vec();
    // The command may stop reading before the end.
    let writer = std::thread::spawn(move || drop(stdin.write_all(&input)));
    let output = child.wait_with_output().unwrap();
    writer.join().unwrap();
    let text = |bytes: Vec<u8>| String::from_utf8(bytes).unwrap();
    Run { code: output.status.code().expect("ended by itself"), out: text(output.stdout), err: text(output.stderr) }
}

/// `endwall reduce -` on a record.
pub fn reduce(record: &str, options: &[&str]) -> Run {
    endwall(&[&["reduce", "-"], options].concat(), record.as_bytes())
}

/// The record with a text replaced that must be in it.
pub fn changed(record: &str, from: &str, to: &str) -> String {
    assert!(record.contains(from), "{from}");
    record.replacen(from, to, 1)
}
