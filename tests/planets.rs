//! Where the planets are: the approximate elements against a numerical ephemeris, 1900 to 2047.
//!
//! The errors that are stated with the elements (E. M. Standish, JPL, "Keplerian Elements for Approximate Positions of
//! the Major Planets", table 1; published) are typical ones and no bounds: the root of the mean square is held to 1.5
//! times them, and every single state to the largest difference that the table's generator found on 3 000 dates.
//!
//! The rows of Saturn, Uranus and Neptune follow the motion about the barycentre of the solar system. About the Sun they
//! miss by the Sun's shift, up to 0.01 au. So their typical error is taken about the barycentre, and the largest one
//! about the Sun, which is how flights use them.

use orbits::constants::{AU_KM, AU_M, DAY_S, SUN_GM_KM3_S2};
use orbits::ephemeris::Traveller;
use orbits::epochs::from_jd_tdb;
use orbits::planets::Planet;
use orbits::units::{TIME_UNIT_D, km_per_s};
use serde_json::Value;
use tests::{list, number, reference, words};

/// Over the stated errors, which are rounded and typical.
const SLACK: f64 = 1.5;

/// States of every planet in the table.
const DATES: usize = 31;

/// A planet at one date in the numerical ephemeris, au and km/s.
struct Row {
    planet: Planet,
    jd_tdb: f64,
    position: [f64; 3],
    velocity: [f64; 3],
}

impl Row {
    fn read(record: &Value) -> Row {
        let triple = |key: &str| [0, 1, 2].map(|i| number(record, &format!("{key}/{i}")));
        Row {
            planet: Planet::from_key(words(record, "/planet")).expect("a planet"),
            jd_tdb: number(record, "/jd_tdb"),
            position: triple("/position_au"),
            velocity: triple("/velocity_km_s"),
        }
    }

    /// The same about the barycentre of all rows of that date.
    fn about_barycentre(&self, all: &[Row]) -> Row {
        let same_date = || all.iter().filter(|row| row.jd_tdb == self.jd_tdb);
        let total = SUN_GM_KM3_S2 + same_date().map(|row| row.planet.gm_km3_s2()).sum::<f64>();
        let shifted = |own: [f64; 3], of: fn(&Row) -> [f64; 3]| {
            let weighted =
                |i: usize| same_date().map(|row| row.planet.gm_km3_s2() * of(row)[i]).sum::<f64>() / total;
            [0, 1, 2].map(|i| own[i] - weighted(i))
        };
        Row {
            position: shifted(self.position, |row| row.position),
            velocity: shifted(self.velocity, |row| row.velocity),
            ..*self
        }
    }

    /// What the elements miss by: longitude and latitude in arcsec, distance in 1000 km, velocity in m/s.
    fn misses(&self) -> [f64; 4] {
        let state =
            Traveller::Planet(self.planet).state(from_jd_tdb(self.jd_tdb)).expect("a planet is somewhere");
        let found = spherical([state.position.x, state.position.y, state.position.z]);
        let true_place = spherical(self.position);
        let arcsec = |degrees: f64| (degrees - 360.0 * (degrees / 360.0).round()) * 3600.0;
        let velocity = [state.velocity.x, state.velocity.y, state.velocity.z].map(km_per_s);
        let off = (0..3).map(|i| (velocity[i] - self.velocity[i]).powi(2)).sum::<f64>().sqrt();
        [
            arcsec(found[0] - true_place[0]),
            arcsec(found[1] - true_place[1]),
            (found[2] - true_place[2]) * AU_KM / 1e3,
            off * 1e3,
        ]
    }
}

/// Longitude and latitude in degrees, and distance.
fn spherical([x, y, z]: [f64; 3]) -> [f64; 3] {
    let across = x.hypot(y);
    [y.atan2(x).to_degrees(), z.atan2(across).to_degrees(), across.hypot(z)]
}

/// Longitude and latitude in arcsec, distance in 1000 km.
struct Errors {
    planet: Planet,
    stated: [f64; 3],
    largest: [f64; 3],
}

/// Every planet's states, and its record of stated and largest errors.
fn table() -> (Vec<Row>, Vec<Errors>) {
    let table = reference("planet_positions.json");
    let rows: Vec<Row> = list(&table, "/states").iter().map(Row::read).collect();
    let errors = list(&table, "/approximate_elements/rows").iter().map(|record| {
        let triple = |key: &str| [0, 1, 2].map(|i| number(record, &format!("{key}/{i}")));
        let planet = Planet::from_key(words(record, "/planet")).expect("a planet");
        Errors { planet, stated: triple("/stated"), largest: triple("/largest") }
    });
    (rows, errors.collect())
}

/// Whether a planet's elements follow the motion about the barycentre.
fn follows_barycentre(planet: Planet) -> bool {
    planet.semi_major_axis_au() > Planet::Jupiter.semi_major_axis_au()
}

#[test]
fn the_table_holds_every_planet_and_the_stated_errors_are_standishs() {
    // E. M. Standish, JPL, table 1 (published): longitude and latitude in arcsec, distance in 1000 km.
    let published: [(Planet, [f64; 3]); 8] = [
        (Planet::Mercury, [15.0, 1.0, 1.0]),
        (Planet::Venus, [20.0, 1.0, 4.0]),
        (Planet::Earth, [20.0, 8.0, 6.0]),
        (Planet::Mars, [40.0, 2.0, 25.0]),
        (Planet::Jupiter, [400.0, 10.0, 600.0]),
        (Planet::Saturn, [600.0, 25.0, 1500.0]),
        (Planet::Uranus, [50.0, 2.0, 1000.0]),
        (Planet::Neptune, [10.0, 1.0, 200.0]),
    ];
    let (rows, errors) = table();
    let stated: Vec<(Planet, [f64; 3])> = errors.iter().map(|e| (e.planet, e.stated)).collect();
    assert_eq!(stated, published);
    for planet in Planet::ALL {
        assert_eq!(rows.iter().filter(|row| row.planet == planet).count(), DATES);
    }
}

#[test]
fn typical_errors_are_those_stated() {
    let (rows, errors) = table();
    for Errors { planet, stated, .. } in errors {
        let own = rows.iter().filter(|row| row.planet == planet);
        let misses: Vec<[f64; 4]> =
            own.map(|row| {
                if follows_barycentre(planet) { row.about_barycentre(&rows).misses() } else { row.misses() }
            })
            .collect();
        for (i, name) in ["longitude [arcsec]", "latitude [arcsec]", "distance [1000 km]"].iter().enumerate()
        {
            let typical = (misses.iter().map(|m| m[i] * m[i]).sum::<f64>() / misses.len() as f64).sqrt();
            let allowed = SLACK * stated[i];
            assert!(typical <= allowed, "{} {name}: {typical:.2}, stated {}", planet.name(), stated[i]);
            // An ephemeris compared with itself would pass as well: the elements are approximate, and it shows.
            assert!(typical > 0.05 * stated[i], "{} {name}: only {typical:.2e}", planet.name());
        }
    }
}

#[test]
fn no_state_misses_by_more_than_the_generator_found() {
    // Half a unit of the last digit written there.
    const ROUNDING: f64 = 0.05;
    let (rows, errors) = table();
    for Errors { planet, largest, .. } in errors {
        for row in rows.iter().filter(|row| row.planet == planet) {
            let misses = row.misses();
            for i in 0..3 {
                let (miss, most) = (misses[i].abs(), largest[i] + ROUNDING);
                assert!(
                    miss <= most,
                    "{} on JD {}: [{i}] {miss:.2}, not {most:.2}",
                    planet.name(),
                    row.jd_tdb
                );
            }
        }
    }
}

/// What a planet's velocity may miss by, m/s.
///
/// A place that wobbles by d about its true one, at rates like the planet's own, moves wrongly by the angular rate times
/// d: d from 1.5 times the stated errors, the rate at perihelion. On top, the velocity is that of a body without mass
/// round the Sun alone: the planet's own mass and, for orbits about the barycentre, all that is inside, make the true
/// one faster by half their share of the Sun's mass.
fn velocity_allowed_m_s(planet: Planet, stated: [f64; 3]) -> f64 {
    let elements = Traveller::Planet(planet).elements(0.0);
    let (a, e) = (elements.semi_major_axis, elements.eccentricity);
    let arcsec = (1.0f64 / 3600.0).to_radians();
    let across = a * AU_M * arcsec * stated[0].hypot(stated[1]);
    let miss_m = SLACK * across.hypot(stated[2] * 1e6);
    let mean_rate = elements.mean_motion(1.0) / (TIME_UNIT_D * DAY_S);
    let rate = mean_rate * (1.0 + e).powi(2) / (1.0 - e * e).powf(1.5);
    let inside =
        |other: &&Planet| **other == planet || (follows_barycentre(planet) && other.semi_major_axis_au() < a);
    let share = Planet::ALL.iter().filter(inside).map(|p| p.gm_km3_s2()).sum::<f64>() / SUN_GM_KM3_S2;
    rate * miss_m + 0.5 * share * km_per_s(a.powf(-0.5)) * 1e3
}

#[test]
fn velocities_miss_by_no_more_than_positions_say() {
    let (rows, errors) = table();
    for Errors { planet, stated, .. } in errors {
        let allowed = velocity_allowed_m_s(planet, stated);
        let mut worst = 0f64;
        for row in rows.iter().filter(|row| row.planet == planet) {
            let miss = if follows_barycentre(planet) {
                row.about_barycentre(&rows).misses()[3]
            } else {
                row.misses()[3]
            };
            worst = worst.max(miss);
        }
        assert!(worst <= allowed, "{}: {worst:.2} m/s, allowed {allowed:.2}", planet.name());
    }
}

#[test]
fn about_the_sun_the_outermost_miss_by_the_suns_own_shift() {
    // The reach of that shift, and so the size of the caution, is 0.01 au: Jupiter and Saturn on one side pull the Sun
    // 5.2 / 1047 + 9.5 / 3498 = 0.0077 au away, Uranus and Neptune 0.0024 au more (arithmetic).
    let (rows, _) = table();
    let mut largest = 0f64;
    for row in rows.iter().filter(|row| row.planet == Planet::Neptune) {
        let about = row.about_barycentre(&rows);
        let shift = (0..3).map(|i| (row.position[i] - about.position[i]).powi(2)).sum::<f64>().sqrt();
        largest = largest.max(shift);
        assert!(shift < 0.0077 + 0.0024, "{shift} au on JD {}", row.jd_tdb);
    }
    assert!(largest > 0.005, "{largest} au: the shift is there");
}
