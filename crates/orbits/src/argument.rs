//! The error for impossible input: which argument, its value, and the rule that it breaks.

use std::fmt;

/// An argument that no answer exists for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BadArgument {
    /// Name of the argument, with its unit.
    pub name: &'static str,
    /// The value given.
    pub value: f64,
    /// What the value must be.
    pub rule: &'static str,
}

impl fmt::Display for BadArgument {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{} = {:?}: {}", self.name, self.value, self.rule)
    }
}

impl std::error::Error for BadArgument {}

/// The largest length, speed or gravity parameter accepted: beyond it products would overflow.
const LARGEST: f64 = 1e60;

/// `value` if it is finite, above zero and far from overflow.
pub(crate) fn positive(name: &'static str, value: f64) -> Result<f64, BadArgument> {
    if value > 1.0 / LARGEST && value < LARGEST {
        Ok(value)
    } else {
        Err(BadArgument { name, value, rule: "must be a number above zero (1e-60 to 1e60)" })
    }
}

/// `value` if it is finite, zero or more, and far from overflow.
pub(crate) fn not_negative(name: &'static str, value: f64) -> Result<f64, BadArgument> {
    if (0.0..LARGEST).contains(&value) {
        Ok(value)
    } else {
        Err(BadArgument { name, value, rule: "must be a number from zero up (to 1e60)" })
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn impossible_values_are_named_with_the_rule() {
        for value in [f64::NAN, f64::INFINITY, -1.0, 0.0, 1e308] {
            let error = positive("radius_km", value).unwrap_err();
            assert_eq!(error.name, "radius_km");
            assert!(error.to_string().starts_with("radius_km = "), "{error}");
        }
        assert!(not_negative("speed_km_s", -1e-300).is_err());
        assert!(not_negative("speed_km_s", f64::NAN).is_err());
    }

    #[test]
    fn possible_values_pass_unchanged() {
        assert_eq!(positive("radius_km", 6678.0), Ok(6678.0));
        assert_eq!(not_negative("speed_km_s", 0.0), Ok(0.0));
    }
}
