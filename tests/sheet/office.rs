//! An office's own templates: put in the place of the embedded ones, held to the same rules, at fault by file and line.

use proofspan::sheet::{Fault, Options, Templates, render, text};

use super::sample;

fn with(name: &str, content: &str) -> Options {
    let mut options = sample::options();
    options.templates.replace(name, content).unwrap();
    options
}

fn fault(name: &str, content: &str) -> Fault {
    render(&sample::model(), &with(name, content)).unwrap_err()
}

#[test]
fn a_template_is_replaced_by_name() {
    let options = with("annex.typ.j2", "part({{ label.annex.title }})\nparagraph({{ running.project | plain }})\n");
    let pages = text(&sample::model(), &options).unwrap();
    assert!(pages.last().unwrap().contains("Tidewater pump house"), "{:?}", pages.last());
    assert!(!pages.last().unwrap().contains("[title]"));
}

#[test]
fn a_name_that_no_template_has_is_refused_with_those_there_are() {
    let fault = Templates::default().replace("letterhead.typ", "").unwrap_err();
    let Fault::UnknownTemplate { name, known } = fault else { panic!("{fault}") };
    assert_eq!(name, "letterhead.typ");
    assert!(known.contains(&"answer.typ.j2".to_owned()) && known.contains(&"labels.toml".to_owned()));
}

#[test]
fn a_value_that_is_not_there_names_file_and_line() {
    let found = fault("annex.typ.j2", "part({{ label.annex.title }})\nparagraph({{ annex.nothing }})\n");
    assert!(matches!(&found, Fault::Template { file, line: 2, .. } if file == "annex.typ.j2"), "{found:?}");
    let found = fault("annex.typ.j2", "part({{ label.annex.nothing }})\n");
    assert!(matches!(&found, Fault::Template { file, line: 1, .. } if file == "annex.typ.j2"), "{found:?}");
}

#[test]
fn a_template_that_cannot_be_read_names_file_and_line() {
    let found = fault("checks.typ.j2", "part(\"a\")\n{% if %}\n");
    assert!(matches!(&found, Fault::Template { file, line: 2, .. } if file == "checks.typ.j2"), "{found:?}");
    let found = fault("labels.toml", "months = [");
    assert!(matches!(found, Fault::Labels { .. }), "{found:?}");
}

#[test]
fn typst_that_cannot_be_set_names_the_template() {
    let found = fault("annex.typ.j2", "part({{ label.annex.title }})\nnothing-of-this-name()\n");
    let Fault::Setting { place: Some((file, line, _)), message } = &found else { panic!("{found:?}") };
    assert!(file == "annex.typ.j2" && *line == 2 && message.contains("nothing-of-this-name"), "{found:?}");
    let style = include_str!("../../templates/style.typ").replace("#let recalled", "#let recalled-no-more");
    let found = fault("style.typ", &style);
    assert!(found.to_string().contains("recalled"), "{found}");
}

#[test]
fn a_template_reads_no_file_and_prints_no_figure_of_its_own() {
    for content in ["paragraph(read(\"deck.toml\"))\n", "image(\"logo.png\")\n", "include \"other.typ\"\n"] {
        let found = fault("annex.typ.j2", content);
        assert!(found.to_string().contains("denied"), "{found}");
    }
    let found = fault("annex.typ.j2", "paragraph({{ 6 * 7 }})\n");
    assert!(matches!(found, Fault::Template { .. }), "{found:?}");
    let found = fault("annex.typ.j2", "paragraph({{ running.project | safe }})\n");
    assert!(matches!(found, Fault::Template { .. }), "{found:?}");
}

#[test]
fn a_translation_is_one_file() {
    let labels =
        include_str!("../../templates/labels.toml").replace("\"sheet\"", "\"Blatt\"").replace("\"of\"", "\"von\"");
    let pages = text(&sample::model(), &with("labels.toml", &labels)).unwrap();
    assert!(pages[0].contains("Blatt"), "{}", pages[0]);
}
