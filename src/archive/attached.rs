//! Attachments and pages of a PDF, read with a library that shares nothing with the one that writes them.

use std::fmt;

use hayro_syntax::Pdf;
use hayro_syntax::object::{Array, Dict, Name, Stream, String as Text};

/// A file inside a PDF.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Attachment {
    /// Its name as the PDF gives it: any text at all.
    pub name: String,
    /// What it is to the document: `Source`, `Data`; may be empty.
    pub relationship: String,
    /// Its bytes.
    pub bytes: Vec<u8>,
}

impl Attachment {
    /// A name that cannot leave the folder it is put in: the last part of its path, letters, digits and `._-` only.
    pub fn safe_name(&self) -> String {
        let last = self.name.rsplit(['/', '\\']).next().unwrap_or_default();
        let kept: String = last
            .chars()
            .map(|letter| if letter.is_ascii_alphanumeric() || "._-".contains(letter) { letter } else { '_' })
            .take(80)
            .collect();
        let plain = kept.trim_start_matches('.');
        if plain.is_empty() { "attachment".to_owned() } else { plain.to_owned() }
    }
}

/// Why a file could not be read.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Fault {
    /// It is no PDF, or too damaged to be read.
    NoPdf,
    /// It is encrypted.
    Encrypted,
    /// It carries no attachments.
    NoAttachments,
    /// It is not a sheet of this program: what is missing.
    NoSheet(String),
}

impl fmt::Display for Fault {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoPdf => out.write_str("it is no PDF, or too damaged to be read"),
            Self::Encrypted => out.write_str("it is encrypted; save it without a password first"),
            Self::NoAttachments => out.write_str(
                "it carries no attachments; a sheet written with --without-attachments cannot be verified from itself",
            ),
            Self::NoSheet(what) => write!(out, "it is no sheet of this program: {what}"),
        }
    }
}

/// What is compared of a PDF.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Contents {
    /// What each page draws, decoded; `None` where that cannot be read.
    pub pages: Vec<Option<Vec<u8>>>,
    /// Files inside.
    pub attachments: Vec<Attachment>,
}

/// Reads a PDF.
pub fn contents(bytes: &[u8]) -> Result<Contents, Fault> {
    let pdf = open(bytes)?;
    let pages = pdf.pages().iter().map(|page| page.page_stream().map(<[u8]>::to_vec)).collect();
    Ok(Contents { pages, attachments: associated(&pdf) })
}

/// The files inside a PDF, in the order of the document.
///
/// # Errors
/// No PDF, an encrypted one, or one without attachments.
pub fn attachments(bytes: &[u8]) -> Result<Vec<Attachment>, Fault> {
    let found = associated(&open(bytes)?);
    if found.is_empty() { Err(Fault::NoAttachments) } else { Ok(found) }
}

fn open(bytes: &[u8]) -> Result<Pdf, Fault> {
    let near_start = bytes.get(..bytes.len().min(1024)).unwrap_or_default();
    if !near_start.windows(5).any(|window| window == b"%PDF-") {
        return Err(Fault::NoPdf);
    }
    Pdf::new(bytes.to_vec()).map_err(|error| match error {
        hayro_syntax::LoadPdfError::Decryption(_) => Fault::Encrypted,
        hayro_syntax::LoadPdfError::Invalid => Fault::NoPdf,
    })
}

fn associated(pdf: &Pdf) -> Vec<Attachment> {
    let Some(root) = pdf.xref().get::<Dict<'_>>(pdf.xref().root_id()) else { return Vec::new() };
    let Some(files) = root.get::<Array<'_>>("AF") else { return Vec::new() };
    files.iter::<Dict<'_>>().filter_map(|file| attachment(&file)).collect()
}

fn attachment(file: &Dict<'_>) -> Option<Attachment> {
    let stream = file.get::<Dict<'_>>("EF")?.get::<Stream<'_>>("F")?;
    let name = file.get::<Text<'_>>("UF").or_else(|| file.get::<Text<'_>>("F"));
    let relationship = file.get::<Name<'_>>("AFRelationship");
    Some(Attachment {
        name: name.map(|name| decoded(name.as_bytes())).unwrap_or_default(),
        relationship: relationship.map(|name| name.as_str().to_owned()).unwrap_or_default(),
        bytes: stream.decoded().ok()?.to_vec(),
    })
}

/// A text string of a PDF: UTF-16 with its mark, or single bytes.
fn decoded(bytes: &[u8]) -> String {
    match bytes.strip_prefix(&[0xFE, 0xFF][..]) {
        Some(wide) => {
            let units: Vec<u16> = wide
                .chunks_exact(2)
                .filter_map(|pair| Some(u16::from_be_bytes([*pair.first()?, *pair.last()?])))
                .collect();
            String::from_utf16_lossy(&units)
        }
        None => bytes.iter().map(|byte| char::from(*byte)).collect(),
    }
}
