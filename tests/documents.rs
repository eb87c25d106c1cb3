//! The documents keep their word: what they link to exists, and their tables are those in force.

use scenario::keys::{KEYS, KeyInfo};
use scenario::refused::refused;
use tests::repository::{files, root, text};

/// The documents for people.
const DOCUMENTS: &[&str] = &["README.md", "DEVELOPERS.md", "CHANGELOG.md", "tests/reference/README.md"];

/// What a build makes, so that documents may name it before it is there.
const BUILT: &[&str] = &["dist", "target"];

/// Targets of `[text](target)` in a document.
fn targets(text: &str) -> Vec<&str> {
    let after = |(start, _): (usize, &str)| {
        let rest = &text[start + 2..];
        rest.split_once(')').map(|(target, _)| target)
    };
    text.match_indices("](").filter_map(after).collect()
}

#[test]
fn links_between_documents_lead_somewhere() {
    let mut found = 0;
    for document in DOCUMENTS {
        let content = text(document);
        for target in targets(&content) {
            let path = target.split('#').next().unwrap_or_default();
            let built = BUILT.iter().any(|folder| path.starts_with(folder));
            if path.is_empty() || built || path.starts_with("https://") {
                continue;
            }
            let folder = root().join(document).parent().map(ToOwned::to_owned).unwrap_or_default();
            assert!(folder.join(path).exists(), "{document} links to {target}, which is not there");
            found += 1;
        }
    }
    assert!(found >= 6, "only {found} links were found");
}

#[test]
fn files_that_documents_name_exist() {
    let tops = ["crates/", "tests/", "web/", "docs/", ".ci/"];
    let all = files();
    let mut found = 0;
    for document in DOCUMENTS {
        let content = text(document);
        let quoted = content.split('`').skip(1).step_by(2);
        let paths = quoted.filter(|path| tops.iter().any(|top| path.starts_with(top)));
        for path in paths.filter(|path| !path.contains([' ', '*', '<'])) {
            let folder = format!("{}/", path.trim_end_matches('/'));
            let exists = all.iter().any(|file| file == path || file.starts_with(&folder));
            assert!(exists, "{document} names {path}, which is not there");
            found += 1;
        }
    }
    assert!(found >= 10, "only {found} names were found");
}

/// The README's table of keys as it must stand there.
fn key_table() -> String {
    let mut table = String::from("| key | meaning | range | unit | default |\n|---|---|---|---|---|\n");
    for info in KEYS {
        let KeyInfo { key, help, range, unit, default, .. } = info;
        table += &format!("| `{key}` | {help} | {range} | {unit} | {default} |\n");
    }
    table
}

#[test]
fn the_table_of_keys_is_the_one_in_force() {
    let table = key_table();
    assert!(text("README.md").contains(&table), "README.md must hold this table:\n\n{table}");
}

#[test]
fn what_the_readme_calls_refused_is_refused() {
    let readme = text("README.md");
    let line =
        readme.lines().find(|line| line.starts_with("Read, but refused")).expect("a list of what is refused");
    for (words, link) in [
        ("films other than `ideal`", "film=aluminised"),
        ("`cone_max_deg` below 90", "cone_max_deg=60"),
        ("`temp_max_k`", "temp_max_k=500"),
        ("`ageing`", "ageing=0.1,1"),
        ("`control` below 1", "control=0.5"),
        ("`arrive=flyby`", "arrive=flyby"),
        ("`segments`", "segments=10"),
    ] {
        let reasons = refused(&scenario::link::decode(link).expect("it decodes"));
        assert!(!reasons.is_empty(), "{link} is solved now: take it off the README's list");
        assert!(line.contains(words), "{link} is refused: put {words} on the README's list");
    }
}

#[test]
fn the_readmes_picture_shows_what_the_program_draws() {
    // Labels and description, not coordinates: those may differ in a last place between machines.
    let answer = tests::flown("");
    let options = figures::FigureOptions::default();
    let figure = figures::layout("orbit", &answer.report, &answer.columns, &options).expect("it is drawn");
    let (drawn, kept) = (figures::svg(&figure), text("docs/orbit.svg"));
    assert_eq!(
        labels(&kept),
        labels(&drawn),
        "draw it again: target/quick/sunreach figure orbit '' -o docs/orbit.svg"
    );
}

/// Every text of an SVG document, in order.
fn labels(svg: &str) -> Vec<&str> {
    let inside = svg.split('>').filter_map(|part| part.split_once('<').map(|(text, _)| text.trim()));
    inside.filter(|text| !text.is_empty()).collect()
}
