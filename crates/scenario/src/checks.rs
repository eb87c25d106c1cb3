//! Published values, computed afresh wherever this core runs: in the page, on the command line, in tests.
//!
//! Expected values and tolerances are those of the project's reference folder; a test holds them together.

use numerics::ode::{Flow, Mode, Options, integrate};
use optimal::coplanar::flight::{Flown, fly};
use optimal::coplanar::solve::{Problem, solve};
use orbits::constants::{DAY_S, PRESSURE_N_M2};
use orbits::hohmann::{Circles, Hohmann, hohmann, synodic_d};
use orbits::planets::Planet;
use orbits::units;
use sail::film::ALUMINISED;
use sail::motion::steered::{self, Law, Plan};
use sail::spiral::Spiral;
use sail::steering::primer::ideal_attitude;
use sail::temperature::film_temperature_k;
use sail::{force, loading};
use serde::Serialize;

/// One check: a value from outside beside ours.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct CheckRow {
    /// What is compared.
    pub name: String,
    /// Where the expected value comes from.
    pub source: &'static str,
    /// How far that source is to be trusted: published, from memory, computed, common practice.
    pub mark: &'static str,
    /// Unit of both values.
    pub unit: &'static str,
    /// The value from outside.
    pub expected: f64,
    /// Our value, computed just now.
    pub found: f64,
    /// Largest allowed difference, in the unit.
    pub tolerance: f64,
    /// Whether ours is that close.
    pub passed: bool,
}

const BRYSON: &str = "A. E. Bryson, Dynamic Optimization (1999), fig. 4.14, after H. J. Kelley (1962); values \
                      stored in the author's companion scripts";
const MCINNES: &str = "C. R. McInnes, Solar Sailing (1999)";
const SPIRAL: &str = "Bacon 1959, London 1960, Tsu, ARS Journal 29 (1959) 422-427; closed form";
const COLLOCATION: &str = "direct collocation and an independent indirect method, agreeing to 1e-7";
const CURTIS: &str = "H. D. Curtis, Orbital Mechanics for Engineering Students, examples 8.2-8.5";
const VALLADO: &str = "D. A. Vallado, Fundamentals of Astrodynamics and Applications, example 6-1";
const KOPP: &str = "G. Kopp and J. L. Lean, Geophys. Res. Lett. 38 (2011) L01706";
const RULE: &str = "common practice, no source";

const PUBLISHED: &str = "published";
const MEMORY: &str = "from memory";
const COMPUTED: &str = "computed";

struct Rows(Vec<CheckRow>);

impl Rows {
    fn add(
        &mut self,
        name: impl Into<String>,
        (source, mark): (&'static str, &'static str),
        unit: &'static str,
        expected: f64,
        tolerance: f64,
        found: f64,
    ) {
        let passed = (found - expected).abs() <= tolerance;
        self.0.push(CheckRow { name: name.into(), source, mark, unit, expected, found, tolerance, passed });
    }
}

/// Every check, computed now.
pub fn published_checks() -> Vec<CheckRow> {
    let mut rows = Rows(Vec::new());
    fastest_flights(&mut rows);
    flat_sail(&mut rows);
    spirals(&mut rows);
    impulsive(&mut rows);
    temperatures(&mut rows);
    rules_of_thumb(&mut rows);
    rows.0
}

/// Minimum-time flight from 1 au; `None` when it does not solve, which fails the check by a NaN.
fn flown(target_radius: f64, lightness: f64) -> Option<Flown> {
    let problem = Problem { start_radius: 1.0, target_radius, lightness };
    fly(&problem, &solve(&problem)?.unknowns)
}

/// Sail angles of the Bryson-Kelley flight at 41 equally spaced times, rad.
pub const BRYSON_ANGLES_RAD: [f64; 41] = [
    0.3894, 0.3515, 0.3123, 0.2724, 0.2329, 0.1965, 0.1690, 0.1710, 0.3638, 1.1163, 1.2479, 1.2412, 1.2082,
    1.1697, 1.1316, 1.0958, 1.0630, 1.0332, 1.0061, 0.9815, 0.9590, 0.9385, 0.9196, 0.9021, 0.8859, 0.8707,
    0.8565, 0.8430, 0.8302, 0.8180, 0.8063, 0.7950, 0.7841, 0.7735, 0.7631, 0.7531, 0.7432, 0.7335, 0.7241,
    0.7148, 0.7057,
];

/// Times among those 41 where the sail swings so fast that a small shift in time is a large one in angle.
pub const BRYSON_SWING: std::ops::RangeInclusive<usize> = 7..=9;

fn fastest_flights(rows: &mut Rows) {
    let source = (BRYSON, PUBLISHED);
    let flight = flown(1.5237, 0.17);
    let of = |f: &dyn Fn(&Flown) -> f64| flight.as_ref().map_or(f64::NAN, f);
    let name = "Earth to Mars, lightness number 0.17:";
    rows.add(format!("{name} time"), source, "canonical", 6.9924, 3e-4 * 6.9924, of(&|f| f.time));
    rows.add(
        format!("{name} angle swept"),
        source,
        "rad",
        4.3223,
        2e-3 * 4.3223,
        of(&|f| f.trajectory.swept),
    );
    rows.add(
        format!("{name} first sail angle"),
        source,
        "rad",
        0.389,
        1e-3,
        of(&|f| f.trajectory.samples[0].cone),
    );
    let worst = of(&|f| worst_angle_gap(f));
    rows.add(
        format!("{name} sail angle at 38 of 41 times, worst difference"),
        source,
        "rad",
        0.0,
        0.01,
        worst,
    );
    for (planet, ac_mm_s2, time_d) in [
        (Planet::Mars, 0.5, 560.11),
        (Planet::Mars, 1.0, 407.72),
        (Planet::Mars, 2.0, 323.93),
        (Planet::Venus, 0.5, 267.86),
        (Planet::Venus, 1.0, 204.75),
        (Planet::Venus, 2.0, 163.65),
        (Planet::Mercury, 0.5, 498.08),
        (Planet::Mercury, 1.0, 265.95),
        (Planet::Mercury, 2.0, 192.55),
        (Planet::Jupiter, 0.5, 6902.85),
        (Planet::Jupiter, 1.0, 3780.16),
        (Planet::Jupiter, 2.0, 2395.08),
    ] {
        let flight = flown(planet.circle_radius_au(), units::lightness(ac_mm_s2));
        rows.add(
            format!("Fastest flight to {}, {ac_mm_s2} mm/s\u{b2}", planet.name()),
            (COLLOCATION, COMPUTED),
            "d",
            time_d,
            0.006, // half of the last digit written, and one unit of rounding beyond it
            flight.map_or(f64::NAN, |f| units::days(f.time)),
        );
    }
}

fn worst_angle_gap(flight: &Flown) -> f64 {
    let samples = &flight.trajectory.samples;
    let cone_at = |time: f64| {
        let next = samples.partition_point(|s| s.time < time).clamp(1, samples.len() - 1);
        let (a, b) = (&samples[next - 1], &samples[next]);
        a.cone + (b.cone - a.cone) * (time - a.time) / (b.time - a.time)
    };
    let gap = |(i, angle): (usize, &f64)| (cone_at(flight.time * i as f64 / 40.0) - angle).abs();
    let smooth = BRYSON_ANGLES_RAD.iter().enumerate().filter(|(i, _)| !BRYSON_SWING.contains(i));
    smooth.map(gap).fold(0.0, f64::max)
}

fn flat_sail(rows: &mut Rows) {
    let cone_deg = |psi_deg: f64| {
        let (sin, cos) = psi_deg.to_radians().sin_cos();
        let (c, s) = ideal_attitude(cos, sin);
        s.atan2(c).to_degrees()
    };
    let best = cone_deg(90.0);
    let (sin, cos) = best.to_radians().sin_cos();
    let push = force::ideal(cos, sin).transverse;
    rows.add(
        "Cone angle of the largest transverse force",
        (MCINNES, COMPUTED),
        "deg",
        35.264_389_7,
        1e-6,
        best,
    );
    rows.add("Largest transverse force over head-on", (MCINNES, COMPUTED), "1", 0.384_900_2, 1e-7, push);
    for (psi, cone, tolerance) in
        [(60.0, 21.6, 0.05), (90.0, 35.26, 0.005), (120.0, 51.6, 0.05), (150.0, 70.2, 0.05)]
    {
        rows.add(
            format!("Best cone angle for a push {psi}\u{b0} off the Sun line"),
            (MCINNES, MEMORY),
            "deg",
            cone,
            tolerance,
            cone_deg(psi),
        );
    }
    let critical = loading::critical_loading_g_m2();
    rows.add("Critical loading", (MCINNES, MEMORY), "g/m\u{b2}", 1.53, 0.005 * 1.53, critical);
    rows.add(
        "Radiation pressure at 1 au",
        (KOPP, PUBLISHED),
        "\u{b5}N/m\u{b2}",
        4.5391,
        0.0017,
        PRESSURE_N_M2 * 1e6,
    );
}

fn spirals(rows: &mut Rows) {
    let best = std::f64::consts::FRAC_1_SQRT_2.atan();
    for (lightness, cone, planet, time_d) in [
        (0.05, best, Planet::Mars, 874.416),
        (0.10, best, Planet::Mars, 430.500),
        (0.10, -best, Planet::Venus, 188.069),
    ] {
        let target = planet.circle_radius_au();
        let found = Spiral::new(lightness, cone).map_or(f64::NAN, |spiral| {
            let (u, v) = spiral.speeds(1.0);
            let law = Law::Fixed { cone_deg: cone.to_degrees() };
            let plan = Plan { lightness, start: [1.0, u, v], target, law, time_limit: 100.0 };
            units::days(steered::fly(&plan).time)
        });
        rows.add(
            format!("Logarithmic spiral to the distance of {}, lightness number {lightness}", planet.name()),
            (SPIRAL, COMPUTED),
            "d",
            time_d,
            1e-3,
            found,
        );
    }
}

fn impulsive(rows: &mut Rows) {
    let of = |circles: Circles, f: &dyn Fn(&Hohmann) -> f64| hohmann(circles).map_or(f64::NAN, |h| f(&h));
    let mars = Circles { gm_km3_s2: 132_712_440_018.0, from_km: 149.6e6, to_km: 227.9e6 };
    let source = (CURTIS, MEMORY);
    rows.add("Earth-Mars Hohmann: time", source, "d", 258.82, 0.02, of(mars, &|h| h.time_d));
    rows.add(
        "Earth-Mars Hohmann: excess at departure",
        source,
        "km/s",
        2.943,
        1e-3,
        of(mars, &|h| h.depart_km_s),
    );
    rows.add(
        "Earth-Mars Hohmann: excess at arrival",
        source,
        "km/s",
        2.648,
        1e-3,
        of(mars, &|h| h.arrive_km_s),
    );
    let geo =
        Circles { gm_km3_s2: 398_600.441_8, from_km: 6378.137 + 191.344_11, to_km: 6378.137 + 35_781.348_57 };
    let source = (VALLADO, MEMORY);
    rows.add(
        "Hohmann to 35 781 km altitude: total",
        source,
        "km/s",
        3.935_224,
        2e-6,
        of(geo, &Hohmann::total_km_s),
    );
    rows.add(
        "Hohmann to 35 781 km altitude: time",
        source,
        "h",
        5.256_713,
        2e-6,
        of(geo, &|h| h.time_d * 24.0),
    );
    let year_d = units::days(std::f64::consts::TAU);
    let synodic = synodic_d(year_d, year_d * Planet::Mars.circle_radius_au().powf(1.5));
    rows.add(
        "Synodic period of Earth and Mars",
        ("arithmetic from the semi-major axes", COMPUTED),
        "d",
        779.9,
        0.1,
        synodic.unwrap_or(f64::NAN),
    );
}

fn temperatures(rows: &mut Rows) {
    for (distance_au, expected) in [(1.0, 263.2), (0.3871, 423.1), (0.25, 526.4)] {
        let found = film_temperature_k(&ALUMINISED, distance_au, 1.0);
        let name = format!("Temperature of aluminised film facing the Sun at {distance_au} au");
        rows.add(name, (MCINNES, COMPUTED), "K", expected, 0.06, found);
    }
}

/// Motion under a constant push and nothing else: distance and speed.
struct ConstantPush(f64);

impl Flow<f64, 2> for ConstantPush {
    fn rates(&self, _: Mode, y: &[f64; 2]) -> [f64; 2] {
        [y[1], self.0]
    }
}

fn rules_of_thumb(rows: &mut Rows) {
    let source = (RULE, RULE);
    let push_m_s2 = 0.058e-3;
    let gained_km_h = |duration_d: f64| {
        let options = Options { tolerance: 1e-12, max_steps: 1000 };
        integrate(&ConstantPush(push_m_s2), &[0.0, 0.0], duration_d * DAY_S, &options).state[1] * 3.6
    };
    let name = "Speed gained by 0.058 mm/s\u{b2}";
    rows.add(format!("{name} in a month"), source, "km/h", 550.0, 0.05 * 550.0, gained_km_h(30.4375));
    rows.add(format!("{name} in sixteen months"), source, "km/h", 8500.0, 0.05 * 8500.0, gained_km_h(487.0));
    let years = 3900.0 / push_m_s2 / DAY_S / 365.25;
    rows.add("Time for 3.9 km/s at 0.058 mm/s\u{b2}", source, "years", 2.2, 0.05 * 2.2, years);
    let mars = Planet::Mars.circle_radius_au();
    rows.add(
        "Sunlight at Mars over that at the Earth",
        source,
        "%",
        43.0,
        0.05 * 43.0,
        100.0 / (mars * mars),
    );
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_check_passes() {
        for row in published_checks() {
            assert!(row.passed, "{}: expected {} found {} {}", row.name, row.expected, row.found, row.unit);
        }
    }
}
