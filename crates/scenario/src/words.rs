//! Numbers as people read them: grouped thousands, sensible digits.

/// Narrow no-break space between groups of three digits.
const GROUP: char = '\u{202f}';

/// `value` with `decimals` digits after the point and its thousands grouped: 6400 becomes "6 400".
pub fn grouped(value: f64, decimals: usize) -> String {
    let text = format!("{:.*}", decimals, value.abs());
    let (whole, rest) = text.split_once('.').map_or((text.as_str(), None), |(w, r)| (w, Some(r)));
    let mut grouped = String::new();
    if value < 0.0 {
        grouped.push('\u{2212}');
    }
    for (i, digit) in whole.chars().enumerate() {
        if i > 0 && (whole.len() - i).is_multiple_of(3) && whole.len() > 3 {
            grouped.push(GROUP);
        }
        grouped.push(digit);
    }
    if let Some(rest) = rest {
        grouped.push('.');
        grouped.push_str(rest);
    }
    grouped
}

/// About four significant digits, grouped, trailing zeros of the fraction dropped.
pub fn short(value: f64) -> String {
    let magnitude = value.abs().max(1e-9).log10().floor() as i32;
    let text = grouped(value, (3 - magnitude).clamp(0, 9) as usize);
    if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.').to_owned() } else { text }
}

/// Days: one decimal below 10 000, none above.
pub fn days(time_d: f64) -> String {
    grouped(time_d, if time_d < 10_000.0 { 1 } else { 0 })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn thousands_are_grouped() {
        assert_eq!(grouped(6400.0, 0), "6\u{202f}400");
        assert_eq!(grouped(1_234_567.89, 1), "1\u{202f}234\u{202f}567.9");
        assert_eq!(grouped(999.0, 0), "999");
        assert_eq!(grouped(-1500.25, 1), "\u{2212}1\u{202f}500.2");
    }

    #[test]
    fn short_numbers_keep_four_digits() {
        assert_eq!(short(60.0), "60");
        assert_eq!(short(0.968_49), "0.9685");
        assert_eq!(short(0.05), "0.05");
        assert_eq!(short(12_345.6), "12\u{202f}346");
    }
}
