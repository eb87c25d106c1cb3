//! A calendar date, TDB: departure dates are days, not instants.

use std::fmt;

use orbits::epochs;

/// A day of the Gregorian calendar. Departure is at its start, 0 h TDB.
///
/// # Example
/// ```
/// use scenario::date::Date;
/// let date = Date::parse("2031-05-17")?;
/// assert_eq!(date.to_string(), "2031-05-17");
/// assert!(Date::parse("2031-02-29").is_err());
/// # Ok::<(), String>(())
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Date {
    /// Year.
    pub year: i32,
    /// Month, 1 to 12.
    pub month: u8,
    /// Day of the month, from 1.
    pub day: u8,
}

impl Date {
    /// First day that a flight may leave on: the planets' elements begin.
    pub const FIRST: Date = Date { year: 1800, month: 1, day: 1 };
    /// Last day that a flight may leave on: the planets' elements end.
    pub const LAST: Date = Date { year: 2050, month: 12, day: 31 };

    /// Reads `YYYY-MM-DD`.
    ///
    /// # Errors
    /// The rule that the text breaks: the form, the calendar, or the span 1800 to 2050.
    pub fn parse(text: &str) -> Result<Date, String> {
        let form = || "must be a date such as 2031-05-17 (YYYY-MM-DD)".to_owned();
        let bytes = text.as_bytes();
        let shaped = bytes.len() == 10
            && bytes.iter().enumerate().all(|(i, byte)| match i {
                4 | 7 => *byte == b'-',
                _ => byte.is_ascii_digit(),
            });
        if !shaped {
            return Err(form());
        }
        // All digits are ASCII by now: slicing and parsing cannot fail, but the types do not know.
        let number = |from: usize, to: usize| text[from..to].parse::<u16>().map_err(|_| form());
        let (year, month, day) = (number(0, 4)?, number(5, 7)?, number(8, 10)?);
        let date = Date { year: i32::from(year), month: month as u8, day: day as u8 };
        if epochs::start_of_day(date.year, date.month, date.day).is_err() {
            return Err("is not a day of the calendar: check month and day (YYYY-MM-DD)".to_owned());
        }
        if date < Date::FIRST || date > Date::LAST {
            return Err(
                "must lie within 1800-01-01 to 2050-12-31: the planets' elements end there".to_owned()
            );
        }
        Ok(date)
    }

    /// The start of the day (0 h TDB), days since J2000; `None` for a date that was not made by [`Date::parse`]
    /// and does not exist.
    pub fn j2000_d(self) -> Option<f64> {
        epochs::start_of_day(self.year, self.month, self.day).ok()
    }
}

impl fmt::Display for Date {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:04}-{:02}-{:02}", self.year, self.month, self.day)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[track_caller]
    fn check_refused(text: &str, rule: &str) {
        let error = Date::parse(text).unwrap_err();
        assert!(error.contains(rule), "{text}: {error}");
    }

    #[test]
    fn dates_of_another_form_are_refused() {
        for text in [
            "",
            "2031",
            "2031-5-17",
            "17-05-2031",
            "2031/05/17",
            "2031-05-17T00",
            "+031-05-17",
            "2031-05-1７",
        ] {
            check_refused(text, "YYYY-MM-DD");
        }
    }

    #[test]
    fn days_that_do_not_exist_are_refused() {
        for text in ["2031-02-29", "1900-02-29", "2031-13-01", "2031-00-10", "2031-01-00", "2031-06-31"] {
            check_refused(text, "calendar");
        }
        assert!(Date::parse("2032-02-29").is_ok());
    }

    #[test]
    fn dates_end_where_the_elements_end() {
        assert_eq!(Date::parse("1800-01-01"), Ok(Date::FIRST));
        assert_eq!(Date::parse("2050-12-31"), Ok(Date::LAST));
        check_refused("1799-12-31", "1800-01-01");
        check_refused("2051-01-01", "2050-12-31");
    }

    #[test]
    fn a_day_starts_at_midnight() {
        assert_eq!(Date { year: 2000, month: 1, day: 1 }.j2000_d(), Some(-0.5));
        assert_eq!(Date { year: 2000, month: 2, day: 30 }.j2000_d(), None);
    }
}
