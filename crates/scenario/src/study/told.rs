//! From evaluated points to the study's report: dates, links, marks and picks.

use ::study::departures::{self, Law};
use orbits::epochs;
use orbits::units;

use super::points::Point;
use super::report::{Axis, AxisValue, Kind, LawMark, Pick, Slip, StudyReport, StudyRow};
use super::{Name, Study};
use crate::craft::craft;
use crate::link::encode;
use crate::report::Status;
use crate::run::program;
use crate::schema::Word;

impl Study {
    /// The report of the points that are there: a study that still runs is one with fewer rows.
    pub fn report(&self, points: &[Point]) -> StudyReport {
        let rows = self.rows(points);
        let laws = rows.chunk_by(|a, b| a.sail == b.sail).flat_map(|rows| Law::of_sail(&self.plan, rows));
        let told: Vec<StudyRow> = rows.iter().zip(laws).map(|(row, law)| self.told(row, law)).collect();
        let best = departures::picks(&self.plan, &rows);
        StudyReport {
            study: self.name.word().to_owned(),
            link: self.link(),
            program: program(),
            axes: self.axes(),
            best: best.iter().map(|pick| self.pick(pick, &rows)).collect(),
            notes: self.notes(&rows, &told),
            rows: told,
        }
    }

    fn told(&self, row: &departures::Row, law: Law) -> StudyRow {
        let flight = self.flight(row.date, row.sail);
        let craft = craft(&flight);
        let point = Point::from(row);
        StudyRow {
            depart: self.dates[row.date].to_string(),
            ac_mm_s2: craft.ac_mm_s2,
            area_m2: craft.area_m2,
            status: point.status,
            time_d: point.time_d,
            arrive: self.arrival(row),
            revolutions: point.revolutions,
            branches: row.branches,
            law: match law {
                Law::Kept => LawMark::Kept,
                Law::Broken => LawMark::Broken,
                Law::NotTested => LawMark::NotTested,
            },
            link: encode(&flight),
        }
    }

    fn arrival(&self, row: &departures::Row) -> Option<String> {
        self.plan.arrival_j2000_d(row).and_then(epochs::iso_instant)
    }

    fn pick(&self, pick: &departures::Pick, rows: &[departures::Row]) -> Pick {
        let flight = self.flight(pick.date, pick.sail);
        let row = rows.iter().find(|row| (row.sail, row.date) == (pick.sail, pick.date));
        let slip = |slip: &departures::Slip| Slip {
            slip_d: slip.slip_d,
            arrive_later_d: slip.arrive_later_d,
            time_change_d: slip.time_change_d,
        };
        Pick {
            kind: match pick.kind {
                departures::Kind::Shortest => Kind::Shortest,
                departures::Kind::Earliest => Kind::Earliest,
            },
            depart: self.dates[pick.date].to_string(),
            ac_mm_s2: craft(&flight).ac_mm_s2,
            time_d: row.and_then(|row| Point::from(row).time_d),
            arrive: row.and_then(|row| self.arrival(row)),
            at_edge: pick.at_edge,
            leave_by: self.dates[pick.leave_by].to_string(),
            slips: pick.slips.iter().map(slip).collect(),
            link: encode(&flight),
        }
    }

    fn axes(&self) -> Vec<Axis> {
        let axis = |field: &str, label: &str, unit: &str, values| Axis {
            field: field.into(),
            label: label.into(),
            unit: unit.into(),
            values,
        };
        let dates = self.dates.iter().map(|date| AxisValue::Text(date.to_string())).collect();
        let mut axes = vec![axis("depart", "Departure date", "", dates)];
        if self.name == Name::Map {
            let crafts = (0..self.crafts.len()).map(|sail| craft(&self.flight(0, sail)));
            axes.push(match self.scenario.study.area_range {
                Some(_) => {
                    let areas = crafts.filter_map(|craft| craft.area_m2.map(AxisValue::Number)).collect();
                    axis("area_m2", "Sail area", "m²", areas)
                }
                None => {
                    let values = crafts.map(|craft| AxisValue::Number(craft.ac_mm_s2)).collect();
                    axis("ac_mm_s2", "Characteristic acceleration", "mm/s²", values)
                }
            });
        }
        axes
    }

    fn notes(&self, rows: &[departures::Row], told: &[StudyRow]) -> Vec<String> {
        let count = |of: &dyn Fn(&StudyRow) -> bool| told.iter().filter(|row| of(row)).count();
        let whole = self.dates.len() * self.crafts.len();
        let mut notes = vec![
            "Every row is the best of the extremals found for its date, re-flown; none is proven to be the best there is."
                .to_owned(),
        ];
        let broken = count(&|row| row.law == LawMark::Broken);
        if broken > 0 {
            notes.push(format!(
                "{broken} of {whole} flights arrive later than one that leaves later: a better flight exists for those \
                 dates than the one found."
            ));
        }
        let unproven = count(&|row| row.status != Status::Converged);
        if unproven > 0 {
            notes.push(format!("{unproven} of {whole} flights are not converged: see their status."));
        }
        if rows.len() < whole {
            notes.push(format!("Not finished: {} of {whole} flights.", rows.len()));
        }
        let fitted_until = epochs::start_of_day(2051, 1, 1).unwrap_or(f64::INFINITY);
        if rows.iter().filter_map(|row| self.plan.arrival_j2000_d(row)).any(|arrival| arrival >= fitted_until)
        {
            notes.push(
                "Some flights arrive after 2050, where the planets\u{2019} elements were not fitted."
                    .to_owned(),
            );
        }
        let synodic_d = self.synodic_d();
        let span_d = self.plan.departures_j2000_d.last().zip(self.plan.departures_j2000_d.first());
        if let Some((synodic_d, (last, first))) = synodic_d.zip(span_d)
            && last - first < synodic_d
        {
            notes.push(format!(
                "The span is shorter than the {} days after which departures repeat.",
                crate::words::grouped(synodic_d, 0)
            ));
        }
        notes
    }

    fn synodic_d(&self) -> Option<f64> {
        let first = *self.plan.departures_j2000_d.first()?;
        let period_d = |body: &orbits::ephemeris::Traveller| {
            units::days(std::f64::consts::TAU * body.elements(first).semi_major_axis.powf(1.5))
        };
        orbits::hohmann::synodic_d(period_d(&self.plan.from), period_d(&self.plan.to))
    }
}
