//! Studies: questions that take many flights, split into items that anyone may evaluate in any order.
//!
//! [`Study::open`] reads the question from a scenario's study keys; [`Study::items`] are evaluated one by one with
//! [`Study::evaluate`]; what comes out goes to [`Study::mends`], whose items are evaluated too, and all of it to
//! [`Study::report`]. The result does not depend on who evaluated which item, or when.

mod points;
mod report;
mod told;

#[cfg(test)]
mod tests;

use ::study::departures::{self, Plan};
use orbits::epochs;
use orbits::units;

pub use points::{Item, Point, Seed};
pub use report::{Axis, AxisValue, Kind, LawMark, Pick, Slip, StudyReport, StudyRow};

use crate::craft::craft;
use crate::date::Date;
use crate::link::{LinkError, encode, entry};
use crate::place::traveller;
use crate::refused::refused;
use crate::schema::{Arrive, CraftInput, Geometry, Scenario, StudyKeys, Word};

/// Which study.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Name {
    /// Flight time and arrival against departure date.
    Dates,
    /// The same for several accelerations or sail areas.
    Map,
}

impl Word for Name {
    const WORDS: &'static [(Self, &'static str)] = &[(Name::Dates, "dates"), (Name::Map, "map")];
}

/// A study ready to be evaluated.
#[derive(Clone, Debug)]
pub struct Study {
    name: Name,
    scenario: Scenario,
    dates: Vec<Date>,
    /// The craft of every sail of the plan.
    crafts: Vec<CraftInput>,
    plan: Plan,
}

/// Most departure dates of a study, and most flights.
const MOST_DATES: usize = 5_000;
const MOST_FLIGHTS: usize = 50_000;

impl Study {
    /// Reads the question from `scenario` and its study keys; `depart` is ignored.
    ///
    /// # Errors
    /// Why this scenario, or this name, is not studied.
    ///
    /// # Example
    /// ```
    /// use scenario::{link::decode, study::Study};
    /// let link = "geometry=spatial&arrive=rendezvous&span=2031-01-01,2031-03-02&step_d=20";
    /// let study = Study::open("dates", &decode(link)?)?;
    /// let points: Vec<_> = study.items().iter().flat_map(|item| study.evaluate(item)).collect();
    /// assert_eq!(study.report(&points).rows.len(), 4);
    /// # Ok::<(), Vec<scenario::link::LinkError>>(())
    /// ```
    pub fn open(name: &str, scenario: &Scenario) -> Result<Study, Vec<LinkError>> {
        let Some(name) = Name::from_word(name) else {
            return Err(vec![LinkError::new("study", name, "must be dates or map")]);
        };
        let keys = &scenario.study;
        let dates = dates(keys);
        let crafts = match name {
            Name::Dates => vec![scenario.craft],
            Name::Map => map_crafts(scenario)?,
        };
        let mut errors = unsuited(scenario);
        let too_many = |key, count: usize, most: usize| {
            let rule =
                format!("makes {count} flights where {most} are the most: widen step_d or shorten span");
            LinkError::new(key, &entry(scenario, key), rule)
        };
        if dates.len() > MOST_DATES {
            errors.push(too_many("span", dates.len(), MOST_DATES));
        } else if dates.len() * crafts.len() > MOST_FLIGHTS {
            errors.push(too_many("span", dates.len() * crafts.len(), MOST_FLIGHTS));
        }
        let mut study = Study {
            name,
            scenario: scenario.clone(),
            dates,
            crafts,
            plan: Plan {
                from: traveller(&scenario.from),
                to: traveller(&scenario.to),
                departures_j2000_d: Vec::new(),
                sails: Vec::new(),
            },
        };
        if errors.is_empty() {
            // What a single flight refuses is refused for the first and the last date and craft.
            let (last_date, last_craft) = (study.dates.len().max(1) - 1, study.crafts.len() - 1);
            errors.extend(refused(&study.flight(0, 0)));
            errors.extend(refused(&study.flight(last_date, last_craft)));
        }
        // One reason a key is enough.
        let mut reasons: Vec<LinkError> = Vec::new();
        for error in errors {
            if reasons.iter().all(|known| known.key != error.key) {
                reasons.push(error);
            }
        }
        if !reasons.is_empty() {
            return Err(reasons);
        }
        study.plan.departures_j2000_d = study.dates.iter().filter_map(|date| date.j2000_d()).collect();
        let lightness = |sail| craft(&study.flight(0, sail)).lightness;
        study.plan.sails = (0..study.crafts.len()).map(lightness).collect();
        Ok(study)
    }

    /// The study's own link: the scenario with its study keys.
    pub fn link(&self) -> String {
        encode(&self.scenario)
    }

    /// Departure dates, in order.
    pub fn dates(&self) -> &[Date] {
        &self.dates
    }

    /// The items of the first evaluation.
    pub fn items(&self) -> Vec<Item> {
        self.plan.items().into_iter().map(Item::from).collect()
    }

    /// Evaluates one item: a point for each of its dates.
    pub fn evaluate(&self, item: &Item) -> Vec<Point> {
        let points = departures::evaluate(&self.plan, &item.clone().into());
        points.iter().map(Point::from).collect()
    }

    /// Items to evaluate again, where the arrivals of the first evaluation break their law or no flight was found;
    /// their points join the others.
    pub fn mends(&self, points: &[Point]) -> Vec<Item> {
        let rows = self.rows(points);
        departures::mends(&self.plan, &rows).into_iter().map(Item::from).collect()
    }

    /// What an item is about, for people.
    pub fn label(&self, item: &Item) -> String {
        let (first, last) = (self.dates[item.first], self.dates[item.end - 1]);
        let ac = units::mm_per_s2(self.plan.sails[item.sail]);
        format!("{first} to {last} at {} mm/s²", crate::words::short(ac))
    }

    fn rows(&self, points: &[Point]) -> Vec<departures::Row> {
        departures::gathered(&points.iter().map(departures::Row::from).collect::<Vec<_>>())
    }

    /// The scenario of one flight, without study keys: what a row's link opens.
    fn flight(&self, date: usize, sail: usize) -> Scenario {
        Scenario {
            depart: self.dates.get(date).copied(),
            craft: self.crafts[sail],
            study: StudyKeys::default(),
            ..self.scenario.clone()
        }
    }
}

/// The dates of the span.
fn dates(keys: &StudyKeys) -> Vec<Date> {
    let [first, last] = keys.span.map(|date| date.j2000_d().unwrap_or(f64::NAN));
    let steps = ((last - first) / f64::from(keys.step_d)).floor().max(0.0) as usize;
    let day = |k: usize| {
        let day = epochs::iso_day(first + (k * keys.step_d as usize) as f64)?;
        Date::parse(&day).ok()
    };
    (0..=steps).filter_map(day).collect()
}

/// The crafts of a map.
fn map_crafts(scenario: &Scenario) -> Result<Vec<CraftInput>, Vec<LinkError>> {
    let Some(areas) = &scenario.study.area_range else {
        let accelerations = scenario.study.ac_range.values();
        return Ok(accelerations.into_iter().map(|ac_mm_s2| CraftInput::Acceleration { ac_mm_s2 }).collect());
    };
    let CraftInput::AreaMass { mass_kg, .. } = scenario.craft else {
        let rule = "needs a mass: give area_m2 and mass_kg instead of ac_mm_s2, or leave it out";
        return Err(vec![LinkError::new("area_range", &entry(scenario, "area_range"), rule)]);
    };
    Ok(areas.values().into_iter().map(|area_m2| CraftInput::AreaMass { area_m2, mass_kg }).collect())
}

/// Why departure dates are not studied for this scenario.
fn unsuited(scenario: &Scenario) -> Vec<LinkError> {
    let mut errors = Vec::new();
    let mut refuse = |applies: bool, key: &str, rule: &str| {
        if applies {
            errors.push(LinkError::new(key, &entry(scenario, key), rule));
        }
    };
    refuse(
        scenario.geometry != Geometry::Spatial,
        "geometry",
        "has no dates: departure dates are studied with geometry=spatial",
    );
    refuse(
        scenario.arrive != Arrive::Rendezvous,
        "arrive",
        "is not studied over departure dates by this version: use arrive=rendezvous",
    );
    refuse(
        scenario.vinf_km_s > 0.0,
        "vinf_km_s",
        "is not studied over departure dates by this version: leave it out (0)",
    );
    refuse(
        scenario.vinf_arrive_km_s > 0.0,
        "vinf_arrive_km_s",
        "is not studied over departure dates by this version: leave it out (0)",
    );
    errors
}
