//! What the tests share: the repository's files, the reference tables, and one way to fly a link.

pub mod repository;

use scenario::link::decode;
use scenario::run::{Answer, run};
use serde_json::Value;

/// A table of `reference/`, parsed.
///
/// # Panics
/// When the file is missing or is no JSON.
pub fn reference(name: &str) -> Value {
    let text = repository::text(&format!("tests/reference/{name}"));
    serde_json::from_str(&text).unwrap_or_else(|error| panic!("{name}: {error}"))
}

/// The number at a JSON pointer, for example `/bryson_kelley/time/value`.
///
/// # Panics
/// When there is none.
#[track_caller]
pub fn number(table: &Value, pointer: &str) -> f64 {
    let value = table.pointer(pointer).and_then(Value::as_f64);
    value.unwrap_or_else(|| panic!("no number at {pointer}"))
}

/// The text at a JSON pointer.
///
/// # Panics
/// When there is none.
#[track_caller]
pub fn words<'a>(table: &'a Value, pointer: &str) -> &'a str {
    table.pointer(pointer).and_then(Value::as_str).unwrap_or_else(|| panic!("no text at {pointer}"))
}

/// The list at a JSON pointer.
///
/// # Panics
/// When there is none.
#[track_caller]
pub fn list<'a>(table: &'a Value, pointer: &str) -> &'a [Value] {
    table.pointer(pointer).and_then(Value::as_array).unwrap_or_else(|| panic!("no list at {pointer}"))
}

/// Flies a link, as the page and the command line do.
///
/// # Panics
/// When the link does not decode or is refused.
#[track_caller]
pub fn flown(link: &str) -> Answer {
    let scenario = decode(link).unwrap_or_else(|errors| panic!("{link}: {errors:?}"));
    run(&scenario).unwrap_or_else(|errors| panic!("{link}: {errors:?}"))
}

/// Flight time of a link, d.
///
/// # Panics
/// When it is refused or gives no flight.
#[track_caller]
pub fn time_d(link: &str) -> f64 {
    let flight = flown(link).report.flight;
    flight.time_d.unwrap_or_else(|| panic!("{link}: {:?} {:?}", flight.status, flight.message))
}

/// Compares with a reference record, which carries its own `value`, tolerance and source.
///
/// # Panics
/// When the difference is larger than the record allows.
#[track_caller]
pub fn check_record(record: &Value, found: f64) {
    let (expected, tolerance) = (number(record, "/value"), number(record, "/tolerance"));
    let allowed = match words(record, "/tolerance_kind") {
        "relative" => tolerance * expected.abs(),
        "absolute" => tolerance,
        other => panic!("unknown kind of tolerance: {other}"),
    };
    assert!(
        (found - expected).abs() <= allowed,
        "{}: {found} instead of {expected} {} within {allowed:.2e} ({}) [{}: {}]",
        words(record, "/name"),
        words(record, "/unit"),
        words(record, "/tolerance_reason"),
        words(record, "/mark"),
        words(record, "/source"),
    );
}
