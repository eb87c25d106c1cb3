//! Minimum time between orbits in space: Cartesian states and costates, canonical units (au).

pub mod calendar;
pub mod curves;
pub mod ends;
pub mod excess;
pub mod excess_rows;
pub mod extremal;
pub mod growing_open;
pub mod launch;
pub mod orbit_match;
pub mod polish;
pub mod prove;
pub mod rendezvous;
pub mod sweep;
pub mod terminal;
