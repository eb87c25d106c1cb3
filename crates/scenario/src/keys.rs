//! The table of link keys: what each means, its unit, range and default, in the order in which links write them.
//!
//! The page builds its fields from this table, the link codec takes its ranges from it, and the README's table is
//! compared with it.

use serde::Serialize;

/// One key of the link.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct KeyInfo {
    /// The key as written in a link.
    pub key: &'static str,
    /// Short name for people.
    pub label: &'static str,
    /// Unit; empty where there is none.
    pub unit: &'static str,
    /// What may be written, in words.
    pub range: &'static str,
    /// Smallest value of a key that takes one number.
    pub min: Option<f64>,
    /// Largest value of a key that takes one number.
    pub max: Option<f64>,
    /// Words of a key that takes one word.
    pub words: &'static [&'static str],
    /// Value when the key is left out; `none`: nothing.
    pub default: &'static str,
    /// What it means, in a sentence.
    pub help: &'static str,
}

impl KeyInfo {
    /// A key of free form.
    const fn text(key: &'static str, label: &'static str, range: &'static str) -> Self {
        Self { key, label, unit: "", range, min: None, max: None, words: &[], default: "none", help: "" }
    }

    /// A key that takes one number.
    const fn number(key: &'static str, label: &'static str, range: &'static str, limits: [f64; 2]) -> Self {
        let mut info = Self::text(key, label, range);
        info.min = Some(limits[0]);
        info.max = Some(limits[1]);
        info
    }

    /// A key that takes one word.
    const fn word(
        key: &'static str,
        label: &'static str,
        range: &'static str,
        words: &'static [&'static str],
    ) -> Self {
        let mut info = Self::text(key, label, range);
        info.words = words;
        info
    }

    const fn unit(mut self, unit: &'static str) -> Self {
        self.unit = unit;
        self
    }

    const fn default(mut self, default: &'static str) -> Self {
        self.default = default;
        self
    }

    const fn help(mut self, help: &'static str) -> Self {
        self.help = help;
        self
    }

    /// The rule for a value out of range: `must be 5 to 90 deg`, `must be 50 to 1000000 km, or none`.
    pub(crate) fn must_be(&self) -> String {
        let space = if self.unit.is_empty() { "" } else { " " };
        let (numbers, or_none) = match self.range.strip_suffix(OR_NONE) {
            Some(numbers) => (numbers, OR_NONE),
            None => (self.range, ""),
        };
        format!("must be {numbers}{space}{}{or_none}", self.unit)
    }
}

/// How a range says that the word `none` may stand instead of a number.
const OR_NONE: &str = ", or none";

const PLACES: &[&str] =
    &["mercury", "venus", "earth", "mars", "jupiter", "saturn", "uranus", "neptune", "orbit"];
const PLACE_RANGE: &str = "mercury, venus, earth, mars, jupiter, saturn, uranus, neptune or orbit";
const ORBIT_RANGE: &str = "a_au,e,i_deg,node_deg,arg_peri_deg,mean_anomaly_deg,epoch_jd_tdb; trailing values \
                           may be left out";
const ORBIT_HELP: &str = "Semi-major axis 0.2 to 40 au, eccentricity 0 to 0.99, inclination 0 to 180 deg, \
                          ascending node, argument (not longitude) of perihelion and mean anomaly -360 to 360 \
                          deg, epoch as Julian date TDB; ecliptic of J2000. Trailing values left out are 0 and \
                          J2000. In coplanar geometry eccentricity and inclination must be 0.";

/// Every key, in the order in which links write them.
pub const KEYS: &[KeyInfo] = &[
    KeyInfo::text("v", "Link version", "1").default("1").help("Version of the link format."),
    KeyInfo::text("title", "Title", "text of up to 80 characters without control characters")
        .help("Free text, shown only as text."),
    KeyInfo::number("area_m2", "Sail area", "0.001 to 1000000000", [1e-3, 1e9])
        .unit("m²")
        .default("6400")
        .help("Sail area; give it together with the mass."),
    KeyInfo::number("mass_kg", "Total mass", "0.001 to 1000000000", [1e-3, 1e9])
        .unit("kg")
        .default("60")
        .help("Mass of the whole craft; give it together with the area."),
    KeyInfo::number("ac_mm_s2", "Characteristic acceleration", "0.01 to 20", [0.01, 20.0])
        .unit("mm/s²")
        .help(
            "Acceleration of the sail facing the Sun at 1 au; instead of area and mass. Checked from 0.05 to 6.",
        ),
    KeyInfo::word(
        "film",
        "Film",
        "ideal, aluminised, aluminised2 or optics",
        &["ideal", "aluminised", "aluminised2", "optics"],
    )
    .default("ideal")
    .help("Perfect mirror, one of two measured aluminised films, or coefficients of your own."),
    KeyInfo::text("optics", "Optical coefficients", "r,s,ef,eb,bf,bb: six numbers, each 0 to 1").help(
        "For film=optics: reflectance, specular share, emissivity front and back, non-Lambertian coefficient \
         front and back.",
    ),
    KeyInfo::number("cone_max_deg", "Largest cone angle", "5 to 90", [5.0, 90.0])
        .unit("deg")
        .default("90")
        .help("The sail's normal may lean this far from the Sun line; 90 allows edge-on."),
    KeyInfo::number("temp_max_k", "Film temperature limit", "50 to 2000", [50.0, 2000.0])
        .unit("K")
        .help("The film never gets hotter than this along the flight."),
    KeyInfo::text("ageing", "Ageing", "factor 0 to 5, half-life dose 0.01 to 1000 years: two numbers").help(
        "Degradation factor and the dose at which half of it has happened, in years of 365.25 d at 1 au head-on.",
    ),
    KeyInfo::number("control", "Attitude under control", "0.1 to 1", [0.1, 1.0])
        .default("1")
        .help("Fraction of time in which the attitude is under control."),
    KeyInfo::word("from", "From", PLACE_RANGE, PLACES)
        .default("earth")
        .help("Where the flight starts; earth is the Earth-Moon barycentre, orbit needs from_orbit."),
    KeyInfo::word("to", "To", PLACE_RANGE, PLACES)
        .default("mars")
        .help("Where the flight goes; orbit needs to_orbit."),
    KeyInfo::text("from_orbit", "Start orbit", ORBIT_RANGE).help(ORBIT_HELP),
    KeyInfo::text("to_orbit", "Target orbit", ORBIT_RANGE).help(ORBIT_HELP),
    KeyInfo::word("geometry", "Geometry", "coplanar or spatial", &["coplanar", "spatial"])
        .default("coplanar")
        .help("Planets on circles in one plane, or orbits as they are."),
    KeyInfo::text("depart", "Departure date", "a date YYYY-MM-DD within 1800-01-01 to 2050-12-31")
        .help("Start of that day, TDB; spatial geometry only. Left out: the departure point is free."),
    KeyInfo::number("vinf_km_s", "Excess speed at departure", "0 to 20", [0.0, 20.0])
        .unit("km/s")
        .default("0")
        .help("Hyperbolic excess speed available at departure; the flight may use less."),
    KeyInfo::number("vinf_arrive_km_s", "Excess speed at arrival", "0 to 20", [0.0, 20.0])
        .unit("km/s")
        .default("0")
        .help("Hyperbolic excess speed allowed at arrival; the flight may use less."),
    KeyInfo::word("arrive", "Arrival", "orbit, rendezvous or flyby", &["orbit", "rendezvous", "flyby"])
        .default("orbit")
        .help("Match the target's orbit, meet the moving body, or pass it at any speed."),
    KeyInfo::word("steer", "Steering", "fastest, local or fixed", &["fastest", "local", "fixed"])
        .default("fastest")
        .help("Minimum time, largest rate of the semi-major axis at every instant, or a constant cone angle."),
    KeyInfo::number("cone_deg", "Cone angle", "-90 to 90", [-90.0, 90.0])
        .unit("deg")
        .help("For steer=fixed: signed, positive pushes forward. Left out: 35.264 towards the target."),
    KeyInfo::number("isp_s", "Specific impulse", "50 to 10000", [50.0, 10_000.0])
        .unit("s")
        .default("320")
        .help("Of the impulsive comparison's engine."),
    KeyInfo::number("park_km", "Parking altitude", "50 to 1000000, or none", [50.0, 1e6])
        .unit("km")
        .default("300")
        .help("Circular parking orbit of the impulsive comparison; none: not counted. No meaning without a planet."),
    KeyInfo::number("capture_km", "Capture altitude", "50 to 1000000, or none", [50.0, 1e6])
        .unit("km")
        .help("Circular capture orbit of the impulsive comparison; none: not counted. No meaning without a planet."),
    KeyInfo::number("stage_dry", "Stage dry mass", "0 to 1", [0.0, 1.0])
        .default("0.1")
        .help("Dry mass of the impulsive stage over its propellant."),
    KeyInfo::number("deadline_d", "Deadline", "1 to 100000", [1.0, 1e5])
        .unit("d")
        .help("Flight time that must be met: gives margins."),
    KeyInfo::number("assembly_g_m2", "Sail assembly", "0 to 1000", [0.0, 1000.0])
        .unit("g/m²")
        .help("Mass of film, booms and deployment per sail area: gives the mass delivered."),
    KeyInfo::number("bus_kg", "Bus", "0 to 1000000000", [0.0, 1e9])
        .unit("kg")
        .help("Mass of everything but sail assembly and payload."),
    KeyInfo::number("segments", "Attitude segments", "a whole number, 1 to 200", [1.0, 200.0])
        .help("Constant attitude in this many segments of equal duration, instead of smooth steering."),
    KeyInfo::text("span", "Departures between", "two dates YYYY-MM-DD within 1800-01-01 to 2050-12-31, the earlier first")
        .default("2030-01-01,2034-01-01")
        .help("For studies of departure dates: the first date and the last."),
    KeyInfo::number("step_d", "Step between departures", "a whole number, 1 to 1000", [1.0, 1000.0])
        .unit("d")
        .default("10")
        .help("For studies of departure dates."),
    KeyInfo::text(
        "ac_range",
        "Accelerations studied",
        "smallest and largest, 0.01 to 20 mm/s², and how many, 2 to 200: three numbers",
    )
    .default("0.5,3,20")
    .help("For the map of departure dates: characteristic accelerations in equal ratios, ends included."),
    KeyInfo::text(
        "area_range",
        "Sail areas studied",
        "smallest and largest, 0.001 to 1000000000 m², and how many, 2 to 200: three numbers",
    )
    .help("For the map of departure dates: sail areas, in equal ratios, instead of accelerations; mass as given."),
];

/// The table's row for a key.
pub fn find(key: &str) -> Option<&'static KeyInfo> {
    KEYS.iter().find(|info| info.key == key)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::link;
    use crate::schema::{Arrive, Geometry, Scenario, Steer, Word};

    #[test]
    fn ranges_in_words_are_the_ranges_in_force() {
        for info in KEYS {
            for limit in [info.min, info.max].into_iter().flatten() {
                assert!(info.range.contains(&limit.to_string()), "{}: {limit} in {:?}", info.key, info.range);
            }
            for word in info.words {
                assert!(info.range.contains(word), "{}: {word}", info.key);
            }
        }
    }

    #[test]
    fn defaults_in_words_are_the_defaults_in_force() {
        for (info, (key, value)) in KEYS.iter().zip(link::entries(&Scenario::default())) {
            assert_eq!(info.key, key);
            let value = if value.is_empty() { "none".to_owned() } else { value };
            assert_eq!(info.default, value, "{key}");
        }
    }

    #[test]
    fn words_are_those_of_the_schema() {
        fn check<W: Word>(key: &str) {
            let words: Vec<_> = W::WORDS.iter().map(|(_, word)| *word).collect();
            assert_eq!(find(key).unwrap().words, words, "{key}");
        }
        check::<Geometry>("geometry");
        check::<Arrive>("arrive");
        check::<Steer>("steer");
        let planets = orbits::planets::Planet::ALL.map(|planet| planet.key());
        assert_eq!(find("from").unwrap().words[..8], planets);
    }

    #[test]
    fn every_key_is_explained_and_unique() {
        for (i, info) in KEYS.iter().enumerate() {
            assert!(info.help.ends_with('.'), "{}", info.key);
            assert!(!info.label.is_empty() && !info.range.is_empty(), "{}", info.key);
            assert!(KEYS[..i].iter().all(|other| other.key != info.key), "{}", info.key);
        }
    }
}
