//! The rules of the house that a compiler does not hold: who may use whom, and what must be absent where.

use std::collections::BTreeSet;
use std::process::Command;

use serde_json::Value;
use tests::repository::{files, is_word, root, rust_code, text};

/// What each crate may use: our own crates, then other people's. A new arrow is a line here, with its reason.
const ARROWS: &[(&str, &[&str], &[&str])] = &[
    ("numerics", &[], &["nalgebra"]),
    // jiff: civil dates for epochs, without zones or clock.
    ("orbits", &[], &["nalgebra", "jiff"]),
    ("sail", &["numerics", "orbits"], &["nalgebra"]),
    ("optimal", &["numerics", "orbits", "sail"], &["nalgebra"]),
    ("study", &["numerics", "orbits", "sail", "optimal"], &[]),
    // The first crate to the right that turns values into text: serde starts here.
    ("scenario", &["numerics", "orbits", "sail", "optimal", "study"], &["serde", "form_urlencoded"]),
    ("figures", &["orbits", "scenario"], &["serde", "plotters"]),
    (
        "wasm",
        &["scenario", "figures"],
        &[
            "serde",
            "serde-wasm-bindgen",
            "wasm-bindgen",
            "web-sys",
            "js-sys",
            "console_error_panic_hook",
            "plotters",
            "plotters-canvas",
        ],
    ),
    ("cli", &["scenario", "figures"], &["serde", "serde_json"]),
    ("tests", &["numerics", "orbits", "sail", "scenario", "figures"], &["serde_json"]),
];

/// What tests and benchmarks of any crate may use besides.
const FOR_TESTS: &[&str] = &["proptest", "criterion", "serde_json", "roxmltree"];

/// Longest file of code, lines. Tables are as long as they are.
const LONGEST: usize = 500;
const TABLES: &[&str] = &["crates/optimal/src/coplanar/guess_table.rs", "crates/numerics/src/ode/tableau.rs"];

/// Words that must not stand in the code (comments and strings apart) of these folders: path prefix, words, except
/// in paths with this prefix.
const ABSENT: &[(&str, &[&str], &str)] = &[
    ("crates/study/", &["std::time", "std::thread", "Instant", "SystemTime", "thread_rng"], ""),
    ("crates/", &["std::fs", "std::io", "std::net", "std::env", "std::process"], "crates/cli/"),
    ("crates/", &["std::time", "std::thread", "Instant", "SystemTime"], "crates/cli/"),
    ("crates/numerics/", &["serde", "planet", "sail"], ""),
    ("crates/orbits/", &["serde", "sail", "steering"], ""),
    ("crates/sail/", &["serde"], ""),
    ("crates/optimal/", &["serde"], ""),
    ("crates/study/", &["serde"], ""),
    ("crates/scenario/", &["wasm_bindgen", "js_sys", "web_sys"], ""),
    ("", &["unsafe", "todo!", "unimplemented!", "dbg!"], ""),
];

fn packages() -> Vec<Value> {
    let output = Command::new(env!("CARGO"))
        .args(["metadata", "--no-deps", "--offline", "--format-version", "1"])
        .current_dir(root())
        .output()
        .expect("cargo describes the workspace");
    assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stderr));
    let metadata: Value = serde_json::from_slice(&output.stdout).expect("JSON");
    metadata["packages"].as_array().expect("a list of packages").clone()
}

#[test]
fn crates_depend_downwards_only() {
    let packages = packages();
    let found: BTreeSet<&str> = packages.iter().filter_map(|package| package["name"].as_str()).collect();
    let known: BTreeSet<&str> = ARROWS.iter().map(|(name, ..)| *name).collect();
    assert_eq!(found, known, "every crate has its line in the table of arrows");
    for package in &packages {
        let name = package["name"].as_str().unwrap_or_default();
        let Some((_, ours, others)) = ARROWS.iter().find(|(known, ..)| *known == name) else { continue };
        for dependency in package["dependencies"].as_array().into_iter().flatten() {
            let used = dependency["name"].as_str().unwrap_or_default();
            let own = dependency["path"].is_string();
            let for_tests = dependency["kind"] == "dev" && FOR_TESTS.contains(&used);
            let allowed = if own { ours.contains(&used) } else { others.contains(&used) || for_tests };
            assert!(allowed, "{name} -> {used} is a new arrow: enter it in tests/tidy.rs and say why");
        }
    }
}

#[test]
fn every_arrow_points_to_the_left() {
    let place = |name: &str| ARROWS.iter().position(|(known, ..)| *known == name);
    for (i, (name, ours, _)) in ARROWS.iter().enumerate() {
        for used in *ours {
            assert!(place(used).is_some_and(|j| j < i), "{name} -> {used} points to the right");
        }
    }
}

#[test]
fn every_crate_has_the_one_lint_table() {
    let top = text("Cargo.toml");
    for lint in ["unsafe_code = \"forbid\"", "missing_docs = \"warn\"", "todo = \"warn\""] {
        assert!(top.contains(lint), "the lint table lost {lint}");
    }
    let manifests = files().into_iter().filter(|path| path.ends_with("Cargo.toml") && path != "Cargo.toml");
    for path in manifests.filter(|path| path != "web/bindings/Cargo.toml") {
        assert!(
            text(&path).contains("[lints]\nworkspace = true"),
            "{path} does not take the workspace's lints"
        );
    }
}

#[test]
fn what_must_be_absent_is_absent() {
    for path in rust_files() {
        // Tests and benchmarks may look at files and clocks; libraries may not.
        let library = path.contains("/src/") && !path.ends_with("_tests.rs");
        let code = rust_code(&text(&path));
        for (prefix, words, except) in ABSENT {
            let applies = path.starts_with(prefix) && (except.is_empty() || !path.starts_with(except));
            if !applies || !(library || prefix.is_empty()) {
                continue;
            }
            for word in *words {
                assert!(!holds(&code, word), "{path} holds {word}, which must be absent there");
            }
        }
    }
}

#[test]
fn identifiers_are_ascii() {
    for path in rust_files() {
        let code = rust_code(&text(&path));
        for (i, line) in code.lines().enumerate() {
            assert!(line.is_ascii(), "{path}:{}: {line}", i + 1);
        }
    }
}

#[test]
fn every_file_of_code_says_its_purpose_first() {
    for path in files() {
        let opening = match path.rsplit_once('.').map(|(_, end)| end) {
            Some("rs") => "//! ",
            Some("ts" | "mjs") => "//",
            Some("css") => "/*",
            Some("py") => "\"\"\"",
            _ => continue,
        };
        assert!(text(&path).starts_with(opening), "{path} does not begin with {opening:?}");
    }
}

#[test]
fn files_stay_short() {
    for path in files() {
        let is_code = ["rs", "ts", "mjs", "css", "py"].iter().any(|end| path.ends_with(&format!(".{end}")));
        if is_code && !TABLES.contains(&path.as_str()) {
            let lines = text(&path).lines().count();
            assert!(lines <= LONGEST, "{path} has {lines} lines: one idea per file");
        }
    }
    for table in TABLES {
        assert!(files().iter().any(|path| path == table), "{table} is gone: take it off the list");
    }
}

#[test]
fn no_file_names_a_machine_or_a_registry() {
    // Split, so that this file does not hold them.
    let machines =
        [["/wo", "rk/"], ["/ro", "ot/"], ["/tm", "p/"], ["local", "host:"]].map(|halves| halves.concat());
    let registries = [["crates", ".io"], ["npm", "js.org"], ["py", "pi.org"], ["python", "hosted.org"]];
    let registries = registries.map(|halves| halves.concat());
    for path in files() {
        let Ok(text) = std::fs::read_to_string(root().join(&path)) else { continue };
        // Cargo writes where each package comes from; it cannot be told not to.
        let lock = path.ends_with("Cargo.lock");
        for word in machines.iter().chain(registries.iter().filter(|_| !lock)) {
            assert!(!text.contains(word.as_str()), "{path} holds {word}");
        }
    }
}

#[test]
fn nothing_is_left_to_do() {
    let marks = [["TO", "DO"], ["FIX", "ME"], ["XX", "X"], ["HA", "CK"]].map(|halves| halves.concat());
    for path in files() {
        let Ok(text) = std::fs::read_to_string(root().join(&path)) else { continue };
        for mark in &marks {
            assert!(!holds(&text, mark), "{path} holds {mark}: do it, or say it in words where it belongs");
        }
    }
}

fn rust_files() -> Vec<String> {
    files().into_iter().filter(|path| path.ends_with(".rs")).collect()
}

/// Whether `word` stands in `text` as a word of its own.
fn holds(text: &str, word: &str) -> bool {
    text.match_indices(word).any(|(i, _)| {
        let before = text[..i].chars().next_back();
        let after = text[i + word.len()..].chars().next();
        !before.is_some_and(is_word) && !after.is_some_and(is_word)
    })
}
