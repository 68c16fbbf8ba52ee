//! Measures of the page in millimetres and points: said once here, handed to the templates as `page`.

use serde::Serialize;

use super::fonts::{Face, text_width};

/// The column of text.
pub const COLUMN: f64 = 120.0;
/// Within it, where numbers put in begin.
pub const SYMBOLS: f64 = 54.0;
/// Width of the symbol of a stated figure, before its words.
pub const SYMBOL: f64 = 20.0;
/// White kept between neighbours.
pub const GAP: f64 = 3.0;
/// How far a continued line stands in.
pub const INDENT: f64 = 6.0;
/// The column of side notes.
pub const NOTES: f64 = 35.0;
/// Size of text.
pub const TEXT_PT: f64 = 10.0;
/// Size of side notes.
pub const NOTE_PT: f64 = 7.5;
/// Size of tables.
pub const TABLE_PT: f64 = 9.0;
/// From one line of text to the next.
pub const TEXT_LINE: f64 = 4.7;
/// From one line of a side note to the next.
pub const NOTE_LINE: f64 = 3.2;
/// White between the lines of one equation.
pub const EQUATION_GAP: f64 = 2.3;
/// White between lines of working.
pub const LINE_GAP: f64 = 2.7;
/// From one row of a table to the next, at least.
pub const TABLE_LINE: f64 = 4.6;

/// Paper a sheet is printed on.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Paper {
    /// 210 mm by 297 mm.
    #[default]
    A4,
    /// 8.5 in by 11 in.
    Letter,
}

/// The measures a template may use.
#[derive(Clone, Copy, Debug, Serialize)]
pub struct Page {
    /// The paper.
    pub paper: Paper,
    /// Its width, mm.
    pub width: f64,
    /// Its height, mm.
    pub height: f64,
    /// Number of the first sheet.
    pub first_sheet: usize,
}

impl Page {
    /// The measures of a paper.
    pub const fn of(paper: Paper, first_sheet: usize) -> Self {
        let (width, height) = match paper {
            Paper::A4 => (210.0, 297.0),
            Paper::Letter => (215.9, 279.4),
        };
        Self { paper, width, height, first_sheet }
    }
}

/// How many lines a text takes in a width of mm at a size in pt, estimated a little high.
pub fn lines(text: &str, width: f64, size_pt: f64) -> f64 {
    let mut used: f64 = 0.0;
    let mut count = 1.0;
    for word in text.split(' ') {
        let wide = text_width(word, Face::Regular, size_pt) + text_width(" ", Face::Regular, size_pt);
        if used > 0.0 && used + wide > width {
            count += 1.0;
            used = 0.0;
        }
        used += wide;
    }
    count
}

/// To a tenth of a millimetre.
pub fn tenth(value: f64) -> f64 {
    (value * 10.0).round() / 10.0
}
