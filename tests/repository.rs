//! The repository as files: where it is, what belongs to it, and Rust text without its comments and strings.

use std::path::{Path, PathBuf};

/// The top folder of the repository.
pub fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().map(Path::to_path_buf).unwrap_or_default()
}

/// The text of a file, by its path from the top.
///
/// # Panics
/// When it cannot be read.
pub fn text(path: &str) -> String {
    std::fs::read_to_string(root().join(path)).unwrap_or_else(|error| panic!("{path}: {error}"))
}

/// Folders that builds and installations fill, and version control's own.
const NOT_OURS: &[&str] = &[".git", "target", "dist", "node_modules", ".venv", "pkg", "__pycache__"];

/// Every file that belongs to the repository, as paths from the top with `/`, sorted.
///
/// # Panics
/// When a folder cannot be read.
pub fn files() -> Vec<String> {
    let mut found = Vec::new();
    collect(&root(), "", &mut found);
    found.sort();
    found
}

fn collect(folder: &Path, prefix: &str, found: &mut Vec<String>) {
    let entries = std::fs::read_dir(folder).unwrap_or_else(|error| panic!("{}: {error}", folder.display()));
    for entry in entries.flatten() {
        let name = entry.file_name().to_string_lossy().into_owned();
        let path = format!("{prefix}{name}");
        if entry.path().is_dir() {
            if !NOT_OURS.contains(&name.as_str()) {
                collect(&entry.path(), &format!("{path}/"), found);
            }
        } else if !name.ends_with(".local") {
            found.push(path);
        }
    }
}

/// Rust text with comments, strings and character literals blanked out, line by line as it was.
pub fn rust_code(text: &str) -> String {
    let characters: Vec<char> = text.chars().collect();
    let at = |i: usize| characters.get(i).copied().unwrap_or('\n');
    let mut code = String::with_capacity(text.len());
    let mut i = 0;
    while i < characters.len() {
        let end = match (at(i), at(i + 1)) {
            ('/', '/') => line_end(&characters, i),
            ('/', '*') => block_end(&characters, i),
            ('"', _) => string_end(&characters, i),
            ('r', '"' | '#') if !code.ends_with(is_word) && raw_hashes(&characters, i).is_some() => {
                raw_end(&characters, i, raw_hashes(&characters, i).unwrap_or(0))
            }
            // A character literal, not a lifetime: 'x' or '\...'.
            ('\'', '\\') => (i + 3..characters.len()).find(|&j| at(j) == '\'').map_or(i + 1, |j| j + 1),
            ('\'', _) if at(i + 2) == '\'' => i + 3,
            _ => {
                code.push(at(i));
                i += 1;
                continue;
            }
        };
        code.extend(characters[i..end].iter().map(|&c| if c == '\n' { '\n' } else { ' ' }));
        i = end;
    }
    code
}

/// Whether a character may stand in an identifier.
pub fn is_word(c: char) -> bool {
    c.is_alphanumeric() || c == '_'
}

fn line_end(text: &[char], from: usize) -> usize {
    (from..text.len()).find(|&i| text[i] == '\n').unwrap_or(text.len())
}

fn block_end(text: &[char], from: usize) -> usize {
    let mut depth = 0;
    for i in from..text.len().saturating_sub(1) {
        match (text[i], text[i + 1]) {
            ('/', '*') => depth += 1,
            ('*', '/') => depth -= 1,
            _ => continue,
        }
        if depth == 0 {
            return i + 2;
        }
    }
    text.len()
}

fn string_end(text: &[char], from: usize) -> usize {
    let mut i = from + 1;
    while i < text.len() && text[i] != '"' {
        i += if text[i] == '\\' { 2 } else { 1 };
    }
    (i + 1).min(text.len())
}

/// Number of `#` of a raw string that starts at `from`; `None` when none starts there.
fn raw_hashes(text: &[char], from: usize) -> Option<usize> {
    let hashes = text[from + 1..].iter().take_while(|&&c| c == '#').count();
    (text.get(from + 1 + hashes) == Some(&'"')).then_some(hashes)
}

fn raw_end(text: &[char], from: usize, hashes: usize) -> usize {
    let closes = |i: usize| text[i] == '"' && text[i + 1..].iter().take(hashes).all(|&c| c == '#');
    let first = from + hashes + 2;
    (first..text.len().saturating_sub(hashes)).find(|&i| closes(i)).map_or(text.len(), |i| i + 1 + hashes)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn comments_and_strings_are_blanked_and_code_is_not() {
        let text = "let a = 'x'; // unsafe\nlet b: &'static str = \"todo!()\\\"\"; /* b /* c */ d */ f(r#\"std::fs\"#);";
        let code = rust_code(text);
        assert_eq!(
            code.split_whitespace().collect::<Vec<_>>().join(" "),
            "let a = ; let b: &'static str = ; f( );"
        );
        assert_eq!(code.lines().count(), 2);
        assert_eq!(rust_code("number(r, '\\'', r)"), "number(r,     , r)");
    }

    #[test]
    fn the_repository_holds_this_file_and_no_builds() {
        let files = files();
        assert!(files.iter().any(|path| path == "tests/repository.rs"));
        assert!(!files.iter().any(|path| path.starts_with("target/") || path.contains("node_modules")));
    }
}
