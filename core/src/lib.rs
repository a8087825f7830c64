//! Endwall.
#![no_std]
pub mod gas;
pub mod number;
pub mod shock;
