//! Calendar dates and instants in TDB.
//!
//! Instants are `j2000_d`: days of TDB since 2000-01-01 12:00 TDB. That keeps ten times more digits than a Julian
//! date, which a 64-bit number resolves to 40 microseconds only. Dates are of the Gregorian calendar, also before
//! its introduction. TDB runs about 69 s ahead of UTC; nothing here converts between the two, and nothing reads a
//! clock.

use std::fmt;

use jiff::civil;

use crate::constants::{DAY_S, J2000_JD_TDB};

/// A day of the calendar that does not exist, or is beyond the years -9999 to 9999.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct NoSuchDay {
    /// Year.
    pub year: i32,
    /// Month, 1 to 12 if it exists.
    pub month: u8,
    /// Day of the month, from 1.
    pub day: u8,
}

impl fmt::Display for NoSuchDay {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:04}-{:02}-{:02} is not a day of the calendar", self.year, self.month, self.day)
    }
}

impl std::error::Error for NoSuchDay {}

/// 2000-01-01, the day of the epoch J2000.
const DAY_OF_J2000: civil::Date = civil::date(2000, 1, 1);

/// The instant at which a calendar day begins (0 h TDB), days since J2000.
///
/// # Errors
/// [`NoSuchDay`] for 30 February and the like.
///
/// # Example
/// ```
/// use orbits::epochs;
/// assert_eq!(epochs::start_of_day(2000, 1, 1), Ok(-0.5)); // J2000 itself is noon
/// assert_eq!(epochs::jd_tdb(-0.5), 2_451_544.5);
/// assert!(epochs::start_of_day(2030, 2, 29).is_err());
/// ```
pub fn start_of_day(year: i32, month: u8, day: u8) -> Result<f64, NoSuchDay> {
    let no_such_day = NoSuchDay { year, month, day };
    let parts = (i16::try_from(year), i8::try_from(month), i8::try_from(day));
    let (Ok(year), Ok(month), Ok(day)) = parts else { return Err(no_such_day) };
    let date = civil::Date::new(year, month, day).map_err(|_| no_such_day)?;
    let days = date.since((jiff::Unit::Day, DAY_OF_J2000)).map_err(|_| no_such_day)?.get_days();
    Ok(f64::from(days) - 0.5)
}

/// Julian date of an instant, TDB.
pub fn jd_tdb(j2000_d: f64) -> f64 {
    j2000_d + J2000_JD_TDB
}

/// The instant of a Julian date, days since J2000.
pub fn from_jd_tdb(jd_tdb: f64) -> f64 {
    jd_tdb - J2000_JD_TDB
}

/// The calendar day and the second within it; `None` beyond the years -9999 to 9999.
fn split(j2000_d: f64, second_step: f64) -> Option<(civil::Date, f64)> {
    let since_midnight_d = j2000_d + 0.5;
    let mut days = since_midnight_d.floor();
    let second = (since_midnight_d - days) * DAY_S;
    let mut second = (second / second_step).round() * second_step;
    // Rounding may reach the next midnight.
    if second >= DAY_S {
        days += 1.0;
        second = 0.0;
    }
    // Four million days lie well beyond both ends of the calendar.
    if days.is_nan() || days.abs() > 4e6 {
        return None;
    }
    let span = jiff::Span::new().days(days as i64);
    Some((DAY_OF_J2000.checked_add(span).ok()?, second))
}

/// The instant's calendar day as ISO 8601, cut (not rounded) to the day: `2031-05-17`; `None` beyond the years
/// -9999 to 9999.
///
/// An instant within half a millisecond of the next midnight counts as that midnight, so that a sum of days that
/// lands on a midnight reads as the day that begins there.
pub fn iso_day(j2000_d: f64) -> Option<String> {
    split(j2000_d, 1e-3).map(|(date, _)| date.to_string())
}

/// The instant as ISO 8601 to the millisecond: `2031-05-17T04:12:33.250`; `None` beyond the years -9999 to 9999.
pub fn iso_instant(j2000_d: f64) -> Option<String> {
    let (date, second) = split(j2000_d, 1e-3)?;
    let milliseconds = (second * 1e3).round() as u32;
    let (seconds, millisecond) = (milliseconds / 1000, milliseconds % 1000);
    let (hour, minute, second) = (seconds / 3600, seconds / 60 % 60, seconds % 60);
    Some(format!("{date}T{hour:02}:{minute:02}:{second:02}.{millisecond:03}"))
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn julian_dates_of_known_days() {
        // From memory (high confidence): J. Meeus, Astronomical Algorithms, chapter 7: 1957-10-04.81 is JD 2436116.31,
        // 1987-01-27.0 is 2446822.5, 1988-06-19.5 is 2447332.0, 1900-01-01.0 is 2415020.5, 1600-01-01.0 is
        // 2305447.5.
        let jd = |y, m, d| jd_tdb(start_of_day(y, m, d).unwrap());
        assert!((jd(1957, 10, 4) + 0.81 - 2_436_116.31).abs() < 1e-6);
        assert_eq!(jd(1987, 1, 27), 2_446_822.5);
        assert_eq!(jd(1988, 6, 19) + 0.5, 2_447_332.0);
        assert_eq!(jd(1900, 1, 1), 2_415_020.5);
        assert_eq!(jd(1600, 1, 1), 2_305_447.5);
    }

    #[test]
    fn days_that_do_not_exist_are_refused() {
        for (y, m, d) in [
            (2030, 2, 29),
            (1900, 2, 29),
            (2030, 4, 31),
            (2030, 0, 1),
            (2030, 13, 1),
            (2030, 1, 0),
            (2030, 200, 1),
            (40_000, 1, 1),
            (i32::MIN, 1, 1),
        ] {
            assert_eq!(start_of_day(y, m, d), Err(NoSuchDay { year: y, month: m, day: d }));
        }
        assert!(start_of_day(2000, 2, 29).is_ok());
    }

    #[test]
    fn instants_read_as_iso_8601() {
        assert_eq!(iso_instant(0.0).unwrap(), "2000-01-01T12:00:00.000");
        assert_eq!(iso_day(0.0).unwrap(), "2000-01-01");
        let start = start_of_day(2031, 5, 17).unwrap();
        assert_eq!(iso_instant(start + 0.25).unwrap(), "2031-05-17T06:00:00.000");
        assert_eq!(iso_instant(start + 1.25 / DAY_S).unwrap(), "2031-05-17T00:00:01.250");
    }

    #[test]
    fn rounding_up_to_midnight_starts_the_next_day() {
        let almost = start_of_day(2031, 12, 31).unwrap() + 1.0 - 1e-9;
        assert_eq!(iso_instant(almost).unwrap(), "2032-01-01T00:00:00.000");
        assert_eq!(iso_day(almost).unwrap(), "2032-01-01");
    }

    #[test]
    fn instants_beyond_the_calendar_have_no_date() {
        for far in [f64::NAN, f64::INFINITY, -1e300, 1e9, 3.0e6] {
            assert_eq!(iso_day(far), None);
            assert_eq!(iso_instant(far), None);
        }
    }

    proptest! {
        #[test]
        fn every_day_reads_back(days in -80_000i32..80_000) {
            let j2000_d = f64::from(days) - 0.5;
            let text = iso_day(j2000_d).unwrap();
            let parts: Vec<i32> = text.split('-').map(|part| part.parse().unwrap()).collect();
            prop_assert_eq!(start_of_day(parts[0], parts[1] as u8, parts[2] as u8), Ok(j2000_d));
        }
    }
}
