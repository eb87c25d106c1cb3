//! Round tick values, their labels, and ranges that show a line well.

/// Most ticks that an axis carries.
pub(crate) const MAX_TICKS: usize = 7;

/// One tick of an axis.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Tick {
    pub(crate) value: f64,
    pub(crate) label: String,
}

/// Which steps are round.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Steps {
    /// 1, 2 and 5 times powers of ten.
    Decimal,
    /// Decimal below 10, then 15, 30, 45 and 90.
    Degrees,
}

impl Steps {
    /// The `rank`-th step at or above `smallest`.
    fn step(self, smallest: f64, rank: usize) -> f64 {
        let first = smallest.log10().floor() as i32;
        let decimal = |i: usize| [1.0, 2.0, 5.0][i % 3] * 10.0_f64.powi(first + (i / 3) as i32);
        let all = (0..).map(decimal);
        match self {
            Steps::Decimal => all.filter(|&s| s >= smallest).nth(rank).unwrap_or(smallest),
            Steps::Degrees => all
                .take_while(|&s| s < 10.5)
                .chain([15.0, 30.0, 45.0, 90.0, 180.0, 360.0])
                .filter(|&s| s >= smallest)
                .nth(rank)
                .unwrap_or(360.0),
        }
    }
}

/// A number with the given decimals, a true minus sign, and thousands set apart from five digits on.
pub(crate) fn number(value: f64, decimals: usize) -> String {
    let text = format!("{:.decimals$}", value.abs());
    let (whole, fraction) = text.split_once('.').map_or((text.as_str(), None), |(w, f)| (w, Some(f)));
    let mut out = String::new();
    if value < 0.0 && text.bytes().any(|b| (b'1'..=b'9').contains(&b)) {
        out.push('−');
    }
    for (i, digit) in whole.chars().enumerate() {
        let left = whole.len() - i;
        if whole.len() > 4 && i > 0 && left % 3 == 0 {
            out.push('\u{202f}');
        }
        out.push(digit);
    }
    if let Some(fraction) = fraction {
        out.push('.');
        out.push_str(fraction);
    }
    out
}

/// A number with about the given count of significant digits and no needless decimals beyond it.
pub(crate) fn significant(value: f64, digits: usize) -> String {
    if value == 0.0 || !value.is_finite() {
        return number(value, 0);
    }
    let magnitude = value.abs().log10().floor() as i32;
    number(value, (digits as i32 - 1 - magnitude).clamp(0, 9) as usize)
}

/// Round ticks in a range: at most [`MAX_TICKS`], and as many as `fits` accepts.
pub(crate) fn linear_ticks(min: f64, max: f64, steps: Steps, fits: impl Fn(&[Tick]) -> bool) -> Vec<Tick> {
    let span = max - min;
    if !span.is_finite() || span <= 0.0 {
        return Vec::new();
    }
    for rank in 0..12 {
        let step = steps.step(span / MAX_TICKS as f64, rank);
        let ticks = multiples(min, max, step);
        if ticks.len() <= MAX_TICKS && fits(&ticks) {
            return ticks;
        }
    }
    Vec::new()
}

fn multiples(min: f64, max: f64, step: f64) -> Vec<Tick> {
    let decimals = (-(step.log10() + 1e-9).floor()).clamp(0.0, 9.0) as usize;
    // A tick may sit on either end of the range in spite of rounding.
    let slack = 1e-9;
    let first = (min / step - slack).ceil() as i64;
    let last = (max / step + slack).floor() as i64;
    (first..=last)
        .map(|k| k as f64 * step)
        .map(|value| Tick { value, label: number(value, decimals) })
        .collect()
}

/// Ticks of a logarithmic axis: 1, 2, 5 of each decade, or whole decades where those are too many.
pub(crate) fn log_ticks(min: f64, max: f64, fits: impl Fn(&[Tick]) -> bool) -> Vec<Tick> {
    if !(min > 0.0 && max > min && max.is_finite()) {
        return Vec::new();
    }
    let (first, last) = (min.log10().floor() as i32, max.log10().ceil() as i32);
    let chosen = |mantissas: &[f64], stride: i32| -> Vec<Tick> {
        (first..=last)
            .filter(|decade| decade.rem_euclid(stride) == 0)
            .flat_map(|decade| mantissas.iter().map(move |m| (decade, m * 10.0_f64.powi(decade))))
            .filter(|&(_, value)| value >= min * (1.0 - 1e-9) && value <= max * (1.0 + 1e-9))
            .map(|(decade, value)| Tick { value, label: number(value, (-decade).clamp(0, 9) as usize) })
            .collect()
    };
    [(&[1.0, 2.0, 5.0][..], 1), (&[1.0], 1), (&[1.0], 2), (&[1.0], 3), (&[1.0], 6)]
        .into_iter()
        .map(|(mantissas, stride)| chosen(mantissas, stride))
        .find(|ticks| ticks.len() <= MAX_TICKS && fits(ticks))
        .unwrap_or_default()
}

/// Smallest and largest finite value; `None` when there is none.
pub(crate) fn extent<'a>(values: impl IntoIterator<Item = &'a f64>) -> Option<(f64, f64)> {
    values.into_iter().filter(|v| v.is_finite()).fold(None, |seen, &v| match seen {
        None => Some((v, v)),
        Some((low, high)) => Some((low.min(v), high.max(v))),
    })
}

/// The range with a margin on both sides; values that hardly differ are shown in a range of 2e-4 of their size,
/// so that rounding noise does not look like history.
pub(crate) fn padded((min, max): (f64, f64), share: f64) -> (f64, f64) {
    let least = 2e-4 * min.abs().max(max.abs()).max(1e-6);
    let middle = (min + max) / 2.0;
    let half = (max - min).max(least) * (0.5 + share);
    (middle - half, middle + half)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn numbers_are_set_for_reading() {
        assert_eq!(number(-3.0, 0), "−3");
        assert_eq!(number(-0.0001, 2), "0.00");
        assert_eq!(number(9000.0, 0), "9000");
        assert_eq!(number(12345.5, 1), "12\u{202f}345.5");
        assert_eq!(number(1234567.0, 0), "1\u{202f}234\u{202f}567");
        assert_eq!(significant(0.012345, 3), "0.0123");
        assert_eq!(significant(1.5237, 3), "1.52");
    }

    #[test]
    fn degrees_step_by_parts_of_a_right_angle() {
        let ticks = linear_ticks(-90.0, 90.0, Steps::Degrees, |_| true);
        let values: Vec<f64> = ticks.iter().map(|tick| tick.value).collect();
        assert_eq!(values, [-90.0, -60.0, -30.0, 0.0, 30.0, 60.0, 90.0]);
    }

    proptest! {
        #[test]
        fn ticks_are_few_inside_and_never_labelled_alike(
            low in -1e5..1e5_f64, exponent in -3.0..6.0_f64, degrees in any::<bool>()
        ) {
            let high = low + 10.0_f64.powf(exponent);
            let steps = if degrees && exponent < 2.5 { Steps::Degrees } else { Steps::Decimal };
            let ticks = linear_ticks(low, high, steps, |_| true);
            prop_assert!(ticks.len() >= 2 && ticks.len() <= MAX_TICKS, "{ticks:?}");
            let slack = (high - low) * 1e-6;
            for pair in ticks.windows(2) {
                prop_assert!(pair[1].value > pair[0].value);
                prop_assert!(pair[1].label != pair[0].label, "{ticks:?}");
            }
            prop_assert!(ticks.iter().all(|t| t.value >= low - slack && t.value <= high + slack));
        }

        #[test]
        fn logarithmic_ticks_are_few_and_inside(low in -6.0..3.0_f64, decades in 0.8..8.0_f64) {
            let (low, high) = (10.0_f64.powf(low), 10.0_f64.powf(low + decades));
            let ticks = log_ticks(low, high, |_| true);
            prop_assert!(!ticks.is_empty() && ticks.len() <= MAX_TICKS);
            prop_assert!(ticks.iter().all(|t| t.value > low * 0.999 && t.value < high * 1.001));
        }
    }
}
