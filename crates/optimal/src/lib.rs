//! Minimum-time transfers: the Hamiltonian, shooting, first guesses, branches and the proof of each answer.
//!
//! Canonical units inside (see `orbits::units`). No pages, no files, no scenario keys.

pub mod certificate;
pub mod coplanar;
pub mod excess;
pub mod spatial;
