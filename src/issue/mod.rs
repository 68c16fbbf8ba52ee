//! An issued sheet: everything a calculation knows, put on paper.

mod plots;

use crate::calculation::{Calculation, both_routes};
use crate::figure::{Cut, Words};
use crate::member::{Member, Purpose};
use crate::quantity::Decimal;
use crate::sheet::model::{Cell, Column, Findings, Parts, Row, Table};
use crate::sheet::{self, Attachments, Model, Options, Printed, typeset};
use crate::verdict::{Check, rounded_up};
use crate::working::{Step, Working, place_names};

/// Prints the sheet of a calculation.
///
/// # Errors
/// A character that no font has, a template at fault, or a page that cannot be set.
pub fn print(
    calculation: &Calculation,
    working: &Working,
    deck: &str,
    file: &str,
    mut options: Options,
) -> Result<Printed, sheet::Fault> {
    let labels = options.templates.labels()?;
    let member = &calculation.member;
    let results = format!("{}\n", calculation.json(Some(working)));
    options.ident.clone_from(&calculation.deck_sha256);
    let findings = findings(calculation, working, file);
    let words = words(calculation, working);
    let model = Model::compose(&Parts {
        member,
        redundants: &calculation.analysis.model.redundants,
        working,
        words: &words,
        findings: &findings,
        file,
        deck,
        labels: &labels,
    })?;
    options.attachments = Attachments { deck: Some(deck.as_bytes().to_vec()), results: Some(results.into_bytes()) };
    sheet::print(&model, &options)
}

/// The step of a case or combination with this symbol.
fn find<'a>(working: &'a Working, tag: &str, symbol: &str) -> Option<&'a Step> {
    working.steps.iter().rev().find(|step| step.symbol == symbol && step.case.as_deref().unwrap_or_default() == tag)
}

fn words(calculation: &Calculation, working: &Working) -> Words {
    let (member, model) = (&calculation.member, &calculation.analysis.model);
    let cuts = place_names(member, model).into_iter().map(|(place, name)| Cut { at: place.x(), name }).collect();
    let rigidity = member
        .sections
        .iter()
        .map(|section| {
            let step = find(working, "", &format!("EI_{}", section.name));
            step.map_or_else(String::new, |step| typeset::quantity(step.result.printed, &step.result.unit))
        })
        .collect();
    Words { cuts, rigidity, ..Words::default() }
}

fn findings(calculation: &Calculation, working: &Working, file: &str) -> Findings {
    let (member, verdict) = (&calculation.member, &calculation.verdict);
    let mut assumptions: Vec<String> = member
        .warnings
        .iter()
        .map(|warning| format!("The input is lawful but odd here: {}.", warning.message))
        .collect();
    if !working.settled {
        assumptions.push(
            "The redundants chosen lose so many digits that twelve figures do not settle the last ones; choose others."
                .to_owned(),
        );
    }
    Findings {
        verdict: verdict.sentences(member),
        fails: !verdict.holds(),
        uplift: uplift(calculation, working),
        findings: failures(calculation),
        checks: checks(calculation, working),
        reactions: reactions(calculation, working),
        plots: plots::plots(calculation, working),
        crosschecks: crosschecks(calculation),
        cases: Some(cases(working)),
        sources: SOURCES.iter().map(|source| (*source).to_owned()).collect(),
        assumptions,
        program: vec![
            format!("Proofspan {}.", env!("CARGO_PKG_VERSION")),
            format!("{} significant figures carried; verdicts are taken from unrounded values.", working.figures),
        ],
        hashes: vec![(file.to_owned(), calculation.deck_sha256.clone())],
        ..Findings::default()
    }
}

/// Where the formulas come from; editions are to be confirmed against the books at hand.
const SOURCES: [&str; 3] = [
    "Cantilever cases: Young, Budynas, Sadegh, Roark's Formulas for Stress and Strain, Table 8.1 (from memory; confirm the edition).",
    "Cantilever cases and beams: AISC, Steel Construction Manual, Table 3-23 (from memory; confirm the edition).",
    "Force method, virtual work: common practice of structural analysis.",
];

fn name_of(member: &Member, combination: usize) -> String {
    member.combinations.get(combination).map(|combination| combination.name.clone()).unwrap_or_default()
}

fn uplift(calculation: &Calculation, working: &Working) -> Vec<String> {
    let member = &calculation.member;
    let each = calculation.verdict.uplifts.iter().filter_map(|uplift| {
        let (support, combination) = (member.supports.get(uplift.support)?, name_of(member, uplift.combination));
        let step = find(working, &combination, &format!("R_{}", support.name))?;
        let figure = typeset::quantity(step.result.printed, &step.result.unit);
        Some(format!(
            "Support {}: net uplift, reaction {figure} in combination {combination}; hold-down required.",
            support.name
        ))
    });
    each.collect()
}

fn failures(calculation: &Calculation) -> Vec<String> {
    let member = &calculation.member;
    let failing = calculation.verdict.checks.iter().filter(|check| !check.pass);
    failing
        .map(|check| {
            let limit = member.limits.get(check.limit).map_or("", |limit| limit.name.as_str());
            let span = member.spans.get(check.span).map_or(String::new(), |span| span.name.replace('-', "–"));
            format!(
                "Limit {limit} FAILS in combination {}, span {span}: {} of the allowable.",
                name_of(member, check.combination),
                rounded_up(check.utilisation)
            )
        })
        .collect()
}

fn head(text: &str, width: f64) -> Column {
    Column::text(text).wide(width)
}

fn checks(calculation: &Calculation, working: &Working) -> Option<Table> {
    let member = &calculation.member;
    let mut order: Vec<(usize, &Check)> = calculation.verdict.checks.iter().enumerate().collect();
    if order.is_empty() {
        return None;
    }
    order.sort_by(|(_, a), (_, b)| a.pass.cmp(&b.pass).then(b.utilisation.total_cmp(&a.utilisation)));
    let columns = vec![
        head("limit", 24.0),
        head("combination", 22.0),
        head("span", 16.0),
        head("deflection", 21.0),
        head("allowable", 21.0),
        head("share", 12.0),
        head("", 0.0),
    ];
    let mut table = Table::new(
        "Every limit, failures first; shares of the allowable are rounded up.",
        "Deflections against allowable deflections",
        columns,
    );
    for (index, check) in order {
        let tag = name_of(member, check.combination);
        let quantity = |symbol: &str| {
            find(working, &tag, &format!("{symbol}{}", index + 1))
                .map_or_else(String::new, |step| typeset::quantity(step.result.printed, &step.result.unit))
        };
        let limit = member.limits.get(check.limit).map_or("", |limit| limit.name.as_str());
        let span = member.spans.get(check.span).map_or(String::new(), |span| span.name.replace('-', "–"));
        let word = if check.pass { "holds" } else { "FAILS" };
        let cells = [
            limit.to_owned(),
            tag.clone(),
            span,
            quantity("v_s"),
            quantity("v_a"),
            rounded_up(check.utilisation),
            word.to_owned(),
        ];
        table.rows.push(Row { bold: !check.pass, ..Row::of(cells.into_iter().map(Cell::text).collect()) });
    }
    Some(table)
}

/// Least and greatest reaction of each support by purpose, with the combination named.
fn reactions(calculation: &Calculation, working: &Working) -> Vec<Table> {
    let member = &calculation.member;
    let columns = vec![head("support", 18.0), head("purpose", 28.0), head("least", 36.0), head("greatest", 36.0)];
    let mut table = Table::new(
        "For whoever designs the supports: least and greatest upward force by purpose. By case, unfactored, see the table above.",
        "Least and greatest reactions by purpose",
        columns,
    );
    for (index, support) in member.supports.iter().enumerate().filter(|(_, support)| support.holds_deflection()) {
        for purpose in [Purpose::Serviceability, Purpose::Strength, Purpose::Stability] {
            let of = member
                .combinations
                .iter()
                .zip(&calculation.analysis.combinations)
                .filter(|(c, _)| c.purpose == purpose);
            let mut forces: Vec<(f64, String)> =
                of.filter_map(|(c, solution)| Some((solution.reactions.get(index)?.force, c.name.clone()))).collect();
            forces.sort_by(|a, b| a.0.total_cmp(&b.0));
            let shown = |found: Option<&(f64, String)>| {
                let step = found.and_then(|(_, tag)| Some((find(working, tag, &format!("R_{}", support.name))?, tag)));
                step.map_or_else(String::new, |(step, tag)| {
                    format!("{} ({tag})", typeset::quantity(step.result.printed, &step.result.unit))
                })
            };
            if !forces.is_empty() {
                let cells =
                    [support.name.clone(), purpose.word().to_owned(), shown(forces.first()), shown(forces.last())];
                table.rows.push(Row::of(cells.into_iter().map(Cell::text).collect()));
            }
        }
    }
    vec![table]
}

fn crosschecks(calculation: &Calculation) -> Vec<Table> {
    let columns = vec![head("figure", 62.0), head("force method", 26.0), head("stiffness method", 26.0)];
    let agreement = calculation.agreement;
    let percent = |value: f64| Decimal::nearest(value, 2);
    let mut table = Table::new(
        format!(
            "Figures in N, N m and m. Largest relative difference {}, of loads against reactions {}, of mirrored flexibilities {}; a difference beyond 0.000001 stops the sheet.",
            typeset::figure(percent(agreement.second_method)),
            typeset::figure(percent(agreement.equilibrium)),
            typeset::figure(percent(agreement.reciprocity)),
        ),
        "Figures by two methods",
        columns,
    );
    for row in both_routes(&calculation.member, &calculation.analysis)
        .into_iter()
        .filter(|row| !row.what.starts_with("deflection") || row.first != 0.0)
        .take(60)
    {
        let figures = [row.first, row.second].map(|value| Cell::text(typeset::figure(Decimal::nearest(value, 7))));
        let [first, second] = figures;
        table.rows.push(Row::of(vec![Cell::text(row.what), first, second]));
    }
    vec![table]
}

fn cases(working: &Working) -> Table {
    let columns = vec![head("case or principle used", 62.0), head("first used at step", 30.0)];
    let mut table = Table::new(
        "What the steps rest on; sources stand at the end of the sheet.",
        "Tabulated cases and principles",
        columns,
    );
    let mut seen: Vec<&str> = Vec::new();
    for step in working.steps.iter().filter(|step| !step.basis.is_empty()) {
        if !seen.contains(&step.basis.as_str()) {
            seen.push(&step.basis);
            table.rows.push(Row::of(vec![Cell::text(step.basis.clone()), Cell::text(step.id.clone())]));
        }
    }
    table
}
