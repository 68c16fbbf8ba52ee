//! Reading Rust text just well enough: code without comments and strings, and the paths that it names.

/// The code alone: comments and the insides of strings and character literals become blanks, lines stay lines.
pub fn code(text: &str) -> String {
    let bytes: Vec<char> = text.chars().collect();
    let mut out = String::with_capacity(text.len());
    let at = |index: usize| bytes.get(index).copied().unwrap_or('\0');
    let mut i = 0;
    while i < bytes.len() {
        let end = match at(i) {
            '/' if at(i + 1) == '/' => line_end(&bytes, i),
            '/' if at(i + 1) == '*' => block_end(&bytes, i),
            '"' => string_end(&bytes, i),
            'r' if !named(&bytes, i) && matches!(at(i + 1), '"' | '#') => raw_end(&bytes, i).unwrap_or(i),
            // A character literal, not a lifetime.
            '\'' if at(i + 1) == '\\' => (i + 3..bytes.len()).find(|j| at(*j) == '\'').map_or(bytes.len(), |j| j + 1),
            '\'' if at(i + 2) == '\'' => i + 3,
            _ => i,
        };
        if end == i {
            out.push(at(i));
            i += 1;
        } else {
            out.extend(bytes[i..end].iter().map(|c| if *c == '\n' { '\n' } else { ' ' }));
            i = end;
        }
    }
    out
}

/// Whether the character belongs to a name that began before it.
fn named(bytes: &[char], i: usize) -> bool {
    i > 0 && (bytes[i - 1].is_alphanumeric() || bytes[i - 1] == '_')
}

fn line_end(bytes: &[char], i: usize) -> usize {
    (i..bytes.len()).find(|j| bytes[*j] == '\n').unwrap_or(bytes.len())
}

fn block_end(bytes: &[char], i: usize) -> usize {
    let mut depth = 0;
    let mut j = i;
    while j + 1 < bytes.len() {
        match (bytes[j], bytes[j + 1]) {
            ('/', '*') => depth += 1,
            ('*', '/') => depth -= 1,
            _ => {
                j += 1;
                continue;
            }
        }
        j += 2;
        if depth == 0 {
            return j;
        }
    }
    bytes.len()
}

fn string_end(bytes: &[char], i: usize) -> usize {
    let mut j = i + 1;
    while j < bytes.len() {
        match bytes[j] {
            '\\' => j += 2,
            '"' => return j + 1,
            _ => j += 1,
        }
    }
    bytes.len()
}

fn raw_end(bytes: &[char], i: usize) -> Option<usize> {
    let hashes = bytes[i + 1..].iter().take_while(|c| **c == '#').count();
    let open = i + 1 + hashes;
    if bytes.get(open) != Some(&'"') {
        return None;
    }
    let closes =
        |j: &usize| bytes[*j] == '"' && bytes[j + 1..].iter().take(hashes).filter(|c| **c == '#').count() == hashes;
    Some((open + 1..bytes.len()).find(closes).map_or(bytes.len(), |j| j + 1 + hashes))
}

/// Every path that begins with `root::` in code, use trees written out: `crate::{a::B, c}` gives `a::B` and `c`.
pub fn paths(code: &str, root: &str) -> Vec<String> {
    let head = format!("{root}::");
    let mut found = Vec::new();
    for (at, _) in code.match_indices(&head) {
        let before = code[..at].chars().next_back().unwrap_or(' ');
        if before.is_alphanumeric() || before == '_' || before == ':' {
            continue;
        }
        tree(code[at + head.len()..].trim_start(), "", &mut found);
    }
    found
}

/// Reads one use tree and gives what is left of the text.
fn tree<'a>(text: &'a str, before: &str, found: &mut Vec<String>) -> &'a str {
    let mut rest = text;
    let mut path = before.to_owned();
    loop {
        if let Some(mut inner) = rest.strip_prefix('{') {
            loop {
                inner = inner.trim_start_matches(|c: char| c.is_whitespace() || c == ',');
                if inner.is_empty() {
                    return inner;
                }
                if let Some(after) = inner.strip_prefix('}') {
                    return after;
                }
                let left = tree(inner, &path, found);
                // Renames and anything unforeseen: on to the next branch.
                let skipped = left.trim_start_matches(|c| c != ',' && c != '}');
                inner = if skipped.len() < inner.len() { skipped } else { "" };
            }
        }
        let name: String = rest.chars().take_while(|c| c.is_alphanumeric() || matches!(c, '_' | '*')).collect();
        rest = &rest[name.len()..];
        path = if path.is_empty() { name } else { format!("{path}::{name}") };
        match rest.strip_prefix("::") {
            Some(more) => rest = more.trim_start(),
            None => {
                found.push(path);
                return rest;
            }
        }
    }
}

#[test]
fn code_is_read_without_comments_and_strings() {
    let text = "a(\"crate::x // \\\" y\"); // crate::z\n/* crate::p /* q */ */ b('\"', r#\"crate::w\"#, 'c: loop)";
    let read = code(text);
    assert!(!read.contains("crate") && read.contains("b(") && read.contains("'c: loop)") && read.lines().count() == 2);
}

#[test]
fn paths_are_written_out() {
    let read = |text: &str| paths(text, "crate");
    assert_eq!(read("use crate::{a::{B, C as D}, e, f::*};"), ["a::B", "a::C", "e", "f::*"]);
    assert_eq!(read("let x = crate::g::h(1) + mycrate::i;"), ["g::h"]);
    assert_eq!(read("use crate::{\n    a,\n    b::c,\n};\nfn f() {}"), ["a", "b::c"]);
    assert_eq!(paths("use std::{fs, io::{self, Write}};", "std"), ["fs", "io::self", "io::Write"]);
}
