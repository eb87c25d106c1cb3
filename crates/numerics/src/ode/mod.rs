//! Ordinary differential equations: one explicit method of order 8 with dense output and events.

pub mod dense;
pub mod flow;
pub mod integrate;
mod tableau;

pub use dense::DenseStep;
pub use flow::{EventKind, Flow, Mode};
pub use integrate::{Options, Outcome, Termination, integrate, integrate_observed};
