//! Numerical methods on small fixed-size systems: integration with dense output and events, exact derivatives,
//! damped root finding and continuation.
//!
//! Numbers here have no units and mean nothing physical: there are no planets, no sails and no files in this
//! crate.

pub mod arclength;
pub mod continuation;
pub mod dual;
pub mod newton;
pub mod ode;
pub mod root;
pub mod scalar;
