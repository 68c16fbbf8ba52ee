//! The working as a reader sees it: chapters of numbered steps, each a sentence with its lines or one table.

use serde::Serialize;

use super::table::{Align, Cell, Column, Row, Table, aligned};
use super::{Equation, Figure};
use crate::quantity::Decimal;
use crate::sheet::equation::NotMathematics;
use crate::sheet::fonts::{Face, text_width};
use crate::sheet::page;
use crate::sheet::typeset;
use crate::working::{self, Body, Chapters, Origin, Working};

/// A chapter of the working.
#[derive(Clone, Debug, Serialize)]
pub struct Chapter {
    /// `given`, `unit_state`, `flexibility`, `case`, `sums`, `places` or `checks`.
    pub about: &'static str,
    /// Index of the redundant, case or combination it is about; 0 for others.
    pub index: usize,
    /// Its number on the sheet.
    pub number: String,
    /// Its heading, prose.
    pub title: String,
    /// Whether it begins on a new page.
    pub new_sheet: bool,
    /// Drawings under its heading.
    pub figures: Vec<Figure>,
    /// Figures repeated so that no page need be turned, prose.
    pub recalled: Vec<String>,
    /// Its steps.
    pub steps: Vec<Step>,
}

/// A numbered paragraph.
#[derive(Clone, Debug, Serialize)]
pub struct Step {
    /// `6.1`.
    pub number: String,
    /// One sentence, prose.
    pub sentence: String,
    /// Side notes, prose.
    pub notes: Vec<String>,
    /// White below, mm, so that long side notes end before the next step.
    pub room: f64,
    /// Lines of working; empty where a table stands.
    pub lines: Vec<Line>,
    /// The formula that the rows of the table share.
    pub formula: Option<Equation>,
    /// Figures of the formula that are the same in every row, prose; may be empty.
    pub shared: String,
    /// The table.
    pub table: Option<Table>,
}

/// A line of working.
#[derive(Clone, Debug, Serialize)]
pub struct Line {
    /// How it is set.
    pub setting: Setting,
    /// Symbols: what it finds and from what.
    pub symbols: Equation,
    /// Numbers put in; none for a figure that is stated.
    pub numbers: Option<Equation>,
    /// Result with unit.
    pub result: String,
    /// Whether it is used later.
    pub bold: bool,
    /// Whether the widest part of an equation is wider than the column and must be made smaller.
    pub shrink: bool,
}

/// How a line is set; chosen from measured widths, so that the compiler need not try.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Setting {
    /// Symbols, numbers and result side by side.
    Row,
    /// Numbers and result below the symbols, in their own columns.
    Below,
    /// Numbers below the symbols over the whole width, the result at the end of their last line.
    Full,
}

/// The chapters of a working.
///
/// An equation that is not plain mathematics is a fault of the program; it is reported, never set.
pub fn chapters(working: &Working) -> Result<Vec<Chapter>, NotMathematics> {
    working.chapters.iter().map(|chapter| view(working, chapter)).collect()
}

fn view(working: &Working, chapter: &working::Chapter) -> Result<Chapter, NotMathematics> {
    let (about, index) = match chapter.about {
        Chapters::Given => ("given", 0),
        Chapters::UnitState(index) => ("unit_state", index),
        Chapters::Flexibility => ("flexibility", 0),
        Chapters::Case(index) => ("case", index),
        Chapters::Sums => ("sums", 0),
        Chapters::Places(index) => ("places", index),
        Chapters::Checks => ("checks", 0),
    };
    let steps: Result<Vec<Step>, NotMathematics> = chapter.blocks.iter().map(|block| step(working, block)).collect();
    Ok(Chapter {
        about,
        index,
        number: chapter.number.to_string(),
        title: chapter.title.clone(),
        new_sheet: matches!(about, "case" | "sums"),
        figures: Vec::new(),
        recalled: Vec::new(),
        steps: steps?,
    })
}

fn step(working: &Working, block: &working::Block) -> Result<Step, NotMathematics> {
    let (Body::Lines(indices) | Body::Table(indices)) = &block.body;
    let steps: Vec<&working::Step> = indices.iter().filter_map(|index| working.steps.get(*index)).collect();
    let mut notes = block.notes.clone();
    notes.extend(origins(working, block, &steps));
    let mut view = Step {
        number: block.number.clone(),
        sentence: block.sentence.clone(),
        notes,
        room: 0.0,
        lines: Vec::new(),
        formula: None,
        shared: String::new(),
        table: None,
    };
    match (&block.body, steps.first()) {
        (Body::Table(_), Some(first)) => {
            view.formula = Some(symbols(first)?);
            (view.shared, view.table) = tabulated(&steps)?;
        }
        _ => view.lines = steps.iter().map(|step| line(step)).collect::<Result<_, _>>()?,
    }
    view.room = room(&view);
    Ok(view)
}

/// Where the figures that a block uses come from: `V_C, M_C: 6.1`.
fn origins(working: &Working, block: &working::Block, steps: &[&working::Step]) -> Option<String> {
    let mut places: Vec<(&str, Vec<&str>)> = Vec::new();
    for input in steps.iter().flat_map(|step| &step.inputs) {
        let Origin::Step(index) = input.from else { continue };
        let Some(id) = working.steps.get(index).map(|step| step.id.as_str()) else { continue };
        let place = id.rsplit_once('.').map_or(id, |(place, _)| place);
        if place == block.number {
            continue;
        }
        match places.iter_mut().find(|(known, _)| *known == place) {
            Some((_, names)) if names.contains(&input.name.as_str()) => {}
            Some((_, names)) => names.push(&input.name),
            None => places.push((place, vec![&input.name])),
        }
    }
    let words: Vec<String> = places.iter().map(|(place, names)| format!("{}: {place}.", names.join(", "))).collect();
    (!words.is_empty()).then(|| words.join(" "))
}

fn symbols(step: &working::Step) -> Result<Equation, NotMathematics> {
    if step.math.is_empty() || step.math == step.math_symbol {
        return Equation::new(step.math_symbol.clone(), step.spoken.clone());
    }
    Equation::new(format!("{} = {}", step.math_symbol, step.math), step.spoken.clone())
}

fn line(step: &working::Step) -> Result<Line, NotMathematics> {
    let symbols = symbols(step)?;
    let result = typeset::quantity(step.result.printed, &step.result.unit);
    let stated = step.numbers.is_empty() || Decimal::parse(&step.numbers) == Some(step.result.printed);
    let numbers = match stated {
        true => None,
        false => Some(Equation::new(format!("= {}", grouped(&step.numbers)), spoken(&step.numbers))?),
    };
    let setting = setting(&symbols, numbers.as_ref(), &result, step.bold);
    let wide = |equation: &Equation| equation.widest_part(page::TEXT_PT) > page::COLUMN - 2.0 * page::INDENT;
    let shrink = wide(&symbols) || numbers.as_ref().is_some_and(wide);
    Ok(Line { setting, symbols, numbers, result: format!("= {result}"), bold: step.bold, shrink })
}

/// Thin spaces between groups of three digits of whole parts from 10 000 up, as everywhere on the sheet.
fn grouped(source: &str) -> String {
    let mut out = String::with_capacity(source.len());
    let mut rest = source;
    while let Some(start) = rest.find(|c: char| c.is_ascii_digit()) {
        let (before, digits) = rest.split_at(start);
        let length = digits.find(|c: char| !c.is_ascii_digit()).unwrap_or(digits.len());
        let (whole, after) = digits.split_at(length);
        out.push_str(before);
        let fraction = before.ends_with('.') || before.ends_with('"');
        if whole.len() < 5 || fraction {
            out.push_str(whole);
        } else {
            for (index, digit) in whole.chars().enumerate() {
                if index > 0 && (whole.len() - index).is_multiple_of(3) {
                    out.push_str(" thin ");
                }
                out.push(digit);
            }
        }
        rest = after;
    }
    out.push_str(rest);
    out
}

/// Numbers put in, read out: the figures in order with their operations.
fn spoken(numbers: &str) -> String {
    let words = numbers.replace("frac(", " the quotient of (").replace("times", " times ").replace("dot", " times ");
    let words = words.replace('+', " plus ").replace('-', " minus ").replace('^', " to the power ");
    let words = words.replace(',', " and ").replace("abs(", " the size of (");
    let plain: Vec<&str> = words.split_whitespace().collect();
    format!("equals {}", plain.join(" "))
}

fn setting(symbols: &Equation, numbers: Option<&Equation>, result: &str, bold: bool) -> Setting {
    let face = if bold { Face::Bold } else { Face::Regular };
    let end = text_width("= ", face, page::TEXT_PT) + text_width(result, face, page::TEXT_PT);
    let head = symbols.width(page::TEXT_PT);
    let Some(numbers) = numbers else {
        return if head + end + page::GAP <= page::COLUMN { Setting::Row } else { Setting::Full };
    };
    let tail = numbers.width(page::TEXT_PT) + page::GAP + end;
    match (head + page::GAP <= page::SYMBOLS, tail <= page::COLUMN - page::SYMBOLS) {
        (true, true) => Setting::Row,
        (false, true) => Setting::Below,
        (_, false) => Setting::Full,
    }
}

/// Steps of one shape as rows; figures that are the same in all of them stand in the sentence above.
fn tabulated(steps: &[&working::Step]) -> Result<(String, Option<Table>), NotMathematics> {
    let Some(first) = steps.first() else { return Ok((String::new(), None)) };
    let one_case = steps.iter().all(|step| step.case == first.case);
    let mut columns = vec![Column::text("").wide(if one_case { 18.0 } else { 26.0 })];
    let mut shared: Vec<String> = Vec::new();
    let mut body: Vec<Vec<Cell>> = Vec::new();
    let alike = steps.iter().all(|step| step.inputs.len() == first.inputs.len());
    if alike {
        for place in 0..first.inputs.len() {
            let inputs: Vec<&working::Input> = steps.iter().filter_map(|step| step.inputs.get(place)).collect();
            let Some(head) = inputs.first() else { continue };
            let same_name = inputs.iter().all(|input| input.name == head.name);
            if same_name && inputs.iter().all(|input| input.printed == head.printed && input.unit == head.unit) {
                shared.push(format!("{} = {}", head.name, typeset::quantity(head.printed, &head.unit)));
                continue;
            }
            let name = if same_name { head.name.as_str() } else { head.name.split('_').next().unwrap_or_default() };
            let cells = aligned(&inputs.iter().map(|input| input.printed).collect::<Vec<_>>());
            let width = cells.iter().map(|cell| cell.width(page::TABLE_PT)).fold(8.0, f64::max) + page::GAP;
            columns.push(Column::figures(Cell::prose(name), &head.unit, width));
            body.push(cells);
        }
    }
    let results = aligned(&steps.iter().map(|step| step.result.printed).collect::<Vec<_>>());
    let end = results.iter().map(|cell| cell.width(page::TABLE_PT)).fold(12.0, f64::max) + page::GAP;
    let used: f64 = columns.iter().map(|column| column.width).sum::<f64>() + end;
    if !alike || used > page::COLUMN || columns.len() == 1 {
        columns.truncate(1);
        shared.clear();
        columns.push(Column::text("numbers put in"));
        let equations = steps.iter().map(|step| Equation::new(grouped(&step.numbers), spoken(&step.numbers)));
        body = vec![equations.map(|equation| equation.map(|equation| Cell::Equation { equation })).collect::<Result<_, _>>()?];
    }
    columns.push(Column::figures(Cell::prose("result"), &first.result.unit, end));
    body.push(results);
    let mut table = Table::new("", format!("One formula for {} results", steps.len()), columns);
    for (index, step) in steps.iter().enumerate() {
        let name = match (&step.case, one_case) {
            (Some(case), false) => format!("{}, {case}", step.symbol),
            _ => step.symbol.clone(),
        };
        let figures = body.iter().filter_map(|column| column.get(index).cloned());
        let mut row = Row::of(std::iter::once(Cell::prose(name)).chain(figures).collect());
        row.bold = step.bold;
        table.rows.push(row);
    }
    table.middle = table.rows.iter().flat_map(|row| &row.cells).any(|cell| matches!(cell, Cell::Equation { .. }));
    table.spread();
    if let Some(last) = table.columns.last_mut() {
        last.align = Align::Right;
    }
    Ok((shared.join(", "), Some(table)))
}

/// White that the side notes need below what stands beside them.
fn room(step: &Step) -> f64 {
    let notes: f64 = step.notes.iter().map(|note| page::lines(note, page::NOTES, page::NOTE_PT)).sum();
    let notes_high = notes * page::NOTE_LINE;
    let sentence = page::lines(&step.sentence, page::COLUMN, page::TEXT_PT) * page::TEXT_LINE;
    let high = |equation: &Equation| if equation.is_tall() { 7.5 } else { page::TEXT_LINE };
    let lines: f64 = step
        .lines
        .iter()
        .map(|line| {
            let below = if line.setting == Setting::Row { 0.0 } else { page::TEXT_LINE };
            high(&line.symbols).max(line.numbers.as_ref().map_or(0.0, high)) + below + 1.0
        })
        .sum();
    let table = step.table.as_ref().map_or(0.0, |table| (table.rows.len() + 2) as f64 * page::TABLE_LINE);
    let formula = step.formula.as_ref().map_or(0.0, |formula| high(formula) + 1.0);
    ((notes_high - sentence - lines - table - formula).max(0.0) * 10.0).round() / 10.0
}
