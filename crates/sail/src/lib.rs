//! The sailcraft: loading, film, force, attitude, steering laws and equations of motion.
//!
//! Canonical units (au, sqrt(au^3/GM), see `orbits::units`) unless a name says otherwise. Nothing here knows
//! what is optimal over a whole flight, and nothing reads or writes files.

pub mod film;
pub mod force;
pub mod loading;
pub mod motion;
pub mod spiral;
pub mod steering;
pub mod temperature;
pub mod trajectory;
