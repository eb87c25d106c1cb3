//! Links once published keep their meaning and their answer: a link in someone's report is a promise.

use scenario::examples::EXAMPLES;
use scenario::link::{decode, encode};
use scenario::run::run;
use tests::repository::text;

/// A line of `links.txt`.
struct Published {
    link: String,
    canonical: String,
    /// Flight time when published, d; `None` where the link is refused or gives no flight.
    time_d: Option<f64>,
}

fn published() -> Vec<Published> {
    let text = text("tests/links.txt");
    let lines = text.lines().filter(|line| !line.starts_with('#') && !line.trim().is_empty());
    let read = |line: &str| {
        let fields: Vec<&str> = line.split('\t').collect();
        let [link, canonical, time, note] = fields[..] else {
            panic!("four fields, not {}: {line}", fields.len())
        };
        assert!(!note.is_empty(), "{line}: say where it was published");
        let time_d = (time != "-").then(|| time.parse().unwrap_or_else(|_| panic!("{line}: no time")));
        Published { link: link.to_owned(), canonical: canonical.to_owned(), time_d }
    };
    lines.map(read).collect()
}

#[test]
fn every_published_link_still_means_what_it_meant() {
    let links = published();
    assert!(links.len() >= EXAMPLES.len());
    for Published { link, canonical, .. } in links {
        let scenario = decode(&link).unwrap_or_else(|errors| panic!("{link}: {errors:?}"));
        assert_eq!(encode(&scenario), canonical, "{link}");
        assert_eq!(decode(&canonical).as_ref(), Ok(&scenario), "{link}");
    }
}

#[test]
fn every_published_link_still_gives_its_flight_time() {
    for Published { link, time_d: recorded, .. } in published() {
        let Some(recorded) = recorded else { continue };
        let answer = decode(&link).and_then(|scenario| run(&scenario));
        let flight = answer.unwrap_or_else(|errors| panic!("{link}: {errors:?}")).report.flight;
        let time_d = flight.time_d.unwrap_or_else(|| panic!("{link}: {:?}", flight.status));
        // Solved to 1e-10; sines and cosines differ by a last place between machines.
        assert!(
            (time_d / recorded - 1.0).abs() < 1e-9,
            "{link}: {time_d} d now, {recorded} d when published"
        );
    }
}

#[test]
fn links_without_a_time_give_no_flight() {
    for Published { link, time_d, .. } in published().into_iter().filter(|row| row.time_d.is_none()) {
        let answer = decode(&link).and_then(|scenario| run(&scenario));
        let flies = answer.is_ok_and(|answer| answer.report.flight.time_d.is_some());
        assert!(!flies && time_d.is_none(), "{link} flies now: record its time");
    }
}

#[test]
fn every_example_is_listed() {
    let links = published();
    for example in EXAMPLES {
        assert!(
            links.iter().any(|row| row.canonical == example.link),
            "add {} to tests/links.txt",
            example.link
        );
    }
}

#[test]
fn every_link_of_the_readme_is_listed() {
    let readme = text("README.md");
    let links = published();
    let quoted: Vec<&str> =
        readme.split(['\'', '`']).filter(|part| part.contains('=') && decode(part).is_ok()).collect();
    assert!(quoted.len() >= 5, "only {quoted:?} were found");
    for part in quoted {
        let link = part.trim_start_matches('#');
        assert!(links.iter().any(|row| row.link == link), "add {link} to tests/links.txt");
    }
}
