//! From results to a judgement: limits that a design must keep, and what is in doubt.

pub mod accept;
pub mod warning;
