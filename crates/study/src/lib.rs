//! Questions that take many flights: sizes and margins.
//!
//! Each study is a plan, an evaluation of one item, and a collection. Absent on purpose: threads, clocks,
//! unseeded randomness, files.

pub mod deadline;
pub mod departures;
