//! The words after `sunreach`.

/// What `sunreach --help` prints.
pub(crate) const USAGE: &str = "\
sunreach: minimum-time solar sail transfers

  sunreach solve LINK [--columns] [--pretty] [-o FILE]   one flight: JSON, or words with --pretty
  sunreach study NAME LINK [--jobs N] [-o FILE]          many flights, JSON: dates, map
  sunreach figure NAME LINK [-o FILE]                    a picture as SVG: orbit, histories
  sunreach checks [--json]                               published values, computed now
  sunreach --version | --help

LINK is a scenario link or its part after '#', such as 'area_m2=9000&mass_kg=80&to=venus'; '' is the default flight.
Exit status: 0 converged or flown; 1 approximate, not converged, unreachable or a check failed (of a study: for
any row); 2 bad input; 3 input or output; 4 internal error.
Preliminary study only: not for flight operations, navigation or range safety.
";

/// What was asked for.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(crate) enum Command {
    Help,
    Version,
    Solve { link: String, columns: bool, pretty: bool, out: Option<String> },
    Study { name: String, link: String, jobs: Option<usize>, out: Option<String> },
    Figure { name: String, link: String, out: Option<String> },
    Checks { json: bool },
}

impl Command {
    /// Reads the arguments; the error says what to write instead.
    pub(crate) fn from_arguments(mut arguments: impl Iterator<Item = String>) -> Result<Command, String> {
        let Some(word) = arguments.next() else { return Ok(Command::Help) };
        let (mut words, mut options, mut out, mut jobs) = (Vec::new(), Vec::new(), None, None);
        while let Some(argument) = arguments.next() {
            if argument == "-o" {
                out = Some(arguments.next().ok_or("-o needs a file name after it")?);
            } else if argument == "--jobs" {
                jobs = Some(arguments.next().as_deref().and_then(jobs_of).ok_or(JOBS_RULE)?);
            } else if argument.starts_with("--") {
                options.push(argument);
            } else {
                words.push(argument);
            }
        }
        let mut option = |name: &str| {
            let place = options.iter().position(|o| o == name);
            place.map(|i| options.remove(i)).is_some()
        };
        let command = match word.as_str() {
            "--help" | "-h" | "help" => Command::Help,
            "--version" | "-V" => Command::Version,
            "solve" => {
                let (columns, pretty) = (option("--columns"), option("--pretty"));
                if columns && pretty {
                    return Err("--columns and --pretty exclude each other".into());
                }
                let [link] = exactly(words, "solve takes one scenario link, '' for the default flight")?;
                Command::Solve { link, columns, pretty, out: out.take() }
            }
            "study" => {
                let [name, link] = exactly(words, "study takes a name (dates, map) and a scenario link")?;
                Command::Study { name, link, jobs: jobs.take(), out: out.take() }
            }
            "figure" => {
                let [name, link] =
                    exactly(words, "figure takes a name (orbit, histories) and a scenario link")?;
                Command::Figure { name, link, out: out.take() }
            }
            "checks" => {
                let json = option("--json");
                let [] = exactly(words, "checks takes no scenario link")?;
                Command::Checks { json }
            }
            other => return Err(format!("unknown command {other:?}: see sunreach --help")),
        };
        if let Some(unknown) = options.first() {
            return Err(format!("unknown option {unknown:?} for {word}: see sunreach --help"));
        }
        if out.is_some() {
            return Err(format!("-o does not go with {word}"));
        }
        if jobs.is_some() {
            return Err(format!("--jobs does not go with {word}"));
        }
        Ok(command)
    }
}

const JOBS_RULE: &str = "--jobs needs a whole number after it, 1 to 256";

fn jobs_of(text: &str) -> Option<usize> {
    text.parse().ok().filter(|jobs| (1..=256).contains(jobs))
}

fn exactly<const N: usize>(words: Vec<String>, rule: &str) -> Result<[String; N], String> {
    words.try_into().map_err(|words: Vec<String>| format!("{rule}; got {}", words.len()))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(line: &[&str]) -> Result<Command, String> {
        Command::from_arguments(line.iter().map(|word| (*word).to_owned()))
    }

    #[test]
    fn options_may_stand_anywhere() {
        let expected =
            Command::Solve { link: "to=venus".into(), columns: true, pretty: false, out: Some("x".into()) };
        assert_eq!(read(&["solve", "--columns", "-o", "x", "to=venus"]), Ok(expected.clone()));
        assert_eq!(read(&["solve", "to=venus", "-o", "x", "--columns"]), Ok(expected));
    }

    #[test]
    fn what_is_wrong_is_named() {
        for (line, part) in [
            (vec!["fly"], "fly"),
            (vec!["solve"], "one scenario link"),
            (vec!["solve", "", "--fast"], "--fast"),
            (vec!["solve", "", "-o"], "-o"),
            (vec!["solve", "", "--columns", "--pretty"], "exclude"),
            (vec!["figure", "orbit"], "a name"),
            (vec!["checks", "-o", "x"], "-o"),
            (vec!["study", "dates"], "a name"),
            (vec!["study", "dates", "", "--jobs"], "whole number"),
            (vec!["study", "dates", "", "--jobs", "0"], "1 to 256"),
            (vec!["solve", "", "--jobs", "2"], "--jobs does not go"),
        ] {
            let message = read(&line).expect_err("wrong on purpose");
            assert!(message.contains(part), "{line:?}: {message}");
        }
    }
}
