//! Widths of texts, measured in the embedded font.

use ttf_parser::Face;

use super::primitive::{Run, SUBSCRIPT_DROP, SUBSCRIPT_SIZE};

static REGULAR: &[u8] = include_bytes!("../../fonts/LibertinusSerif-Regular.otf");
static ITALIC: &[u8] = include_bytes!("../../fonts/LibertinusSerif-Italic.otf");

/// One point of 1/72 in, mm.
pub const POINT: f64 = 25.4 / 72.0;
/// Height of capitals and figures above the baseline, against the size; a little more than the font's own.
pub const ASCENT: f64 = 0.70;
/// Depth of descenders below the baseline, against the size.
pub const DESCENT: f64 = 0.22;

/// Width in mm of the runs set one after another at `size_pt`, from the advances of the glyphs, without kerning.
///
/// Kerning moves a label by some hundredths of a millimetre; the clearance kept around labels covers it. A character that
/// the font lacks counts as wide as the font's mark for a missing glyph.
pub fn width(runs: &[Run], size_pt: f64) -> f64 {
    let (regular, italic) = (Face::parse(REGULAR, 0).ok(), Face::parse(ITALIC, 0).ok());
    let one = |run: &Run| {
        let face = if run.italic { italic.as_ref() } else { regular.as_ref() };
        let size = if run.sub { size_pt * SUBSCRIPT_SIZE } else { size_pt };
        run.text.chars().map(|character| advance(face, character)).sum::<f64>() * size * POINT
    };
    runs.iter().map(one).sum()
}

/// Advance of one character in ems; half an em where the font cannot be read, so that labels still keep apart.
fn advance(face: Option<&Face<'_>>, character: char) -> f64 {
    face.and_then(|face| {
        let glyph = face.glyph_index(character).unwrap_or_default();
        Some(f64::from(face.glyph_hor_advance(glyph)?) / f64::from(face.units_per_em()))
    })
    .unwrap_or(0.5)
}

/// Heights above and below the baseline, mm.
pub fn heights(runs: &[Run], size_pt: f64) -> (f64, f64) {
    let drop = if runs.iter().any(|run| run.sub) { SUBSCRIPT_DROP } else { 0.0 };
    (ASCENT * size_pt * POINT, (DESCENT * (1.0 - 0.3 * f64::from(u8::from(drop > 0.0))) + drop) * size_pt * POINT)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn plain(text: &str) -> Run {
        Run { text: text.to_owned(), italic: false, sub: false }
    }

    #[test]
    fn figures_are_equally_wide_and_scale_with_the_size() {
        // Libertinus Serif, hmtx table: figures advance 465 of 1000 units.
        let one = width(&[plain("1")], 10.0);
        assert!((one - 0.465 * 10.0 * POINT).abs() < 1e-9, "{one}");
        assert_eq!(one, width(&[plain("8")], 10.0));
        assert!((width(&[plain("18")], 20.0) - 4.0 * one).abs() < 1e-9);
    }

    #[test]
    fn a_subscript_is_narrower_and_reaches_lower() {
        let sub = Run { sub: true, ..plain("B") };
        let (lowered, upright) = ([sub], [plain("B")]);
        assert!(width(&lowered, 8.0) < width(&upright, 8.0));
        assert!(heights(&lowered, 8.0).1 > heights(&upright, 8.0).1);
    }

    #[test]
    fn every_character_that_drawings_use_has_a_glyph() {
        let regular = Face::parse(REGULAR, 0).expect("font");
        let italic = Face::parse(ITALIC, 0).expect("font");
        for character in "0123456789.−×·–²³⁴ \u{2009}°,;()+=/".chars() {
            assert!(regular.glyph_index(character).is_some(), "{character:?}");
        }
        for character in "RMVvψEIq".chars() {
            assert!(italic.glyph_index(character).is_some(), "{character:?}");
        }
    }
}
