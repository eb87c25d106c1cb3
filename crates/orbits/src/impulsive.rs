//! The impulsive side of the comparison, counted three ways between the same two circles.
//!
//! - heliocentric: both bodies massless, two impulses against the Sun's gravity alone;
//! - same start, same end: the craft is already outside the departure body's gravity well with a given excess,
//!   burns at the parking altitude on that hyperbola, and ends matched with the target, as a sail does;
//! - from parking: from a circular parking orbit, and into a circular capture orbit if one is asked for.

use crate::argument::{BadArgument, not_negative};
use crate::escape::{Burn, Excess};
use crate::hohmann::{Circles, Hohmann, hohmann};
use crate::planets::Planet;

/// One end of the transfer: a circle around the Sun and the body that moves on it, if any.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Body {
    /// Radius of the circle, au.
    pub circle_au: f64,
    /// The planet there; `None` for an orbit without a body.
    pub planet: Option<Planet>,
    /// Altitude of the circular orbit around the planet, km; `None`: not counted.
    pub altitude_km: Option<f64>,
}

impl Body {
    fn burn(&self) -> Result<Option<Burn>, BadArgument> {
        match (self.planet, self.altitude_km) {
            (Some(planet), Some(altitude_km)) => Burn::above(planet, altitude_km).map(Some),
            _ => Ok(None),
        }
    }
}

/// What is to be compared.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Question {
    /// Where the transfer starts; its altitude is that of the parking orbit.
    pub from: Body,
    /// Where it ends; its altitude is that of the capture orbit.
    pub to: Body,
    /// Hyperbolic excess speed that the launch has already given, km/s.
    pub excess_km_s: f64,
}

/// Sizes of the two impulses, km/s.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Impulses {
    /// First impulse, km/s.
    pub depart_km_s: f64,
    /// Second impulse, km/s.
    pub arrive_km_s: f64,
}

impl Impulses {
    /// Their sum, km/s.
    pub fn total_km_s(&self) -> f64 {
        self.depart_km_s + self.arrive_km_s
    }
}

/// The same transfer counted three ways.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ThreeWays {
    /// The heliocentric transfer itself: time, lead angle, synodic period and signed impulses.
    pub transfer: Hohmann,
    /// Both bodies massless, no excess given.
    pub heliocentric: Impulses,
    /// From the given excess outside the departure body's gravity, ending matched. Without a parking altitude or
    /// a planet the missing excess is added far from the planet, at full price.
    pub same_start_same_end: Impulses,
    /// From a circular parking orbit, into a circular capture orbit if both it and a planet are there, else
    /// matched. `None` without a planet or a parking altitude at the start.
    pub from_parking: Option<Impulses>,
}

/// Counts the Hohmann transfer between two circles in three ways.
///
/// # Units
/// Radii in au, altitudes in km, speeds in km/s.
///
/// # Errors
/// [`BadArgument`] names the radius, altitude or excess that is impossible.
///
/// # Example
/// ```
/// use orbits::impulsive::{Body, Question, three_ways};
/// use orbits::planets::Planet;
/// let end = |planet: Planet, altitude_km| Body {
///     circle_au: planet.circle_radius_au(),
///     planet: Some(planet),
///     altitude_km,
/// };
/// let found = three_ways(Question {
///     from: end(Planet::Earth, Some(300.0)),
///     to: end(Planet::Mars, None),
///     excess_km_s: 0.0,
/// })?;
/// // Deep in the Earth's gravity well 0.4 km/s buys the 2.9 km/s of excess that the transfer needs.
/// assert!((found.heliocentric.depart_km_s - 2.94).abs() < 0.01);
/// assert!((found.same_start_same_end.depart_km_s - 0.39).abs() < 0.01);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn three_ways(question: Question) -> Result<ThreeWays, BadArgument> {
    let Question { from, to, excess_km_s } = question;
    let transfer = hohmann(Circles::around_sun(from.circle_au, to.circle_au))?;
    let heliocentric =
        Impulses { depart_km_s: transfer.depart_km_s.abs(), arrive_km_s: transfer.arrive_km_s.abs() };

    let available_km_s = not_negative("excess_km_s", excess_km_s)?;
    let needed_km_s = heliocentric.depart_km_s;
    let parking = from.burn()?;
    let same_start_same_end = Impulses {
        depart_km_s: match parking {
            Some(burn) => burn.on_hyperbola_km_s(Excess { available_km_s, needed_km_s })?,
            None => (needed_km_s - available_km_s).max(0.0),
        },
        arrive_km_s: heliocentric.arrive_km_s,
    };

    let from_parking = match parking {
        None => None,
        Some(burn) => Some(Impulses {
            depart_km_s: burn.from_circle_km_s(needed_km_s)?,
            arrive_km_s: match to.burn()? {
                Some(capture) => capture.from_circle_km_s(heliocentric.arrive_km_s)?,
                None => heliocentric.arrive_km_s,
            },
        }),
    };
    Ok(ThreeWays { transfer, heliocentric, same_start_same_end, from_parking })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn end(planet: Planet, altitude_km: Option<f64>) -> Body {
        Body { circle_au: planet.circle_radius_au(), planet: Some(planet), altitude_km }
    }

    fn earth_to_mars(excess_km_s: f64) -> Question {
        Question { from: end(Planet::Earth, Some(300.0)), to: end(Planet::Mars, None), excess_km_s }
    }

    #[test]
    fn parking_and_hyperbola_differ_by_the_escape_from_parking() {
        let found = three_ways(earth_to_mars(0.0)).unwrap();
        let escape = Burn::above(Planet::Earth, 300.0).unwrap().from_circle_km_s(0.0).unwrap();
        let difference = found.from_parking.unwrap().depart_km_s - found.same_start_same_end.depart_km_s;
        assert!((difference - escape).abs() < 1e-13);
    }

    #[test]
    fn excess_already_given_is_not_paid_again() {
        let needed = three_ways(earth_to_mars(0.0)).unwrap().heliocentric.depart_km_s;
        let found = three_ways(earth_to_mars(needed)).unwrap();
        assert_eq!(found.same_start_same_end.depart_km_s, 0.0);
        assert_eq!(found.heliocentric.depart_km_s, needed);
    }

    #[test]
    fn capture_is_counted_only_when_asked() {
        let mut question = earth_to_mars(0.0);
        let matched = three_ways(question).unwrap();
        assert_eq!(matched.from_parking.unwrap().arrive_km_s, matched.heliocentric.arrive_km_s);
        question.to.altitude_km = Some(400.0);
        let captured = three_ways(question).unwrap();
        let burn = Burn::above(Planet::Mars, 400.0).unwrap();
        let expected = burn.from_circle_km_s(captured.heliocentric.arrive_km_s).unwrap();
        assert_eq!(captured.from_parking.unwrap().arrive_km_s, expected);
        assert_eq!(captured.same_start_same_end, matched.same_start_same_end);
    }

    #[test]
    fn orbit_without_a_body_has_no_parking_orbit() {
        let mut question = earth_to_mars(1.0);
        question.from.planet = None;
        let found = three_ways(question).unwrap();
        assert_eq!(found.from_parking, None);
        assert_eq!(found.same_start_same_end.depart_km_s, found.heliocentric.depart_km_s - 1.0);
    }

    #[test]
    fn impossible_input_is_named() {
        assert_eq!(three_ways(earth_to_mars(f64::NAN)).unwrap_err().name, "excess_km_s");
        let mut question = earth_to_mars(0.0);
        question.from.altitude_km = Some(-300.0);
        assert_eq!(three_ways(question).unwrap_err().name, "altitude_km");
    }
}
