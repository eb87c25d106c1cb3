//! Steering laws, one a file. Each turns what it knows of the flight into the direction of the sail normal.

pub mod fixed;
pub mod local;
pub mod primer;
