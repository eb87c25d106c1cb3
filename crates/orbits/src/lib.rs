//! Orbits: units, constants, planets, two-body motion and impulsive transfers.
//!
//! Heliocentric unless a function says otherwise. Absent on purpose: sails, steering, files, clocks.
//!
//! Modules, in the order in which a newcomer may read them: [`constants`] and [`units`]; [`planets`]; the impulsive
//! yardsticks [`hohmann`], [`escape`] and [`rocket`], and [`impulsive`], which puts them together; then, for orbits
//! in space, [`kepler`] and [`two_body`], [`epochs`] and [`frames`], [`ephemeris`], which says where the planets
//! are, [`geometry`], what that looks like from the Earth, [`lambert`], which connects two places in a given time, and
//! [`two_impulse`], the cheapest such connection within a span of dates.

pub mod argument;
pub mod constants;
pub mod ephemeris;
pub mod epochs;
pub mod escape;
pub mod frames;
pub mod geometry;
pub mod hohmann;
pub mod impulsive;
pub mod kepler;
pub mod lambert;
pub mod planets;
pub mod rocket;
pub mod two_body;
pub mod two_impulse;
pub mod units;
