//! The question: one flight of one craft, everything that the answer depends on.
//!
//! A scenario is plain data. Its text form is the link (see [`crate::link`]); what each field means, its unit,
//! range and default stand in [`crate::keys`].

use orbits::constants::J2000_JD_TDB;
use orbits::planets::Planet;

use crate::date::Date;

/// One question. Field names and units are those of the link keys.
#[derive(Clone, Debug, PartialEq)]
pub struct Scenario {
    /// Free text, shown only as text.
    pub title: Option<String>,
    /// Size and mass, or acceleration, of the craft.
    pub craft: CraftInput,
    /// What the sail is made of.
    pub film: Film,
    /// Largest cone angle, deg; 90 allows edge-on.
    pub cone_max_deg: f64,
    /// Film temperature limit, K.
    pub temp_max_k: Option<f64>,
    /// How the film degrades.
    pub ageing: Option<Ageing>,
    /// Fraction of time the attitude is under control.
    pub control: f64,
    /// Where the flight starts.
    pub from: Place,
    /// Where it goes.
    pub to: Place,
    /// Coplanar circles or orbits in space.
    pub geometry: Geometry,
    /// Departure date, TDB.
    pub depart: Option<Date>,
    /// Hyperbolic excess speed available at departure, km/s.
    pub vinf_km_s: f64,
    /// Hyperbolic excess speed allowed at arrival, km/s.
    pub vinf_arrive_km_s: f64,
    /// What counts as arrival.
    pub arrive: Arrive,
    /// How the sail is steered.
    pub steer: Steer,
    /// Signed cone angle for fixed steering, deg; `None`: 35.264 towards the target.
    pub cone_deg: Option<f64>,
    /// What the impulsive comparison assumes.
    pub baseline: Baseline,
    /// Flight time that must be met, d.
    pub deadline_d: Option<f64>,
    /// Sail assembly per sail area, g/m^2.
    pub assembly_g_m2: Option<f64>,
    /// Everything but sail assembly and payload, kg.
    pub bus_kg: Option<f64>,
    /// Number of constant-attitude segments of equal duration; `None`: smooth steering.
    pub segments: Option<u32>,
    /// What studies of this scenario vary; without effect on a single flight.
    pub study: StudyKeys,
}

impl Default for Scenario {
    /// The defaults of link version 1, frozen: a link leaves out what equals them.
    fn default() -> Self {
        Self {
            title: None,
            craft: CraftInput::AreaMass { area_m2: 6400.0, mass_kg: 60.0 },
            film: Film::Ideal,
            cone_max_deg: 90.0,
            temp_max_k: None,
            ageing: None,
            control: 1.0,
            from: Place::Planet(Planet::Earth),
            to: Place::Planet(Planet::Mars),
            geometry: Geometry::Coplanar,
            depart: None,
            vinf_km_s: 0.0,
            vinf_arrive_km_s: 0.0,
            arrive: Arrive::Orbit,
            steer: Steer::Fastest,
            cone_deg: None,
            baseline: Baseline { isp_s: 320.0, park_km: Some(300.0), capture_km: None, stage_dry: 0.1 },
            deadline_d: None,
            assembly_g_m2: None,
            bus_kg: None,
            segments: None,
            study: StudyKeys::default(),
        }
    }
}

/// What studies vary.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StudyKeys {
    /// First and last departure date.
    pub span: [Date; 2],
    /// Days between departure dates.
    pub step_d: u32,
    /// Characteristic accelerations, mm/s^2.
    pub ac_range: Range,
    /// Sail areas, m^2, instead of accelerations.
    pub area_range: Option<Range>,
}

impl Default for StudyKeys {
    /// The defaults of link version 1, frozen like the scenario's.
    fn default() -> Self {
        let new_year = |year| Date { year, month: 1, day: 1 };
        Self {
            span: [new_year(2030), new_year(2034)],
            step_d: 10,
            ac_range: Range { first: 0.5, last: 3.0, count: 20 },
            area_range: None,
        }
    }
}

/// Values in equal ratios, both ends included.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Range {
    /// Smallest value.
    pub first: f64,
    /// Largest value.
    pub last: f64,
    /// How many, at least 2.
    pub count: u32,
}

impl Range {
    /// The values, rounded to six significant digits so that links which carry them stay short.
    ///
    /// # Example
    /// ```
    /// use scenario::schema::Range;
    /// let range = Range { first: 0.5, last: 2.0, count: 3 };
    /// assert_eq!(range.values(), [0.5, 1.0, 2.0]);
    /// ```
    pub fn values(&self) -> Vec<f64> {
        let Range { first, last, count } = *self;
        let ratio = (last / first).powf(1.0 / f64::from(count - 1).max(1.0));
        let rounded = |value: f64| {
            let decimals = 5 - value.log10().floor() as i32;
            let scale = 10f64.powi(decimals.abs());
            if decimals >= 0 { (value * scale).round() / scale } else { (value / scale).round() * scale }
        };
        let inner = (1..count - 1).map(|k| rounded(first * ratio.powi(k as i32)));
        std::iter::once(first).chain(inner).chain([last]).collect()
    }
}

/// The craft as given.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum CraftInput {
    /// Sail area and total mass.
    AreaMass {
        /// Sail area, m^2.
        area_m2: f64,
        /// Total mass, kg.
        mass_kg: f64,
    },
    /// Characteristic acceleration alone.
    Acceleration {
        /// Characteristic acceleration, mm/s^2.
        ac_mm_s2: f64,
    },
}

/// What the sail is made of.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Film {
    /// A flat perfect mirror.
    Ideal,
    /// Aluminised film with a chromium back, first optical set.
    Aluminised,
    /// The newer optical set.
    Aluminised2,
    /// Coefficients of the front face, each 0 to 1: reflectance, specular share, emissivities front and back,
    /// non-Lambertian coefficients front and back.
    Optics([f64; 6]),
}

/// How the film degrades with the sunlight that it has met.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Ageing {
    /// Degradation factor.
    pub factor: f64,
    /// Dose at which half of it has happened, years at 1 au head-on.
    pub half_life_y: f64,
}

/// One end of the flight.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Place {
    /// A planet (`Earth`: the Earth-Moon barycentre) and its orbit.
    Planet(Planet),
    /// An orbit given by elements.
    Orbit(OrbitInput),
}

/// An ellipse around the Sun, ecliptic and equinox of J2000, and where a body on it is.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OrbitInput {
    /// Semi-major axis, au.
    pub a_au: f64,
    /// Eccentricity.
    pub e: f64,
    /// Inclination, deg.
    pub i_deg: f64,
    /// Longitude of the ascending node, deg.
    pub node_deg: f64,
    /// Argument (not longitude) of perihelion, deg.
    pub arg_peri_deg: f64,
    /// Mean anomaly at the epoch, deg.
    pub mean_anomaly_deg: f64,
    /// Epoch, Julian date TDB.
    pub epoch_jd_tdb: f64,
}

impl OrbitInput {
    /// A circle in the ecliptic: what left-out trailing values stand for.
    pub fn circle(a_au: f64) -> Self {
        Self {
            a_au,
            e: 0.0,
            i_deg: 0.0,
            node_deg: 0.0,
            arg_peri_deg: 0.0,
            mean_anomaly_deg: 0.0,
            epoch_jd_tdb: J2000_JD_TDB,
        }
    }

    /// Values in the order of the link key.
    pub fn values(&self) -> [f64; 7] {
        [
            self.a_au,
            self.e,
            self.i_deg,
            self.node_deg,
            self.arg_peri_deg,
            self.mean_anomaly_deg,
            self.epoch_jd_tdb,
        ]
    }

    /// The orbit with these values in the order of the link key.
    pub fn from_values(values: [f64; 7]) -> Self {
        let [a_au, e, i_deg, node_deg, arg_peri_deg, mean_anomaly_deg, epoch_jd_tdb] = values;
        Self { a_au, e, i_deg, node_deg, arg_peri_deg, mean_anomaly_deg, epoch_jd_tdb }
    }
}

/// What the impulsive comparison assumes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Baseline {
    /// Specific impulse, s.
    pub isp_s: f64,
    /// Altitude of the circular parking orbit, km; `None`: not counted.
    pub park_km: Option<f64>,
    /// Altitude of the circular capture orbit, km; `None`: not counted.
    pub capture_km: Option<f64>,
    /// Dry mass of the stage over its propellant.
    pub stage_dry: f64,
}

/// A value that a link writes as one word of a short list.
pub trait Word: Copy + PartialEq + 'static {
    /// Every value with its word, in the order in which they are offered.
    const WORDS: &'static [(Self, &'static str)];

    /// The word of this value.
    fn word(self) -> &'static str {
        Self::WORDS.iter().find(|(value, _)| *value == self).map_or("", |(_, word)| word)
    }

    /// The value with this word.
    fn from_word(word: &str) -> Option<Self> {
        Self::WORDS.iter().find(|(_, known)| *known == word).map(|(value, _)| *value)
    }
}

/// Coplanar circles, or orbits in space.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Geometry {
    /// Planets on circles in one plane, no dates.
    Coplanar,
    /// Orbits as they are.
    Spatial,
}

impl Word for Geometry {
    const WORDS: &'static [(Self, &'static str)] =
        &[(Geometry::Coplanar, "coplanar"), (Geometry::Spatial, "spatial")];
}

/// What counts as arrival.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Arrive {
    /// On the target's orbit, anywhere.
    Orbit,
    /// With the target body itself.
    Rendezvous,
    /// Past the target, at any speed.
    Flyby,
}

impl Word for Arrive {
    const WORDS: &'static [(Self, &'static str)] =
        &[(Arrive::Orbit, "orbit"), (Arrive::Rendezvous, "rendezvous"), (Arrive::Flyby, "flyby")];
}

/// How the sail is steered.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Steer {
    /// In minimum time.
    Fastest,
    /// With the largest rate of the semi-major axis at every instant.
    Local,
    /// At a constant cone angle.
    Fixed,
}

impl Word for Steer {
    const WORDS: &'static [(Self, &'static str)] =
        &[(Steer::Fastest, "fastest"), (Steer::Local, "local"), (Steer::Fixed, "fixed")];
}
