//! Where bodies are at an instant: planets from mean elements with rates, other bodies on a fixed ellipse.

use crate::argument::BadArgument;
use crate::constants::JULIAN_CENTURY_D;
use crate::kepler::Elements;
use crate::planets::{MeanElements, Planet};
use crate::two_body::State;
use crate::units::canonical_time;

/// Something that moves around the Sun.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Traveller {
    /// A planet (`Earth`: the Earth-Moon barycentre), on elements that drift.
    Planet(Planet),
    /// A body without mass on one fixed ellipse.
    Ellipse {
        /// Elements at the epoch: au and rad, ecliptic of J2000.
        at_epoch: Elements,
        /// Epoch, days of TDB since J2000.
        epoch_j2000_d: f64,
    },
}

impl Traveller {
    /// Osculating elements at an instant: au and rad, ecliptic of J2000.
    ///
    /// # Units
    /// The instant in days of TDB since J2000. Planets' elements were fitted to 1800-2050; outside they are
    /// extrapolated.
    pub fn elements(&self, j2000_d: f64) -> Elements {
        match self {
            Traveller::Planet(planet) => planet_elements(*planet, j2000_d),
            Traveller::Ellipse { at_epoch, epoch_j2000_d } => {
                at_epoch.later(1.0, canonical_time(j2000_d - epoch_j2000_d))
            }
        }
    }

    /// Heliocentric state at an instant in canonical units (au, and 29.78 km/s), ecliptic of J2000.
    ///
    /// The velocity is that of a body without mass on the osculating ellipse, under the Sun's gravity alone. So a
    /// craft with this state stays on the same ellipse; the elements' drift and the planet's own mass, which the
    /// tabulated motion contains, are left out of it (at most 7 m/s, Jupiter).
    ///
    /// # Errors
    /// [`BadArgument`] when the instant or the elements are impossible.
    ///
    /// # Example
    /// ```
    /// use orbits::{ephemeris::Traveller, epochs, planets::Planet};
    /// // Early in January the Earth is closest to the Sun.
    /// let day = epochs::start_of_day(2031, 1, 4).expect("a day of the calendar");
    /// let earth = Traveller::Planet(Planet::Earth).state(day)?;
    /// assert!((earth.position.norm() - 0.9833).abs() < 1e-4);
    /// # Ok::<(), orbits::argument::BadArgument>(())
    /// ```
    pub fn state(&self, j2000_d: f64) -> Result<State, BadArgument> {
        self.elements(j2000_d).state(1.0)
    }
}

/// Osculating elements of a planet from its mean elements and rates.
fn planet_elements(planet: Planet, j2000_d: f64) -> Elements {
    let centuries = j2000_d / JULIAN_CENTURY_D;
    let (start, rate) = (planet.elements_at_j2000(), planet.element_rates());
    let at = |element: fn(&MeanElements) -> f64| element(&start) + centuries * element(&rate);
    let perihelion_deg = at(|m| m.perihelion_longitude_deg);
    let node_deg = at(|m| m.node_deg);
    Elements {
        semi_major_axis: at(|m| m.semi_major_axis_au),
        eccentricity: at(|m| m.eccentricity),
        inclination_rad: at(|m| m.inclination_deg).to_radians(),
        node_rad: node_deg.to_radians(),
        arg_peri_rad: (perihelion_deg - node_deg).to_radians(),
        mean_anomaly_rad: (at(|m| m.mean_longitude_deg) - perihelion_deg).to_radians(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::epochs::start_of_day;
    use crate::units::TIME_UNIT_D;

    fn planet(planet: Planet, j2000_d: f64) -> State {
        Traveller::Planet(planet).state(j2000_d).unwrap()
    }

    #[test]
    fn mars_came_close_in_2003() {
        // From memory (high confidence): closest approach 2003-08-27 09:51 UT, 0.372719 au. 1.5 times the elements'
        // stated errors in distance (25 000 and 6 000 km), which are typical and no bounds, and the Earth's 4 700 km
        // about the barycentre allow 3.4e-4 au.
        let instant = start_of_day(2003, 8, 27).unwrap() + (9.0 + 51.0 / 60.0) / 24.0;
        let distance = |d: f64| (planet(Planet::Mars, d).position - planet(Planet::Earth, d).position).norm();
        assert!((distance(instant) - 0.372_719).abs() < 3.4e-4, "{}", distance(instant));
        assert!(distance(instant) < distance(instant - 2.0) && distance(instant) < distance(instant + 2.0));
    }

    #[test]
    fn venus_crossed_the_sun_in_2004_and_2012() {
        // From memory (high confidence): geocentric conjunction in longitude 2004-06-08 08:43 and 2012-06-06 01:09,
        // when both heliocentric longitudes agree; 20 arcsec of error each allow 0.012 deg.
        for (year, month, day, hour) in [(2004, 6, 8, 8.72), (2012, 6, 6, 1.15)] {
            let instant = start_of_day(year, month, day).unwrap() + hour / 24.0;
            let longitude_deg = |p: Planet| {
                let r = planet(p, instant).position;
                r.y.atan2(r.x).to_degrees()
            };
            let difference = longitude_deg(Planet::Venus) - longitude_deg(Planet::Earth);
            assert!(difference.abs() < 0.012, "{year}: {difference}");
        }
    }

    #[test]
    fn velocity_is_how_the_position_moves() {
        // Central difference over 0.1 d against the two-body velocity: they differ by the drift of the elements and
        // by the planet's mass, 7 m/s at most (2.4e-4 canonical), as the documentation says. The difference itself
        // errs by (w h)^2 / 6 = 5e-6 of the speed where Mercury is fastest.
        for body in Planet::ALL {
            for year in [1800, 1900, 2000, 2050] {
                let day = start_of_day(year, 7, 1).unwrap();
                let moved = planet(body, day + 0.05).position - planet(body, day - 0.05).position;
                let by_difference = moved * (TIME_UNIT_D / 0.1);
                let difference = (by_difference - planet(body, day).velocity).norm();
                assert!(difference < 2.4e-4, "{} {year}: {difference}", body.name());
            }
        }
    }

    #[test]
    fn bodies_return_after_their_period() {
        let at_epoch = planet_elements(Planet::Mars, 0.0);
        let body = Traveller::Ellipse { at_epoch, epoch_j2000_d: 100.0 };
        let period_d = std::f64::consts::TAU / at_epoch.mean_motion(1.0) * TIME_UNIT_D;
        let (start, end) = (body.state(100.0).unwrap(), body.state(100.0 + period_d).unwrap());
        assert!((start.position - end.position).norm() < 1e-13);
        assert_eq!(start, at_epoch.state(1.0).unwrap());
    }

    #[test]
    fn instants_that_are_no_numbers_are_refused() {
        assert_eq!(Traveller::Planet(Planet::Earth).state(f64::NAN).unwrap_err().name, "semi_major_axis");
    }
}
