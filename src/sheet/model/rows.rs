//! Steps of one shape as the rows of a table.

use super::table::{Align, Cell, Column, Row, Table, aligned};
use crate::sheet::equation::linear;
use crate::sheet::template::Labels;
use crate::sheet::{Fault, page, typeset};
use crate::working;

/// Rows for steps of one shape, and the figures that are the same in all of them, which stand above the table.
pub fn tabulated(steps: &[&working::Step], labels: &Labels) -> Result<(String, Option<Table>), Fault> {
    let Some(first) = steps.first() else { return Ok((String::new(), None)) };
    let one_case = steps.iter().all(|step| step.case == first.case);
    let mut columns = vec![Column::text("").wide(if one_case { 18.0 } else { 26.0 })];
    let results = aligned(&steps.iter().map(|step| step.result.printed).collect::<Vec<_>>());
    let end = results.iter().map(|cell| cell.width(page::TABLE_PT)).fold(12.0, f64::max) + page::GAP;
    let mut shared = Vec::new();
    let mut body = Vec::new();
    if first.math == first.math_symbol {
        columns.push(Column::text(""));
        body.push(steps.iter().map(|step| Cell::prose(step.title.clone())).collect());
    } else if let Some(found) = inputs(steps, page::COLUMN - end - 26.0) {
        (shared, body) = (found.shared, found.cells);
        columns.extend(found.columns);
    } else {
        columns.push(Column::text(labels.get("working.numbers")?));
        let numbers = steps.iter().map(|step| linear(&step.numbers).map(Cell::figures));
        body.push(numbers.collect::<Result<Vec<Cell>, _>>()?);
    }
    columns.push(Column::figures(Cell::text(labels.get("working.result")?), &first.result.unit, end));
    body.push(results);
    let mut table = Table::new("", labels.get("working.rows")?, columns);
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
    table.spread();
    Ok((shared.join(", "), Some(table)))
}

/// Steps whose making the sentence tells: number, symbol, numbers put in, result with its unit.
pub fn listed(steps: &[&working::Step], labels: &Labels) -> Result<Table, Fault> {
    let results: Vec<Cell> = steps.iter().map(|step| Cell::quantity(step.result.printed, &step.result.unit)).collect();
    let end = results.iter().map(|cell| cell.width(page::TABLE_PT)).fold(18.0, f64::max) + page::GAP;
    let columns = vec![
        Column::text("").wide(7.0),
        Column::text("").wide(15.0),
        Column::text(labels.get("working.numbers")?),
        Column { align: Align::Right, ..Column::text(labels.get("working.result")?).wide(end) },
    ];
    let mut table = Table::new("", labels.get("working.listed")?, columns);
    for (index, (step, result)) in steps.iter().zip(results).enumerate() {
        let cells = vec![
            Cell::text((index + 1).to_string()),
            Cell::prose(step.symbol.clone()),
            Cell::figures(linear(&step.numbers)?),
            result,
        ];
        table.rows.push(Row { bold: step.bold, ..Row::of(cells) });
    }
    Ok(table)
}

/// Inputs by column.
struct Inputs {
    shared: Vec<String>,
    columns: Vec<Column>,
    cells: Vec<Vec<Cell>>,
}

/// A column for every input that differs between the rows; `None` where the rows do not have the same inputs or the
/// columns are wider than `room` mm.
fn inputs(steps: &[&working::Step], room: f64) -> Option<Inputs> {
    let first = steps.first()?;
    if steps.iter().any(|step| step.inputs.len() != first.inputs.len()) {
        return None;
    }
    let mut found = Inputs { shared: Vec::new(), columns: Vec::new(), cells: Vec::new() };
    for place in 0..first.inputs.len() {
        let inputs: Vec<&working::Input> = steps.iter().filter_map(|step| step.inputs.get(place)).collect();
        let head = inputs.first()?;
        if inputs.iter().any(|input| input.unit != head.unit) {
            return None;
        }
        let same_name = inputs.iter().all(|input| input.name == head.name);
        if same_name && inputs.iter().all(|input| input.printed == head.printed) {
            found.shared.push(format!("{}\u{A0}=\u{A0}{}", head.name, typeset::quantity(head.printed, &head.unit)));
            continue;
        }
        // Where the rows name it differently the column bears the letter they have in common.
        let letter = head.name.split('_').next().unwrap_or_default();
        if !same_name && inputs.iter().any(|input| input.name.split('_').next() != Some(letter)) {
            return None;
        }
        let cells = aligned(&inputs.iter().map(|input| input.printed).collect::<Vec<_>>());
        let width = cells.iter().map(|cell| cell.width(page::TABLE_PT)).fold(8.0, f64::max) + page::GAP;
        let head_cell = Cell::prose(if same_name { head.name.as_str() } else { letter });
        found.columns.push(Column::figures(head_cell, &head.unit, width));
        found.cells.push(cells);
    }
    let used: f64 = found.columns.iter().map(|column| column.width).sum();
    (used <= room && !found.columns.is_empty()).then_some(found)
}
