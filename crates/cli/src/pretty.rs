//! A report and checks in lines for people.

use scenario::checks::CheckRow;
use scenario::report::{Flight, ImpulsiveWay, Margin, Report, Status};
use scenario::words::{days, grouped, short};

/// The whole report, a fact a line.
pub(crate) fn page(report: &Report) -> String {
    let mut lines = vec![report.sentence.clone(), String::new()];
    lines.push(format!("status      {}", report.flight.status.word()));
    lines.extend(report.flight.message.clone());
    lines.extend(sail(&report.flight));
    lines.push(String::new());
    lines.push("impulsive, same orbits".into());
    let ways = [("heliocentric", Some(&report.impulsive.heliocentric))];
    let ways = ways.into_iter().chain([
        ("same start", Some(&report.impulsive.same_start_same_end)),
        ("parking", report.impulsive.from_parking.as_ref()),
    ]);
    lines.extend(ways.filter_map(|(name, way)| way.map(|way| impulsive(name, way))));
    lines.extend(report.impulsive.from_parking_note.clone());
    lines.push(String::new());
    lines.extend(proof(&report.flight));
    lines.extend(report.cautions.iter().map(|caution| format!("caution     {caution}")));
    lines.push(
        "caution     Preliminary study only: not for flight operations, navigation or range safety.".into(),
    );
    lines.push(format!("link        #{}", report.link));
    lines.join("\n") + "\n"
}

fn sail(flight: &Flight) -> Vec<String> {
    let facts = [
        ("time", flight.time_d.map(|x| format!("{} d", days(x)))),
        ("estimate", flight.estimate.map(|x| format!("{} d, a look-up, not a result", days(x)))),
        ("revolutions", flight.revolutions.map(|x| grouped(x, 2))),
        ("sun", flight.sun_distance_min_au.zip(flight.sun_distance_max_au).map(range_au)),
        ("film", flight.film_temp_max_k.map(|x| format!("{} K at most", grouped(x, 0)))),
        ("turn rate", flight.turn_rate_max_deg_d.map(|x| format!("{} deg/d at most", short(x)))),
        ("sail dv", flight.sail_dv_km_s.map(|x| format!("{} km/s", grouped(x, 2)))),
        ("margin", flight.margin.as_ref().map(margin)),
    ];
    facts.into_iter().filter_map(|(name, fact)| fact.map(|fact| format!("{name:<12}{fact}"))).collect()
}

fn margin(margin: &Margin) -> String {
    let growth = margin.mass_growth_pct.map(|pct| format!(", {} % of mass growth", grouped(pct, 1)));
    format!("{} d in hand{}", grouped(margin.days_in_hand, 1), growth.unwrap_or_default())
}

fn range_au((nearest, farthest): (f64, f64)) -> String {
    format!("{} to {} au", short(nearest), short(farthest))
}

fn impulsive(name: &str, way: &ImpulsiveWay) -> String {
    format!(
        "  {name:<14}{} d, {} km/s, {} % propellant: {}",
        days(way.time_d),
        grouped(way.dv_total_km_s, 3),
        grouped(way.propellant_fraction * 100.0, 1),
        way.phases
    )
}

fn proof(flight: &Flight) -> Vec<String> {
    let proof = &flight.proof;
    let mut lines = vec![format!("method      {}", proof.method)];
    if let (Some(km), Some(m_s)) = (proof.position_error_km, proof.speed_error_m_s) {
        let how = if flight.status == Status::Flown { "as flown" } else { "re-flown" };
        lines.push(format!("{how:<12}misses by {km:.2e} km and {m_s:.2e} m/s"));
    }
    if let Some(drift) = proof.hamiltonian_drift {
        lines.push(format!(
            "Hamiltonian drifts by {drift:.1e}; best of {} extremal(s)",
            proof.extremals_found
        ));
    }
    lines
}

/// The checks as a table.
pub(crate) fn checks(rows: &[CheckRow]) -> String {
    let mut text = String::new();
    for row in rows {
        let verdict = if row.passed { "agrees " } else { "DIFFERS" };
        text += &format!(
            "{verdict}  {}: expected {} {}, found {} (within {}) [{}; {}]\n",
            row.name,
            row.expected,
            row.unit,
            significant(row.found),
            short(row.tolerance),
            row.mark,
            row.source
        );
    }
    let passed = rows.iter().filter(|row| row.passed).count();
    text + &format!("{passed} of {} checks agree\n", rows.len())
}

/// Seven significant digits.
fn significant(value: f64) -> String {
    let decimals = (6 - value.abs().max(1e-9).log10().floor() as i32).clamp(0, 12) as usize;
    format!("{value:.decimals$}")
}
