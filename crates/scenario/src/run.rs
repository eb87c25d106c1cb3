//! Running a scenario: everything from the question to the report.

use orbits::constants::{AU_KM, G0_M_S2, IRRADIANCE_W_M2, PRESSURE_N_M2, SUN_GM_KM3_S2};
use orbits::units::ACCELERATION_UNIT_MM_S2;

use crate::link::{LinkError, encode};
use crate::refused::refused;
use crate::report::{Columns, Constants, Ends, Program, Report};
use crate::schema::Scenario;
use crate::{baseline, cautions, craft, dated, flight, place, sentence};

/// A report and the histories behind it.
#[derive(Clone, Debug)]
pub struct Answer {
    /// The report.
    pub report: Report,
    /// Histories of the sail flight; empty when there is none to show.
    pub columns: Columns,
}

/// Answers one scenario.
///
/// # Errors
/// Every reason for which this combination is refused. A solve that did not converge is no error: the report's
/// status says so.
///
/// # Example
/// ```
/// use scenario::{report::Status, run::run, schema::Scenario};
/// let answer = run(&Scenario::default()).expect("the default flight is not refused");
/// assert_eq!(answer.report.flight.status, Status::Converged);
/// ```
pub fn run(scenario: &Scenario) -> Result<Answer, Vec<LinkError>> {
    let reasons = refused(scenario);
    if !reasons.is_empty() {
        return Err(reasons);
    }
    let craft = craft::craft(scenario);
    let mut impulsive = baseline::impulsive(scenario).map_err(|error| vec![error])?;
    let (flight, columns) = flight::flight(scenario, craft.lightness);
    let dated = dated::dated(scenario, flight.time_d).map_err(|error| vec![error])?;
    (impulsive.dated, impulsive.dated_same_dates) = (dated.least, dated.same_dates);
    let report = Report {
        program: program(),
        link: encode(scenario),
        sentence: sentence::sentence(scenario, &craft, &flight, &impulsive),
        ends: Ends { from: place::end(&scenario.from, scenario), to: place::end(&scenario.to, scenario) },
        cautions: cautions::cautions(scenario, &craft, &flight),
        craft,
        flight,
        impulsive,
    };
    Ok(Answer { report, columns })
}

/// Name, version and constants of this core.
pub fn program() -> Program {
    Program {
        name: "sunreach".into(),
        version: env!("CARGO_PKG_VERSION").into(),
        constants: Constants {
            sun_gm_km3_s2: SUN_GM_KM3_S2,
            au_km: AU_KM,
            irradiance_w_m2: IRRADIANCE_W_M2,
            pressure_n_m2: PRESSURE_N_M2,
            sun_gravity_mm_s2: ACCELERATION_UNIT_MM_S2,
            g0_m_s2: G0_M_S2,
        },
    }
}
