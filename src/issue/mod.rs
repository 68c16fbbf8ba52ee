//! An issued sheet: everything a calculation knows, put on paper.

mod document;
mod plots;
pub mod review;

use sha2::{Digest, Sha256};

use crate::calculation::{Calculation, both_routes, hexadecimal};
use crate::figure::{Cut, Words};
use crate::member::{Member, Purpose};
use crate::quantity::Decimal;
use crate::sheet::model::{Cell, Column, Findings, Parts, Row, Table};
use crate::sheet::{self, Attachments, Model, Options, Paper, Printed, Templates, typeset};
use crate::verdict::{Check, rounded_up};
use crate::working::{Step, Working, place_names};

/// How a sheet is to be issued: all that its bytes depend on besides the deck and the version of the program.
#[derive(Clone, Debug, Default)]
pub struct Wishes {
    /// Name of the deck's file, without folders.
    pub file: String,
    /// The paper.
    pub paper: Paper,
    /// Whether the short form is wanted.
    pub brief: bool,
    /// Number of the first sheet.
    pub first_sheet: usize,
    /// The templates.
    pub templates: Templates,
    /// Whether deck and results travel inside.
    pub attach: bool,
}

impl Wishes {
    /// What the deck wishes for, under the name of its file.
    pub fn of(member: &Member, file: impl Into<String>) -> Self {
        let sheet = member.record.sheet;
        Self {
            file: file.into(),
            paper: if sheet.letter == Some(true) { Paper::Letter } else { Paper::A4 },
            brief: sheet.brief.unwrap_or(false),
            first_sheet: sheet.first_sheet.unwrap_or(1),
            templates: Templates::default(),
            attach: true,
        }
    }

    /// The same as the results carry them, so that the sheet can be made again from itself.
    pub fn json(&self) -> serde_json::Value {
        serde_json::json!({
            "program": "Proofspan",
            "version": env!("CARGO_PKG_VERSION"),
            "file": self.file,
            "paper": match self.paper { Paper::A4 => "a4", Paper::Letter => "letter" },
            "detail": if self.brief { "brief" } else { "full" },
            "first_sheet": self.first_sheet,
            "templates": self.templates.own_hash(),
        })
    }

    /// Reads what [`Self::json`] wrote; the templates are the embedded ones. `None` where something is missing.
    pub fn read(value: &serde_json::Value) -> Option<Self> {
        let text = |key: &str| value.get(key).and_then(serde_json::Value::as_str);
        Some(Self {
            file: text("file")?.to_owned(),
            paper: if text("paper")? == "letter" { Paper::Letter } else { Paper::A4 },
            brief: text("detail")? == "brief",
            first_sheet: usize::try_from(value.get("first_sheet")?.as_u64()?).ok()?,
            templates: Templates::default(),
            attach: true,
        })
    }
}

/// Prints the sheet of a calculation.
///
/// # Errors
/// A character that no font has, a template at fault, or a page that cannot be set.
pub fn print(
    calculation: &Calculation,
    working: &Working,
    deck: &str,
    wishes: &Wishes,
) -> Result<Printed, sheet::Fault> {
    let (model, options) = prepared(calculation, working, deck, wishes)?;
    sheet::print(&model, &options)
}

/// The text of every page of the same sheet, as [`sheet::text`] gives it.
///
/// # Errors
/// As [`print()`].
pub fn text(
    calculation: &Calculation,
    working: &Working,
    deck: &str,
    wishes: &Wishes,
) -> Result<Vec<String>, sheet::Fault> {
    let (model, options) = prepared(calculation, working, deck, wishes)?;
    sheet::text(&model, &options)
}

fn prepared(
    calculation: &Calculation,
    working: &Working,
    deck: &str,
    wishes: &Wishes,
) -> Result<(Model, Options), sheet::Fault> {
    let labels = wishes.templates.labels()?;
    let member = &calculation.member;
    let results = results(calculation, working, wishes);
    let findings = findings(calculation, working, wishes, &results);
    let words = words(calculation, working);
    let model = Model::compose(&Parts {
        member,
        redundants: &calculation.analysis.model.redundants,
        working,
        words: &words,
        findings: &findings,
        file: &wishes.file,
        deck,
        labels: &labels,
        brief: wishes.brief,
    })?;
    let attachments = if wishes.attach {
        Attachments {
            deck: Some(deck.as_bytes().to_vec()),
            results: Some(results.into_bytes()),
            ..Attachments::default()
        }
    } else {
        Attachments::default()
    };
    let options = Options {
        paper: wishes.paper,
        first_sheet: wishes.first_sheet,
        templates: wishes.templates.clone(),
        attachments,
        ident: calculation.deck_sha256.clone(),
        ..Options::default()
    };
    Ok((model, options))
}

/// The results that travel inside a sheet: the results of the deck, the working, and how the sheet was issued.
pub fn results(calculation: &Calculation, working: &Working, wishes: &Wishes) -> String {
    let mut results = calculation.json(Some(working));
    if let Some(object) = results.as_object_mut() {
        object.insert("sheet".to_owned(), wishes.json());
    }
    format!("{results}\n")
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

fn findings(calculation: &Calculation, working: &Working, wishes: &Wishes, results: &str) -> Findings {
    let (member, verdict) = (&calculation.member, &calculation.verdict);
    let odd = member.warnings.iter().map(|warning| format!("The input is lawful but odd here: {}.", warning.message));
    let mut assumptions: Vec<String> = document::assumptions(member);
    assumptions.extend(odd);
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
        agreement: agreement(calculation),
        crosschecks: crosschecks(calculation),
        cases: Some(cases(working)),
        sources: SOURCES.iter().map(|source| (*source).to_owned()).collect(),
        assumptions,
        unconfirmed: member.record.unconfirmed(),
        declared: document::declared(member),
        revisions: document::revisions(member),
        events: document::events(member),
        program: document::program(calculation, working),
        hashes: vec![
            (wishes.file.clone(), calculation.deck_sha256.clone()),
            ("results.json".to_owned(), hexadecimal(&Sha256::digest(results.as_bytes()))),
        ],
        totals: Vec::new(),
        sums: Vec::new(),
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

/// How well the independent checks agree, in words.
fn agreement(calculation: &Calculation) -> String {
    let agreement = calculation.agreement;
    let shown = |value: f64| typeset::figure(Decimal::nearest(value, 2));
    format!(
        "Every load case and combination was computed again by a stiffness method that shares nothing with the force method but the member. Largest relative difference between the two {}; of loads against reactions {}; of mirrored flexibilities {}. A difference beyond 0.000001 stops the sheet.",
        shown(agreement.second_method),
        shown(agreement.equilibrium),
        shown(agreement.reciprocity),
    )
}

fn crosschecks(calculation: &Calculation) -> Vec<Table> {
    let columns = vec![
        head("figure", 50.0),
        head("force method", 24.0),
        head("stiffness method", 24.0),
        head("difference", 22.0),
    ];
    let mut table = Table::new("In N, N m and m", "Figures by two methods, and their difference", columns);
    for row in both_routes(&calculation.member, &calculation.analysis)
        .into_iter()
        .filter(|row| !row.what.starts_with("deflection") || row.first != 0.0)
        .take(60)
    {
        let shown = |value: f64, digits: u32| Cell::text(typeset::figure(Decimal::nearest(value, digits)));
        let cells =
            vec![Cell::text(row.what), shown(row.first, 7), shown(row.second, 7), shown(row.second - row.first, 1)];
        table.rows.push(Row::of(cells));
    }
    vec![table]
}

/// The published source of a case or principle; editions from memory, to be confirmed.
fn source_of(basis: &str) -> &'static str {
    if basis.contains("cantilever") {
        "Roark T. 8.1; AISC T. 3-23 *"
    } else if basis.contains("Gauss") {
        "Abramowitz, Stegun T. 25.4 *"
    } else {
        "common practice"
    }
}

fn cases(working: &Working) -> Table {
    let columns = vec![
        head("case or principle used", 58.0),
        head("source (* confirm the edition)", 40.0),
        head("first at", 22.0),
    ];
    let mut table = Table::new("", "Tabulated cases and principles, with their sources", columns);
    let mut seen: Vec<&str> = Vec::new();
    for step in working.steps.iter().filter(|step| !step.basis.is_empty()) {
        if !seen.contains(&step.basis.as_str()) {
            seen.push(&step.basis);
            let cells = [step.basis.as_str(), source_of(&step.basis), step.id.as_str()].map(Cell::text);
            table.rows.push(Row::of(cells.to_vec()));
        }
    }
    table
}
