//! Tables of the view model.

use serde::Serialize;

use super::Equation;
use crate::quantity::{Decimal, Unit};
use crate::sheet::fonts::{Face, MM_PER_PT, text_width};
use crate::sheet::page;
use crate::sheet::prose::LONGEST;
use crate::sheet::typeset;

/// A table: heads, then rows.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Table {
    /// Prose above it; may be empty.
    pub title: String,
    /// What it holds, for those who do not see it.
    pub alt: String,
    /// Whether cells stand at the middle of their row, for rows of equations, rather than at its top.
    pub middle: bool,
    /// Whether it is set small, where it has many columns.
    pub small: bool,
    /// Columns, left to right.
    pub columns: Vec<Column>,
    /// Rows.
    pub rows: Vec<Row>,
}

/// A column.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Column {
    /// Its head.
    pub head: Cell,
    /// Second line of the head: the unit of every figure below; may be empty.
    pub unit: String,
    /// Where its cells stand.
    pub align: Align,
    /// Width in mm; 0 takes a share of what is left.
    pub width: f64,
}

/// Where a cell's text stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Align {
    /// Text.
    Left,
    /// Figures.
    Right,
    /// Marks.
    Centre,
}

/// A row.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Row {
    /// One cell for each column.
    pub cells: Vec<Cell>,
    /// Whether it stands in bold.
    pub bold: bool,
    /// Whether a rule stands above it.
    pub rule: bool,
    /// Whether its one cell goes over all columns.
    pub span: bool,
}

/// What stands in a cell.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(tag = "kind", rename_all = "snake_case")]
pub enum Cell {
    /// Words as they stand.
    Text {
        /// The words; may be empty.
        text: String,
    },
    /// Prose: `v_C` is set as a symbol.
    Prose {
        /// The words; may be empty.
        text: String,
    },
    /// A figure of a column that aligns at the point.
    Figure {
        /// The figure.
        text: String,
        /// White to its right, in ems, that stands for the decimals it lacks against its neighbours.
        pad: f64,
    },
    /// A formula on as many lines as it needs, and a few words about it.
    Formula {
        /// Its lines; may be none.
        lines: Vec<Equation>,
        /// What it finds, prose.
        words: String,
    },
    /// An equation.
    Equation {
        /// The equation.
        equation: Equation,
    },
}

impl Cell {
    /// Words as they stand.
    pub fn text(text: impl Into<String>) -> Self {
        Self::Text { text: text.into() }
    }

    /// Prose: `v_C` is set as a symbol.
    pub fn prose(text: impl Into<String>) -> Self {
        Self::Prose { text: text.into() }
    }

    /// Figures that no line may divide but at their plain spaces.
    pub const fn figures(text: String) -> Self {
        Self::Figure { text, pad: 0.0 }
    }

    /// A figure with its unit.
    pub fn quantity(figure: Decimal, unit: &Unit) -> Self {
        Self::Text { text: typeset::quantity(figure, unit) }
    }

    /// Width in mm of the longest word at a size in pt; very long ones do not count, they may be divided.
    fn longest(&self, bold: bool, size_pt: f64) -> f64 {
        let face = if bold { Face::Bold } else { Face::Regular };
        match self {
            Self::Text { text } | Self::Prose { text } => {
                let words = text.split(' ').filter(|word| word.chars().count() <= LONGEST);
                words.map(|word| text_width(word, face, size_pt)).fold(0.0, f64::max)
            }
            Self::Figure { text, pad } => {
                let words = text.split(' ').map(|word| text_width(word, face, size_pt));
                words.fold(0.0, f64::max) + pad * size_pt * MM_PER_PT
            }
            Self::Equation { equation } => equation.width(size_pt),
            Self::Formula { .. } => 0.0,
        }
    }

    /// Estimated width in mm at a size in pt.
    pub fn width(&self, size_pt: f64) -> f64 {
        match self {
            Self::Text { text } | Self::Prose { text } => text_width(text, Face::Regular, size_pt),
            Self::Figure { text, pad } => text_width(text, Face::Regular, size_pt) + pad * size_pt * MM_PER_PT,
            Self::Equation { equation } => equation.width(size_pt),
            Self::Formula { .. } => 0.0,
        }
    }
}

/// Figures of one column, aligned at the point.
pub fn aligned(figures: &[Decimal]) -> Vec<Cell> {
    let texts: Vec<String> = figures.iter().map(|figure| typeset::figure(*figure)).collect();
    // A power of ten has no decimals to align.
    let tail = |text: &str| {
        if text.contains('·') {
            return 0.0;
        }
        text.split_once('.')
            .map_or(0.0, |(_, decimals)| text_width(".", Face::Regular, 1.0) + text_width(decimals, Face::Regular, 1.0))
            / MM_PER_PT
    };
    let longest = texts.iter().map(|text| tail(text)).fold(0.0, f64::max);
    texts.into_iter().map(|text| Cell::Figure { pad: thousandth(longest - tail(&text)), text }).collect()
}

fn thousandth(value: f64) -> f64 {
    (value * 1000.0).round() / 1000.0
}

impl Column {
    /// A column of text that takes a share of the width left.
    pub fn text(head: impl Into<String>) -> Self {
        Self { head: Cell::text(head), unit: String::new(), align: Align::Left, width: 0.0 }
    }

    /// A column of figures of one unit, of a width in mm.
    pub fn figures(head: Cell, unit: &Unit, width: f64) -> Self {
        Self { head, unit: typeset::unit(unit), align: Align::Right, width }
    }

    /// The same column with a fixed width in mm.
    #[must_use]
    pub fn wide(mut self, width: f64) -> Self {
        self.width = width;
        self
    }
}

impl Row {
    /// A plain row.
    pub fn of(cells: Vec<Cell>) -> Self {
        Self { cells, bold: false, rule: false, span: false }
    }
}

impl Table {
    /// A table without rows yet.
    pub fn new(title: impl Into<String>, alt: impl Into<String>, columns: Vec<Column>) -> Self {
        Self { title: title.into(), alt: alt.into(), middle: false, small: false, columns, rows: Vec::new() }
    }

    /// Widens columns whose longest word does not fit, at the cost of those that have width to spare.
    ///
    /// Where the words of a row are wider than the text column altogether, they stay as they are.
    pub fn fit(&mut self) {
        let needs: Vec<f64> = (0..self.columns.len()).map(|index| self.need(index)).collect();
        let given: f64 = self.columns.iter().map(|column| column.width).sum();
        let free = self.columns.iter().filter(|column| column.width <= 0.0).count();
        let share = (page::COLUMN - given).max(0.0) / free.max(1) as f64;
        // A column that takes what is left is given a width where that is too little.
        for (column, need) in self.columns.iter_mut().zip(&needs) {
            if column.width <= 0.0 && *need > share {
                column.width = need.min(page::COLUMN / 2.0);
            }
        }
        let free = self.columns.iter().zip(&needs).filter(|(column, _)| column.width <= 0.0);
        let kept: f64 = free.map(|(_, need)| need).sum();
        let fixed: f64 = kept + self.columns.iter().map(|column| column.width).sum::<f64>();
        let gaps = || self.columns.iter().zip(&needs).filter(|(c, _)| c.width > 0.0).map(|(c, need)| c.width - need);
        let short: f64 = gaps().map(|gap| (-gap).max(0.0)).sum();
        let spare: f64 = gaps().map(|gap| gap.max(0.0)).sum();
        let over = (fixed + short - page::COLUMN).max(0.0);
        // Less than a tenth of a millimetre a column is rounding.
        if short <= 0.1 * needs.len() as f64 && over <= 0.1 * needs.len() as f64 {
            return;
        }
        let share = if spare > 0.0 { (over / spare).min(1.0) } else { 0.0 };
        for (column, need) in self.columns.iter_mut().zip(&needs).filter(|(column, _)| column.width > 0.0) {
            let slack = column.width - need;
            column.width = page::tenth(if slack > 0.0 { column.width - slack * share } else { *need });
        }
    }

    /// Width of a column's longest word with the white around it.
    fn need(&self, index: usize) -> f64 {
        let column = self.columns.get(index);
        let (size, white) = if self.small { (8.0, 1.4) } else { (page::TABLE_PT, 2.6) };
        let head = column.map_or(0.0, |column| column.head.longest(false, size));
        let unit = column.map_or(0.0, |column| text_width(&column.unit, Face::Regular, 8.0));
        let cells = self
            .rows
            .iter()
            .filter(|row| !row.span)
            .filter_map(|row| Some(row.cells.get(index)?.longest(row.bold, size)));
        cells.fold(head.max(unit), f64::max) + white
    }

    /// Gives the width that is left to the columns alike, where all of them have a width of their own.
    pub fn spread(&mut self) {
        let used: f64 = self.columns.iter().map(|column| column.width).sum();
        let fixed = self.columns.iter().all(|column| column.width > 0.0);
        let share = (page::COLUMN - used) / self.columns.len().max(1) as f64;
        if fixed && share > 0.0 {
            for column in &mut self.columns {
                column.width = page::tenth(column.width + share.min(8.0) - 0.05);
            }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::{Cell, Column, Row, Table};
    use crate::sheet::page;

    #[test]
    fn a_column_is_widened_for_its_longest_word_and_the_table_stays_within() {
        let columns = vec![Column::text("a").wide(80.0), Column::text("b").wide(30.0), Column::text("").wide(10.0)];
        let mut table = Table::new("", "", columns);
        let mut row = Row::of(vec![Cell::text("some words"), Cell::text("b"), Cell::text("FAILS")]);
        row.bold = true;
        table.rows.push(row);
        table.fit();
        let widths: Vec<f64> = table.columns.iter().map(|column| column.width).collect();
        assert!(widths[2] > 11.0, "{widths:?}");
        assert!(widths.iter().sum::<f64>() <= page::COLUMN + 0.2, "{widths:?}");
        let before = table.clone();
        table.fit();
        assert_eq!(table, before);

        table.columns[0].width = 84.0;
        table.columns[1].width = 34.0;
        table.columns[2].width = 0.0;
        table.fit();
        let widths: Vec<f64> = table.columns.iter().map(|column| column.width).collect();
        assert!(widths[2] > 11.0 && widths.iter().sum::<f64>() <= page::COLUMN + 0.2, "{widths:?}");
        let before = table.clone();
        table.fit();
        assert_eq!(table, before);
    }
}
