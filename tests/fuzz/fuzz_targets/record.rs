//! Arbitrary bytes as a record file.

#![no_main]

use libfuzzer_sys::fuzz_target;

fuzz_target!(|file: &[u8]| endwall_fuzz::judge(file));
