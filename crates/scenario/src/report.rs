//! The report: everything one flight tells, with the unit in every field's name.
//!
//! Field names, units and nulls are an interface that outside scripts rely on: within link version 1
//! fields may be added, never renamed or given another unit. Unknown values are `None` (JSON null).

use serde::{Deserialize, Serialize};

/// One flight, whole.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Report {
    /// What computed this report.
    pub program: Program,
    /// The canonical scenario link that reproduces this report.
    pub link: String,
    /// The answer in one or two sentences of plain words.
    pub sentence: String,
    /// Where the flight starts and ends, as the solver used it.
    pub ends: Ends,
    /// The sailcraft, with the numbers that follow from the ones given.
    pub craft: Craft,
    /// The sail flight and its proof.
    pub flight: Flight,
    /// Impulsive transfers between the same two ends.
    pub impulsive: Impulsive,
    /// What the reader must know before relying on the numbers, one sentence each.
    pub cautions: Vec<String>,
}

/// Program name, version and the constants it used.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Program {
    /// Always `sunreach`.
    pub name: String,
    /// Version of the core.
    pub version: String,
    /// Physical constants in force.
    pub constants: Constants,
}

/// Physical constants in force.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Constants {
    /// Sun's gravitational parameter, km^3/s^2.
    pub sun_gm_km3_s2: f64,
    /// Astronomical unit, km.
    pub au_km: f64,
    /// Solar irradiance at 1 au, W/m^2.
    pub irradiance_w_m2: f64,
    /// Radiation pressure on a black surface at 1 au, N/m^2.
    pub pressure_n_m2: f64,
    /// Solar gravity at 1 au, mm/s^2.
    pub sun_gravity_mm_s2: f64,
    /// Standard gravity used with specific impulse, m/s^2.
    pub g0_m_s2: f64,
}

/// Both ends of the flight.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Ends {
    /// Where the flight starts.
    pub from: End,
    /// Where it goes.
    pub to: End,
}

/// One end: a planet's orbit or an orbit given by elements.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct End {
    /// Name for people: `Earth`, `Mars`, ... or `given orbit`.
    pub name: String,
    /// Semi-major axis, au (the radius of the circle in coplanar geometry).
    pub semi_major_axis_au: f64,
    /// Eccentricity.
    pub eccentricity: f64,
    /// Inclination to the ecliptic of J2000, deg.
    pub inclination_deg: f64,
    /// Longitude of the ascending node, deg.
    pub node_deg: f64,
    /// Argument of perihelion, deg.
    pub arg_peri_deg: f64,
    /// Mean anomaly of the body at departure, deg; null where the flight has no date or no body is meant.
    #[serde(default)]
    pub mean_anomaly_deg: Option<f64>,
    /// Period of the orbit, d: the body moves by 360 deg of mean anomaly in this time.
    #[serde(default)]
    pub period_d: f64,
}

/// The sailcraft.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Craft {
    /// Characteristic acceleration, mm/s^2.
    pub ac_mm_s2: f64,
    /// Lightness number: characteristic acceleration over solar gravity at 1 au.
    pub lightness: f64,
    /// Head-on force over that of an ideal mirror.
    pub efficiency: f64,
    /// Total mass per sail area, g/m^2; it follows from the acceleration where only that was given.
    pub loading_g_m2: Option<f64>,
    /// Sail area, m^2.
    pub area_m2: Option<f64>,
    /// Side of the square with that area, m.
    pub side_m: Option<f64>,
    /// Total mass, kg.
    pub mass_kg: Option<f64>,
    /// Mass delivered at the target: total less sail assembly, kg.
    pub delivered_kg: Option<f64>,
}

/// What a solve ended as. Thresholds: see `optimal::certificate`.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Status {
    /// A proven extremal: re-flown, Hamiltonian constant and positive.
    Converged,
    /// Flown with a steering law that promises no optimum.
    Flown,
    /// An extremal that misses the proof's thresholds, but by no more than 1e-4.
    Approximate,
    /// No flight found within the budget; `estimate` may say what is known.
    NotConverged,
    /// A stated necessary condition is violated: no such flight exists.
    Unreachable,
}

impl Status {
    /// The word used in reports and on the page.
    pub fn word(self) -> &'static str {
        match self {
            Status::Converged => "converged",
            Status::Flown => "flown",
            Status::Approximate => "approximate",
            Status::NotConverged => "not_converged",
            Status::Unreachable => "unreachable",
        }
    }
}

/// The sail flight. Numbers are null where no flight was found.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Flight {
    /// What the solve ended as.
    pub status: Status,
    /// What went wrong or what to know, in plain words.
    pub message: Option<String>,
    /// Flight time, d.
    pub time_d: Option<f64>,
    /// Heliocentric angle swept / 360 deg.
    pub revolutions: Option<f64>,
    /// Departure date, ISO 8601, TDB.
    pub depart: Option<String>,
    /// Arrival date, ISO 8601, TDB.
    pub arrive: Option<String>,
    /// Hyperbolic excess speed used at departure, km/s.
    pub vinf_used_km_s: Option<f64>,
    /// Its square, km^2/s^2.
    pub c3_km2_s2: Option<f64>,
    /// Excess speed left at arrival, km/s.
    pub vinf_arrive_km_s: Option<f64>,
    /// Closest distance to the Sun, au.
    pub sun_distance_min_au: Option<f64>,
    /// Farthest distance from the Sun, au.
    pub sun_distance_max_au: Option<f64>,
    /// Hottest film temperature, K.
    pub film_temp_max_k: Option<f64>,
    /// Largest inertial turn rate of the sail normal where it is smooth, deg/d.
    pub turn_rate_max_deg_d: Option<f64>,
    /// Attitude jumps.
    pub jumps: Vec<Jump>,
    /// Time integral of the sail acceleration, km/s.
    pub sail_dv_km_s: Option<f64>,
    /// Heliocentric angle by which a body on the target orbit must lead the craft at departure for the two to
    /// meet, deg in (-180, 180]; coplanar flights only.
    pub lead_angle_deg: Option<f64>,
    /// Largest distance from the Earth, au.
    pub earth_range_max_au: Option<f64>,
    /// The flight as seen from the Earth; null without a departure date.
    pub earth_view: Option<EarthView>,
    /// Eccentricity of the orbit the craft ends on.
    pub final_eccentricity: Option<f64>,
    /// Flight time estimate where nothing converged, d.
    pub estimate: Option<f64>,
    /// The evidence.
    pub proof: Proof,
    /// Every extremal found, best first.
    pub branches: Vec<Branch>,
    /// Margin against `deadline_d`.
    pub margin: Option<Margin>,
}

/// A sudden change of attitude.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Jump {
    /// Time since departure, d.
    pub time_d: f64,
    /// Angle between the normals before and after, deg.
    pub angle_deg: f64,
}

/// The evidence for a flight.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Proof {
    /// Distance from the target after re-flying, km.
    pub position_error_km: Option<f64>,
    /// Speed mismatch after re-flying, m/s.
    pub speed_error_m_s: Option<f64>,
    /// Largest relative drift of the Hamiltonian along the flight.
    pub hamiltonian_drift: Option<f64>,
    /// Distinct extremals found.
    pub extremals_found: u32,
    /// Second-order test: passed, failed or not tested.
    pub second_order: SecondOrder,
    /// How the answer was found, in words.
    pub method: String,
}

/// Outcome of the conjugate-point test.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum SecondOrder {
    /// No conjugate point before arrival.
    Passed,
    /// A conjugate point before arrival: not a minimum.
    Failed,
    /// The test was not made.
    NotTested,
}

/// One extremal.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Branch {
    /// Flight time, d.
    pub time_d: f64,
    /// Revolutions.
    pub revolutions: f64,
    /// Whether this is the one reported.
    pub best: bool,
}

/// Margin against a deadline.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Margin {
    /// Deadline less flight time, d.
    pub days_in_hand: f64,
    /// Mass growth that still meets the deadline, percent; null where not solved.
    pub mass_growth_pct: Option<f64>,
    /// Acceleration that could be lost, percent; null where not solved.
    pub ac_in_hand_pct: Option<f64>,
}

/// Impulsive transfers between the same ends.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Impulsive {
    /// Hohmann between massless bodies.
    pub heliocentric: ImpulsiveWay,
    /// Starts and ends exactly as the sail does.
    pub same_start_same_end: ImpulsiveWay,
    /// From a circular parking orbit and, if asked, into a circular capture orbit.
    pub from_parking: Option<ImpulsiveWay>,
    /// Why `from_parking` is null or narrower than asked, if so.
    pub from_parking_note: Option<String>,
    /// Angle by which the target leads at departure, deg in (-180, 180].
    pub lead_angle_deg: f64,
    /// Time between departure windows, d; null for equal periods.
    pub synodic_d: Option<f64>,
    /// The cheapest transfer between the orbits as they are, within a span of dates from the sail's departure on, counted
    /// from the same start to the same end; null without a departure date.
    pub dated: Option<DatedTransfer>,
    /// The cheapest transfer that leaves and arrives when the sail does, counted alike; null without a date or a flight.
    pub dated_same_dates: Option<DatedTransfer>,
}

/// A transfer of two impulses on calendar dates, between the orbits as they are.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct DatedTransfer {
    /// Departure day, ISO 8601, TDB.
    pub depart: String,
    /// Arrival day, ISO 8601, TDB.
    pub arrive: String,
    /// Flight time, d.
    pub time_d: f64,
    /// First impulse, km/s.
    pub dv_depart_km_s: f64,
    /// Second impulse, km/s.
    pub dv_arrive_km_s: f64,
    /// Their sum, km/s.
    pub dv_total_km_s: f64,
    /// Square of the excess speed needed at departure, km^2/s^2.
    pub c3_km2_s2: f64,
    /// Excess speed at arrival before the second impulse, km/s.
    pub vinf_arrive_km_s: f64,
    /// Propellant over the mass at the start of the phases counted.
    pub propellant_fraction: f64,
    /// Start mass less propellant less stage dry mass, kg; null without a mass.
    pub delivered_kg: Option<f64>,
    /// Heliocentric angle swept / 360 deg.
    pub revolutions: f64,
    /// Which way round the Sun.
    pub direction: Direction,
    /// Heliocentric longitude of the target body less that of the start body at departure, deg in (-180, 180]; null
    /// where no body is met.
    pub phase_depart_deg: Option<f64>,
    /// Which departures and flight times were searched, in words.
    pub span: String,
    /// What is counted, in words.
    pub phases: String,
}

/// Which way round the Sun, seen from ecliptic north.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Direction {
    /// Counter-clockwise, as the planets go.
    Prograde,
    /// Clockwise.
    Retrograde,
}

/// A dated flight as seen from the Earth (the Earth-Moon barycentre), and how the bodies stand.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct EarthView {
    /// Largest distance from the Earth, au.
    pub range_max_au: f64,
    /// Distance from the Earth at arrival, au.
    pub range_arrive_au: f64,
    /// Time that light takes one way over the largest distance, s.
    pub light_time_max_s: f64,
    /// Smallest angle at the Earth between the Sun and the craft, deg; null where the craft never leaves the Earth.
    pub sun_earth_craft_min_deg: Option<f64>,
    /// Heliocentric longitude of the target body less that of the start body at departure, deg in (-180, 180].
    pub phase_depart_deg: f64,
    /// The same at arrival.
    pub phase_arrive_deg: f64,
}

/// One way of counting an impulsive transfer.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ImpulsiveWay {
    /// Flight time, d.
    pub time_d: f64,
    /// First impulse, km/s.
    pub dv_depart_km_s: f64,
    /// Second impulse, km/s.
    pub dv_arrive_km_s: f64,
    /// Their sum, km/s.
    pub dv_total_km_s: f64,
    /// Propellant over the mass at the start of the phases counted.
    pub propellant_fraction: f64,
    /// Start mass less propellant less stage dry mass, kg; null without a mass.
    pub delivered_kg: Option<f64>,
    /// What is counted, in words.
    pub phases: String,
}

/// Histories of a flight: one value each per sample, equal lengths.
///
/// Angles, distances and temperatures that do not exist are NaN here and null in JSON (`serde_json` writes
/// NaN as null). Attitude jumps appear as two samples with the same time.
#[derive(Clone, Debug, Default, PartialEq, Serialize)]
pub struct Columns {
    /// Time since departure, d.
    pub t_d: Vec<f64>,
    /// Heliocentric position, au; coplanar flights start on the +x axis and move towards +y.
    pub x_au: Vec<f64>,
    /// See `x_au`.
    pub y_au: Vec<f64>,
    /// See `x_au`; towards ecliptic north.
    pub z_au: Vec<f64>,
    /// Heliocentric velocity, km/s.
    pub vx_km_s: Vec<f64>,
    /// See `vx_km_s`.
    pub vy_km_s: Vec<f64>,
    /// See `vx_km_s`.
    pub vz_km_s: Vec<f64>,
    /// Cone angle of the sail normal, deg; signed in coplanar geometry (positive pushes forward).
    pub cone_deg: Vec<f64>,
    /// Clock angle of the sail normal, deg.
    pub clock_deg: Vec<f64>,
    /// Distance from the Sun, au.
    pub distance_au: Vec<f64>,
    /// Heliocentric speed, km/s.
    pub speed_km_s: Vec<f64>,
    /// Sail acceleration, mm/s^2.
    pub sail_accel_mm_s2: Vec<f64>,
    /// Inertial turn rate of the sail normal, deg/d; NaN at jumps.
    pub turn_rate_deg_d: Vec<f64>,
    /// Film temperature, K.
    pub film_temp_k: Vec<f64>,
    /// Distance from the Earth, au; dated spatial flights only.
    pub earth_range_au: Vec<f64>,
    /// Sun-Earth-craft angle, deg; dated spatial flights only.
    pub sun_earth_craft_deg: Vec<f64>,
}

impl Columns {
    /// Names in the order of [`Columns::values`]; the page unpacks by this order.
    pub const NAMES: [&'static str; 16] = [
        "t_d",
        "x_au",
        "y_au",
        "z_au",
        "vx_km_s",
        "vy_km_s",
        "vz_km_s",
        "cone_deg",
        "clock_deg",
        "distance_au",
        "speed_km_s",
        "sail_accel_mm_s2",
        "turn_rate_deg_d",
        "film_temp_k",
        "earth_range_au",
        "sun_earth_craft_deg",
    ];

    /// Columns in the order of [`Columns::NAMES`].
    pub fn values(&self) -> [&Vec<f64>; 16] {
        [
            &self.t_d,
            &self.x_au,
            &self.y_au,
            &self.z_au,
            &self.vx_km_s,
            &self.vy_km_s,
            &self.vz_km_s,
            &self.cone_deg,
            &self.clock_deg,
            &self.distance_au,
            &self.speed_km_s,
            &self.sail_accel_mm_s2,
            &self.turn_rate_deg_d,
            &self.film_temp_k,
            &self.earth_range_au,
            &self.sun_earth_craft_deg,
        ]
    }

    /// The same columns from packed values: column after column, equal lengths.
    ///
    /// # Errors
    /// When the length is not a multiple of the number of columns.
    pub fn from_packed(packed: &[f64]) -> Result<Self, PackedLength> {
        let count = Self::NAMES.len();
        if !packed.len().is_multiple_of(count) {
            return Err(PackedLength(packed.len()));
        }
        let rows = packed.len() / count;
        let column = |i: usize| packed[i * rows..(i + 1) * rows].to_vec();
        Ok(Columns {
            t_d: column(0),
            x_au: column(1),
            y_au: column(2),
            z_au: column(3),
            vx_km_s: column(4),
            vy_km_s: column(5),
            vz_km_s: column(6),
            cone_deg: column(7),
            clock_deg: column(8),
            distance_au: column(9),
            speed_km_s: column(10),
            sail_accel_mm_s2: column(11),
            turn_rate_deg_d: column(12),
            film_temp_k: column(13),
            earth_range_au: column(14),
            sun_earth_craft_deg: column(15),
        })
    }

    /// All columns in one array, column after column.
    pub fn packed(&self) -> Vec<f64> {
        self.values().iter().flat_map(|column| column.iter().copied()).collect()
    }
}

/// A packed array whose length does not fit the number of columns.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct PackedLength(pub usize);

impl std::fmt::Display for PackedLength {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(f, "{} packed values do not divide into {} columns", self.0, Columns::NAMES.len())
    }
}

impl std::error::Error for PackedLength {}
