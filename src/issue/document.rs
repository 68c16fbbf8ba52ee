//! What makes a sheet a document: assumptions, sources, revisions, events, the program that made it.

use crate::calculation::Calculation;
use crate::member::Member;
use crate::quantity::Decimal;
use crate::sheet::model::{Cell, Column, Row, Table};
use crate::sheet::typeset;
use crate::working::Working;

/// Assumptions of the deck, in its order.
pub fn assumptions(member: &Member) -> Vec<String> {
    let each = member.record.assumptions.iter().map(|assumption| {
        let mut said = assumption.text.trim_end_matches('.').to_owned();
        if !assumption.source.is_empty() {
            said = format!("{said} (source: {})", assumption.source);
        }
        if assumption.confirm { format!("{said}; to be confirmed.") } else { format!("{said}.") }
    });
    each.collect()
}

/// Sources of what was typed, and what waits for confirmation.
pub fn declared(member: &Member) -> Option<Table> {
    let columns =
        vec![Column::text("input").wide(36.0), Column::text("source").wide(54.0), Column::text("state").wide(30.0)];
    let mut table = Table::new("Sources of the input", "Sources of the input and what waits for confirmation", columns);
    for one in &member.record.declared {
        let state = if one.confirm { "TO BE CONFIRMED" } else { "as sourced" };
        let source = if one.source.is_empty() { "none given" } else { one.source.as_str() };
        let cells = [one.words.as_str(), source, state].map(Cell::text).to_vec();
        table.rows.push(Row { bold: one.confirm, ..Row::of(cells) });
    }
    (!table.rows.is_empty()).then_some(table)
}

fn day((year, month, day): (u16, u8, u8)) -> String {
    format!("{year:04}-{month:02}-{day:02}")
}

/// The revisions: what changed, why, and which results moved.
pub fn revisions(member: &Member) -> Option<Table> {
    let columns = vec![
        Column::text("revision").wide(16.0),
        Column::text("date").wide(22.0),
        Column::text("what changed").wide(36.0),
        Column::text("why").wide(26.0),
        Column::text("results that moved").wide(20.0),
    ];
    let mut table = Table::new("", "Revisions", columns);
    for one in &member.record.revisions {
        let moved = if one.moved.is_empty() { "not said" } else { one.moved.as_str() };
        let date = day(one.date);
        let cells = [one.letter.as_str(), &date, &one.what, &one.why, moved].map(Cell::text).to_vec();
        table.rows.push(Row { bold: one.letter == member.title.revision, ..Row::of(cells) });
    }
    (!table.rows.is_empty()).then_some(table)
}

/// What has been done with this calculation, by whom, and what has not.
pub fn events(member: &Member) -> Option<Table> {
    let columns =
        vec![Column::text("event").wide(34.0), Column::text("by").wide(50.0), Column::text("date").wide(36.0)];
    let mut table = Table::new("", "Events in the life of this calculation", columns);
    let title = &member.title;
    let date = day(title.date);
    let none = "not recorded";
    let mut row = |event: &str, by: &str, on: &str| {
        table.rows.push(Row::of([event, by, on].map(Cell::text).to_vec()));
    };
    row("created", title.prepared.as_deref().unwrap_or(none), &date);
    row(
        "checked",
        title.checked.as_deref().unwrap_or("not checked"),
        if title.checked.is_some() { "see signature" } else { "–" },
    );
    row(
        "approved",
        title.approved.as_deref().unwrap_or("not approved"),
        if title.approved.is_some() { "see signature" } else { "–" },
    );
    let superseded = member.record.revisions.iter().filter(|one| one.letter != title.revision);
    for one in superseded {
        row(&format!("revision {} superseded", one.letter), "by the revisions after it", &day(one.date));
    }
    row("issue timestamped", "no trusted authority", "not timestamped");
    row(
        "kept",
        member.record.retention.as_deref().unwrap_or("as the office\u{2019}s rules say"),
        "from the date of issue",
    );
    Some(table)
}

/// The program, and how far its figures go.
pub fn program(calculation: &Calculation, working: &Working) -> Vec<String> {
    let mut said = vec![
        format!(
            "Proofspan {}. Its tests hold it against published cases and worked examples, each named beside its check.",
            env!("CARGO_PKG_VERSION")
        ),
        format!("{} significant figures carried; verdicts are taken from unrounded values.", working.figures),
    ];
    if let Some(condition) = calculation.analysis.flexibility.condition {
        said.push(format!(
            "Condition number of the flexibilities: {}.",
            typeset::figure(Decimal::nearest(condition, 3))
        ));
    }
    said
}
