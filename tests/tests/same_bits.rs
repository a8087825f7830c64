//! The same bits in every build: with and without a fused multiply-add, with and without `std`.
//!
//! `tests/run` runs this test in each of them; all compare with the same hashes.

use endwall::record;
use endwall_tests::same_bits::{Fingerprint, PARTS, add_reduction};

/// Every part is looked at before one fails, so that a change shows where it acts.
#[test]
fn results_have_the_bits_that_were_recorded() {
    let mut differ = Vec::new();
    for part in PARTS {
        for (cases, expected) in [part.few, part.many] {
            let found = part.fingerprint(cases);
            println!("{}, {cases} cases: {found}", part.name);
            if found.hash != expected {
                differ.push(format!("{} ({cases} cases): {found}, recorded {expected:#018x}", part.name));
            }
        }
        assert!(part.fingerprint(part.many.0).results >= 100_000, "{}", part.name);
    }
    assert!(differ.is_empty(), "{differ:#?}");
}

/// From the text of a file to every number of its reduction.
#[test]
fn a_record_has_the_bits_that_were_recorded() {
    let shot = record::Shot::read(include_bytes!("../../examples/records/argon-b0412.json")).expect("a record");
    let mut fingerprint = Fingerprint::EMPTY;
    shot.with_reduction(|reduction, _| add_reduction(&mut fingerprint, reduction)).expect("a shot");
    assert_eq!(fingerprint.hash, RECORD, "{fingerprint}");
}

/// Recorded from the library.
const RECORD: u64 = 0xc0e7_9b15_03bb_1351;
