//! Scenarios: what is asked, the link text that carries it, and the report that answers it.
//!
//! [`link::decode`] reads a link into a [`schema::Scenario`], [`run::run`] answers it with a [`report::Report`].
//! Absent on purpose: JavaScript, pages, and formulas of physics.

pub mod checks;
pub mod date;
pub mod examples;
pub mod keys;
pub mod link;
pub mod refused;
pub mod report;
pub mod run;
pub mod schema;
pub mod study;
pub mod words;

mod baseline;
mod cautions;
mod craft;
mod dated;
mod earth;
mod flight;
mod histories;
mod place;
mod sentence;
