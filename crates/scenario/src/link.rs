//! The scenario link: one line of text that carries a whole question, from the page's address to the command line.
//!
//! The text is `application/x-www-form-urlencoded`, readable and written by hand if need be. Reading is total:
//! any text gives a scenario or a list of errors. Writing is canonical: `v=1` first, keys in the order of
//! [`crate::keys::KEYS`], defaults left out, commas kept.

mod reader;
mod text;
mod value;

use std::fmt;

use serde::{Deserialize, Serialize};

use crate::keys::KEYS;
use crate::schema::{CraftInput, Film, OrbitInput, Place, Range, Scenario, Word};

/// Longest link, characters.
pub const LINK_CHARACTERS: usize = 2000;

/// Longest piece of a wrong key or value that a message repeats, characters.
const SHOWN_CHARACTERS: usize = 60;

/// What is wrong with one key of a link, and what to do.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct LinkError {
    /// The key; `link` where the link as a whole is meant.
    pub key: String,
    /// The value given, shortened, with control characters spelt out.
    pub value: String,
    /// The rule that it breaks and the way out.
    pub rule: String,
}

impl LinkError {
    /// An error about any key and value, however strange.
    pub fn new(key: &str, value: &str, rule: impl Into<String>) -> Self {
        Self { key: shown(key), value: shown(value), rule: rule.into() }
    }
}

impl fmt::Display for LinkError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {} \u{2014} {}", self.key, self.value, self.rule)
    }
}

impl std::error::Error for LinkError {}

/// Text that is safe to repeat in a message: shortened, control characters spelt out.
fn shown(text: &str) -> String {
    let mut shown = String::new();
    for (count, character) in text.chars().enumerate() {
        if count == SHOWN_CHARACTERS {
            shown.push_str("...");
            break;
        }
        if value::is_control(character) {
            shown.extend(character.escape_unicode());
        } else {
            shown.push(character);
        }
    }
    shown
}

/// Reads a link: bare, with a leading `#`, or as part of a full address.
///
/// # Errors
/// Every error found, in the order of the link; a link that is too long or of another version gives just that one.
///
/// # Example
/// ```
/// let scenario = scenario::link::decode("https://example.org/#v=1&ac_mm_s2=0.5&to=venus").unwrap();
/// assert_eq!(scenario::link::encode(&scenario), "v=1&ac_mm_s2=0.5&to=venus");
/// let errors = scenario::link::decode("ac_mm_s2=-1").unwrap_err();
/// assert_eq!(errors[0].to_string(), "ac_mm_s2: -1 \u{2014} must be 0.01 to 20 mm/s²");
/// ```
pub fn decode(text: &str) -> Result<Scenario, Vec<LinkError>> {
    let link = text::link_part(text);
    if link.chars().nth(LINK_CHARACTERS).is_some() {
        return Err(vec![LinkError::new("link", link, "must be at most 2000 characters long")]);
    }
    let scenario = reader::read(link)?;
    if encode(&scenario).len() > LINK_CHARACTERS {
        // A title in letters beyond ASCII grows when escaped; what is read must also be writable.
        let title = scenario.title.as_deref().unwrap_or("");
        let rule = "makes the link longer than 2000 characters once escaped: shorten it";
        return Err(vec![LinkError::new("title", title, rule)]);
    }
    Ok(scenario)
}

/// Writes the canonical link.
pub fn encode(scenario: &Scenario) -> String {
    let defaults = entries(&Scenario::default());
    let now = entries(scenario);
    // Area and mass are one statement: both are written or neither.
    let craft_is_default = scenario.craft == Scenario::default().craft;
    let pairs = now.iter().zip(&defaults).filter(|((key, value), (_, default))| match *key {
        "v" => true,
        "area_m2" | "mass_kg" => !craft_is_default && !value.is_empty(),
        _ => value != default && !value.is_empty(),
    });
    let written: Vec<String> =
        pairs.map(|((key, value), _)| format!("{key}={}", text::escape(value))).collect();
    written.join("&")
}

/// Every key with its explicit value, in the order of the table; empty where there is none.
pub fn entries(scenario: &Scenario) -> Vec<(&'static str, String)> {
    KEYS.iter().map(|info| (info.key, entry(scenario, info.key))).collect()
}

/// The value of one key as a link writes it, before escaping.
pub(crate) fn entry(scenario: &Scenario, key: &str) -> String {
    let number = |value: f64| value::write(value);
    let optional = |value: Option<f64>| value.map_or_else(String::new, value::write);
    let or_none = |value: Option<f64>| value.map_or_else(|| "none".to_owned(), value::write);
    let s = scenario;
    match key {
        "v" => "1".to_owned(),
        "title" => s.title.clone().unwrap_or_default(),
        "area_m2" => match s.craft {
            CraftInput::AreaMass { area_m2, .. } => number(area_m2),
            CraftInput::Acceleration { .. } => String::new(),
        },
        "mass_kg" => match s.craft {
            CraftInput::AreaMass { mass_kg, .. } => number(mass_kg),
            CraftInput::Acceleration { .. } => String::new(),
        },
        "ac_mm_s2" => match s.craft {
            CraftInput::AreaMass { .. } => String::new(),
            CraftInput::Acceleration { ac_mm_s2 } => number(ac_mm_s2),
        },
        "film" => match s.film {
            Film::Ideal => "ideal",
            Film::Aluminised => "aluminised",
            Film::Aluminised2 => "aluminised2",
            Film::Optics(_) => "optics",
        }
        .to_owned(),
        "optics" => match s.film {
            Film::Optics(values) => join(&values),
            _ => String::new(),
        },
        "cone_max_deg" => number(s.cone_max_deg),
        "temp_max_k" => optional(s.temp_max_k),
        "ageing" => s.ageing.map_or_else(String::new, |ageing| join(&[ageing.factor, ageing.half_life_y])),
        "control" => number(s.control),
        "from" => place_word(&s.from).to_owned(),
        "to" => place_word(&s.to).to_owned(),
        "from_orbit" => place_orbit(&s.from),
        "to_orbit" => place_orbit(&s.to),
        "geometry" => s.geometry.word().to_owned(),
        "depart" => s.depart.map_or_else(String::new, |date| date.to_string()),
        "vinf_km_s" => number(s.vinf_km_s),
        "vinf_arrive_km_s" => number(s.vinf_arrive_km_s),
        "arrive" => s.arrive.word().to_owned(),
        "steer" => s.steer.word().to_owned(),
        "cone_deg" => optional(s.cone_deg),
        "isp_s" => number(s.baseline.isp_s),
        "park_km" => or_none(s.baseline.park_km),
        "capture_km" => or_none(s.baseline.capture_km),
        "stage_dry" => number(s.baseline.stage_dry),
        "deadline_d" => optional(s.deadline_d),
        "assembly_g_m2" => optional(s.assembly_g_m2),
        "bus_kg" => optional(s.bus_kg),
        "segments" => s.segments.map_or_else(String::new, |count| count.to_string()),
        "span" => s.study.span.map(|date| date.to_string()).join(","),
        "step_d" => s.study.step_d.to_string(),
        "ac_range" => range(&s.study.ac_range),
        "area_range" => s.study.area_range.as_ref().map_or_else(String::new, range),
        _ => String::new(),
    }
}

fn join(values: &[f64]) -> String {
    values.iter().copied().map(value::write).collect::<Vec<_>>().join(",")
}

fn range(range: &Range) -> String {
    join(&[range.first, range.last, f64::from(range.count)])
}

fn place_word(place: &Place) -> &'static str {
    match place {
        Place::Planet(planet) => planet.key(),
        Place::Orbit(_) => "orbit",
    }
}

fn place_orbit(place: &Place) -> String {
    let Place::Orbit(orbit) = place else { return String::new() };
    let values = orbit.values();
    let circle = OrbitInput::circle(orbit.a_au).values();
    let needed = (0..values.len()).rev().find(|&i| values[i] != circle[i]).unwrap_or(0);
    join(&values[..=needed])
}
