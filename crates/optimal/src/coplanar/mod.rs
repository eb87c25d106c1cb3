//! Minimum time between coplanar circles.
//!
//! Lengths here are in units of the start radius and times in the matching unit, so that only the ratio of radii
//! and the lightness number remain; [`solve::Problem`] converts.

pub mod excess;
pub mod extremal;
pub mod flight;
pub mod guess;
mod guess_table;
pub mod shooting;
pub mod solve;
