//! Text from a deck is set as it stands or refused by name; it is never read as markup, code or a path.

use proofspan::sheet::model::{Cell, Row};
use proofspan::sheet::{Fault, Model, Options, render, text};

use super::{real, sample};

/// What somebody might type, or paste, or try.
const STRINGS: [&str; 72] = [
    "#read(\"/etc/passwd\")",
    "#include \"other.typ\"",
    "#import \"@preview/example:0.1.0\": *",
    "#eval(\"1 + 1\")",
    "#panic(\"stop\")",
    "#set page(width: 1mm)",
    "#let x = 1",
    "#{ while true {} }",
    "#x",
    "#(",
    "#[",
    "#]",
    "\" + read(\"a\") + \"",
    "\"); panic(\"stop\"); (\"",
    "\\\"); panic(\\\"stop\\\"); (\\\"",
    "\\",
    "\\\\",
    "\\\\\\\"",
    "ends in a backslash \\",
    "\"",
    "\"\"",
    "'",
    "`raw`",
    "```typ #read(\"a\")```",
    "$x^2$",
    "$",
    "$$",
    "$ \" $",
    "*bold*",
    "_emph_",
    "= Heading",
    "== Heading",
    "- item",
    "+ item",
    "/ term: text",
    "<label>",
    "@reference",
    "// comment",
    "/* comment",
    "*/ comment",
    "https://example.org/#a",
    "~",
    "--- -- -",
    "...",
    "\\u{41}",
    "\\n",
    "{{ running.number }}",
    "{{ 7 * 7 }}",
    "{% for x in y %}",
    "{% include \"sheet.typ.j2\" %}",
    "{% raw %}",
    "{# comment #}",
    "}}",
    "{{",
    "{%",
    "{{ \"a\" | safe }}",
    "{\"a\": 1}",
    "[[segment]]",
    "a = \"b\"",
    "${HOME}",
    "$(id)",
    "`id`",
    "; rm -rf x",
    "../../../etc/passwd",
    "C:\\Windows\\System32",
    "<script>alert(1)</script>",
    "%PDF-1.7",
    "(text) Tj",
    "endobj endstream",
    "tr\u{e8}s bien, Stra\u{df}e, \u{141}\u{f3}d\u{17a}, \u{3a9} \u{2264} \u{b5}",
    "v_C is no symbol here? EI_1, psi_B",
    "100 % & more < less > #1 @ home ^ up | bar",
];

fn options() -> Options {
    Options { attachments: Default::default(), ..sample::options() }
}

/// A short sheet whose every text of the deck is `hostile`.
fn filled(hostile: &str) -> Model {
    let mut member = real::propped();
    let title = &mut member.title;
    for field in [&mut title.project, &mut title.number, &mut title.subject, &mut title.revision] {
        *field = hostile.to_owned();
    }
    for field in [&mut title.prepared, &mut title.checked, &mut title.approved, &mut title.client, &mut title.office] {
        *field = Some(hostile.to_owned());
    }
    for case in &mut member.cases {
        case.title = hostile.to_owned();
        for load in &mut case.loads {
            load.note = Some(hostile.to_owned());
            load.source = Some(hostile.to_owned());
        }
    }
    for combination in &mut member.combinations {
        combination.title = hostile.to_owned();
    }
    for limit in &mut member.limits {
        limit.basis = hostile.to_owned();
    }
    let mut model = real::model_without_working(&member);
    model.annex.lines = vec![hostile.to_owned()];
    model.given.warnings = vec![hostile.to_owned()];
    // Drawings hold names and figures alone, and take most of the time.
    model.drawings.iter_mut().for_each(|drawing| drawing.items.clear());
    model
}

/// What a page holds, without white.
fn packed(text: &str) -> String {
    text.chars().filter(|c| !c.is_whitespace() && *c != '\u{200B}').collect()
}

#[test]
fn hostile_text_is_printed_as_it_stands() {
    for hostile in STRINGS {
        let pages = text(&filled(hostile), &options()).unwrap_or_else(|fault| panic!("{hostile:?}: {fault}"));
        let all = packed(&pages.join(" "));
        let wanted = packed(hostile);
        // Project, client, office, subject, case titles, notes, sources, combination titles, basis, annex.
        let count = all.matches(&wanted).count();
        assert!(count >= 18, "{hostile:?} stands {count} times in {all}");
    }
}

#[test]
fn hostile_text_makes_a_whole_file() {
    let everything = STRINGS.join(" ");
    for hostile in [everything.as_str(), "{{ \"a\" | safe }} #read(\"a\") \\", "\n\n= a\n\tb\r\n"] {
        let pdf = render(&filled(hostile), &options()).unwrap_or_else(|fault| panic!("{hostile:?}: {fault}"));
        assert!(pdf.starts_with(b"%PDF-1.7"));
    }
}

#[test]
fn ten_thousand_characters_are_set_with_and_without_white() {
    for long in ["word ".repeat(2000), "x".repeat(10_000)] {
        let mut model = sample::model();
        model.chapters.clear();
        model.running.project.clone_from(&long);
        model.running.subject.clone_from(&long);
        model.given.inputs[0].rows.push(Row::of(vec![Cell::text("a"), Cell::text("b"), Cell::text(&long)]));
        let pages = text(&model, &options()).unwrap_or_else(|fault| panic!("{fault}"));
        let all = packed(&pages.join(" "));
        assert!(all.matches(['x', 'w']).count() >= 4000, "{}", all.len());
    }
}

#[test]
fn what_no_font_has_is_refused_by_name_and_place() {
    for (hostile, character) in [
        ("steel \u{1F642}", '\u{1F642}'),
        ("\u{202E}reversed", '\u{202E}'),
        ("zero\u{200B}width", '\u{200B}'),
        ("bell\u{7}", '\u{7}'),
        ("\u{4E2D}\u{6587}", '\u{4E2D}'),
        ("nul\u{0}", '\u{0}'),
        ("private \u{E000}", '\u{E000}'),
        ("mark \u{FEFF}", '\u{FEFF}'),
    ] {
        let mut model = sample::model();
        model.running.project = hostile.to_owned();
        let fault = render(&model, &options()).unwrap_err();
        assert_eq!(fault, Fault::Glyph { character, place: "running.project".to_owned() }, "{hostile:?}");
        assert!(fault.to_string().contains("running.project"), "{fault}");
    }
}

#[test]
fn right_to_left_text_is_printed_or_refused() {
    for hostile in ["\u{5E9}\u{5DC}\u{5D5}\u{5DD}", "\u{645}\u{631}\u{62D}\u{628}\u{627}", "abc \u{5D0}\u{5D1} def"] {
        match render(&filled(hostile), &options()) {
            Ok(pdf) => assert!(pdf.starts_with(b"%PDF")),
            Err(fault) => assert!(matches!(fault, Fault::Glyph { .. }), "{hostile:?}: {fault}"),
        }
    }
}
