//! Approximate widths of text, so that layout needs no font.
//!
//! The figures are set in whatever sans-serif font the reader has. The table errs on the wide side: it was
//! read off a broad screen face, so that text that fits here fits in narrower faces too.

use crate::geometry::Rect;
use crate::shapes::{Anchor, Text, Weight};

/// Advance width of one character, in units of the font size.
fn advance_em(c: char) -> f64 {
    match c {
        'i' | 'j' | 'l' | '\'' | '|' | '\u{2019}' => 0.30,
        ' ' | '.' | ',' | ':' | ';' | '!' | '\u{a0}' | '\u{202f}' => 0.33,
        'f' | 't' | 'r' | '(' | ')' | '[' | ']' | '/' | '-' => 0.41,
        '°' => 0.50,
        'c' | 's' | 'z' | 'k' | 'v' | 'x' | 'y' => 0.60,
        'm' | 'w' | 'M' | 'W' | '@' | '%' | '\u{2014}' => 1.0,
        '−' | '+' | '=' | '<' | '>' | '×' | '~' => 0.84,
        'A'..='Z' => 0.76,
        c if c.is_ascii() => 0.64,
        c if (c as u32) < 0x250 => 0.72,
        _ => 1.0,
    }
}

/// Width of a line of text, CSS pixels.
pub(crate) fn text_width(content: &str, size: f64, weight: Weight) -> f64 {
    let factor = if weight == Weight::Bold { 1.1 } else { 1.0 };
    content.chars().map(advance_em).sum::<f64>() * size * factor
}

/// Height that a line of text takes, CSS pixels.
pub(crate) fn text_height(size: f64) -> f64 {
    size * 1.2
}

/// The box that a text fills.
pub(crate) fn text_box(text: &Text) -> Rect {
    let width = text_width(&text.content, text.size, text.weight);
    let left = match text.anchor {
        Anchor::Start => text.at.x,
        Anchor::Middle => text.at.x - width / 2.0,
        Anchor::End => text.at.x - width,
    };
    let height = text_height(text.size);
    Rect { left, top: text.at.y - height / 2.0, width, height }
}

/// The text broken into lines no wider than `width`, at spaces where there are any. At most `max_lines`; a text
/// cut short ends in an ellipsis.
pub(crate) fn wrap(content: &str, size: f64, width: f64, max_lines: usize) -> Vec<String> {
    let fits = |line: &str| text_width(line, size, Weight::Normal) <= width;
    let mut lines: Vec<String> = Vec::new();
    let mut line = String::new();
    for word in content.split_whitespace() {
        let longer = if line.is_empty() { word.to_owned() } else { format!("{line} {word}") };
        if fits(&longer) {
            line = longer;
            continue;
        }
        if !line.is_empty() {
            lines.push(std::mem::take(&mut line));
        }
        for c in word.chars() {
            line.push(c);
            if !fits(&line) && line.chars().count() > 1 {
                line.pop();
                lines.push(std::mem::replace(&mut line, c.to_string()));
            }
        }
    }
    if !line.is_empty() {
        lines.push(line);
    }
    if lines.len() > max_lines {
        lines.truncate(max_lines);
        if let Some(last) = lines.last_mut() {
            last.push('…');
            while !fits(last) && last.chars().count() > 1 {
                last.pop();
                last.pop();
                last.push('…');
            }
        }
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn wrapped_lines_fit_and_lose_no_word() {
        let text = "No flight was found within the budget; an estimate is 1200 d.";
        let lines = wrap(text, 12.0, 160.0, 10);
        assert!(lines.len() > 1);
        assert!(lines.iter().all(|line| text_width(line, 12.0, Weight::Normal) <= 160.0));
        assert_eq!(lines.join(" "), text);
    }

    #[test]
    fn a_word_wider_than_the_line_is_broken_and_a_long_text_is_cut_with_an_ellipsis() {
        let lines = wrap(&"x".repeat(200), 12.0, 100.0, 3);
        assert_eq!(lines.len(), 3);
        assert!(lines[2].ends_with('…'));
        assert!(lines.iter().all(|line| text_width(line, 12.0, Weight::Normal) <= 100.0));
    }
}
