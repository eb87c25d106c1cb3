//! Single values of a link: numbers, lists, words and titles, read strictly and written canonically.
//!
//! Each reader returns the rule that the text breaks, as words that follow "key: value —".

use crate::date::Date;
use crate::keys::KeyInfo;
use crate::schema::Range;

/// Longest title, characters.
pub(super) const TITLE_CHARACTERS: usize = 80;

/// Reads a finite decimal number: digits with at most one point, an optional sign, an optional exponent.
pub(super) fn number(text: &str) -> Result<f64, String> {
    if text.is_empty() {
        return Err("is empty: write a number such as 1.5, or leave the key out".to_owned());
    }
    if !is_decimal(text) {
        let hint = if text.contains(char::is_whitespace) {
            "must be a number without spaces (a + in a link means a space: write 1e3, not 1e+3)"
        } else if text.contains(',') {
            "must be one number with a decimal point and no commas"
        } else {
            "must be a finite decimal number such as 1500, 0.5 or 1e3"
        };
        return Err(hint.to_owned());
    }
    let value: f64 = text.parse().map_err(|_| "must be a decimal number".to_owned())?;
    // Zero has one way of being written.
    Ok(if value == 0.0 { 0.0 } else { value })
}

/// Whether the text is `[+-] digits [. digits] [e [+-] digits]` with a digit before or after the point.
fn is_decimal(text: &str) -> bool {
    let unsigned = |text: &str| text.strip_prefix(['+', '-']).unwrap_or(text).to_owned();
    let digits = |text: &str| text.bytes().all(|byte| byte.is_ascii_digit());
    let text = unsigned(text);
    let (mantissa, exponent) = match text.split_once(['e', 'E']) {
        Some((mantissa, exponent)) => (mantissa, Some(unsigned(exponent))),
        None => (text.as_str(), None),
    };
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    digits(whole)
        && digits(fraction)
        && !(whole.is_empty() && fraction.is_empty())
        && exponent.is_none_or(|exponent| !exponent.is_empty() && digits(&exponent))
}

/// Reads a number and holds it to the key's range.
pub(super) fn in_range(info: &KeyInfo, text: &str) -> Result<f64, String> {
    let value = number(text)?;
    let (min, max) = (info.min.unwrap_or(f64::MIN), info.max.unwrap_or(f64::MAX));
    if (min..=max).contains(&value) { Ok(value) } else { Err(info.must_be()) }
}

/// Reads a number in the key's range, or `none`.
pub(super) fn in_range_or_none(info: &KeyInfo, text: &str) -> Result<Option<f64>, String> {
    if text == "none" { Ok(None) } else { in_range(info, text).map(Some) }
}

/// Reads a whole number in the key's range.
pub(super) fn whole(info: &KeyInfo, text: &str) -> Result<u32, String> {
    let value = in_range(info, text)?;
    if value.fract() == 0.0 { Ok(value as u32) } else { Err(info.must_be()) }
}

/// One place of a list: its name and its range.
pub(super) struct Place {
    pub(super) name: &'static str,
    pub(super) min: f64,
    pub(super) max: f64,
}

/// Reads numbers separated by commas, the first of them in the order of `places`.
///
/// `fewest`: how many must be there at least.
pub(super) fn list(info: &KeyInfo, text: &str, places: &[Place], fewest: usize) -> Result<Vec<f64>, String> {
    let pieces: Vec<&str> = text.split(',').collect();
    if text.is_empty() || pieces.len() < fewest || pieces.len() > places.len() {
        return Err(info.must_be());
    }
    let read = |(place, piece): (&Place, &&str)| {
        let value = number(piece).map_err(|rule| format!("{} {rule}", place.name))?;
        if (place.min..=place.max).contains(&value) {
            Ok(value)
        } else {
            Err(format!("{} must be {} to {}", place.name, place.min, place.max))
        }
    };
    places.iter().zip(&pieces).map(read).collect()
}

/// Fewest and most values of a range.
const COUNTS: Place = Place { name: "the number of values", min: 2.0, max: 200.0 };

/// Closest ends of a range: its values are told apart at six digits.
const CLOSEST: f64 = 1.01;

/// Reads a range: smallest and largest value, each within `limits`, and how many.
pub(super) fn range(info: &KeyInfo, text: &str, limits: &Place) -> Result<Range, String> {
    let end = || Place { name: limits.name, min: limits.min, max: limits.max };
    let values = list(info, text, &[end(), end(), COUNTS], 3)?;
    let [first, last, count] = values[..] else { return Err(info.must_be()) };
    if last < CLOSEST * first {
        return Err("must have its second value at least 1.01 times the first".to_owned());
    }
    if count.fract() != 0.0 {
        return Err(format!("{} must be a whole number", COUNTS.name));
    }
    Ok(Range { first, last, count: count as u32 })
}

/// Reads two dates, the earlier first.
pub(super) fn span(info: &KeyInfo, text: &str) -> Result<[Date; 2], String> {
    let Some((first, last)) = text.split_once(',') else { return Err(info.must_be()) };
    let (first, last) = (Date::parse(first)?, Date::parse(last)?);
    if last < first { Err("must have the earlier date first".to_owned()) } else { Ok([first, last]) }
}

/// Reads free text: 1 to 80 characters, none of which could act as anything but text.
pub(super) fn title(text: &str) -> Result<String, String> {
    if text.trim().is_empty() {
        return Err("is empty: write a title, or leave the key out".to_owned());
    }
    if text.chars().any(is_control) {
        return Err("must not contain control characters".to_owned());
    }
    if text.chars().nth(TITLE_CHARACTERS).is_some() {
        return Err("must be at most 80 characters long".to_owned());
    }
    Ok(text.to_owned())
}

/// Characters that act instead of being seen: control codes, line and paragraph separators, and those that turn
/// the direction of writing, with which a title could disguise what stands beside it.
pub(super) fn is_control(character: char) -> bool {
    character.is_control() || matches!(character, '\u{2028}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
}

/// Writes a number in the shortest form that reads back the same, without plus signs; an exponent only where the
/// plain form would be long.
pub(super) fn write(value: f64) -> String {
    if value == 0.0 || (1e-6..1e21).contains(&value.abs()) {
        format!("{value}")
    } else {
        format!("{value:e}")
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn usual_ways_of_writing_numbers_are_read() {
        for (text, value) in [
            ("6400", 6400.0),
            ("-3.5", -3.5),
            (".5", 0.5),
            ("5.", 5.0),
            ("1e3", 1000.0),
            ("1E-3", 0.001),
            ("+2", 2.0),
            ("1e+3", 1000.0),
            ("007", 7.0),
        ] {
            assert_eq!(number(text), Ok(value), "{text}");
        }
    }

    #[test]
    fn other_texts_are_refused_with_the_way_out() {
        for (text, hint) in [
            ("", "empty"),
            ("1 000", "without spaces"),
            ("1e 3", "1e3"),
            (" 1", "without spaces"),
            ("1,000", "no commas"),
            ("NaN", "finite decimal"),
            ("inf", "finite decimal"),
            ("-Infinity", "finite decimal"),
            ("0x10", "finite decimal"),
            ("1_000", "finite decimal"),
            ("ten", "finite decimal"),
            (".", "finite decimal"),
            ("-", "finite decimal"),
            ("e3", "finite decimal"),
            ("1e", "finite decimal"),
            ("--1", "finite decimal"),
            ("1.2.3", "finite decimal"),
            ("=1+1", "finite decimal"),
            ("<b>1</b>", "finite decimal"),
            ("\u{663}", "finite decimal"),
            ("1e3e3", "finite decimal"),
        ] {
            let rule = number(text).unwrap_err();
            assert!(rule.contains(hint), "{text}: {rule}");
        }
    }

    #[test]
    fn minus_zero_is_zero() {
        assert!(number("-0").unwrap().is_sign_positive());
        assert!(number("-1e-400").unwrap().is_sign_positive());
    }

    #[test]
    fn control_characters_are_more_than_the_control_codes() {
        for character in ['\0', '\n', '\u{7f}', '\u{85}', '\u{2028}', '\u{202e}', '\u{2066}'] {
            assert!(title(&format!("a{character}b")).is_err(), "{character:?}");
        }
        // A joiner within an emoji acts on nothing but its neighbours.
        assert!(title("\u{1f468}\u{200d}\u{1f680} <b>=1+1</b>").is_ok());
    }

    #[test]
    fn title_length_counts_characters() {
        assert!(title(&"\u{1f680}".repeat(80)).is_ok());
        assert!(title(&"a".repeat(81)).is_err());
        assert!(title("  ").is_err());
    }

    proptest! {
        #[test]
        fn written_numbers_read_back_exactly(value in prop::num::f64::NORMAL | prop::num::f64::SUBNORMAL) {
            let text = write(value);
            prop_assert_eq!(number(&text), Ok(value));
            prop_assert!(!text.contains('+'));
            prop_assert!(text.len() <= 26, "{}", text);
        }
    }
}
