//! The two ends of a coplanar flight as the solvers see them: circles, and the bodies on them.

use orbits::impulsive::Body;

use crate::report::End;
use crate::schema::Place;

/// Radius of the circle that stands for a place in coplanar geometry, au.
pub(crate) fn circle_au(place: &Place) -> f64 {
    match place {
        Place::Planet(planet) => planet.circle_radius_au(),
        Place::Orbit(orbit) => orbit.a_au,
    }
}

/// The end as the report tells it, coplanar.
pub(crate) fn end(place: &Place) -> End {
    End {
        name: name(place),
        semi_major_axis_au: circle_au(place),
        eccentricity: 0.0,
        inclination_deg: 0.0,
        node_deg: 0.0,
        arg_peri_deg: 0.0,
    }
}

/// The place by name.
pub(crate) fn name(place: &Place) -> String {
    match place {
        Place::Planet(planet) => planet.name().to_owned(),
        Place::Orbit(orbit) => format!("the {} au orbit", crate::words::short(orbit.a_au)),
    }
}

/// The orbit of a place, in words: `Mars's orbit`, `the 0.5 au orbit`.
pub(crate) fn orbit_name(place: &Place) -> String {
    match place {
        Place::Planet(planet) => format!("{}\u{2019}s orbit", planet.name()),
        Place::Orbit(_) => name(place),
    }
}

/// The end of an impulsive transfer there.
pub(crate) fn body(place: &Place, altitude_km: Option<f64>) -> Body {
    let planet = match place {
        Place::Planet(planet) => Some(*planet),
        Place::Orbit(_) => None,
    };
    Body { circle_au: circle_au(place), planet, altitude_km }
}
