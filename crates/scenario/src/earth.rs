//! A dated flight as seen from the Earth: range, light time, the angle from the Sun, and how the bodies stand.

use orbits::argument::BadArgument;
use orbits::geometry::{FromEarth, from_earth, phase_angle_deg};

use crate::place::traveller;
use crate::report::{Columns, EarthView};
use crate::schema::Scenario;

/// Fills the two columns seen from the Earth from the columns' positions, and says what they come to; `None` for a
/// flight without a departure date, without samples, or at an impossible instant (the columns then stay as they are).
pub(crate) fn fill(scenario: &Scenario, columns: &mut Columns) -> Option<EarthView> {
    let depart_j2000_d = scenario.depart?.j2000_d()?;
    let seen = seen(columns, depart_j2000_d).ok()?;
    let last = seen.last()?;
    let farthest = seen.iter().max_by(|a, b| a.range_au.total_cmp(&b.range_au))?;
    let arrive_j2000_d = depart_j2000_d + columns.t_d.last()?;
    let (from, to) = (traveller(&scenario.from), traveller(&scenario.to));
    let view = EarthView {
        range_max_au: farthest.range_au,
        range_arrive_au: last.range_au,
        light_time_max_s: farthest.light_time_s(),
        sun_earth_craft_min_deg: seen.iter().filter_map(|s| s.sun_earth_craft_deg).min_by(f64::total_cmp),
        phase_depart_deg: phase_angle_deg(&to, &from, depart_j2000_d).ok()?,
        phase_arrive_deg: phase_angle_deg(&to, &from, arrive_j2000_d).ok()?,
    };
    columns.earth_range_au = seen.iter().map(|s| s.range_au).collect();
    columns.sun_earth_craft_deg = seen.iter().map(|s| s.sun_earth_craft_deg.unwrap_or(f64::NAN)).collect();
    Some(view)
}

/// The craft from the Earth at every sample.
fn seen(columns: &Columns, depart_j2000_d: f64) -> Result<Vec<FromEarth>, BadArgument> {
    let Columns { t_d, x_au, y_au, z_au, .. } = columns;
    (0..t_d.len()).map(|i| from_earth([x_au[i], y_au[i], z_au[i]], depart_j2000_d + t_d[i])).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::date::Date;
    use crate::schema::Place;
    use orbits::ephemeris::Traveller;
    use orbits::planets::Planet;

    /// Histories of something that moves with a planet.
    fn moving_with(planet: Planet, depart: Date, days: &[f64]) -> Columns {
        let start = depart.j2000_d().unwrap();
        let states: Vec<_> =
            days.iter().map(|d| Traveller::Planet(planet).state(start + d).unwrap()).collect();
        Columns {
            t_d: days.to_vec(),
            x_au: states.iter().map(|s| s.position.x).collect(),
            y_au: states.iter().map(|s| s.position.y).collect(),
            z_au: states.iter().map(|s| s.position.z).collect(),
            ..Columns::default()
        }
    }

    fn dated(depart: &str) -> Scenario {
        Scenario { depart: Some(Date::parse(depart).unwrap()), ..Scenario::default() }
    }

    #[test]
    fn mars_comes_closest_on_its_day_in_2003() {
        // From memory (high confidence): closest approach 2003-08-27 09:51 UT, 0.372719 au; elements err by 3.4e-4 au.
        let scenario = dated("2003-07-01");
        let days: Vec<f64> = (0..120).map(f64::from).collect();
        let mut columns = moving_with(Planet::Mars, scenario.depart.unwrap(), &days);
        let view = fill(&scenario, &mut columns).unwrap();
        let closest =
            (0..days.len()).min_by(|&a, &b| columns.earth_range_au[a].total_cmp(&columns.earth_range_au[b]));
        assert_eq!(days[closest.unwrap()], 57.0, "27 August is 57 days after 1 July");
        assert!((columns.earth_range_au[57] - 0.372_719).abs() < 3.4e-4);
        assert!(columns.sun_earth_craft_deg[57] > 170.0, "near opposition");
        let largest = columns.earth_range_au.iter().copied().fold(0.0, f64::max);
        assert_eq!(view.range_max_au, largest);
        assert!((view.light_time_max_s / largest - 499.004_8).abs() < 1e-3);
        // Mars falls behind the Earth through opposition.
        assert!(view.phase_depart_deg > 0.0 && view.phase_arrive_deg < 0.0, "{view:?}");
    }

    #[test]
    fn at_the_earth_there_is_a_range_but_no_direction() {
        let scenario = Scenario { to: Place::Planet(Planet::Earth), ..dated("2031-05-17") };
        let mut columns = moving_with(Planet::Earth, scenario.depart.unwrap(), &[0.0, 50.0]);
        let view = fill(&scenario, &mut columns).unwrap();
        assert_eq!(columns.earth_range_au, [0.0, 0.0]);
        assert!(columns.sun_earth_craft_deg.iter().all(|angle| angle.is_nan()));
        assert_eq!((view.sun_earth_craft_min_deg, view.phase_arrive_deg), (None, 0.0));
    }

    #[test]
    fn without_a_date_or_samples_nothing_is_filled() {
        let scenario = dated("2031-05-17");
        let mut columns = moving_with(Planet::Mars, scenario.depart.unwrap(), &[0.0, 1.0]);
        columns.earth_range_au = vec![f64::NAN; 2];
        assert_eq!(fill(&Scenario::default(), &mut columns), None);
        assert!(columns.earth_range_au.iter().all(|range| range.is_nan()));
        assert_eq!(fill(&scenario, &mut Columns::default()), None);
    }
}
