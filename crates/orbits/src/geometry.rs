//! What a flight looks like from the Earth: range, light time, the angle from the Sun, and angles between bodies.
//!
//! The Earth is the Earth-Moon barycentre throughout: the Earth itself stays within 4 900 km of it.

use nalgebra::Vector3;

use crate::argument::BadArgument;
use crate::constants::{AU_KM, AU_M, LIGHT_SPEED_M_S};
use crate::ephemeris::Traveller;
use crate::planets::Planet;

/// Closer to the Earth than this its direction is lost in the rounding of positions, au (150 m).
const TOGETHER_AU: f64 = 1e-9;

/// A craft as seen from the Earth-Moon barycentre.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct FromEarth {
    /// Distance, au.
    pub range_au: f64,
    /// Angle at the Earth between the Sun and the craft, deg in [0, 180]: near 0 the Sun drowns the radio link, near
    /// 180 the craft is opposite the Sun. `None` where the craft is at the Earth.
    pub sun_earth_craft_deg: Option<f64>,
}

impl FromEarth {
    /// Distance, km.
    pub fn range_km(&self) -> f64 {
        self.range_au * AU_KM
    }

    /// Time that light takes one way, s.
    pub fn light_time_s(&self) -> f64 {
        self.range_au * (AU_M / LIGHT_SPEED_M_S)
    }
}

/// A craft at a heliocentric position as seen from the Earth at the same instant (light time is not taken off).
///
/// # Units
/// Position in au, ecliptic of J2000; instant in days of TDB since J2000.
///
/// # Errors
/// [`BadArgument`] when the instant is not a number.
///
/// # Example
/// ```
/// use orbits::geometry::from_earth;
/// // From the Sun's centre light takes a little over eight minutes.
/// let sun = from_earth([0.0; 3], 0.0)?;
/// assert!((sun.light_time_s() / 60.0 - 8.17).abs() < 0.01);
/// # Ok::<(), orbits::argument::BadArgument>(())
/// ```
pub fn from_earth(craft_au: [f64; 3], j2000_d: f64) -> Result<FromEarth, BadArgument> {
    let earth = Traveller::Planet(Planet::Earth).state(j2000_d)?.position;
    let to_craft = Vector3::from(craft_au) - earth;
    let range_au = to_craft.norm();
    let apart = range_au > TOGETHER_AU;
    let sun_earth_craft_deg = apart.then(|| angle_deg(&-earth, &to_craft));
    Ok(FromEarth { range_au, sun_earth_craft_deg })
}

/// Angle between two directions, deg in [0, 180]; exact also near both ends.
fn angle_deg(a: &Vector3<f64>, b: &Vector3<f64>) -> f64 {
    a.cross(b).norm().atan2(a.dot(b)).to_degrees()
}

/// Heliocentric longitude of a place, deg in (-180, 180], ecliptic of J2000.
pub fn longitude_deg(position: &Vector3<f64>) -> f64 {
    position.y.atan2(position.x).to_degrees()
}

/// The same angle in (-180, 180], deg.
pub fn wrapped_deg(angle_deg: f64) -> f64 {
    let turned = angle_deg.rem_euclid(360.0);
    if turned > 180.0 { turned - 360.0 } else { turned }
}

/// Phase angle: heliocentric longitude of `ahead` less that of `behind` at one instant, deg in (-180, 180]; positive
/// where `ahead` is farther along in the direction in which the planets go.
///
/// # Errors
/// [`BadArgument`] when the instant or a body's elements are impossible.
pub fn phase_angle_deg(ahead: &Traveller, behind: &Traveller, j2000_d: f64) -> Result<f64, BadArgument> {
    let longitude = |body: &Traveller| body.state(j2000_d).map(|state| longitude_deg(&state.position));
    Ok(wrapped_deg(longitude(ahead)? - longitude(behind)?))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::epochs::start_of_day;
    use crate::hohmann::{Circles, hohmann};
    use proptest::prelude::*;

    fn planet(planet: Planet, j2000_d: f64) -> Vector3<f64> {
        Traveller::Planet(planet).state(j2000_d).unwrap().position
    }

    #[test]
    fn light_takes_499_seconds_over_one_au() {
        // From memory (high confidence): IAU 1976 light time for unit distance 499.004782 s.
        let one = FromEarth { range_au: 1.0, sun_earth_craft_deg: None };
        assert!((one.light_time_s() - 499.004_8).abs() < 1e-4);
        assert!((one.range_km() - 149_597_870.7).abs() < 1e-6);
    }

    #[test]
    fn mars_stood_opposite_the_sun_in_2003() {
        // From memory (high confidence): opposition 2003-08-28 17:59 UT, when geocentric longitudes differ by 180 deg;
        // Mars stood about 6.6 deg south of the ecliptic, which is what is left (0.1 deg for the digits quoted).
        let instant = start_of_day(2003, 8, 28).unwrap() + 18.0 / 24.0;
        let seen = from_earth(planet(Planet::Mars, instant).into(), instant).unwrap();
        assert!((seen.sun_earth_craft_deg.unwrap() - (180.0 - 6.6)).abs() < 0.2, "{seen:?}");
        let phase =
            phase_angle_deg(&Traveller::Planet(Planet::Mars), &Traveller::Planet(Planet::Earth), instant)
                .unwrap();
        // 40 and 20 arcsec of the elements, and half an hour.
        assert!(phase.abs() < 0.03, "{phase}");
    }

    #[test]
    fn venus_stood_farthest_from_the_sun_in_2004() {
        // From memory (high confidence): greatest elongations 2004-03-29, 46.0 deg east, and 2004-08-17, 45.8 deg west.
        for (year, month, day, expected) in [(2004, 3, 29, 46.0), (2004, 8, 17, 45.8)] {
            let instant = start_of_day(year, month, day).unwrap() + 0.5;
            let seen = from_earth(planet(Planet::Venus, instant).into(), instant).unwrap();
            assert!((seen.sun_earth_craft_deg.unwrap() - expected).abs() < 0.1, "{seen:?}");
        }
    }

    #[test]
    fn a_craft_at_the_earth_has_no_direction() {
        let here = from_earth(planet(Planet::Earth, 5_000.0).into(), 5_000.0).unwrap();
        assert_eq!(here, FromEarth { range_au: 0.0, sun_earth_craft_deg: None });
        assert!(from_earth([1.0, 0.0, 0.0], f64::NAN).is_err());
    }

    #[test]
    fn mars_leads_at_real_departures_by_about_hohmanns_angle() {
        // The real orbit of Mars is off a circle by up to 2 e = 0.19 rad, so within 11 deg and the spread of windows.
        let lead = hohmann(Circles::around_sun(1.0, 1.52371034)).unwrap().lead_angle_deg;
        // Published: launch of Mars Reconnaissance Orbiter 2005-08-12 (from memory, high confidence).
        let instant = start_of_day(2005, 8, 12).unwrap();
        let phase =
            phase_angle_deg(&Traveller::Planet(Planet::Mars), &Traveller::Planet(Planet::Earth), instant)
                .unwrap();
        assert!((phase - lead).abs() < 15.0, "{phase} against {lead}");
    }

    proptest! {
        #[test]
        fn triangle_of_sun_earth_and_craft_closes(
            x in -5.0f64..5.0, y in -5.0f64..5.0, z in -1.0f64..1.0, j2000_d in -20_000.0f64..18_000.0,
        ) {
            // Law of cosines: distance from the Sun from the other two sides and the angle at the Earth.
            let craft = Vector3::new(x, y, z);
            let seen = from_earth(craft.into(), j2000_d).unwrap();
            prop_assume!(seen.range_au > 1e-3);
            let side = planet(Planet::Earth, j2000_d).norm();
            let cos = seen.sun_earth_craft_deg.unwrap().to_radians().cos();
            let squared = side * side + seen.range_au.powi(2) - 2.0 * side * seen.range_au * cos;
            prop_assert!((squared - craft.norm_squared()).abs() < 1e-12 * (1.0 + craft.norm_squared()));
        }

        #[test]
        fn phase_angle_turns_its_sign_with_the_bodies(j2000_d in -20_000.0f64..18_000.0) {
            let (venus, earth) = (Traveller::Planet(Planet::Venus), Traveller::Planet(Planet::Earth));
            let there = phase_angle_deg(&venus, &earth, j2000_d).unwrap();
            prop_assert!((-180.0..=180.0).contains(&there));
            let back = phase_angle_deg(&earth, &venus, j2000_d).unwrap();
            prop_assert!(wrapped_deg(there + back).abs() < 1e-9);
        }
    }
}
