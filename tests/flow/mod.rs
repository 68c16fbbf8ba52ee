//! The order of the house: who may use whom, what the pure part must not touch, how long a file may be.

use std::path::{Path, PathBuf};

/// The modules in the order of the flow, as `src/lib.rs` has them.
fn order() -> Vec<String> {
    let lib = std::fs::read_to_string(root().join("src/lib.rs")).unwrap();
    lib.lines().filter_map(|line| line.strip_prefix("pub mod ")?.strip_suffix(';').map(str::to_owned)).collect()
}

fn root() -> &'static Path {
    Path::new(env!("CARGO_MANIFEST_DIR"))
}

fn files(folder: &Path, endings: &[&str]) -> Vec<PathBuf> {
    let mut found = Vec::new();
    let mut folders = vec![folder.to_owned()];
    while let Some(folder) = folders.pop() {
        for entry in std::fs::read_dir(folder).unwrap() {
            let path = entry.unwrap().path();
            if path.is_dir() {
                folders.push(path);
            } else if endings.iter().any(|ending| path.to_string_lossy().ends_with(ending)) {
                found.push(path);
            }
        }
    }
    found.sort();
    found
}

/// The module a file of `src` belongs to.
fn module(path: &Path) -> String {
    let inner = path.strip_prefix(root().join("src")).unwrap();
    let first = inner.components().next().unwrap().as_os_str().to_string_lossy().into_owned();
    first.trim_end_matches(".rs").to_owned()
}

/// The code of a file without comments and strings that only speak of it.
fn code(text: &str) -> String {
    text.lines().map(|line| line.split("//").next().unwrap_or_default()).collect::<Vec<_>>().join("\n")
}

/// The modules of the crate that a text uses: after every `crate::`, also within braces.
fn used(text: &str) -> Vec<String> {
    let text = code(text);
    let mut found = Vec::new();
    for (at, _) in text.match_indices("crate::") {
        let rest = &text[at + 7..];
        let names: Vec<&str> = if let Some(group) = rest.strip_prefix('{') {
            group[..group.find('}').unwrap_or(0)].split(',').collect()
        } else {
            vec![rest]
        };
        for name in names {
            let name: String = name.trim().chars().take_while(|c| c.is_ascii_alphanumeric() || *c == '_').collect();
            found.push(name);
        }
    }
    found
}

/// Uses of what stands to the right.
fn against_the_flow(order: &[String], module: &str, text: &str) -> Vec<String> {
    let place = |name: &str| order.iter().position(|known| known == name);
    let Some(own) = place(module) else { return Vec::new() };
    used(text).into_iter().filter(|name| place(name).is_some_and(|other| other > own)).collect()
}

/// Words of the world outside, which nothing left of the sheet may say.
fn impure(text: &str) -> Vec<&'static str> {
    let text = code(text);
    let words = [
        "std::fs",
        "std::env",
        "std::time",
        "std::thread",
        "std::net",
        "std::process",
        "HashMap",
        "HashSet",
        "Instant::",
        "SystemTime",
        "println!",
        "eprintln!",
        "static mut",
        "thread_local!",
    ];
    words.into_iter().filter(|word| text.contains(word)).collect()
}

/// Functions of the system's mathematical library, whose last digits differ from machine to machine.
fn system_mathematics(text: &str) -> Vec<&'static str> {
    let text = code(text);
    let words = [
        ".sin(",
        ".cos(",
        ".tan(",
        ".asin(",
        ".acos(",
        ".atan(",
        ".atan2(",
        ".exp(",
        ".exp2(",
        ".ln(",
        ".log(",
        ".log2(",
        ".log10(",
        ".powf(",
        ".powi(",
        ".cbrt(",
        ".sinh(",
        ".cosh(",
        ".tanh(",
        ".hypot(",
        ".mul_add(",
    ];
    words.into_iter().filter(|word| text.contains(word)).collect()
}

#[test]
fn a_module_uses_only_what_stands_to_its_left() {
    let order = order();
    assert!(order.len() > 15 && order[0] == "number" && order.last().unwrap() == "cli");
    for path in files(&root().join("src"), &[".rs"]) {
        let found = against_the_flow(&order, &module(&path), &std::fs::read_to_string(&path).unwrap());
        assert!(found.is_empty(), "{} uses {found:?}, which stand to its right", path.display());
    }
    // It sees what it looks for.
    assert_eq!(against_the_flow(&order, "analysis", "use crate::working::Step;"), ["working"]);
    assert_eq!(against_the_flow(&order, "analysis", "use crate::{member::Member, sheet::Model};"), ["sheet"]);
    assert_eq!(against_the_flow(&order, "figure", "let x = crate::sheet::typeset::unit();"), ["sheet"]);
    assert!(against_the_flow(&order, "working", "use crate::analysis::Analysis; // crate::sheet").is_empty());
}

#[test]
fn the_second_method_shares_nothing_with_the_first_but_the_member() {
    let foreign =
        |text: &str| used(text).into_iter().filter(|name| name == "analysis" || name == "number").collect::<Vec<_>>();
    for path in files(&root().join("src/crosscheck"), &[".rs"]) {
        let found = foreign(&std::fs::read_to_string(&path).unwrap());
        assert!(found.is_empty(), "{} uses {found:?}", path.display());
    }
    assert_eq!(foreign("use crate::analysis::gauss;"), ["analysis"]);
}

#[test]
fn everything_left_of_the_sheet_is_pure() {
    let order = order();
    let sheet = order.iter().position(|name| name == "sheet").unwrap();
    for path in files(&root().join("src"), &[".rs"]) {
        if order.iter().position(|name| *name == module(&path)).is_some_and(|place| place < sheet) {
            let found = impure(&std::fs::read_to_string(&path).unwrap());
            assert!(found.is_empty(), "{} says {found:?}", path.display());
        }
    }
    assert_eq!(impure("let x = std::fs::read(path);"), ["std::fs"]);
    assert_eq!(impure("use std::collections::HashMap;"), ["HashMap"]);
    assert!(impure("// std::fs is not used here").is_empty());
}

#[test]
fn no_figure_comes_from_the_systems_mathematics() {
    for path in files(&root().join("src"), &[".rs"]) {
        let found = system_mathematics(&std::fs::read_to_string(&path).unwrap());
        assert!(found.is_empty(), "{} calls {found:?}: use libm", path.display());
    }
    assert_eq!(system_mathematics("let y = x.sin() + x.sqrt();"), [".sin("]);
}

/// Files over 400 lines.
fn long(path: &Path) -> bool {
    std::fs::read_to_string(path).is_ok_and(|text| text.lines().count() > 400)
}

/// Each with the reason why it is not split.
const LONG: [(&str, &str); 2] = [
    ("src/working/narrate/given.rs", "one list of given figures, a function for each kind"),
    ("src/working/narrate/state.rs", "one state told from reactions to chain; its parts share its working space"),
];

#[test]
fn no_file_is_longer_than_four_hundred_lines_without_a_reason() {
    for folder in ["src", "tests", "templates"] {
        for path in files(&root().join(folder), &[".rs", ".j2", ".typ"]) {
            let name = path.strip_prefix(root()).unwrap().to_string_lossy().into_owned();
            let excused = LONG.iter().any(|(known, _)| *known == name);
            assert!(!long(&path) || excused, "{name} is longer than 400 lines");
        }
    }
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.rs");
    std::fs::write(&path, "\n".repeat(401)).unwrap();
    assert!(long(&path));
}

#[test]
fn nothing_else_stands_at_the_top() {
    let known = [
        "Cargo.toml",
        "Cargo.lock",
        "README.md",
        "DEVELOPERS.md",
        "LICENSE",
        "src",
        "templates",
        "tests",
        "examples",
        "fonts",
        "target",
    ];
    for entry in std::fs::read_dir(root()).unwrap() {
        let name = entry.unwrap().file_name().to_string_lossy().into_owned();
        assert!(name.starts_with('.') || known.contains(&name.as_str()), "{name} at the top");
    }
    assert!(!known.contains(&"docs"));
}
