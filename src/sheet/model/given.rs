//! What was given: acceptance criteria, inputs with their sources, combinations, signs and loads.

use super::compose::{Gallery, Parts, case_words};
use super::{Cell, Column, Given, Row, Table, aligned};
use crate::figure;
use crate::member::{Hold, Limit, Measured, Member, Section, Span, Support, SupportKind, Weight};
use crate::quantity::{Decimal, Unit};
use crate::sheet::template::Labels;
use crate::sheet::{Fault, page, typeset};

/// What was given.
pub fn given(parts: &Parts<'_>, gallery: &mut Gallery) -> Result<Given, Fault> {
    let (member, labels) = (parts.member, parts.labels);
    let inputs = [
        parts.findings.declared.clone().unwrap_or_else(|| Table::new("", "", Vec::new())),
        sections(member, labels)?,
        segments(member, labels)?,
        supports(member, labels)?,
        loads(member, parts, labels)?,
    ];
    let mut sketches = Vec::new();
    for (index, case) in member.cases.iter().enumerate() {
        let drawing = figure::loads(member, index, &case_words(parts, index), figure::COLUMN);
        let nature = labels.get(&format!("nature.{}", word(case.nature)))?;
        let name = if case.title.is_empty() { case.name.clone() } else { format!("{}: {}", case.name, case.title) };
        sketches.push(gallery.hang(format!("{name} ({nature})"), drawing));
    }
    Ok(Given {
        limits: limits(member, labels)?,
        inputs: inputs.into_iter().filter(|table| !table.rows.is_empty()).collect(),
        combinations: combinations(member, labels)?,
        signs: Some(gallery.hang("", figure::signs(figure::COLUMN))),
        loads: sketches,
        warnings: member.warnings.iter().map(|warning| warning.message.clone()).collect(),
    })
}

fn word(nature: crate::member::Nature) -> &'static str {
    use crate::member::Nature;
    Nature::WORDS.iter().find(|(_, known)| *known == nature).map_or("other", |(word, _)| word)
}

fn columns(labels: &Labels, heads: &[(&str, f64)]) -> Result<Vec<Column>, Fault> {
    let column = |(path, width): &(&str, f64)| Ok(Column::text(labels.get(path)?).wide(*width));
    heads.iter().map(column).collect()
}

fn limits(member: &Member, labels: &Labels) -> Result<Option<Table>, Fault> {
    let heads = [("given.limit", 20.0), ("given.criterion", 46.0), ("given.applies", 22.0), ("given.basis", 32.0)];
    let mut table = Table::new("", labels.get("given.limits")?, columns(labels, &heads)?);
    for limit in &member.limits {
        let spans: Vec<&Span> = limit.spans.iter().filter_map(|index| member.spans.get(*index)).collect();
        let combinations = limit.combinations.iter().filter_map(|index| member.combinations.get(*index));
        let names: Vec<&str> = combinations.map(|combination| combination.name.as_str()).collect();
        let spans_said: Vec<String> = spans.iter().map(|span| span.name.replace('-', "–")).collect();
        let applies = format!("{}; {}", spans_said.join(", "), names.join(", "));
        let criterion = criterion(limit, &spans, labels)?;
        table.rows.push(Row::of(vec![
            Cell::text(&limit.name),
            Cell::text(criterion),
            Cell::text(applies),
            Cell::text(&limit.basis),
        ]));
    }
    Ok((!table.rows.is_empty()).then_some(table))
}

/// `L/250, L = 9 m (A–B); measured from the chord`; a cantilever's reference length written out.
fn criterion(limit: &Limit, spans: &[&Span], labels: &Labels) -> Result<String, Fault> {
    let mut said: Vec<String> = Vec::new();
    if let Some(ratio) = &limit.ratio {
        let mut lengths = Vec::new();
        for span in spans {
            let exact = span.to.exact().minus(span.from.exact()).unwrap_or(Decimal::ZERO);
            let metre = Unit::of(Unit::known("m").map(|atom| (atom, 1)));
            let plain = exact.trimmed();
            let plain = plain.with_exponent(plain.exponent().min(0)).unwrap_or(plain);
            let length = typeset::quantity(plain, &metre);
            let name = span.name.replace('-', "–");
            lengths.push(match (&limit.cantilever_length_factor, span.is_cantilever()) {
                (Some(factor), true) => format!("{} × {length} ({name})", typeset::figure(factor.figure)),
                _ => format!("{length} ({name})"),
            });
        }
        said.push(format!("L/{}, L = {}", typeset::figure(ratio.figure), lengths.join(", ")));
    }
    if let Some(absolute) = &limit.absolute {
        said.push(typeset::typed(&absolute.typed));
    }
    if limit.ratio.is_some() && limit.absolute.is_some() {
        said.push(labels.get("given.smaller")?.to_owned());
    }
    said.push(
        match limit.measured {
            Measured::Chord => labels.get("given.chord")?,
            Measured::Absolute => labels.get("given.absolute")?,
        }
        .to_owned(),
    );
    Ok(said.join("; "))
}

fn sections(member: &Member, labels: &Labels) -> Result<Table, Fault> {
    let heads = [("given.section", 24.0), ("given.values", 96.0)];
    let mut table = Table::new(labels.get("given.sections")?, labels.get("given.sections")?, columns(labels, &heads)?);
    for section in &member.sections {
        table.rows.push(Row::of(vec![Cell::text(&section.name), Cell::text(values(section, labels)?)]));
    }
    Ok(table)
}

fn values(section: &Section, labels: &Labels) -> Result<String, Fault> {
    let typed = typeset::typed;
    let mut said =
        vec![format!("E = {}", typed(&section.modulus.typed)), format!("I = {}", typed(&section.second_moment.typed))];
    match &section.weight {
        None => {}
        Some(Weight::PerLength(weight)) => said.push(labels.with("given.weight", &typed(&weight.typed))?),
        Some(Weight::MassPerLength(mass)) => said.push(labels.with("given.weight", &typed(&mass.typed))?),
        Some(Weight::Mass(area, density)) => {
            said.push(format!("A = {}", typed(&area.typed)));
            said.push(labels.with("given.density", &typed(&density.typed))?);
        }
        Some(Weight::Specific(area, weight)) => {
            said.push(format!("A = {}", typed(&area.typed)));
            said.push(labels.with("given.density", &typed(&weight.typed))?);
        }
    }
    if let Some(depth) = &section.depth {
        said.push(labels.with("given.depth", &typed(&depth.typed))?);
    }
    if let Some(expansion) = &section.expansion {
        said.push(format!("α = {}", typed(&expansion.typed)));
    }
    if let Some((modulus, area)) = &section.shear {
        said.push(format!("G = {}", typed(&modulus.typed)));
        said.push(labels.with("given.shear_area", &typed(&area.typed))?);
    }
    Ok(said.join(", "))
}

fn segments(member: &Member, labels: &Labels) -> Result<Table, Fault> {
    let heads = [("given.segment", 24.0), ("given.length", 30.0), ("given.section", 66.0)];
    let mut table = Table::new(labels.get("given.segments")?, labels.get("given.segments")?, columns(labels, &heads)?);
    let name = |index: usize| member.sections.get(index).map_or("", |section| section.name.as_str());
    for (index, segment) in member.segments.iter().enumerate() {
        let section = match segment.taper {
            None => name(segment.section).to_owned(),
            Some(taper) => {
                let law = match taper.law {
                    crate::member::TaperLaw::Linear => labels.get("given.linear")?,
                    crate::member::TaperLaw::Cubic => labels.get("given.cubic")?,
                };
                format!("{} → {}; {law}", name(segment.section), name(taper.to))
            }
        };
        table.rows.push(Row::of(vec![
            Cell::text((index + 1).to_string()),
            Cell::text(typeset::typed(&segment.length.typed)),
            Cell::text(section),
        ]));
    }
    Ok(table)
}

fn supports(member: &Member, labels: &Labels) -> Result<Table, Fault> {
    let heads = [("given.support", 24.0), ("given.place", 30.0), ("given.holds", 66.0)];
    let mut table = Table::new(labels.get("given.supports")?, labels.get("given.supports")?, columns(labels, &heads)?);
    for support in &member.supports {
        let place = match member.typed_places.get(&support.at) {
            Some(typed) => typeset::typed(typed),
            None => metres(support.at.exact()),
        };
        table.rows.push(Row::of(vec![
            Cell::text(&support.name),
            Cell::text(place),
            Cell::text(held(support, labels)?),
        ]));
    }
    for hinge in &member.hinges {
        let place = member.typed_places.get(&hinge.at).map_or_else(|| metres(hinge.at.exact()), typeset::typed);
        let hinge_word = labels.get("given.hinge")?;
        table.rows.push(Row::of(vec![Cell::text(&hinge.name), Cell::text(place), Cell::text(hinge_word)]));
    }
    Ok(table)
}

fn metres(exact: Decimal) -> String {
    let short = exact.trimmed();
    let plain = short.with_exponent(short.exponent().min(0)).unwrap_or(short);
    typeset::quantity(plain, &Unit::of(Unit::known("m").map(|atom| (atom, 1))))
}

fn held(support: &Support, labels: &Labels) -> Result<String, Fault> {
    let kind = match support.kind {
        SupportKind::Fixed => "fixed",
        SupportKind::Pinned => "pinned",
        SupportKind::Roller => "roller",
        SupportKind::Guided => "guided",
        SupportKind::Elastic => "elastic",
    };
    let mut said = labels.get(&format!("support.{kind}"))?.to_owned();
    if let SupportKind::Elastic = support.kind {
        let stiffness = |typed: Option<&crate::quantity::Typed>, rigid: bool| -> Result<String, Fault> {
            Ok(match (typed, rigid) {
                (Some(typed), _) => typeset::typed(typed),
                (None, true) => labels.get("support.rigid")?.to_owned(),
                (None, false) => labels.get("support.free")?.to_owned(),
            })
        };
        let vertical = match &support.vertical {
            Hold::Spring(given) => stiffness(Some(&given.typed), false)?,
            other => stiffness(None, matches!(other, Hold::Rigid))?,
        };
        let rotation = match &support.rotation {
            Hold::Spring(given) => stiffness(Some(&given.typed), false)?,
            other => stiffness(None, matches!(other, Hold::Rigid))?,
        };
        said = format!(
            "{said}: {}, {}",
            labels.with("support.vertical", &vertical)?,
            labels.with("support.rotation", &rotation)?
        );
    }
    Ok(said)
}

/// Remarks and sources of loads, where the deck gives any; the figures stand in the sketches.
fn loads(member: &Member, parts: &Parts<'_>, labels: &Labels) -> Result<Table, Fault> {
    let heads = [("given.case", 20.0), ("given.load", 60.0), ("given.source", 40.0)];
    let title = labels.get("given.load_sources")?;
    let mut table = Table::new(title, title, columns(labels, &heads)?);
    for case in &member.cases {
        for load in &case.loads {
            let note = load.note.clone().unwrap_or_default();
            let source = load.source.clone().unwrap_or_default();
            if note.is_empty() && source.is_empty() {
                continue;
            }
            let what = figure::describe(member, &load.kind, parts.words);
            let said = if note.is_empty() { what } else { format!("{what}: {note}") };
            table.rows.push(Row::of(vec![Cell::text(&case.name), Cell::text(said), Cell::text(source)]));
        }
    }
    Ok(table)
}

fn combinations(member: &Member, labels: &Labels) -> Result<Table, Fault> {
    let mut heads =
        vec![Column::text(labels.get("given.combination")?), Column::text(labels.get("given.purpose")?).wide(26.0)];
    let mut cells: Vec<Vec<Cell>> = Vec::new();
    let room = (page::COLUMN - 26.0 - 30.0) / member.cases.len().max(1) as f64;
    for (index, case) in member.cases.iter().enumerate() {
        let factors: Vec<Decimal> = member
            .combinations
            .iter()
            .map(|combination| combination.factors.get(index).map_or(Decimal::ZERO, |factor| factor.figure))
            .collect();
        let column = aligned(&factors);
        let need = column.iter().map(|cell| cell.width(page::TABLE_PT)).fold(6.0, f64::max) + page::GAP;
        heads.push(Column::figures(Cell::text(&case.name), &Unit::none(), page::tenth(need.max(room.min(14.0)))));
        cells.push(column);
    }
    let mut table = Table::new("", labels.get("given.factors")?, heads);
    for (index, combination) in member.combinations.iter().enumerate() {
        let name = match combination.title.as_str() {
            "" => combination.name.clone(),
            title => format!("{}: {title}", combination.name),
        };
        let purpose = labels.get(&format!("purpose.{}", combination.purpose.word()))?;
        let mut row = vec![Cell::text(name), Cell::text(purpose)];
        row.extend(cells.iter().filter_map(|column| column.get(index).cloned()));
        table.rows.push(Row::of(row));
    }
    Ok(table)
}
