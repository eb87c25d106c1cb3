//! The two ends of a flight as the solvers see them: circles or ellipses, and the bodies on them.

use std::f64::consts::TAU;

use orbits::ephemeris::Traveller;
use orbits::epochs;
use orbits::impulsive::Body;
use orbits::kepler::Elements;
use orbits::units;

use crate::date::Date;
use crate::report::End;
use crate::schema::{Geometry, Place, Scenario};

/// Radius of the circle that stands for a place in coplanar geometry, au.
pub(crate) fn circle_au(place: &Place) -> f64 {
    match place {
        Place::Planet(planet) => planet.circle_radius_au(),
        Place::Orbit(orbit) => orbit.a_au,
    }
}

/// The end as the report tells it: a circle in coplanar geometry, else the orbit at the departure date (J2000
/// without one).
pub(crate) fn end(place: &Place, scenario: &Scenario) -> End {
    match scenario.geometry {
        Geometry::Coplanar => circle_end(place),
        Geometry::Spatial => spatial_end(place, scenario.depart.and_then(Date::j2000_d)),
    }
}

fn spatial_end(place: &Place, depart_j2000_d: Option<f64>) -> End {
    let orbit = traveller(place).elements(depart_j2000_d.unwrap_or(0.0));
    End {
        name: name(place),
        semi_major_axis_au: orbit.semi_major_axis,
        eccentricity: orbit.eccentricity,
        inclination_deg: orbit.inclination_rad.to_degrees(),
        node_deg: orbit.node_rad.to_degrees(),
        arg_peri_deg: orbit.arg_peri_rad.to_degrees(),
        mean_anomaly_deg: depart_j2000_d.map(|_| orbit.mean_anomaly_rad.to_degrees()),
        period_d: period_d(orbit.semi_major_axis),
    }
}

fn circle_end(place: &Place) -> End {
    End {
        name: name(place),
        semi_major_axis_au: circle_au(place),
        eccentricity: 0.0,
        inclination_deg: 0.0,
        node_deg: 0.0,
        arg_peri_deg: 0.0,
        mean_anomaly_deg: None,
        period_d: period_d(circle_au(place)),
    }
}

/// Period of a heliocentric orbit, d.
fn period_d(semi_major_axis_au: f64) -> f64 {
    units::days(TAU * semi_major_axis_au.powf(1.5))
}

/// The body that moves there, in space.
pub(crate) fn traveller(place: &Place) -> Traveller {
    match place {
        Place::Planet(planet) => Traveller::Planet(*planet),
        Place::Orbit(orbit) => Traveller::Ellipse {
            at_epoch: Elements {
                semi_major_axis: orbit.a_au,
                eccentricity: orbit.e,
                inclination_rad: orbit.i_deg.to_radians(),
                node_rad: orbit.node_deg.to_radians(),
                arg_peri_rad: orbit.arg_peri_deg.to_radians(),
                mean_anomaly_rad: orbit.mean_anomaly_deg.to_radians(),
            },
            epoch_j2000_d: epochs::from_jd_tdb(orbit.epoch_jd_tdb),
        },
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
