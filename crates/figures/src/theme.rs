//! Colours of the light and the dark look, as data that the page and the figures share.

use serde::{Deserialize, Serialize};

/// An opaque sRGB colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Color {
    /// Red, 0-255.
    pub red: u8,
    /// Green, 0-255.
    pub green: u8,
    /// Blue, 0-255.
    pub blue: u8,
}

impl Color {
    /// The colour written as `0xRRGGBB`.
    pub const fn hex(rgb: u32) -> Self {
        Color { red: (rgb >> 16) as u8, green: (rgb >> 8) as u8, blue: rgb as u8 }
    }

    /// CSS notation, `#RRGGBB`.
    pub fn css(self) -> String {
        format!("#{:02X}{:02X}{:02X}", self.red, self.green, self.blue)
    }

    /// The colour `share` of the way (0-1) towards `other`, mixed channel by channel.
    pub fn towards(self, other: Color, share: f64) -> Color {
        let mix = |a: u8, b: u8| (f64::from(a) + (f64::from(b) - f64::from(a)) * share).round() as u8;
        Color {
            red: mix(self.red, other.red),
            green: mix(self.green, other.green),
            blue: mix(self.blue, other.blue),
        }
    }
}

/// Which look a figure is drawn in.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum ThemeName {
    /// Dark ink on light paper.
    #[default]
    Light,
    /// Light ink on dark paper.
    Dark,
}

/// The colours of one look, named by what they are for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Theme {
    /// The page.
    pub paper: Color,
    /// Panels and figures.
    pub sheet: Color,
    /// Text and axes.
    pub ink: Color,
    /// Labels and units.
    pub muted: Color,
    /// Rules and grids that carry no meaning.
    pub hairline: Color,
    /// Borders and neutral lines that carry meaning, such as planetary orbits.
    pub edge: Color,
    /// Everything that is the sail's, and nothing else.
    pub sail: Color,
    /// Everything impulsive.
    pub impulse: Color,
    /// Wrong input, not converged, out of date.
    pub alarm: Color,
}

/// The light look.
pub const LIGHT: Theme = Theme {
    paper: Color::hex(0xFAF8F3),
    sheet: Color::hex(0xFFFFFF),
    ink: Color::hex(0x1E2430),
    muted: Color::hex(0x5D6573),
    hairline: Color::hex(0xD9D4C7),
    edge: Color::hex(0x7C8290),
    sail: Color::hex(0xB8430A),
    impulse: Color::hex(0x1D5FA8),
    alarm: Color::hex(0x7A0F45),
};

/// The dark look.
pub const DARK: Theme = Theme {
    paper: Color::hex(0x14181F),
    sheet: Color::hex(0x1B212B),
    ink: Color::hex(0xE8E4DA),
    muted: Color::hex(0x9AA3B2),
    hairline: Color::hex(0x2C333E),
    edge: Color::hex(0x737D8E),
    sail: Color::hex(0xF08A4B),
    impulse: Color::hex(0x6FB1E8),
    alarm: Color::hex(0xF5B3D3),
};

impl Theme {
    /// The look with this name.
    pub const fn named(name: ThemeName) -> &'static Theme {
        match name {
            ThemeName::Light => &LIGHT,
            ThemeName::Dark => &DARK,
        }
    }

    /// Every token with its colour, in a fixed order.
    pub const fn entries(&self) -> [(&'static str, Color); 9] {
        [
            ("paper", self.paper),
            ("sheet", self.sheet),
            ("ink", self.ink),
            ("muted", self.muted),
            ("hairline", self.hairline),
            ("edge", self.edge),
            ("sail", self.sail),
            ("impulse", self.impulse),
            ("alarm", self.alarm),
        ]
    }

    /// The same look with everything drawn greyed, for pictures that no longer match the inputs. The alarm
    /// colour stays, since it says so.
    pub(crate) fn greyed(&self) -> Theme {
        let fade = |color: Color| color.towards(self.muted, 0.75);
        Theme { ink: self.muted, sail: fade(self.sail), impulse: fade(self.impulse), ..*self }
    }
}

/// Token names and CSS colours of the look called `light` or `dark`; `None` for any other name.
pub fn tokens(name: &str) -> Option<Vec<(&'static str, String)>> {
    let theme = match name {
        "light" => &LIGHT,
        "dark" => &DARK,
        _ => return None,
    };
    Some(theme.entries().into_iter().map(|(token, color)| (token, color.css())).collect())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Relative luminance and contrast ratio as published in WCAG 2.2 (definitions of those two terms).
    fn contrast(a: Color, b: Color) -> f64 {
        let luminance = |color: Color| {
            let linear = |channel: u8| {
                let c = f64::from(channel) / 255.0;
                if c <= 0.04045 { c / 12.92 } else { ((c + 0.055) / 1.055).powf(2.4) }
            };
            0.2126 * linear(color.red) + 0.7152 * linear(color.green) + 0.0722 * linear(color.blue)
        };
        let (a, b) = (luminance(a), luminance(b));
        (a.max(b) + 0.05) / (a.min(b) + 0.05)
    }

    #[test]
    fn text_reads_at_four_and_a_half_and_lines_at_three() {
        for theme in [&LIGHT, &DARK] {
            for ground in [theme.paper, theme.sheet] {
                for text in [theme.ink, theme.muted, theme.sail, theme.impulse, theme.alarm] {
                    assert!(contrast(text, ground) >= 4.5, "{} on {}", text.css(), ground.css());
                }
                assert!(contrast(theme.edge, ground) >= 3.0, "{} on {}", theme.edge.css(), ground.css());
            }
        }
    }

    #[test]
    fn contrast_of_black_on_white_is_21() {
        // Published: WCAG 2.2, "contrast ratios can range from 1 to 21".
        assert!((contrast(Color::hex(0), Color::hex(0xFFFFFF)) - 21.0).abs() < 1e-9);
    }

    #[test]
    fn tokens_are_css_colours_and_unknown_looks_are_none() {
        let light = tokens("light").unwrap();
        assert_eq!(light[6], ("sail", "#B8430A".to_owned()));
        assert!(tokens("sepia").is_none());
    }
}
