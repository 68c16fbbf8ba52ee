//! The file read back with a library that shares nothing with the one that wrote it.

use std::sync::LazyLock;

use hayro_syntax::Pdf;
use hayro_syntax::object::{Array, Dict, Name, Object, Stream, String as Text};
use proofspan::sheet::{Model, Options, Paper, print, render};

use super::{real, sample};

static MODEL: LazyLock<Model> = LazyLock::new(|| real::model(&real::propped()));
static WHOLE: LazyLock<Vec<u8>> =
    LazyLock::new(|| render(&MODEL, &sample::options()).unwrap_or_else(|fault| panic!("{fault}")));

fn whole() -> Vec<u8> {
    WHOLE.clone()
}

fn catalogue(pdf: &Pdf) -> Dict<'_> {
    pdf.xref().get::<Dict<'_>>(pdf.xref().root_id()).expect("a document catalogue")
}

/// A text string of a PDF: UTF-16 with its mark, or single bytes.
fn decoded(text: &Text<'_>) -> String {
    let bytes = text.as_bytes();
    match bytes.strip_prefix(&[0xFE, 0xFF][..]) {
        Some(wide) => {
            let units: Vec<u16> = wide.chunks_exact(2).map(|pair| u16::from_be_bytes([pair[0], pair[1]])).collect();
            String::from_utf16(&units).unwrap()
        }
        None => bytes.iter().map(|byte| char::from(*byte)).collect(),
    }
}

/// Every element of the structure tree: its kind and its alternative text.
fn elements(pdf: &Pdf) -> Vec<(String, Option<String>)> {
    fn walk(element: &Dict<'_>, out: &mut Vec<(String, Option<String>)>) {
        if let Some(kind) = element.get::<Name<'_>>("S") {
            out.push((kind.as_str().to_owned(), element.get::<Text<'_>>("Alt").map(|alt| decoded(&alt))));
        }
        if let Some(children) = element.get::<Array<'_>>("K") {
            for child in children.iter::<Object<'_>>() {
                if let Object::Dict(child) = child {
                    walk(&child, out);
                }
            }
        } else if let Some(child) = element.get::<Dict<'_>>("K") {
            walk(&child, out);
        }
    }
    let mut out = Vec::new();
    walk(&catalogue(pdf).get::<Dict<'_>>("StructTreeRoot").expect("a structure tree"), &mut out);
    out
}

#[test]
fn attachments_come_back_byte_for_byte() {
    let pdf = Pdf::new(whole()).unwrap();
    let files = catalogue(&pdf).get::<Array<'_>>("AF").expect("associated files");
    let mut found = Vec::new();
    for file in files.iter::<Dict<'_>>() {
        let stream = file.get::<Dict<'_>>("EF").and_then(|files| files.get::<Stream<'_>>("F")).expect("a file");
        found.push((
            decoded(&file.get::<Text<'_>>("UF").unwrap()),
            file.get::<Name<'_>>("AFRelationship").unwrap().as_str().to_owned(),
            stream.dict().get::<Name<'_>>("Subtype").unwrap().as_str().to_owned(),
            stream.decoded().unwrap().to_vec(),
        ));
    }
    found.sort();
    let deck = ("deck.toml", "Source", "application/toml", sample::DECK.as_bytes().to_vec());
    let results = ("results.json", "Data", "application/json", b"{\"format\": 1}\n".to_vec());
    let wanted =
        [deck, results].map(|(name, kind, media, bytes)| (name.to_owned(), kind.to_owned(), media.to_owned(), bytes));
    assert_eq!(found, wanted);
}

#[test]
fn a_portal_that_refuses_attachments_gets_none() {
    let options = Options { attachments: Default::default(), ..sample::options() };
    let pdf = Pdf::new(render(&sample::model(), &options).unwrap()).unwrap();
    assert!(catalogue(&pdf).get::<Array<'_>>("AF").is_none());
}

#[test]
fn the_metadata_name_both_standards_title_and_language() {
    let pdf = Pdf::new(whole()).unwrap();
    let root = catalogue(&pdf);
    assert_eq!(root.get::<Text<'_>>("Lang").map(|lang| decoded(&lang)).as_deref(), Some("en"));
    let marked = root.get::<Dict<'_>>("MarkInfo").unwrap();
    assert_eq!(marked.get::<bool>("Marked"), Some(true));
    let stream = root.get::<Stream<'_>>("Metadata").unwrap();
    let xmp = String::from_utf8(stream.decoded().unwrap().to_vec()).unwrap();
    for part in [
        "<pdfaid:part>3</pdfaid:part>",
        "<pdfaid:conformance>A</pdfaid:conformance>",
        "<pdfuaid:part>1</pdfuaid:part>",
        "TPH-014 Intake beam B3",
        "2026-11-30",
        concat!("Proofspan ", env!("CARGO_PKG_VERSION")),
    ] {
        assert!(xmp.contains(part), "{part} is not in {xmp}");
    }
    assert!(root.get::<Array<'_>>("OutputIntents").is_some(), "an output intent");
}

#[test]
fn every_font_is_embedded_and_maps_back_to_characters() {
    let pdf = Pdf::new(whole()).unwrap();
    let (mut files, mut maps, mut simple) = (0, 0, 0);
    for object in pdf.objects() {
        let Object::Dict(dict) = object else { continue };
        match dict.get::<Name<'_>>("Type").as_ref().map(|name| name.as_str().to_owned()).as_deref() {
            Some("FontDescriptor") => {
                assert!(
                    dict.contains_key("FontFile3") || dict.contains_key("FontFile2"),
                    "a font that is not embedded"
                );
                files += 1;
            }
            Some("Font") if dict.get::<Name<'_>>("Subtype").is_some_and(|kind| kind.as_str() == "Type0") => {
                assert!(dict.contains_key("ToUnicode"), "a font without a way back to characters");
                maps += 1;
            }
            Some("Font") => simple += 1,
            _ => {}
        }
    }
    assert!(files >= 4 && maps == files && simple == files, "{files} files, {maps} fonts, {simple} descendants");
}

#[test]
fn headings_tables_equations_and_figures_are_tagged() {
    let pdf = Pdf::new(whole()).unwrap();
    let elements = elements(&pdf);
    let count = |kind: &str| elements.iter().filter(|(found, _)| found == kind).count();
    assert!(count("H1") >= 12, "{} headings", count("H1"));
    let counts = ["H2", "Table", "TH", "P", "TD"].map(&count);
    assert!(counts[0] >= 8 && counts[1] >= 5 && counts[2] >= 15 && counts[3] > 100 && counts[4] > 200, "{counts:?}");
    for kind in ["Formula", "Figure"] {
        let all: Vec<_> = elements.iter().filter(|(found, _)| found == kind).collect();
        assert!(!all.is_empty(), "{kind}");
        assert!(all.iter().all(|(_, alt)| alt.as_ref().is_some_and(|alt| alt.len() > 3)), "{kind} without words");
    }
    assert!(count("Formula") > 100, "{}", count("Formula"));
    assert!(count("Figure") >= 8, "{}", count("Figure"));
    assert!(elements.iter().any(|(_, alt)| alt.as_deref().is_some_and(|alt| alt.contains("R A equals minus R B"))));
    // No heading below one that is not there.
    let levels = elements.iter().filter_map(|(kind, _)| kind.strip_prefix('H')?.parse::<u32>().ok());
    let mut last = 0;
    for level in levels {
        assert!(level <= last + 1, "a heading of level {level} after one of {last}");
        last = level;
    }
}

#[test]
fn pages_are_counted_and_have_the_size_of_the_paper() {
    let mut model = sample::model();
    for (paper, width, height) in [(Paper::A4, 595.3, 841.9), (Paper::Letter, 612.0, 792.0)] {
        let printed = print(&model, &Options { paper, ..sample::options() }).unwrap();
        let pdf = Pdf::new(printed.pdf).unwrap();
        assert_eq!(pdf.pages().len(), printed.pages);
        for page in pdf.pages().iter() {
            let area = page.media_box();
            assert!((area.x1 - width).abs() < 0.1 && (area.y1 - height).abs() < 0.1, "{area:?}");
        }
    }
    model.chapters.clear();
    let pages = proofspan::sheet::text(&model, &Options { first_sheet: 12, ..sample::options() }).unwrap();
    let last = 11 + pages.len();
    assert!(pages[0].contains("sheet 12 of") || pages[0].replace(' ', "").contains(&format!("sheet12of{last}")));
}

#[test]
fn a_sheet_is_preliminary_until_somebody_has_checked_it() {
    let mut model = sample::model();
    let said = |model: &proofspan::sheet::Model| {
        let pages = proofspan::sheet::text(model, &sample::options()).unwrap();
        pages.iter().filter(|page| page.contains("PRELIMINARY, NOT CHECKED")).count()
    };
    assert!(said(&model) > 8);
    model.running.checked = "B. Checker".to_owned();
    assert_eq!(said(&model), 0);
}

#[test]
fn the_same_sheet_is_the_same_file() {
    let (model, options) = (MODEL.clone(), sample::options());
    let first = whole();
    // Another document between them must leave no trace.
    let mut other = sample::model();
    other.running.project = "Another project".to_owned();
    assert_ne!(render(&other, &options).unwrap(), first);
    let elsewhere = std::thread::spawn(move || render(&model, &options).unwrap()).join().unwrap();
    assert_eq!(elsewhere, first);
    let renamed = Options { ident: "another".to_owned(), ..sample::options() };
    assert_ne!(render(&other, &renamed).unwrap(), render(&other, &sample::options()).unwrap());
}
