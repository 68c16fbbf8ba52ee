//! Grids: one derivation for several places, spans or combinations, a column for each of them; and weighted sums.

use super::step::Reader;
use super::table::{Align, Cell, Column, Row, Table};
use crate::sheet::model::line::symbols;
use crate::sheet::{Fault, page, typeset};
use crate::working::{self, Grid, Origin, column_letter};

/// Width of the row's number, its symbol and its unit, mm.
const LABELS: [f64; 3] = [5.0, 13.0, 11.0];
/// Narrowest column of figures, mm.
const NARROWEST: f64 = 11.0;
/// Size of the figures, pt.
const SMALL_PT: f64 = 8.0;
/// White between figures, mm.
const GAP: f64 = 1.6;

/// A row of a grid: what it is called, and its figures.
struct Line {
    number: String,
    label: String,
    unit: String,
    figures: Vec<String>,
    bold: bool,
}

/// What stands above the figures of a line.
struct Above {
    formula: Vec<super::Equation>,
    words: String,
}

impl Reader<'_> {
    /// A grid as tables, as many columns in each as there is room for; and the figures all columns share.
    pub(super) fn grid(&self, grid: &Grid) -> Result<(String, Vec<Table>), Fault> {
        let mut shared: Vec<String> = Vec::new();
        let mut lines: Vec<(Option<Above>, Line)> = Vec::new();
        let mut shown: Vec<Vec<Option<usize>>> = grid.rows.clone();
        for (number, row) in grid.rows.iter().enumerate() {
            let steps: Vec<&working::Step> =
                row.iter().flatten().filter_map(|step| self.working.steps.get(*step)).collect();
            let Some(first) = steps.first() else { continue };
            for place in 0..first.inputs.len() {
                let inputs: Vec<&working::Input> = steps.iter().filter_map(|step| step.inputs.get(place)).collect();
                let from: Vec<Option<usize>> = inputs.iter().map(|input| step_of(input)).collect();
                if shown.contains(&from) && from.iter().any(Option::is_some) {
                    continue;
                }
                let Some(head) = inputs.first() else { continue };
                let one = inputs.iter().all(|input| input.printed == head.printed && input.name == head.name);
                if one {
                    let said = format!("{}\u{A0}=\u{A0}{}", head.name, typeset::quantity(head.printed, &head.unit));
                    if !shared.contains(&said) {
                        shared.push(said);
                    }
                    continue;
                }
                let figures = inputs.iter().map(|input| typeset::figure(input.printed)).collect();
                let unit = typeset::unit(&head.unit);
                lines
                    .push((None, Line { number: String::new(), label: head.name.clone(), unit, figures, bold: false }));
                shown.push(from);
            }
            let plain = first.math.is_empty() || first.math == first.math_symbol;
            let above = if plain {
                Above { formula: Vec::new(), words: first.title.clone() }
            } else {
                let words = if first.basis.is_empty() {
                    first.title.clone()
                } else {
                    format!("{}; {}", first.title, first.basis)
                };
                Above {
                    formula: symbols(first)?.lines(page::COLUMN - 12.0, page::COLUMN - 12.0, page::TABLE_PT),
                    words,
                }
            };
            let figures = steps.iter().map(|step| typeset::figure(step.result.printed)).collect();
            let unit = typeset::unit(&first.result.unit);
            let label = first.symbol.clone();
            let number = (number + 1).to_string();
            lines.push((Some(above), Line { number, label, unit, figures, bold: first.bold }));
        }
        let tables = chunks(&lines.iter().map(|(_, line)| line).collect::<Vec<_>>(), grid.heads.len(), LABELS)
            .into_iter()
            .map(|part| self.grid_table(grid, &lines, part))
            .collect::<Result<Vec<Table>, Fault>>()?;
        Ok((shared.join(", "), tables))
    }

    fn grid_table(
        &self,
        grid: &Grid,
        lines: &[(Option<Above>, Line)],
        part: std::ops::Range<usize>,
    ) -> Result<Table, Fault> {
        let mut columns = labels(LABELS);
        let each = (page::COLUMN - LABELS.iter().sum::<f64>()) / part.len().max(4) as f64;
        for index in part.clone() {
            let Some((head, second)) = grid.heads.get(index) else { continue };
            let head = if grid.heads.len() > 1 && !head.is_empty() {
                format!("{}\u{2002}{head}", column_letter(index))
            } else {
                head.clone()
            };
            columns.push(Column {
                head: Cell::prose(head),
                unit: second.clone(),
                align: Align::Right,
                width: page::tenth(each - 0.05),
            });
        }
        let mut table = Table::new("", self.labels.get("working.columns")?, columns);
        table.small = true;
        let first = part.start == 0;
        for (above, line) in lines {
            if let Some(above) = above.as_ref().filter(|_| first) {
                let formula = Cell::Formula { lines: above.formula.clone(), words: above.words.clone() };
                table.rows.push(Row { span: true, ..Row::of(vec![formula]) });
            }
            table.rows.push(line.row(&part));
        }
        Ok(table)
    }

    /// Weighted sums as tables: cases, then combinations with their factors above.
    pub(super) fn matrix(&self, grid: &Grid) -> Vec<Table> {
        let cases = self.summed_cases(grid);
        let heads: Vec<(String, bool)> = cases
            .iter()
            .map(|case| (case.clone(), false))
            .chain(grid.heads.iter().map(|h| (h.0.clone(), true)))
            .collect();
        let mut lines = self.factor_lines(grid, &cases);
        let factors = lines.len();
        lines.extend(grid.rows.iter().enumerate().filter_map(|(number, row)| self.sum_line(number, row, &cases)));
        let mut tables = Vec::new();
        for part in chunks(&lines.iter().collect::<Vec<_>>(), heads.len(), LABELS) {
            let mut columns = labels(LABELS);
            let each = (page::COLUMN - LABELS.iter().sum::<f64>()) / part.len().max(4) as f64;
            for index in part.clone() {
                let Some((head, combination)) = heads.get(index) else { continue };
                let letter = if *combination {
                    format!("{}\u{2002}", column_letter(index - cases.len()))
                } else {
                    String::new()
                };
                columns.push(Column {
                    head: Cell::text(format!("{letter}{head}")),
                    unit: String::new(),
                    align: Align::Right,
                    width: page::tenth(each - 0.05),
                });
            }
            let mut table = Table::new("", self.labels.get("working.sums").unwrap_or_default(), columns);
            table.small = true;
            for (index, line) in lines.iter().enumerate() {
                let combinations = part.end > cases.len();
                if index >= factors || combinations {
                    table.rows.push(Row { rule: index == factors && combinations, ..line.row(&part) });
                }
            }
            tables.push(table);
        }
        tables
    }

    /// The load cases that the sums draw on, in the order of the working.
    fn summed_cases(&self, grid: &Grid) -> Vec<String> {
        let mut found: Vec<(usize, String)> = Vec::new();
        for step in grid.rows.iter().flatten().flatten().filter_map(|step| self.working.steps.get(*step)) {
            for input in &step.inputs {
                let Some(index) = step_of(input) else { continue };
                let Some(case) = self.working.steps.get(index).and_then(|step| step.case.clone()) else { continue };
                match found.iter_mut().find(|(_, known)| *known == case) {
                    Some((first, _)) => *first = (*first).min(index),
                    None => found.push((index, case)),
                }
            }
        }
        found.sort();
        found.into_iter().map(|(_, case)| case).collect()
    }

    /// Factor and figure of a case in a step that sums.
    fn term<'s>(
        &'s self,
        step: &'s working::Step,
        case: &str,
    ) -> Option<(Option<&'s working::Input>, &'s working::Input)> {
        let of = |input: &&working::Input| {
            step_of(input).and_then(|index| self.working.steps.get(index)).and_then(|step| step.case.as_deref())
                == Some(case)
        };
        let place = step.inputs.iter().position(|input| of(&input))?;
        let factor = place.checked_sub(1).and_then(|before| step.inputs.get(before));
        let factor = factor.filter(|input| {
            let from = step_of(input).and_then(|index| self.working.steps.get(index));
            from.is_some_and(|step| step.case.is_none())
        });
        Some((factor, step.inputs.get(place)?))
    }

    /// A line of factors for each case; the case columns stay empty.
    fn factor_lines(&self, grid: &Grid, cases: &[String]) -> Vec<Line> {
        let lines = cases.iter().map(|case| {
            let factors = (0..grid.heads.len()).map(|column| {
                let steps = grid.rows.iter().filter_map(|row| row.get(column).copied().flatten());
                let mut found = steps.filter_map(|step| self.term(self.working.steps.get(step)?, case)?.0);
                found.next().map_or_else(|| "0".to_owned(), |input| typeset::figure(input.printed))
            });
            let figures = cases.iter().map(|_| String::new()).chain(factors).collect();
            Line { number: String::new(), label: format!("gamma_{case}"), unit: String::new(), figures, bold: false }
        });
        lines.collect()
    }

    fn sum_line(&self, number: usize, row: &[Option<usize>], cases: &[String]) -> Option<Line> {
        let step = |cell: &Option<usize>| cell.and_then(|step| self.working.steps.get(step));
        let first = row.iter().find_map(step)?;
        let figures = cases.iter().map(|case| {
            let mut terms = row.iter().filter_map(step).filter_map(|step| self.term(step, case));
            terms.next().map_or_else(|| "0".to_owned(), |(_, input)| typeset::figure(input.printed))
        });
        let sums =
            row.iter().map(|cell| step(cell).map_or("0".to_owned(), |step| typeset::figure(step.result.printed)));
        Some(Line {
            number: (number + 1).to_string(),
            label: first.symbol.clone(),
            unit: typeset::unit(&first.result.unit),
            figures: figures.chain(sums).collect(),
            bold: first.bold,
        })
    }

    /// `V_C: 7.1, w_CB: 8.1`: from which numbered paragraphs a grid takes what it does not hold itself.
    pub(super) fn grid_origins(&self, block: &working::Block) -> Option<String> {
        let mut words: Vec<(String, Vec<String>)> = Vec::new();
        let steps = block.body.steps();
        for input in steps.iter().filter_map(|step| self.working.steps.get(*step)).flat_map(|step| &step.inputs) {
            let Some(from) = step_of(input).and_then(|index| self.foreign(index, block)) else { continue };
            match words.iter_mut().find(|(known, _)| *known == from) {
                Some((_, names)) if names.contains(&input.name) || names.len() > 7 => {}
                Some((_, names)) => names.push(input.name.clone()),
                None => words.push((from, vec![input.name.clone()])),
            }
        }
        let list: Vec<String> =
            words.into_iter().map(|(from, names)| format!("{}: {from}", names.join(", "))).collect();
        (!list.is_empty()).then(|| list.join("; "))
    }
}

impl Line {
    fn row(&self, part: &std::ops::Range<usize>) -> Row {
        let mut cells =
            vec![Cell::text(self.number.clone()), Cell::prose(self.label.clone()), Cell::text(self.unit.clone())];
        cells.extend(
            part.clone().filter_map(|index| self.figures.get(index)).map(|figure| Cell::figures(figure.clone())),
        );
        Row { bold: self.bold, ..Row::of(cells) }
    }
}

fn labels(widths: [f64; 3]) -> Vec<Column> {
    widths.map(|width| Column::text("").wide(width)).into()
}

fn step_of(input: &working::Input) -> Option<usize> {
    match input.from {
        Origin::Step(index) => Some(index),
        Origin::Deck => None,
    }
}

/// How the columns are shared out among tables, each as wide as the text column allows.
fn chunks(lines: &[&Line], columns: usize, labels: [f64; 3]) -> Vec<std::ops::Range<usize>> {
    let widest =
        lines.iter().flat_map(|line| &line.figures).map(|figure| Cell::figures(figure.clone()).width(SMALL_PT) + GAP);
    let each = widest.fold(NARROWEST, f64::max);
    let room = page::COLUMN - labels.iter().sum::<f64>();
    let count = ((room / each) as usize).max(1);
    // Tables of like width rather than a full one and a rest.
    let tables = columns.div_ceil(count).max(1);
    let each = columns.div_ceil(tables).max(1);
    (0..tables).map(|table| (table * each)..((table + 1) * each).min(columns)).filter(|part| !part.is_empty()).collect()
}
