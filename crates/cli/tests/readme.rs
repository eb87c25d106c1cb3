//! The README's commands, run: what it quotes is what they write.

use std::process::Command;

/// One command of a `console` block, and the lines quoted after it.
struct Quoted {
    command: String,
    output: String,
}

fn quoted() -> Vec<Quoted> {
    let readme = include_str!("../../../README.md");
    let blocks = readme.split("```console\n").skip(1).filter_map(|rest| rest.split_once("```"));
    let mut found: Vec<Quoted> = Vec::new();
    for (block, _) in blocks {
        for line in block.lines() {
            if let Some(command) = line.strip_prefix("$ ") {
                found.push(Quoted { command: command.to_owned(), output: String::new() });
            } else if let Some(last) = found.last_mut() {
                last.output += line;
                last.output.push('\n');
            }
        }
    }
    found
}

/// The words of a command line: parted by spaces, kept together by single quotes.
fn words(command: &str) -> Vec<String> {
    let mut parts = command.split('\'');
    let mut words = Vec::new();
    while let Some(plain) = parts.next() {
        words.extend(plain.split_whitespace().map(str::to_owned));
        words.extend(parts.next().map(str::to_owned));
    }
    words
}

#[test]
fn quoted_commands_write_what_is_quoted() {
    let quoted = quoted();
    assert!(quoted.len() >= 3, "only {} commands are quoted", quoted.len());
    for Quoted { command, output: expected } in quoted {
        let words = words(&command);
        assert_eq!(words[0], "sunreach", "{command}");
        let run = Command::new(env!("CARGO_BIN_EXE_sunreach")).args(&words[1..]).output().expect("it starts");
        assert_eq!(run.status.code(), Some(0), "{command}");
        let written = String::from_utf8(run.stdout).expect("UTF-8");
        // Three dots stand for what is left out.
        let mut rest = written.as_str();
        for piece in expected.split("...").map(str::trim).filter(|piece| !piece.is_empty()) {
            let Some(at) = rest.find(piece) else {
                panic!("{command} does not write {piece:?} there:\n{rest}")
            };
            rest = &rest[at + piece.len()..];
        }
        assert!(!expected.trim().is_empty(), "{command}: nothing is quoted");
    }
}

#[test]
fn the_usage_in_the_readme_is_the_one_printed() {
    let help = Command::new(env!("CARGO_BIN_EXE_sunreach")).arg("--help").output().expect("it starts");
    let help = String::from_utf8(help.stdout).expect("UTF-8");
    let readme = include_str!("../../../README.md");
    let commands: Vec<&str> = help.lines().filter_map(|line| line.strip_prefix("  sunreach ")).collect();
    assert!(commands.len() >= 4);
    for command in commands.iter().filter(|command| !command.starts_with("--")) {
        assert!(
            readme.contains(&format!("sunreach {command}")),
            "README.md does not show: sunreach {command}"
        );
    }
}
