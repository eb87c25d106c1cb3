//! Equations of motion, and flights under laws that promise no optimum.

pub mod polar;
pub mod steered;
