//! A short fingerprint of a file, so that a report can be matched with its input.

use alloc::format;
use alloc::string::String;

/// FNV-1a with 64 bits (G. Fowler, L. C. Noll, K.-P. Vo; from memory), written `fnv1a64:` and 16 hexadecimal digits.
///
/// It tells files apart that were changed by accident; it is no protection against intent.
///
/// ```
/// // Published test vectors: the empty text and "a" (from memory).
/// assert_eq!(endwall::record::input_digest(b""), "fnv1a64:cbf29ce484222325");
/// assert_eq!(endwall::record::input_digest(b"a"), "fnv1a64:af63dc4c8601ec8c");
/// ```
pub fn input_digest(bytes: &[u8]) -> String {
    let hash = bytes.iter().fold(0xcbf2_9ce4_8422_2325_u64, |hash, byte| (hash ^ u64::from(*byte)).wrapping_mul(0x0000_0100_0000_01b3));
    format!("fnv1a64:{hash:016x}")
}
