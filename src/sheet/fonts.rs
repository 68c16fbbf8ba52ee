//! The embedded fonts: all that a sheet is set in, and what their glyphs and widths say before anything is set.

use std::sync::LazyLock;

use typst::foundations::Bytes;
use typst::text::{Font, FontBook};
use typst::utils::LazyHash;

/// The fonts in the order of the book: text regular, italic, bold, bold italic, mathematics, typewriter.
static FILES: [&[u8]; 6] = [
    include_bytes!("../../fonts/LibertinusSerif-Regular.otf"),
    include_bytes!("../../fonts/LibertinusSerif-Italic.otf"),
    include_bytes!("../../fonts/LibertinusSerif-Bold.otf"),
    include_bytes!("../../fonts/LibertinusSerif-BoldItalic.otf"),
    include_bytes!("../../fonts/NewCMMath-Book.otf"),
    include_bytes!("../../fonts/DejaVuSansMono.ttf"),
];

/// A face of the sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Face {
    /// Text.
    Regular,
    /// Text, bold.
    Bold,
    /// Equations.
    Mathematics,
    /// The input, verbatim.
    Typewriter,
}

impl Face {
    const fn index(self) -> usize {
        match self {
            Self::Regular => 0,
            Self::Bold => 2,
            Self::Mathematics => 4,
            Self::Typewriter => 5,
        }
    }
}

static FACES: LazyLock<Vec<ttf_parser::Face<'static>>> =
    LazyLock::new(|| FILES.iter().filter_map(|bytes| ttf_parser::Face::parse(bytes, 0).ok()).collect());

static FONTS: LazyLock<Vec<Font>> =
    LazyLock::new(|| FILES.iter().filter_map(|bytes| Font::new(Bytes::new(*bytes), 0)).collect());

static BOOK: LazyLock<LazyHash<FontBook>> = LazyLock::new(|| LazyHash::new(FontBook::from_fonts(FONTS.iter())));

/// The catalogue the compiler chooses from.
pub(super) fn book() -> &'static LazyHash<FontBook> {
    &BOOK
}

/// The font at a place in the catalogue.
pub(super) fn font(index: usize) -> Option<Font> {
    FONTS.get(index).cloned()
}

/// How many of the embedded files are fonts; all of them, a test holds.
#[cfg(test)]
pub(super) fn count() -> (usize, usize) {
    (FONTS.len(), FILES.len())
}

/// Advance of a character in ems; `None` where the face has no glyph for it.
pub(super) fn advance(face: Face, character: char) -> Option<f64> {
    let font = FACES.get(face.index())?;
    let glyph = font.glyph_index(character)?;
    Some(f64::from(font.glyph_hor_advance(glyph)?) / f64::from(font.units_per_em()))
}

/// Width of a line of text in mm at a size in pt; no kerning, half an em for what has no glyph.
pub fn text_width(text: &str, face: Face, size_pt: f64) -> f64 {
    let ems: f64 = text.chars().map(|c| advance(face, c).unwrap_or(0.5)).sum();
    ems * size_pt * MM_PER_PT
}

/// Millimetres in a point of 1/72 in.
pub(super) const MM_PER_PT: f64 = 25.4 / 72.0;

/// The first character that the sheet cannot print: neither the text fonts, in upright, italic and bold alike, nor the
/// typewriter font has a glyph for it, or it is a control character.
///
/// A sheet never prints an empty box or drops a character; a deck that holds such a character is refused by name.
/// `None` when all of `text` can be printed. Line ends and tabs are spaces to a sheet.
pub fn missing_glyph(text: &str) -> Option<char> {
    text.chars().find(|c| !printable(*c))
}

fn printable(character: char) -> bool {
    // Every face holds the printable ASCII characters, as a test makes sure; most of a sheet is made of them.
    if matches!(character, '\n' | '\r' | '\t' | ' '..='~') {
        return true;
    }
    let has = |index: usize| FACES.get(index).is_some_and(|font| font.glyph_index(character).is_some());
    !character.is_control() && !invisible(character) && ((0..4).all(has) || has(Face::Typewriter.index()))
}

/// Characters that direct the order of others or stand for none: the page would not show what the file holds.
const fn invisible(character: char) -> bool {
    matches!(character,
        '\u{00AD}' | '\u{061C}' | '\u{180E}' | '\u{200B}'..='\u{200F}' | '\u{2028}'..='\u{202E}' | '\u{2060}'..='\u{206F}'
        | '\u{FE00}'..='\u{FE0F}' | '\u{FEFF}' | '\u{FFF9}'..='\u{FFFD}' | '\u{E000}'..='\u{F8FF}'
        | '\u{E0000}'..='\u{E0FFF}' | '\u{F0000}'..='\u{10FFFF}')
}

#[cfg(test)]
mod tests {
    use super::{FACES, Face, advance, count, missing_glyph};

    #[test]
    fn every_face_holds_printable_ascii() {
        for (index, face) in FACES.iter().enumerate().take(4) {
            for character in ' '..='~' {
                assert!(face.glyph_index(character).is_some(), "face {index} lacks {character:?}");
            }
        }
    }

    #[test]
    fn every_embedded_file_is_a_font() {
        assert_eq!(count().0, count().1);
    }

    #[test]
    fn figures_are_tabular_and_marks_are_there() {
        for face in [Face::Regular, Face::Bold] {
            let zero = advance(face, '0');
            for digit in '1'..='9' {
                assert_eq!(advance(face, digit), zero, "{digit}");
            }
            for mark in "−×·≤≥√²³⁴⁻¹ψφδαγθΔΣ–—‘’“”°→\u{202F}\u{A0}".chars() {
                assert!(advance(face, mark).is_some(), "{mark}");
            }
        }
    }

    #[test]
    fn what_no_font_has_is_named() {
        assert_eq!(missing_glyph("Pump house – “B3” ψ Ω č ł"), None);
        assert_eq!(missing_glyph("steel 🙂"), Some('🙂'));
        assert_eq!(missing_glyph("a\u{202E}b"), Some('\u{202E}'));
        assert_eq!(missing_glyph("bell \u{7}"), Some('\u{7}'));
    }
}
