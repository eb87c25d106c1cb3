//! The text layer of a link: where it starts, how it splits into pairs, what its escapes mean.

/// The part of a text that is a link: what follows `#`, or else `?`, in a full address; what follows a leading `#`
/// or `?`; otherwise everything. Surrounding white space is not part of a link.
pub(super) fn link_part(text: &str) -> &str {
    let text = text.trim();
    let head_end = text.find(['=', '&', '#', '?']).unwrap_or(text.len());
    let (head, rest) = text.split_at(head_end);
    let after = |mark: char| text.split_once(mark).map(|(_, after)| after);
    if head.contains("://") || rest.starts_with('?') {
        // An address: it may have a query as well as a fragment.
        return after('#').or_else(|| after('?')).unwrap_or("");
    }
    // Otherwise only a leading `#` is not part of the link: any further on belongs to a value.
    rest.strip_prefix('#').unwrap_or(text)
}

/// Key and value of every pair, still escaped; empty pairs are skipped.
pub(super) fn pairs(link: &str) -> impl Iterator<Item = (&str, &str)> {
    link.split('&').filter(|pair| !pair.is_empty()).map(|pair| pair.split_once('=').unwrap_or((pair, "")))
}

/// The text that an escaped part of a link stands for.
///
/// # Errors
/// The rule that a broken escape violates.
pub(super) fn unescape(part: &str) -> Result<String, &'static str> {
    let mut bytes = Vec::with_capacity(part.len());
    let mut rest = part.as_bytes();
    while let Some((&first, after)) = rest.split_first() {
        rest = after;
        match first {
            b'+' => bytes.push(b' '),
            b'%' => {
                let digits = rest.split_at_checked(2);
                let value = digits.and_then(|(digits, _)| Some(16 * hex(digits[0])? + hex(digits[1])?));
                let Some(value) = value else {
                    return Err("has a broken percent-escape: write a plain % as %25");
                };
                bytes.push(value);
                rest = &rest[2..];
            }
            other => bytes.push(other),
        }
    }
    String::from_utf8(bytes).map_err(|_| "has percent-escapes that do not spell UTF-8 text")
}

fn hex(digit: u8) -> Option<u8> {
    char::from(digit).to_digit(16).map(|value| value as u8)
}

/// Escapes a value for a link; commas stay.
pub(super) fn escape(value: &str) -> String {
    let escaped = value.split(',').map(|piece| form_urlencoded::byte_serialize(piece.as_bytes()).collect());
    escaped.collect::<Vec<String>>().join(",")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[track_caller]
    fn check_part(text: &str, link: &str) {
        assert_eq!(link_part(text), link, "{text}");
    }

    #[test]
    fn link_starts_after_the_address() {
        check_part("v=1&to=venus", "v=1&to=venus");
        check_part("#v=1&to=venus", "v=1&to=venus");
        check_part("?v=1&to=venus", "v=1&to=venus");
        check_part("https://example.org/s/#v=1&to=venus", "v=1&to=venus");
        check_part("https://example.org/s/?v=1&to=venus", "v=1&to=venus");
        check_part("https://example.org/?a=b#v=1", "v=1");
        check_part("file:///home/me/my%20files/sunreach.html#v=1", "v=1");
        check_part("sunreach.html#v=1&title=a?b", "v=1&title=a?b");
        check_part("  #v=1\n", "v=1");
        check_part("https://example.org/sunreach.html", "");
        check_part("", "");
    }

    #[test]
    fn marks_within_a_bare_link_belong_to_its_values() {
        check_part("title=why?&to=venus", "title=why?&to=venus");
        check_part("#title=no.#1", "title=no.#1");
        check_part("title=see+https://example.org/#x", "title=see+https://example.org/#x");
    }

    #[test]
    fn escapes_mean_what_the_form_encoding_says() {
        assert_eq!(unescape("a+b%2Cc%2c%C3%A9").unwrap(), "a b,c,\u{e9}");
        assert!(unescape("50%").unwrap_err().contains("%25"));
        assert!(unescape("%2").is_err());
        assert!(unescape("%zz").is_err());
        assert!(unescape("%+1").is_err());
        assert!(unescape("%C3").unwrap_err().contains("UTF-8"));
    }

    #[test]
    fn commas_stay_when_written() {
        assert_eq!(escape("1.5,0.2,<b> & \u{e9}"), "1.5,0.2,%3Cb%3E+%26+%C3%A9");
        assert_eq!(escape(""), "");
    }
}
