//! `sunreach`: the same scenarios as the page, without a page.
//!
//! Exit status: 0 converged or flown; 1 approximate, not converged, unreachable, or a check failed; 2 bad input,
//! refused combinations included; 3 input or output; 4 internal error. Messages go to standard error, a line each.

mod arguments;
mod jobs;
mod output;
mod pretty;

use std::process::ExitCode;

use scenario::checks::published_checks;
use scenario::link::{LinkError, decode};
use scenario::report::Status;
use scenario::run::{Answer, run};
use scenario::study::{LawMark, Study, StudyRow};

use arguments::{Command, USAGE};

const MISSED: u8 = 1;
const BAD_INPUT: u8 = 2;
const IO: u8 = 3;
const INTERNAL: u8 = 4;

fn main() -> ExitCode {
    std::panic::set_hook(Box::new(|panic| eprintln!("sunreach: internal error: {panic}")));
    match std::panic::catch_unwind(dispatch) {
        Ok(code) => ExitCode::from(code),
        Err(_) => ExitCode::from(INTERNAL),
    }
}

fn dispatch() -> u8 {
    let command = match Command::from_arguments(std::env::args().skip(1)) {
        Ok(command) => command,
        Err(message) => return refuse(&message),
    };
    match command {
        Command::Help => output::write(None, USAGE),
        Command::Version => output::write(None, concat!("sunreach ", env!("CARGO_PKG_VERSION"), "\n")),
        Command::Solve { link, columns, pretty, out } => match answer(&link) {
            Ok(answer) => {
                let text =
                    if pretty { Ok(pretty::page(&answer.report)) } else { output::json(&answer, columns) };
                worst(told(text, out.as_deref()), flight_code(answer.report.flight.status))
            }
            Err(code) => code,
        },
        Command::Study { name, link, jobs, out } => {
            let study = match decode(&link).and_then(|scenario| Study::open(&name, &scenario)) {
                Ok(study) => study,
                Err(errors) => return refuse_all(&errors),
            };
            let cores = || std::thread::available_parallelism().map_or(1, usize::from);
            let report = study.report(&jobs::evaluated(&study, jobs.unwrap_or_else(cores)));
            let code = report.rows.iter().map(row_code).max().unwrap_or(MISSED);
            worst(told(output::line(&report), out.as_deref()), code)
        }
        Command::Figure { name, link, out } => match answer(&link) {
            Ok(answer) => {
                let drawn = output::figure(&name, &answer);
                match drawn {
                    Ok(svg) => {
                        worst(output::write(out.as_deref(), &svg), flight_code(answer.report.flight.status))
                    }
                    Err(message) => refuse(&message),
                }
            }
            Err(code) => code,
        },
        Command::Checks { json } => {
            let rows = published_checks();
            let passed = rows.iter().all(|row| row.passed);
            let text = if json { output::rows(&rows) } else { Ok(pretty::checks(&rows)) };
            worst(told(text, None), if passed { 0 } else { MISSED })
        }
    }
}

fn answer(link: &str) -> Result<Answer, u8> {
    decode(link).and_then(|scenario| run(&scenario)).map_err(|errors| refuse_all(&errors))
}

fn refuse_all(errors: &[LinkError]) -> u8 {
    for error in errors {
        eprintln!("sunreach: {error}");
    }
    BAD_INPUT
}

/// A study's row that breaks the law of arrivals is no answer, however well its flight is proven.
fn row_code(row: &StudyRow) -> u8 {
    if row.law == LawMark::Broken { MISSED } else { flight_code(row.status) }
}

fn flight_code(status: Status) -> u8 {
    match status {
        Status::Converged | Status::Flown => 0,
        Status::Approximate | Status::NotConverged | Status::Unreachable => MISSED,
    }
}

/// Trouble with the output outweighs what the flight says.
fn worst(output: u8, flight: u8) -> u8 {
    if output == 0 { flight } else { output }
}

fn told(text: Result<String, String>, out: Option<&str>) -> u8 {
    match text {
        Ok(text) => output::write(out, &text),
        Err(message) => {
            eprintln!("sunreach: {message}");
            INTERNAL
        }
    }
}

fn refuse(message: &str) -> u8 {
    eprintln!("sunreach: {message}");
    BAD_INPUT
}
