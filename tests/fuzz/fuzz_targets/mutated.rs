//! A good record with damaged values: most inputs pass the JSON reader and reach the reduction.

#![no_main]

use endwall_fuzz::damage::Plan;
use libfuzzer_sys::fuzz_target;

fuzz_target!(|plan: Plan| endwall_fuzz::judge(plan.file().as_bytes()));
