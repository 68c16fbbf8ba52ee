//! A line of working, and how it is set: chosen from widths measured beforehand, so that the compiler need not try.

use serde::Serialize;

use super::Equation;
use crate::quantity::Decimal;
use crate::sheet::equation::NotMathematics;
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
    /// Numbers put in, on as many lines as they need; none for a figure that is stated.
    pub numbers: Vec<Equation>,
    /// Whether the result stands on a line of its own, since the line before it is full.
    pub alone: bool,
    /// What it finds, in words, prose: beside a stated figure.
    pub words: String,
    /// Result with unit.
    pub result: String,
    /// Whether it is used later.
    pub bold: bool,
    /// Whether the widest part of an equation is wider than the column and must be made smaller.
    pub shrink: bool,
    /// Side note, prose: what it finds; empty where it is stated.
    pub title: String,
    /// Side note, prose: on what it rests; may be empty.
    pub basis: String,
    /// Side note, prose: where its figures come from; may be empty.
    pub origins: String,
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
    let numbers = match repeats {
        true => None,
        false => Some(Equation::new(format!("= {}", grouped(&step.numbers)), spoken(&step.numbers))?),
    };
    let face = if step.bold { Face::Bold } else { Face::Regular };
    let end = text_width("= ", face, page::TEXT_PT) + text_width(&result, face, page::TEXT_PT);
    let stated = repeats && (step.math.is_empty() || step.math == step.math_symbol);
    let setting = if stated { Setting::Stated } else { setting(&symbols, numbers.as_ref(), end) };
    let (title, words) = if stated { ("", step.title.as_str()) } else { (step.title.as_str(), "") };
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
        drop: 0.0,
        room: 0.0,
    };
    if setting == Setting::Full {
        spread(&mut line, end);
    }
    let tall = |list: &[Equation]| list.first().is_some_and(Equation::is_tall);
    let lower = tall(&line.symbols) || (setting == Setting::Row && tall(&line.numbers));
    line.drop = if lower { 2.6 } else { 0.5 };
    line.room = room(&line);
    Ok(line)
}

fn setting(symbols: &Equation, numbers: Option<&Equation>, end: f64) -> Setting {
    let head = symbols.width(page::TEXT_PT);
    let Some(numbers) = numbers else {
        return if head + end + page::GAP <= page::COLUMN { Setting::Row } else { Setting::Full };
    };
    let tail = numbers.width(page::TEXT_PT) + page::GAP + end;
    match (head + page::GAP <= page::SYMBOLS, tail <= page::COLUMN - page::SYMBOLS) {
        (true, true) => Setting::Row,
        (false, true) if head <= page::COLUMN => Setting::Below,
        _ => Setting::Full,
    }
}

/// Breaks long equations over several lines, and says where the result goes and whether a part must be made smaller.
fn spread(line: &mut Line, end: f64) {
    let broken = |list: &[Equation], first: f64| -> Vec<Equation> {
        list.iter()
            .flat_map(|equation| equation.lines(first, page::COLUMN - 2.0 * page::INDENT, page::TEXT_PT))
            .collect()
    };
    line.symbols = broken(&line.symbols, page::COLUMN);
    line.numbers = broken(&line.numbers, page::COLUMN - page::INDENT);
    let lists = [&line.symbols, &line.numbers];
    let all: Vec<(usize, f64)> = lists
        .into_iter()
        .enumerate()
        .flat_map(|(row, list)| list.iter().enumerate().map(move |(index, equation)| (row + index.min(1), equation)))
        .map(|(indents, equation)| (indents, equation.width(page::TEXT_PT)))
        .collect();
    let room = |indents: usize| page::COLUMN - indents as f64 * page::INDENT;
    line.shrink = all.iter().any(|(indents, width)| *width > room(*indents));
    line.alone = all.last().is_some_and(|(indents, width)| width + page::GAP + end > room(*indents));
}

/// Thin spaces between groups of three digits of whole parts from 10 000 up, as everywhere on the sheet.
pub fn grouped(source: &str) -> String {
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
pub fn spoken(numbers: &str) -> String {
    let words = numbers.replace("frac(", " the quotient of (").replace("times", " times ").replace("dot", " times ");
    let words = words.replace('+', " plus ").replace('-', " minus ").replace('^', " to the power ");
    let words = words.replace(',', " and ").replace("abs(", " the size of (");
    let plain: Vec<&str> = words.split_whitespace().collect();
    format!("equals {}", plain.join(" "))
}

/// White that the side notes of a line need below what stands beside them.
fn room(line: &Line) -> f64 {
    let texts = [&line.title, &line.basis, &line.origins].into_iter().filter(|text| !text.is_empty());
    let notes: f64 = texts.map(|text| page::lines(text, page::NOTES, page::NOTE_PT)).sum();
    let high = |equation: &Equation| -> f64 { if equation.is_tall() { 7.5 } else { 3.2 } };
    let one = |list: &[Equation]| list.iter().map(|equation| high(equation) + page::EQUATION_GAP).sum::<f64>();
    let beside = match line.setting {
        Setting::Stated | Setting::Row => one(&line.symbols).max(one(&line.numbers)),
        Setting::Below | Setting::Full => one(&line.symbols) + one(&line.numbers),
    } - page::EQUATION_GAP;
    // The gap to the next line is white too.
    page::tenth((notes * page::NOTE_LINE + line.drop - beside - page::LINE_GAP + 2.0).max(0.0))
}

#[cfg(test)]
mod tests {
    use super::grouped;

    #[test]
    fn whole_parts_are_grouped_and_decimals_are_not() {
        assert_eq!(grouped("3 times 41200"), "3 times 41 thin 200");
        assert_eq!(grouped("0.00011721683 + 1234567.12345"), "0.00011721683 + 1 thin 234 thin 567.12345");
        assert_eq!(grouped("9999 + x_\"12345\""), "9999 + x_\"12345\"");
    }
}
