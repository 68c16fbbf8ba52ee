//! Setting a sheet and writing its PDF.

use minijinja::value::{Serde, Value};
use serde::Serialize;
use typst::WorldExt;
use typst::diag::{SourceDiagnostic, Warned};
use typst::foundations::{Bytes, Dict, Smart, Value as Data};
use typst::layout::{Frame, FrameItem};
use typst::syntax::DiagSpanKind;
use typst_layout::PagedDocument;
use typst_pdf::{PdfOptions, PdfStandard, PdfStandards};

use super::page::{Page, Paper};
use super::template::Templates;
use super::world::{Closed, MAIN};
use super::{Fault, Model, missing_glyph};
use crate::figure::{Drawing, Item};

/// How a sheet is printed.
#[derive(Clone, Debug)]
pub struct Options {
    /// The paper.
    pub paper: Paper,
    /// Number of the first sheet; 1 unless the sheet is part of a larger document.
    pub first_sheet: usize,
    /// The templates.
    pub templates: Templates,
    /// Files inside the file.
    pub attachments: Attachments,
    /// What tells this document from all others, the same whenever it is made again: a hash of the deck, say.
    pub ident: String,
    /// Language of the labels, as `en`.
    pub language: String,
}

impl Default for Options {
    fn default() -> Self {
        Self {
            paper: Paper::A4,
            first_sheet: 1,
            templates: Templates::default(),
            attachments: Attachments::default(),
            ident: String::new(),
            language: "en".to_owned(),
        }
    }
}

/// Files inside the file; none where a portal refuses them.
#[derive(Clone, Debug, Default)]
pub struct Attachments {
    /// The deck, byte for byte: `deck.toml`.
    pub deck: Option<Vec<u8>>,
    /// The results: `results.json`.
    pub results: Option<Vec<u8>>,
    /// Of a review, the claims: `claims.toml`.
    pub claims: Option<Vec<u8>>,
}

/// A finished sheet.
#[derive(Clone, Debug)]
pub struct Printed {
    /// The PDF.
    pub pdf: Vec<u8>,
    /// How many pages it has.
    pub pages: usize,
    /// What the compiler warned of; empty with the embedded templates.
    pub warnings: Vec<String>,
}

/// Prints a sheet: PDF/A-3a with the tags of PDF/UA-1, the same bytes whenever, wherever and in whatever order.
///
/// # Errors
///
/// A character that no font has, a template at fault, or a page that cannot be set.
pub fn render(model: &Model, options: &Options) -> Result<Vec<u8>, Fault> {
    print(model, options).map(|printed| printed.pdf)
}

/// The same with the number of pages and the compiler's warnings.
///
/// # Errors
///
/// As [`render`].
pub fn print(model: &Model, options: &Options) -> Result<Printed, Fault> {
    within(model, options, |world, document, warnings| {
        let standards = PdfStandards::new(&[PdfStandard::A_3a, PdfStandard::Ua_1])
            .map_err(|error| Fault::Setting { place: None, message: error.message().to_string() })?;
        let pdf_options = PdfOptions {
            ident: Smart::Custom(options.ident.clone()),
            creator: Smart::Custom(Some(concat!("Proofspan ", env!("CARGO_PKG_VERSION")).to_owned())),
            standards,
            ..PdfOptions::default()
        };
        let pdf = typst_pdf::pdf(document, &pdf_options).map_err(|errors| first(world, &errors, &options.templates))?;
        Ok(Printed { pdf, pages: document.pages().len(), warnings })
    })
}

/// The text of every page, in the order set, equations included glyph by glyph; what a reader's eye meets, for tests and
/// for searching.
///
/// # Errors
///
/// As [`render`], but for what only the writing of a PDF finds.
pub fn text(model: &Model, options: &Options) -> Result<Vec<String>, Fault> {
    within(model, options, |_, document, _| {
        let page = |frame: &Frame| {
            let mut out = String::new();
            collect(frame, &mut out);
            out
        };
        Ok(document.pages().iter().map(|one| page(&one.frame)).collect())
    })
}

fn collect(frame: &Frame, out: &mut String) {
    for (_, item) in frame.items() {
        match item {
            FrameItem::Text(text) => {
                out.push_str(&text.text);
                out.push(' ');
            }
            FrameItem::Group(group) => collect(&group.frame, out),
            _ => {}
        }
    }
}

/// Sets a sheet and hands it on.
fn within<T>(
    model: &Model,
    options: &Options,
    then: impl FnOnce(&Closed, &PagedDocument, Vec<String>) -> Result<T, Fault>,
) -> Result<T, Fault> {
    let view = Value::from(Serde(model));
    if let Some((character, place)) = unprintable(&view, String::new()) {
        return Err(Fault::Glyph { character, place });
    }
    for (index, drawing) in model.drawings.iter().enumerate() {
        if let Some(character) = in_drawing(drawing) {
            return Err(Fault::Glyph { character, place: format!("drawings.{index}") });
        }
    }
    let extra = minijinja::context! {
        page => Value::from(Serde(Page::of(options.paper, options.first_sheet))),
        attachments => Value::from(Serde(attached(&options.attachments))),
        language => options.language.clone(),
    };
    let text = options.templates.fill(&view, &model.drawings, extra)?;
    let world = Closed::new(text, &options.templates.modules(), inputs(&options.attachments))
        .ok_or_else(|| Fault::Setting { place: None, message: "a template's name is no path".to_owned() })?;
    let Warned { output, warnings } = typst::compile::<PagedDocument>(&world);
    let warnings = warnings.iter().map(|warning| said(&world, warning, &options.templates).to_string()).collect();
    let result = output
        .map_err(|errors| first(&world, &errors, &options.templates))
        .and_then(|document| then(&world, &document, warnings));
    // Without this a long run would keep every document it has ever set.
    comemo::evict(0);
    result
}

fn first(world: &Closed, errors: &[SourceDiagnostic], templates: &Templates) -> Fault {
    errors.first().map_or_else(
        || Fault::Setting { place: None, message: "the compiler gave no reason".to_owned() },
        |error| said(world, error, templates),
    )
}

/// What the compiler says, at its place in a template where that can be told.
fn said(world: &Closed, diagnostic: &SourceDiagnostic, templates: &Templates) -> Fault {
    let file = match diagnostic.span.get() {
        DiagSpanKind::Detached => None,
        DiagSpanKind::Number { id, .. } | DiagSpanKind::Range { id, .. } => Some(id),
    };
    let place = file.zip(world.range(diagnostic.span)).and_then(|(file, range)| world.place(file, range.start));
    let origin = place
        .as_ref()
        .filter(|(file, ..)| format!("/{file}") == MAIN)
        .and_then(|(_, line, _)| templates.origin(world.text(), *line));
    let place = origin.map(|(file, line)| (file, line, 0)).or(place);
    let hints: String = diagnostic.hints.iter().map(|hint| format!("; {}", hint.v)).collect();
    Fault::Setting { place, message: format!("{}{hints}", diagnostic.message) }
}

/// An attachment as the templates see it; its bytes travel beside, as data.
#[derive(Serialize)]
struct Attachment {
    name: &'static str,
    input: &'static str,
    relationship: &'static str,
    media: &'static str,
    description: &'static str,
}

fn attached(attachments: &Attachments) -> Vec<Attachment> {
    let deck = attachments.deck.as_ref().map(|_| Attachment {
        name: "deck.toml",
        input: "deck",
        relationship: "source",
        media: "application/toml",
        description: "The input from which this sheet was made, byte for byte",
    });
    let results = attachments.results.as_ref().map(|_| Attachment {
        name: "results.json",
        input: "results",
        relationship: "data",
        media: "application/json",
        description: "The results that this sheet shows, unrounded, with the working",
    });
    let claims = attachments.claims.as_ref().map(|_| Attachment {
        name: "claims.toml",
        input: "claims",
        relationship: "source",
        media: "application/toml",
        description: "The claims that were reviewed, byte for byte",
    });
    deck.into_iter().chain(results).chain(claims).collect()
}

fn inputs(attachments: &Attachments) -> Dict {
    let mut dict = Dict::new();
    for (name, bytes) in
        [("deck", &attachments.deck), ("results", &attachments.results), ("claims", &attachments.claims)]
    {
        if let Some(bytes) = bytes {
            dict.insert(name.into(), Data::Bytes(Bytes::new(bytes.clone())));
        }
    }
    dict
}

/// The first character in a view model that cannot be printed, and where it stands.
fn unprintable(value: &Value, place: String) -> Option<(char, String)> {
    if let Some(text) = value.as_str() {
        return missing_glyph(text).map(|character| (character, place));
    }
    let join = |key: &str| if place.is_empty() { key.to_owned() } else { format!("{place}.{key}") };
    match value.kind() {
        minijinja::value::ValueKind::Map => value.try_iter().ok()?.find_map(|key| {
            let inner = value.get_item(&key).ok()?;
            unprintable(&inner, join(key.as_str().unwrap_or_default()))
        }),
        minijinja::value::ValueKind::Seq => {
            value.try_iter().ok()?.enumerate().find_map(|(index, inner)| unprintable(&inner, join(&index.to_string())))
        }
        _ => None,
    }
}

/// The first character of a drawing's texts that cannot be printed.
fn in_drawing(drawing: &Drawing) -> Option<char> {
    let texts = drawing.items.iter().filter_map(|item| match item {
        Item::Text { runs, .. } => Some(runs),
        _ => None,
    });
    missing_glyph(&drawing.alt).or_else(|| texts.flatten().find_map(|run| missing_glyph(&run.text)))
}
