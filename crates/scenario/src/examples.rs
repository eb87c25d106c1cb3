//! Scenarios to start from. Every craft here is invented.

use serde::Serialize;

/// A scenario with a name and a line about it.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct Example {
    /// Name for people.
    pub name: &'static str,
    /// The link.
    pub link: &'static str,
    /// What it shows.
    pub about: &'static str,
}

/// Built-in examples, the default flight first.
pub const EXAMPLES: &[Example] = &[
    Example {
        name: "Courier to Mars's orbit",
        link: "v=1",
        about: "An invented 6400 m\u{b2} sail on 60 kg: the default flight.",
    },
    Example {
        name: "Venus in 400 days",
        link: "v=1&title=Venus+in+400+days&area_m2=1800&mass_kg=45&to=venus&deadline_d=400",
        about: "An invented small craft with a date to keep: how much mass may it gain?",
    },
    Example {
        name: "Mercury watch",
        link: "v=1&title=Mercury+watch&area_m2=12000&mass_kg=180&to=mercury",
        about: "An invented heavy craft spiralling down to Mercury's orbit.",
    },
    Example {
        name: "Too small for Mars",
        link: "v=1&title=Too+small+for+Mars&ac_mm_s2=0.06",
        about: "An invented craft of 0.06 mm/s\u{b2}: it gets there, after many years and revolutions.",
    },
    Example {
        name: "Meet Mars",
        link: "v=1&title=Meet+Mars&geometry=spatial&depart=2031-02-01&arrive=rendezvous",
        about: "The default craft leaves on a date and meets the planet itself.",
    },
    Example {
        name: "Small body",
        link: "v=1&title=Small+body&area_m2=10000&mass_kg=90&to=orbit&to_orbit=1.3,0.22,10.8,304,178,60\
               &geometry=spatial&depart=2032-03-01&arrive=rendezvous",
        about: "An invented small body on an inclined ellipse near the Earth.",
    },
    Example {
        name: "Tilted inner orbit",
        link: "v=1&title=Tilted+inner+orbit&area_m2=10000&mass_kg=90&to=orbit&to_orbit=0.6,0.1,15,40\
               &geometry=spatial",
        about: "An invented orbit to watch the Sun from out of the ecliptic; both ends free.",
    },
    Example {
        name: "Spiral without foresight",
        link: "v=1&title=Spiral+without+foresight&area_m2=3000&mass_kg=60&steer=local",
        about: "The same trip steered from moment to moment: see the eccentricity it ends with.",
    },
];

#[cfg(test)]
mod tests {
    use super::*;
    use crate::link::{decode, encode};
    use crate::run::run;

    #[test]
    fn every_example_is_canonical_and_flies() {
        for example in EXAMPLES {
            let scenario = decode(example.link).unwrap_or_else(|e| panic!("{}: {e:?}", example.name));
            assert_eq!(encode(&scenario), example.link);
            assert!(run(&scenario).expect("not refused").report.flight.time_d.is_some(), "{}", example.name);
        }
    }
}
