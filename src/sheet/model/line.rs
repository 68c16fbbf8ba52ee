//! A line of working, and how it is set: chosen from widths measured beforehand, so that the compiler need not try.

use serde::Serialize;

use super::Equation;
use crate::quantity::Decimal;
use crate::sheet::equation::{NotMathematics, linear, linear_lines};
use crate::sheet::fonts::{Face, text_width};
use crate::sheet::{page, typeset};
use crate::working;

/// A line of working.
#[derive(Clone, Debug, Serialize)]
pub struct Line {
    /// `6.1.2`, where its step has several lines; empty where it has one.
    pub id: String,
    /// How it is set.
    pub setting: Setting,
    /// Symbols, what it finds and from what, on as many lines as they need.
    pub symbols: Vec<Equation>,
    /// Numbers put in, as a calculator takes them, on as many lines as they need; none for a figure that is stated.
    pub numbers: Vec<String>,
    /// Whether the result stands on a line of its own, since the line before it is full.
    pub alone: bool,
    /// What it finds, in words, prose: beside a stated figure.
    pub words: String,
    /// Result with unit.
    pub result: String,
    /// Whether it is used later.
    pub bold: bool,
    /// Whether the widest part of the symbols is wider than the column and must be made smaller.
    pub shrink: bool,
    /// Side note, prose: what it finds; empty where it is stated.
    pub title: String,
    /// Side note, prose: on what it rests; may be empty.
    pub basis: String,
    /// Side note, prose: where its figures come from; may be empty.
    pub origins: String,
    /// White above and below that a fraction needs, mm.
    pub tall: f64,
    /// How far below the top of the line its number and notes stand, mm: a fraction's line lies lower.
    pub drop: f64,
    /// White below, mm, so that the side notes end before the next line's.
    pub room: f64,
}

/// How a line is set.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Setting {
    /// A figure that is stated: symbol, words, result.
    Stated,
    /// Symbols, numbers and result side by side.
    Row,
    /// The same, where the numbers begin further right than in other lines.
    Flow,
    /// Numbers and result below the symbols, in their own columns.
    Below,
    /// Symbols, and below them numbers, over the whole width; the result at the end of the last line.
    Full,
}

/// The left side and the symbols of a step as one equation; the symbol alone where the step states a figure.
pub fn symbols(step: &working::Step) -> Result<Equation, NotMathematics> {
    if step.math.is_empty() || step.math == step.math_symbol {
        return Equation::new(step.math_symbol.clone(), step.spoken.clone());
    }
    Equation::new(format!("{} = {}", step.math_symbol, step.math), step.spoken.clone())
}

/// A step as a line; `basis` is what it rests on where the line above did not say so, `several` whether its block has
/// other lines.
pub fn line(step: &working::Step, basis: &str, origins: Option<String>, several: bool) -> Result<Line, NotMathematics> {
    let symbols = symbols(step)?;
    let result = typeset::quantity(step.result.printed, &step.result.unit);
    let repeats = step.numbers.is_empty() || Decimal::parse(&step.numbers) == Some(step.result.printed);
    let numbers = if repeats { None } else { Some(linear(&format!("= {}", step.numbers))?) };
    let face = if step.bold { Face::Bold } else { Face::Regular };
    let end = text_width("= ", face, page::TEXT_PT) + text_width(&result, face, page::TEXT_PT);
    let stated = repeats && (step.math.is_empty() || step.math == step.math_symbol);
    let setting = if stated { Setting::Stated } else { setting(&symbols, numbers.as_deref(), end) };
    let beside =
        text_width(&step.title, Face::Regular, page::TABLE_PT) + page::SYMBOL + page::GAP + end <= page::COLUMN;
    let inside = stated && beside && symbols.width(page::TEXT_PT) < page::SYMBOL;
    let (title, words) = if inside { ("", step.title.as_str()) } else { (step.title.as_str(), "") };
    let mut line = Line {
        id: if several { step.id.clone() } else { String::new() },
        setting,
        symbols: vec![symbols],
        numbers: numbers.into_iter().collect(),
        alone: false,
        words: words.to_owned(),
        result: format!("= {result}"),
        bold: step.bold,
        shrink: false,
        title: title.to_owned(),
        basis: basis.to_owned(),
        origins: origins.unwrap_or_default(),
        tall: 0.0,
        drop: 0.0,
        room: 0.0,
    };
    if setting == Setting::Full {
        spread(&mut line, end);
    }
    let lower = line.symbols.first().is_some_and(Equation::is_tall);
    (line.tall, line.drop) = if lower { (1.2, 1.5) } else { (0.0, 0.5) };
    line.room = room(&line);
    Ok(line)
}

fn setting(symbols: &Equation, numbers: Option<&str>, end: f64) -> Setting {
    let head = symbols.width(page::TEXT_PT);
    let Some(numbers) = numbers else {
        return if head + end + page::GAP <= page::COLUMN { Setting::Row } else { Setting::Full };
    };
    let tail = text_width(numbers, Face::Regular, page::TEXT_PT) + page::GAP + end;
    let beside = tail <= page::COLUMN - page::SYMBOLS;
    match head + page::GAP {
        head if head <= page::SYMBOLS && beside => Setting::Row,
        head if head + tail <= page::COLUMN => Setting::Flow,
        head if head <= page::COLUMN && beside => Setting::Below,
        _ => Setting::Full,
    }
}

/// Breaks what is long over several lines, and says where the result goes and whether a part must be made smaller.
fn spread(line: &mut Line, end: f64) {
    let rest = page::COLUMN - 2.0 * page::INDENT;
    let wide = |text: &str| text_width(text, Face::Regular, page::TEXT_PT);
    line.symbols = line.symbols.iter().flat_map(|one| one.lines(page::COLUMN, rest, page::TEXT_PT)).collect();
    let numbers = line.numbers.iter();
    line.numbers =
        numbers.flat_map(|one| linear_lines(one, page::COLUMN - page::INDENT, rest, page::TEXT_PT)).collect();
    let room = |index: usize, first: f64| if index == 0 { first } else { rest };
    let symbols = line.symbols.iter().map(|one| one.width(page::TEXT_PT));
    line.shrink = symbols.enumerate().any(|(index, width)| width > room(index, page::COLUMN));
    let last = match line.numbers.last() {
        Some(last) => wide(last) + end + page::GAP - room(line.numbers.len() - 1, page::COLUMN - page::INDENT),
        None => {
            let last = line.symbols.last().map_or(0.0, |last| last.width(page::TEXT_PT));
            last + end + page::GAP - room(line.symbols.len().saturating_sub(1), page::COLUMN)
        }
    };
    line.alone = last > 0.0;
}

/// White that the side notes of a line need below what stands beside them.
fn room(line: &Line) -> f64 {
    let note = [line.title.as_str(), &line.basis, &line.origins].join(" ");
    let notes = if note.trim().is_empty() { 0.0 } else { page::lines(&note, page::NOTES, page::NOTE_PT) };
    let high = |equation: &Equation| -> f64 { if equation.is_tall() { 6.0 } else { 3.2 } };
    let symbols = line.symbols.iter().map(|one| high(one) + page::EQUATION_GAP).sum::<f64>();
    let numbers = match line.setting {
        Setting::Stated | Setting::Row | Setting::Flow => 0.0,
        Setting::Below | Setting::Full => line.numbers.len() as f64 * (3.2 + page::EQUATION_GAP),
    };
    let beside = symbols + numbers - page::EQUATION_GAP;
    // The gap to the next line is white too.
    page::tenth((notes * page::NOTE_LINE + line.drop - beside - page::LINE_GAP + 1.2).max(0.0))
}
