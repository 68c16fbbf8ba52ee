//! An issued review: claims, differences, the mistakes that would reproduce them, each with its own short working.

use sha2::{Digest, Sha256};

use super::{findings, words};
use crate::analysis;
use crate::calculation::{Calculation, hexadecimal};
use crate::issue::Wishes;
use crate::member::{Member, System};
use crate::quantity::{Decimal, Unit, parse_quantity};
use crate::review::ask::{Along, Ask};
use crate::review::search::{Explanation, Findings};
use crate::review::{Claim, Claims, Compared, Status};
use crate::sheet::model::{Align, Cell, Chapter, Column, Explained, Model, Parts, Reviewing, Row, Table, chapters};
use crate::sheet::{self, Attachments, Options, Printed, Templates, typeset};
use crate::working::{self, Chapters, Demand, Working};

/// So many explanations get a working of their own.
const WORKED: usize = 3;

/// A review, ready to be printed.
#[derive(Clone, Copy, Debug)]
pub struct Reviewed<'a> {
    /// The checker's own calculation.
    pub calculation: &'a Calculation,
    /// The checker's deck.
    pub deck: &'a str,
    /// Name of the file of claims.
    pub file: &'a str,
    /// Its text.
    pub text: &'a str,
    /// Where the claims were taken from a sheet, its name and SHA-256.
    pub sheet: Option<(&'a str, &'a str)>,
    /// The claims.
    pub claims: &'a Claims,
    /// What they came to.
    pub compared: &'a [Compared],
    /// What would reproduce the differing ones.
    pub findings: &'a Findings,
}

/// Prints a review.
///
/// # Errors
/// A character that no font has, or a page that cannot be set.
pub fn print(review: &Reviewed<'_>, working: &Working) -> Result<Printed, sheet::Fault> {
    let wishes = Wishes::of(&review.calculation.member, review.claims.deck.clone());
    let templates = Templates::default();
    let labels = templates.labels()?;
    let mut explained = Vec::new();
    for (index, one) in review.findings.explanations.iter().take(WORKED).enumerate() {
        explained.push(explanation(index, one, &labels)?);
    }
    let found = findings(review.calculation, working, &wishes, "");
    let words = words(review.calculation, working);
    let mut model = Model::compose(&Parts {
        member: &review.calculation.member,
        redundants: &review.calculation.analysis.model.redundants,
        working,
        words: &words,
        findings: &found,
        file: &review.claims.deck,
        deck: review.deck,
        labels: &labels,
        brief: true,
    })?;
    model.chapters = Vec::new();
    model.review = Some(Reviewing {
        statement: statement(review),
        counts: counts(review.compared),
        claims: claims_table(review),
        remarks: remarks(review),
        search: search_words(review.findings),
        explanations: ranked(review.findings),
        explained,
        dispositions: dispositions(review),
        hashes: hashes(review),
    });
    model.review.iter_mut().for_each(Reviewing::fit);
    let title = &review.calculation.member.title;
    model.document.title = format!("Review of {} {}", review.claims.reviewed.number, review.claims.reviewed.subject);
    model.running.subject = format!("Review of {}", review.claims.reviewed.number);
    model.running.prepared.clone_from(&review.claims.reviewer.name);
    model.running.checked = String::new();
    model.running.number.clone_from(&title.number);
    let date = review.claims.reviewer.date;
    model.document.date = date;
    model.running.date = typeset::date(date, &labels.list("months")?);
    let options = Options {
        paper: wishes.paper,
        attachments: Attachments {
            deck: Some(review.deck.as_bytes().to_vec()),
            claims: Some(review.text.as_bytes().to_vec()),
            ..Attachments::default()
        },
        ident: hexadecimal(&Sha256::digest(format!("{}\n{}", review.text, review.deck))),
        ..Options::default()
    };
    sheet::print(&model, &options)
}

/// A claim's figure in the units of the trade: `39.24 kN`.
pub fn shown(claim: &Claim, si: f64, system: System) -> String {
    if claim.verdict {
        return if si > 0.5 { "pass" } else { "fail" }.to_owned();
    }
    let unit = unit_of(claim, system);
    typeset::quantity(Decimal::nearest(si / unit.si().unwrap_or(1.0), 5), &unit)
}

/// What is claimed: with its own digits where it is written in the unit that is shown here, converted otherwise.
pub fn claimed(claim: &Claim, system: System) -> String {
    let unit = unit_of(claim, system);
    let own = if unit.is_none() {
        Decimal::parse(&claim.written)
    } else {
        let typed = parse_quantity(&claim.written).ok();
        typed.and_then(|typed| match typed.terms.as_slice() {
            [only] if only.unit == unit => Some(only.figure),
            _ => None,
        })
    };
    match own.filter(|_| !claim.verdict) {
        Some(figure) => typeset::quantity(figure, &unit),
        None => shown(claim, claim.claimed, system),
    }
}

/// The unit that figures of a claim's kind are shown in.
fn unit_of(claim: &Claim, system: System) -> Unit {
    let (force, length, small) = match system {
        System::Si => ("kN", "m", "mm"),
        System::Us => ("kip", "ft", "in"),
    };
    let moment = [force, length];
    let atoms: &[&str] = match &claim.question.ask {
        Ask::Reaction { .. } => &[force],
        Ask::ReactionMoment { .. } => &moment,
        Ask::Redundant { name } if name.starts_with("M.") => &moment,
        Ask::Redundant { .. } => &[force],
        Ask::Station { along, .. } | Ask::Extreme { along, .. } => match along {
            Along::Shear => &[force],
            Along::Moment => &moment,
            Along::Slope => &["mrad"],
            Along::Deflection => &[small],
        },
        Ask::Allowable { .. } => &[small],
        Ask::Utilisation { .. } | Ask::Verdict { .. } => &[],
    };
    Unit::of(atoms.iter().filter_map(|atom| Unit::known(atom)).map(|atom| (atom, 1)))
}

fn statement(review: &Reviewed<'_>) -> Vec<String> {
    let of = &review.claims.reviewed;
    let mut document = format!("Under review: {}", of.number);
    if !of.revision.is_empty() {
        document = format!("{document}, revision {}", of.revision);
    }
    if let Some((year, month, day)) = of.date {
        document = format!("{document}, {year:04}-{month:02}-{day:02}");
    }
    if !of.subject.is_empty() {
        document = format!("{document}: {}", of.subject);
    }
    let blind = if review.claims.blind {
        "The checker's model was made without the originator's sheets."
    } else {
        "The checker's model was made with the originator's sheets at hand."
    };
    vec![
        format!("{document}."),
        blind.to_owned(),
        "Compared are figures only; what the document under review does not claim was not reviewed.".to_owned(),
    ]
}

/// How many claims agree and differ, in a sentence.
pub fn counts(compared: &[Compared]) -> String {
    let of = |status: Status| compared.iter().filter(|found| found.status == status).count();
    let (agree, differ, none) = (of(Status::Agrees), of(Status::Differs), of(Status::NotComparable));
    let word = |count: usize, one: &str, many: &str| format!("{count} {}", if count == 1 { one } else { many });
    let mut said = format!("{}, {}", word(agree, "claim agrees", "claims agree"), word(differ, "differs", "differ"));
    if none > 0 {
        said = format!("{said}, {none} not comparable");
    }
    format!("{said}.")
}

fn right(head: &str, width: f64) -> Column {
    Column { align: Align::Right, ..Column::text(head).wide(width) }
}

fn claims_table(review: &Reviewed<'_>) -> Table {
    let columns = vec![
        Column::text("no.").wide(7.0),
        Column::text("claim").wide(32.0),
        right("claimed", 19.0),
        right("recomputed", 19.0),
        right("difference", 19.0),
        right("%", 9.0),
        Column::text("").wide(15.0),
    ];
    let mut table = Table::new("", "Claims against recomputed figures", columns);
    table.small = true;
    let system = review.calculation.member.title.system;
    for (claim, found) in review.claims.claims.iter().zip(review.compared) {
        let figure = |si: Option<f64>| si.map_or_else(|| "–".to_owned(), |si| shown(claim, si, system));
        let difference = if claim.verdict { None } else { found.difference };
        let percent =
            found.relative.map_or_else(String::new, |share| typeset::figure(Decimal::nearest(share * 100.0, 2)));
        let status = match found.status {
            Status::Agrees => "agrees",
            Status::Differs => "DIFFERS",
            Status::NotComparable => "not comparable",
        };
        let words = match claim.reference.as_str() {
            "" => claim.words.clone(),
            _ if review.sheet.is_some() => claim.words.clone(),
            reference => format!("{} ({reference})", claim.words),
        };
        let cells = vec![
            Cell::text((claim.index + 1).to_string()),
            Cell::text(words),
            Cell::text(claimed(claim, system)),
            Cell::text(figure(found.recomputed)),
            Cell::text(figure(difference)),
            Cell::text(percent),
            Cell::text(status),
        ];
        table.rows.push(Row { bold: found.status == Status::Differs, ..Row::of(cells) });
    }
    table
}

fn remarks(review: &Reviewed<'_>) -> Vec<String> {
    let pairs = review.claims.claims.iter().zip(review.compared);
    pairs
        .filter(|(_, found)| !found.remark.is_empty())
        .map(|(claim, found)| format!("Claim {} ({}): {}.", claim.index + 1, claim.words, found.remark))
        .collect()
}

fn search_words(findings: &Findings) -> Vec<String> {
    let mut said = Vec::new();
    if findings.tried > 0 {
        said.push(format!(
            "{} ways in which one or two mistakes might have been made on this member were tried. What follows would reproduce figures; whether it was done, only the originator can say.",
            findings.tried
        ));
    }
    said.extend(findings.remark.clone());
    said
}

fn ranked(findings: &Findings) -> Option<Table> {
    let columns = vec![
        Column::text("").wide(7.0),
        Column::text("would reproduce these figures").wide(63.0),
        right("reproduces", 17.0),
        right("keeps", 13.0),
        right("off by, %", 20.0),
    ];
    let mut table = Table::new("", "Explanations, best first", columns);
    for (index, one) in findings.explanations.iter().enumerate() {
        let places = one.mistakes.iter().zip(&one.wheres).map(|(mistake, place)| format!("{mistake} ({place})"));
        let tie = if one.tie { "; another gives the same figures" } else { "" };
        let said = format!("{}{tie}", places.collect::<Vec<_>>().join(" and "));
        let cells = vec![
            Cell::text((index + 1).to_string()),
            Cell::text(said),
            Cell::text(one.explains.to_string()),
            Cell::text(one.keeps.to_string()),
            Cell::text(typeset::figure(Decimal::nearest(one.largest_relative_difference * 100.0, 2))),
        ];
        table.rows.push(Row::of(cells));
    }
    (!table.rows.is_empty()).then_some(table)
}

/// An explanation with the short working of the member under it.
fn explanation(index: usize, one: &Explanation, labels: &sheet::Labels) -> Result<Explained, sheet::Fault> {
    let title = format!("{}. {}", index + 1, one.mistakes.join(" and "));
    let mut explained = Explained { title, text: one.text.clone(), chapters: Vec::new() };
    let Some(working) = one.member.as_ref().and_then(short_working) else { return Ok(explained) };
    let kept = [Chapters::Flexibility, Chapters::Sums];
    let all: Vec<Chapter> = chapters(&working, labels)?;
    for (chapter, shown) in working.chapters.iter().zip(all) {
        let equations = matches!(chapter.about, Chapters::Case(_));
        let mut shown = Chapter { new_sheet: false, figures: Vec::new(), ..shown };
        if equations {
            // Of a load case, the blocks that close what the released member leaves open.
            let closing = chapter.blocks.iter().map(|block| {
                let steps = block.body.steps();
                steps.iter().any(|step| {
                    working.steps.get(*step).is_some_and(|step| {
                        step.basis.contains("compatibility") || step.basis.contains("movement of the released member")
                    })
                })
            });
            let pairs = shown.steps.into_iter().zip(closing);
            shown.steps = pairs.filter_map(|(step, closing)| closing.then_some(step)).collect();
        }
        if (equations && !shown.steps.is_empty()) || kept.contains(&chapter.about) {
            explained.chapters.push(shown);
        }
    }
    Ok(explained)
}

fn short_working(member: &Member) -> Option<Working> {
    let analysis = analysis::solve(member)?;
    let none: [Demand; 0] = [];
    working::narrate(member, &analysis, &none).ok()
}

fn dispositions(review: &Reviewed<'_>) -> Option<Table> {
    let columns = vec![
        Column::text("claim").wide(40.0),
        Column::text("disposition").wide(50.0),
        Column::text("by, date").wide(30.0),
    ];
    let mut table = Table::new("", "Dispositions, to be filled in", columns);
    let pairs = review.claims.claims.iter().zip(review.compared);
    for (claim, _) in pairs.filter(|(_, found)| found.status != Status::Agrees) {
        let cells = vec![Cell::text(format!("{}: {}", claim.index + 1, claim.words)), Cell::text("…"), Cell::text("…")];
        table.rows.push(Row { rule: true, ..Row::of(cells) });
    }
    (!table.rows.is_empty()).then_some(table)
}

fn hashes(review: &Reviewed<'_>) -> Table {
    let columns = vec![Column::text("file").wide(36.0), Column::text("SHA-256").wide(84.0)];
    let mut table = Table::new("", "Hashes of claims and deck", columns);
    let of = |text: &str| hexadecimal(&Sha256::digest(text.as_bytes()));
    let sheet = review.sheet.map(|(name, hash)| (name, hash.to_owned()));
    let ours = [(review.file, of(review.text)), (review.claims.deck.as_str(), of(review.deck))];
    for (name, hash) in sheet.into_iter().chain(ours) {
        let digits: Vec<char> = hash.chars().collect();
        let groups: Vec<String> = digits.chunks(8).map(|group| group.iter().collect()).collect();
        table.rows.push(Row::of(vec![Cell::text(name), Cell::text(groups.join(" "))]));
    }
    table
}
