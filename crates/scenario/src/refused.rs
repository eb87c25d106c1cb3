//! Scenarios that can be written but are not solved: each one a line of a table, with the way out.
//!
//! Two lists. `NOT_YET` is what this version does not solve: a line goes when its solver comes. `NEVER` is
//! what contradicts itself or hides a problem of another kind, and stays.
//!
//! Identical ends are not refused: the answer is a flight of zero days.

use orbits::constants::PRESSURE_N_M2;

use crate::keys::KEYS;
use crate::link::{LinkError, entry};
use crate::schema::{Arrive, CraftInput, Film, Geometry, OrbitInput, Place, Scenario, Steer};

/// One reason to refuse: the key to mark, and the rule when it applies.
struct Refusal {
    key: &'static str,
    applies: fn(&Scenario) -> bool,
    rule: &'static str,
}

/// What this version does not solve.
const NOT_YET: &[Refusal] = &[
    Refusal {
        key: "film",
        applies: |s| s.film != Film::Ideal,
        rule: "is not solved by this version: use film=ideal",
    },
    Refusal {
        key: "cone_max_deg",
        applies: |s| s.cone_max_deg < 90.0,
        rule: "is not solved by this version: leave it out (90)",
    },
    Refusal {
        key: "temp_max_k",
        applies: |s| s.temp_max_k.is_some(),
        rule: "is not solved by this version: leave it out",
    },
    Refusal {
        key: "ageing",
        applies: |s| s.ageing.is_some(),
        rule: "is not solved by this version: leave it out",
    },
    Refusal {
        key: "control",
        applies: |s| s.control < 1.0,
        rule: "is not solved by this version: leave it out (1)",
    },
    Refusal {
        key: "arrive",
        applies: |s| s.arrive == Arrive::Flyby,
        rule: "flyby is not solved by this version: use arrive=orbit or arrive=rendezvous",
    },
    Refusal {
        key: "segments",
        applies: |s| s.segments.is_some(),
        rule: "is not solved by this version: leave it out for smooth steering",
    },
];

/// What contradicts itself or is another problem than it seems.
const NEVER: &[Refusal] = &[
    Refusal {
        key: "vinf_km_s",
        applies: |s| s.vinf_km_s > 0.0 && s.steer != Steer::Fastest,
        rule: "is used by steer=fastest only: leave it out (0)",
    },
    Refusal {
        key: "vinf_arrive_km_s",
        applies: |s| s.vinf_arrive_km_s > 0.0 && s.steer != Steer::Fastest,
        rule: "is used by steer=fastest only: leave it out (0)",
    },
    Refusal {
        key: "area_m2",
        applies: |s| ideal_ac_mm_s2(s).is_some_and(|ac| !(0.01..=20.0).contains(&ac)),
        rule: "with this mass gives a characteristic acceleration outside 0.01 to 20 mm/s²: change area or mass",
    },
    Refusal {
        key: "temp_max_k",
        applies: |s| s.temp_max_k.is_some() && s.cone_max_deg < 90.0,
        rule: "together with cone_max_deg hides a limit on the distance from the Sun: give one of the two",
    },
    Refusal {
        key: "ageing",
        applies: |s| s.ageing.is_some() && s.film == Film::Ideal,
        rule: "needs a film that can age: choose a film other than ideal",
    },
    Refusal {
        key: "control",
        applies: |s| s.control < 1.0 && s.temp_max_k.is_some(),
        rule: "below 1 is solved without a temperature limit only: leave out one of the two",
    },
    Refusal {
        key: "from_orbit",
        applies: |s| s.geometry == Geometry::Coplanar && is_no_circle(&s.from),
        rule: "must have e and i_deg 0 in coplanar geometry, which knows circles only",
    },
    Refusal {
        key: "to_orbit",
        applies: |s| s.geometry == Geometry::Coplanar && is_no_circle(&s.to),
        rule: "must have e and i_deg 0 in coplanar geometry, which knows circles only",
    },
    Refusal {
        key: "depart",
        applies: |s| s.depart.is_some() && s.geometry == Geometry::Coplanar,
        rule: "has a meaning only with geometry=spatial: leave it out, circles have no dates",
    },
    Refusal {
        key: "arrive",
        applies: |s| s.arrive == Arrive::Rendezvous && s.geometry == Geometry::Coplanar,
        rule: "needs geometry=spatial and depart: on circles without dates no body has a place",
    },
    Refusal {
        key: "arrive",
        applies: |s| s.arrive == Arrive::Rendezvous && s.depart.is_none(),
        rule: "needs a departure date: give depart=YYYY-MM-DD",
    },
    Refusal {
        key: "arrive",
        applies: |s| s.arrive == Arrive::Flyby && s.temp_max_k.is_none(),
        rule: "needs a film temperature limit: without one, dives ever closer to the Sun get ever faster",
    },
    Refusal {
        key: "arrive",
        applies: |s| s.arrive == Arrive::Flyby && s.geometry == Geometry::Spatial && s.depart.is_none(),
        rule: "needs a departure date in spatial geometry: give depart=YYYY-MM-DD",
    },
    Refusal {
        key: "steer",
        applies: |s| s.steer != Steer::Fastest && s.geometry == Geometry::Spatial,
        rule: "is flown between circles only: use steer=fastest or geometry=coplanar",
    },
    Refusal {
        key: "steer",
        applies: |s| s.steer != Steer::Fastest && s.arrive != Arrive::Orbit,
        rule: "ends at the target's orbit only: use steer=fastest or arrive=orbit",
    },
    Refusal {
        key: "cone_deg",
        applies: |s| s.cone_deg.is_some() && s.steer != Steer::Fixed,
        rule: "has a meaning only with steer=fixed: add that, or leave it out",
    },
    Refusal {
        key: "cone_deg",
        applies: |s| s.cone_deg.is_some_and(|cone| cone.abs() > s.cone_max_deg),
        rule: "leans farther than cone_max_deg allows: change one of the two",
    },
    Refusal {
        key: "segments",
        applies: |s| s.segments.is_some() && s.steer != Steer::Fastest,
        rule: "has a meaning only with steer=fastest: leave it out",
    },
];

/// Why this scenario is not solved: at most one reason a key, in the order of the table of keys; empty when it is.
///
/// # Example
/// ```
/// use scenario::{link, refused::refused};
/// assert!(refused(&link::decode("to=jupiter").unwrap()).is_empty());
/// let reasons = refused(&link::decode("cone_deg=20").unwrap());
/// assert_eq!(reasons[0].key, "cone_deg");
/// ```
pub fn refused(scenario: &Scenario) -> Vec<LinkError> {
    // What is not solved at all comes first: mending a combination would not help there.
    let reason = |key: &'static str| {
        let all = NOT_YET.iter().chain(NEVER);
        let first = all.filter(|refusal| refusal.key == key).find(|refusal| (refusal.applies)(scenario))?;
        Some(LinkError::new(key, &entry(scenario, key), first.rule))
    };
    KEYS.iter().filter_map(|info| reason(info.key)).collect()
}

/// Characteristic acceleration of an ideal sail with the area and mass given, mm/s^2.
fn ideal_ac_mm_s2(scenario: &Scenario) -> Option<f64> {
    match (scenario.craft, scenario.film) {
        (CraftInput::AreaMass { area_m2, mass_kg }, Film::Ideal) => {
            Some(2.0 * PRESSURE_N_M2 * (area_m2 / mass_kg) * 1e3)
        }
        _ => None,
    }
}

fn is_no_circle(place: &Place) -> bool {
    matches!(place, Place::Orbit(OrbitInput { e, i_deg, .. }) if *e != 0.0 || *i_deg != 0.0)
}
