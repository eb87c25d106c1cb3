//! Where text goes, and JSON.

use std::io::Write;

use scenario::checks::CheckRow;
use scenario::run::Answer;
use serde::Serialize;

#[derive(Serialize)]
struct WithColumns<'a> {
    #[serde(flatten)]
    report: &'a scenario::report::Report,
    #[serde(skip_serializing_if = "Option::is_none")]
    columns: Option<&'a scenario::report::Columns>,
}

/// The report as one line of JSON, with its histories if asked for.
pub(crate) fn json(answer: &Answer, columns: bool) -> Result<String, String> {
    line(&WithColumns { report: &answer.report, columns: columns.then_some(&answer.columns) })
}

/// The checks as one line of JSON.
pub(crate) fn rows(rows: &[CheckRow]) -> Result<String, String> {
    line(&rows)
}

/// A value as one line of JSON.
pub(crate) fn line(value: &impl Serialize) -> Result<String, String> {
    serde_json::to_string(value).map(|text| text + "\n").map_err(|error| format!("internal error: {error}"))
}

/// The picture `name` as SVG.
pub(crate) fn figure(name: &str, answer: &Answer) -> Result<String, String> {
    let options = figures::FigureOptions::default();
    figures::layout(name, &answer.report, &answer.columns, &options)
        .map(|figure| figures::svg(&figure))
        .map_err(|error| error.to_string())
}

/// Writes `text` to the file, or to standard output; returns the exit status.
///
/// A reader that goes away (a closed pipe) is an output error like any other, without a panic.
pub(crate) fn write(out: Option<&str>, text: &str) -> u8 {
    let written = match out {
        Some(path) => std::fs::write(path, text).map_err(|error| format!("cannot write {path}: {error}")),
        None => {
            let mut stdout = std::io::stdout().lock();
            stdout
                .write_all(text.as_bytes())
                .and_then(|()| stdout.flush())
                .map_err(|error| format!("cannot write to standard output: {error}"))
        }
    };
    match written {
        Ok(()) => 0,
        Err(message) => {
            // Standard error may be gone as well: nothing more can be done then.
            let _ = writeln!(std::io::stderr(), "sunreach: {message}");
            crate::IO
        }
    }
}
