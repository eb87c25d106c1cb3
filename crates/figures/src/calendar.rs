//! Calendar dates beside a time axis that counts days: months, years or days, whichever suits the flight's length.

use orbits::epochs;

use crate::axis::{MAX_TICKS, Tick};

/// Where calendar ticks stand.
#[derive(Clone, Copy, Debug)]
enum Step {
    /// On these days of every month.
    Days(&'static [u8]),
    /// On the first of every so many months, counted from January.
    Months(i32),
    /// On 1 January of every so many years.
    Years(i32),
}

/// Finest first.
const STEPS: [Step; 13] = [
    Step::Days(&[1, 6, 11, 16, 21, 26]),
    Step::Days(&[1, 11, 21]),
    Step::Months(1),
    Step::Months(2),
    Step::Months(3),
    Step::Months(6),
    Step::Years(1),
    Step::Years(2),
    Step::Years(5),
    Step::Years(10),
    Step::Years(20),
    Step::Years(50),
    Step::Years(100),
];

/// The calendar day of an ISO 8601 date or instant.
pub(crate) fn day(iso: Option<&str>) -> Option<&str> {
    iso.and_then(|text| text.get(..10))
}

/// The beginning of a calendar day (TDB), days since J2000.
pub(crate) fn start_d(iso: Option<&str>) -> Option<f64> {
    let mut parts = day(iso)?.split('-');
    let year: i32 = parts.next()?.parse().ok()?;
    let mut part = || parts.next()?.parse::<u8>().ok();
    epochs::start_of_day(year, part()?, part()?).ok()
}

/// The finest calendar ticks that `fits` accepts, at most [`MAX_TICKS`] of them, as days since a departure at
/// `depart_j2000_d`; empty where there are none.
pub(crate) fn date_ticks(depart_j2000_d: f64, end_d: f64, fits: impl Fn(&[Tick]) -> bool) -> Vec<Tick> {
    let year = |time_d: f64| -> Option<i32> { epochs::iso_day(time_d)?.split('-').next()?.parse().ok() };
    let (Some(first), Some(last)) = (year(depart_j2000_d), year(depart_j2000_d + end_d)) else {
        return Vec::new();
    };
    STEPS
        .into_iter()
        .map(|step| {
            let days = |&(year, month, day): &(i32, u8, u8)| {
                let value = epochs::start_of_day(year, month, day).ok()? - depart_j2000_d;
                let label = match step {
                    Step::Days(_) => format!("{year:04}-{month:02}-{day:02}"),
                    Step::Months(_) => format!("{year:04}-{month:02}"),
                    Step::Years(_) => format!("{year:04}"),
                };
                (0.0..=end_d).contains(&value).then_some(Tick { value, label })
            };
            // One more than there may be is enough to see that there are too many.
            let dates = dates(step, first, last);
            dates.iter().filter_map(days).take(MAX_TICKS + 1).collect::<Vec<Tick>>()
        })
        .find(|ticks| !ticks.is_empty() && ticks.len() <= MAX_TICKS && fits(ticks))
        .unwrap_or_default()
}

/// Every date of a step from the first to the last year.
fn dates(step: Step, first: i32, last: i32) -> Vec<(i32, u8, u8)> {
    let (every_year, every_month, days): (i32, i32, &[u8]) = match step {
        Step::Days(days) => (1, 1, days),
        Step::Months(every) => (1, every, &[1]),
        Step::Years(every) => (every, 12, &[1]),
    };
    (first..=last)
        .filter(|year| year.rem_euclid(every_year) == 0)
        .flat_map(|year| {
            (0..12).filter(move |month| month % every_month == 0).map(move |m| (year, m as u8 + 1))
        })
        .flat_map(|(year, month)| days.iter().map(move |&day| (year, month, day)))
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn labels(depart: &str, end_d: f64) -> Vec<String> {
        let start = start_d(Some(depart)).unwrap();
        date_ticks(start, end_d, |_| true).into_iter().map(|tick| tick.label).collect()
    }

    #[test]
    fn a_flight_of_a_year_shows_every_other_month_and_one_of_a_decade_every_other_year() {
        let months = ["2031-07", "2031-09", "2031-11", "2032-01", "2032-03", "2032-05"];
        assert_eq!(labels("2031-05-17", 380.0), months);
        assert_eq!(labels("2031-05-17", 3652.0), ["2032", "2034", "2036", "2038", "2040"]);
        assert_eq!(labels("2031-05-17", 20.0), ["2031-05-21", "2031-05-26", "2031-06-01", "2031-06-06"]);
    }

    #[test]
    fn a_month_begins_as_many_days_after_departure_as_the_calendar_says() {
        let start = start_d(Some("2031-12-25T00:00")).unwrap();
        let ticks = date_ticks(start, 40.0, |ticks| ticks.len() < 3);
        // Seven days are left of December 2031 with the 25th itself; January has 31.
        assert_eq!(ticks.iter().map(|tick| tick.value).collect::<Vec<_>>(), [7.0, 38.0]);
    }

    #[test]
    fn what_is_no_date_has_no_ticks() {
        for text in ["", "2031", "2031-13-01", "soon, perhaps", "−031-05-17"] {
            assert_eq!(start_d(Some(text)), None, "{text}");
        }
        assert!(date_ticks(f64::NAN, 100.0, |_| true).is_empty());
        assert!(date_ticks(0.0, 1e12, |_| true).is_empty());
    }

    proptest! {
        #[test]
        fn dates_are_few_inside_and_in_order(start in -70_000.0..20_000.0_f64, exponent in 1.0..4.9_f64) {
            let end_d = 10.0_f64.powf(exponent);
            let ticks = date_ticks(start, end_d, |_| true);
            prop_assert!(!ticks.is_empty() && ticks.len() <= MAX_TICKS, "{ticks:?}");
            prop_assert!(ticks.iter().all(|tick| (0.0..=end_d).contains(&tick.value)));
            prop_assert!(ticks.windows(2).all(|pair| pair[0].value < pair[1].value));
        }
    }
}
