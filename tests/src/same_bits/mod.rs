//! The same bits on every machine: results of every part of the library, hashed, with the hashes that every build must give.
//!
//! These files use nothing but `core` and the library without features, so that a build for WebAssembly or a microcontroller can take
//! them as a module (`#[path]`) and compare. Inputs are made from whole numbers and exact products alone.

mod algebraic;
mod elementary;
mod reductions;
mod thermal;

pub use reductions::add_reduction;

use core::fmt;
use endwall::number::Enclosure;
use endwall::shot::Generator;

/// FNV-1a over the bits of results (G. Fowler, L. C. Noll, K.-P. Vo, 64 bits, from memory), and how many there were.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Fingerprint {
    /// The hash.
    pub hash: u64,
    /// Doubles that went in.
    pub results: u64,
}

impl Fingerprint {
    /// Of nothing.
    pub const EMPTY: Self = Self { hash: 0xcbf2_9ce4_8422_2325, results: 0 };

    /// Takes in all bits of a double.
    pub fn add(&mut self, value: f64) {
        for byte in value.to_bits().to_le_bytes() {
            self.hash = (self.hash ^ u64::from(byte)).wrapping_mul(0x0100_0000_01b3);
        }
        self.results += 1;
    }

    /// Takes in both bounds.
    pub fn add_enclosure(&mut self, value: Enclosure) {
        self.add(value.low());
        self.add(value.high());
    }

    /// Takes in a value that may not exist; its absence is a result too.
    pub fn add_option(&mut self, value: Option<f64>) {
        self.add(value.unwrap_or(-1.0));
    }
}

impl fmt::Display for Fingerprint {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:#018x} of {} results", self.hash, self.results)
    }
}

/// A part of the library.
#[derive(Clone, Copy, Debug)]
pub struct Part {
    /// Its name.
    pub name: &'static str,
    case: fn(&mut Generator, &mut Fingerprint),
    /// Cases that a slow machine can do, and the hash after these.
    pub few: (u32, u64),
    /// Cases with more than 100 000 results, and the hash after these.
    pub many: (u32, u64),
}

impl Part {
    /// The fingerprint of the first cases; the same for as many cases everywhere.
    #[must_use]
    pub fn fingerprint(&self, cases: u32) -> Fingerprint {
        let mut generator = Generator::new(0x5A3E_B175);
        let mut fingerprint = Fingerprint::EMPTY;
        for _ in 0..cases {
            (self.case)(&mut generator, &mut fingerprint);
        }
        fingerprint
    }
}

/// Every part. The hashes are recorded from the library: other tests say that its results are right, these that they are the same.
pub const PARTS: [Part; 6] = [
    Part { name: "nine ratios", case: algebraic::ratios, few: (20, 0x2283_d7d5_fd86_27ff), many: (6_000, 0x4f1f_3301_06e3_623f) },
    Part { name: "outputs of a shock", case: algebraic::outputs, few: (5, 0x787d_cfa7_3dd5_b917), many: (1_000, 0xc83f_9038_fcc1_ff05) },
    Part { name: "inverse problems", case: algebraic::inverses, few: (2, 0xeb73_28d8_ce9f_3815), many: (700, 0x5c0b_5969_3e5f_c4cd) },
    Part {
        name: "logarithm and exponential",
        case: elementary::functions,
        few: (5, 0xe1c9_a46d_11e0_6797),
        many: (4_000, 0x0a23_c2d2_5875_d069),
    },
    Part { name: "thermally perfect gases", case: thermal::shocks, few: (2, 0xb295_17c2_1afc_f4e3), many: (1_200, 0xe98c_e725_a36e_839c) },
    Part { name: "reductions", case: reductions::reduction, few: (1, 0x131a_c2eb_831c_72cf), many: (300, 0xf544_c2bf_1799_d787) },
];

/// A double from 2^low to 2^high (within 2^±1000), all bits of its fraction random, the exponent even over the range.
fn over_binades(generator: &mut Generator, low: i32, high: i32) -> f64 {
    let exponent = low + (generator.next_u64() % u64::from(high.abs_diff(low))) as i32;
    f64::from_bits(((1023 + exponent) as u64) << 52 | generator.next_u64() >> 12)
}

/// A whole number from `low` to `high`.
fn whole(generator: &mut Generator, low: u32, high: u32) -> u32 {
    low + (generator.next_u64() % u64::from(high - low + 1)) as u32
}
