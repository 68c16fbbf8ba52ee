//! The order of the house: who may use whom, what the pure part must not touch, how long a file may be.
//!
//! Every rule is a function of a text or a list of names, so that beside each stands a text that breaks it.

mod text;

use std::path::{Path, PathBuf};

use text::{code, paths};

/// The modules, left to right. A new module is put here and into `src/lib.rs` at once: an order that could be changed in one
/// place would hold nobody.
const ORDER: [&str; 17] = [
    "number",
    "quantity",
    "diagnostic",
    "deck",
    "member",
    "analysis",
    "crosscheck",
    "verdict",
    "working",
    "results",
    "calculation",
    "review",
    "figure",
    "sheet",
    "issue",
    "archive",
    "cli",
];

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

/// A file of `src` by its path from there, with its text.
fn sources() -> Vec<(String, String)> {
    let src = root().join("src");
    let list = files(&src, &[".rs"]).into_iter().map(|path| {
        let name = path.strip_prefix(&src).unwrap().to_string_lossy().replace('\\', "/");
        (name, std::fs::read_to_string(path).unwrap())
    });
    list.collect()
}

/// The module a file of `src` belongs to.
fn module(file: &str) -> &str {
    let first = file.split('/').next().unwrap_or_default();
    first.strip_suffix(".rs").unwrap_or(first)
}

fn place(module: &str) -> Option<usize> {
    ORDER.iter().position(|known| *known == module)
}

/// The crate's modules that a file uses: after `crate::`, and after as many `super::` as lead out of its module.
fn used(file: &str, text: &str) -> Vec<String> {
    let code = code(text);
    let depth = file.split('/').count() - usize::from(file.ends_with("/mod.rs"));
    let out = vec!["super"; depth].join("::");
    let first = |path: String| path.split("::").next().unwrap_or_default().to_owned();
    paths(&code, "crate").into_iter().chain(paths(&code, &out)).map(first).collect()
}

/// What a file uses that stands to the right of its module.
fn against_the_flow(file: &str, text: &str) -> Vec<String> {
    let own = place(module(file));
    used(file, text).into_iter().filter(|name| place(name) > own).collect()
}

/// What the second method uses beyond the member and what a member is made of. Nothing is excepted.
fn shared_with_the_first_method(file: &str, text: &str) -> Vec<String> {
    let allowed = ["quantity", "member", "crosscheck"];
    used(file, text).into_iter().filter(|name| place(name).is_some() && !allowed.contains(&name.as_str())).collect()
}

/// Words of the world outside, which nothing left of the sheet may say.
fn impure(text: &str) -> Vec<String> {
    let code = code(text);
    let modules = ["fs", "env", "time", "thread", "net", "process", "io", "os"];
    let outside = paths(&code, "std").into_iter().filter(|path| {
        let first = path.split("::").next().unwrap_or_default();
        modules.contains(&first)
    });
    let words = [
        "HashMap",
        "HashSet",
        "Instant",
        "SystemTime",
        "println!",
        "print!",
        "eprintln!",
        "dbg!",
        "static mut",
        "thread_local!",
    ];
    let said = words.into_iter().filter(|word| holds_word(&code, word)).map(str::to_owned);
    outside.map(|path| format!("std::{path}")).chain(said).collect()
}

/// Whether a text holds a word that is not a part of a longer one.
fn holds_word(text: &str, word: &str) -> bool {
    text.match_indices(word).any(|(at, _)| {
        let inside = |c: Option<char>| c.is_some_and(|c| c.is_alphanumeric() || c == '_');
        let after = if word.ends_with('!') { None } else { text[at + word.len()..].chars().next() };
        !inside(text[..at].chars().next_back()) && !inside(after)
    })
}

/// Functions of the system's mathematical library, whose last digits differ from machine to machine.
fn system_mathematics(text: &str) -> Vec<String> {
    let code = code(text);
    let names = [
        "sin", "cos", "tan", "sin_cos", "asin", "acos", "atan", "atan2", "sinh", "cosh", "tanh", "asinh", "acosh",
        "atanh", "exp", "exp2", "exp_m1", "ln", "ln_1p", "log", "log2", "log10", "powf", "powi", "cbrt", "hypot",
        "mul_add",
    ];
    let called = |name: &&str| {
        [format!(".{name}("), format!("f64::{name}("), format!("f64::{name})"), format!("f64::{name},")]
            .iter()
            .any(|word| code.contains(word.as_str()))
    };
    names.into_iter().filter(called).map(str::to_owned).collect()
}

#[test]
fn the_order_is_the_one_of_the_library() {
    let listed = |text: &str| -> Vec<String> {
        text.lines().filter_map(|line| line.strip_prefix("pub mod ")?.strip_suffix(';').map(str::to_owned)).collect()
    };
    let lib = std::fs::read_to_string(root().join("src/lib.rs")).unwrap();
    assert_eq!(listed(&lib), ORDER);
    assert_ne!(listed("pub mod cli;\npub mod number;\n"), ORDER);
    // No file of the library stands outside the order.
    let outside: Vec<String> =
        sources().into_iter().map(|(file, _)| file).filter(|file| place(module(file)).is_none()).collect();
    assert_eq!(outside, ["lib.rs", "main.rs"]);
}

#[test]
fn a_module_uses_only_what_stands_to_its_left() {
    for (file, text) in sources().iter().filter(|(file, _)| place(module(file)).is_some()) {
        let found = against_the_flow(file, text);
        assert!(found.is_empty(), "{file} uses {found:?}, which stand to its right");
    }
    // It sees what it looks for, in every dress.
    for (file, text, seen) in [
        ("analysis/solve.rs", "use crate::working::Step;", "working"),
        ("analysis/solve.rs", "use crate::{member::{Member, Place}, sheet::Model};", "sheet"),
        ("figure/plot.rs", "let x = crate::sheet::typeset::unit();", "sheet"),
        ("analysis/solve.rs", "use super::super::verdict;", "verdict"),
        ("analysis/mod.rs", "use super::{member, cli::run};", "cli"),
        ("number.rs", "use super::quantity::Decimal;", "quantity"),
        ("deck/reader.rs", "use crate::{\n    quantity,\n    member,\n};", "member"),
    ] {
        assert_eq!(against_the_flow(file, text), [seen], "{text}");
    }
    let lawful = "use crate::analysis::Analysis; // crate::sheet\nlet s = \"crate::sheet\";\nuse super::step::Step;";
    assert!(against_the_flow("working/draft.rs", lawful).is_empty());
}

#[test]
fn the_second_method_shares_nothing_with_the_first_but_the_member() {
    let mut seen = 0;
    for (file, text) in sources().iter().filter(|(file, _)| module(file) == "crosscheck") {
        let found = shared_with_the_first_method(file, text);
        assert!(found.is_empty(), "{file} uses {found:?}");
        seen += 1;
    }
    assert!(seen >= 5);
    let shared = |text: &str| shared_with_the_first_method("crosscheck/element.rs", text);
    assert_eq!(shared("use crate::analysis::gauss;"), ["analysis"]);
    assert_eq!(shared("use crate::{member::Member, number::Number};"), ["number"]);
    assert_eq!(shared("use super::super::analysis::cantilever;"), ["analysis"]);
    // Nor does the first know of the second.
    for (file, text) in sources().iter().filter(|(file, _)| module(file) == "analysis") {
        assert!(!used(file, text).contains(&"crosscheck".to_owned()), "{file}");
    }
}

#[test]
fn everything_left_of_the_sheet_is_pure() {
    for (file, text) in
        sources().iter().filter(|(file, _)| place(module(file)).is_some_and(|own| own < place("sheet").unwrap()))
    {
        let found = impure(text);
        assert!(found.is_empty(), "{file} says {found:?}");
    }
    for (text, seen) in [
        ("let x = std::fs::read(path);", "std::fs::read"),
        ("use std::{fmt, env};", "std::env"),
        ("use std::{collections::{BTreeMap, HashMap}};", "HashMap"),
        ("let now = Instant::now();", "Instant"),
        ("println!(\"{x}\");", "println!"),
        ("std::thread::spawn(f)", "std::thread::spawn"),
        ("use std::time::Duration;", "std::time::Duration"),
    ] {
        assert_eq!(impure(text), [seen], "{text}");
    }
    assert!(impure("// std::fs is not used here\nlet InstantCoffee = \"std::fs\";").is_empty());
}

#[test]
fn no_figure_comes_from_the_systems_mathematics() {
    for (file, text) in sources() {
        let found = system_mathematics(&text);
        assert!(found.is_empty(), "{file} calls {found:?}: use libm");
    }
    assert_eq!(system_mathematics("let y = x.sin() + x.sqrt() + libm::cos(x);"), ["sin"]);
    assert_eq!(system_mathematics("let y = f64::powi(x, 2);"), ["powi"]);
    assert_eq!(system_mathematics("list.iter().copied().map(f64::ln)"), ["ln"]);
    assert!(system_mathematics("let y = libm::exp(x); // x.exp()").is_empty());
}

/// The most lines a file may have.
const LONGEST: usize = 400;

/// Files that are longer, for now: they are being rewritten, and each leaves this list as it is split.
const LONG: [&str; 4] = [
    "src/working/draft.rs",
    "src/working/narrate/cases.rs",
    "src/working/narrate/given.rs",
    "src/working/narrate/state.rs",
];

/// What is said of a file's length, where anything is.
fn length_fault(name: &str, text: &str) -> Option<String> {
    let count = text.lines().count();
    (count > LONGEST && !LONG.contains(&name)).then(|| format!("{name} has {count} lines: split it"))
}

#[test]
fn no_file_is_longer_than_four_hundred_lines() {
    for folder in ["src", "tests", "templates"] {
        for path in files(&root().join(folder), &[".rs", ".j2", ".typ", ".py"]) {
            let name = path.strip_prefix(root()).unwrap().to_string_lossy().replace('\\', "/");
            let found = length_fault(&name, &std::fs::read_to_string(&path).unwrap());
            assert!(found.is_none(), "{}", found.unwrap_or_default());
        }
    }
    assert!(length_fault("src/a.rs", &"\n".repeat(401)).is_some());
    assert!(length_fault("src/a.rs", &"\n".repeat(400)).is_none());
}

/// Names at the top that do not belong there.
fn strays<'a>(names: &[&'a str]) -> Vec<&'a str> {
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
    names.iter().copied().filter(|name| !name.starts_with('.') && !known.contains(name)).collect()
}

#[test]
fn nothing_else_stands_at_the_top() {
    let names: Vec<String> = std::fs::read_dir(root())
        .unwrap()
        .map(|entry| entry.unwrap().file_name().to_string_lossy().into_owned())
        .collect();
    let names: Vec<&str> = names.iter().map(String::as_str).collect();
    assert!(names.contains(&"src") && strays(&names).is_empty(), "{:?} at the top", strays(&names));
    assert_eq!(strays(&["src", ".ci", "docs", "notes.md"]), ["docs", "notes.md"]);
}
