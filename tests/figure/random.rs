//! Random members, loads and diagrams: nothing overlaps, nothing is wider than its column, nothing is left out.

use proofspan::figure::{
    self, COLUMN, Curve, Drawing, Item, Mark, Panel, Plot, Style, WIDE, Words, elevation, free_bodies, loads, released,
};
use proofspan::member::{LoadKind, Member, Redundant, Taper, TaperLaw};
use proptest::prelude::*;

use super::{all_cuts, build};

/// Millionths of a metre as a decimal of metres.
fn metres(micro: u64) -> String {
    format!("{}.{:06}", micro / 1_000_000, micro % 1_000_000)
}

const CODES: [char; 9] = ['F', 'P', 'R', 'G', 'e', 'c', 'b', 'g', 't'];

/// Lengths of segments in millionths of a metre: mostly ordinary, some very short.
fn length() -> impl Strategy<Value = u64> {
    prop_oneof![4 => 500_000_u64..12_000_000, 1 => 1_u64..20, 1 => 1_000_u64..80_000]
}

prop_compose! {
    fn members()(
        lengths in prop::collection::vec((length(), 0_usize..3, prop::option::weighted(0.2, 0_usize..3)), 1..12),
        supports in prop::collection::vec((0_usize..1_000_000, 0_usize..9, 1_usize..16), 1..9),
        hinges in prop::collection::vec(0_usize..1_000_000, 0..4),
        kinds in prop::collection::vec((0_u8..9, 0_usize..1_000_000, 0_usize..1_000_000, -99_999_i64..99_999), 0..30),
        depths in any::<bool>(),
    ) -> Member {
        let total: u64 = lengths.iter().map(|(length, ..)| *length).sum();
        let spot = |part: usize| metres(total * part as u64 / 999_999);
        let depth = |text| depths.then_some(text);
        let sections = vec![
            build::section("deep", "20600.25", depth("480")),
            build::section("a", "103", depth("160")),
            build::section("haunch_of_pier_2", "15000", depth("300")),
        ];
        let typed: Vec<(String, usize, Option<Taper>)> = lengths
            .iter()
            .map(|(length, section, to)| (metres(*length), *section, to.map(|to| Taper { to, law: TaperLaw::Linear })))
            .collect();
        let segments: Vec<(&str, usize, Option<Taper>)> =
            typed.iter().map(|(length, section, taper)| (length.as_str(), *section, *taper)).collect();
        let mut places: Vec<_> = supports.clone();
        places.sort();
        places.dedup_by_key(|(part, ..)| spot(*part));
        let named = places
            .iter()
            .enumerate()
            .map(|(index, (part, code, letters))| {
                build::support(&format!("{}{index}", "W".repeat(*letters)), &spot(*part), CODES[*code])
            })
            .collect();
        let mut joints: Vec<String> = hinges.iter().map(|part| spot(*part)).collect();
        joints.sort();
        joints.dedup();
        let names: Vec<String> = (0..joints.len()).map(|index| format!("H{index}")).collect();
        let hinges: Vec<(&str, &str)> = names.iter().map(String::as_str).zip(joints.iter().map(String::as_str)).collect();
        let mut member = build::member(sections, &segments, named, &hinges);
        let count = member.supports.len();
        let list = kinds.iter().map(|(kind, a, b, size)| load(*kind, (*a, *b), *size, count, &spot)).collect();
        member.cases = vec![build::case("Q", list)];
        member
    }
}

fn load(kind: u8, (a, b): (usize, usize), size: i64, supports: usize, spot: &dyn Fn(usize) -> String) -> LoadKind {
    let (low, high) = (a.min(b).min(999_000), a.max(b).max(a.min(b).min(999_000) + 900));
    let (from, to) = (spot(low), spot(high.min(999_999)));
    let size = format!("{}{}.{:02}", if size < 0 { "-" } else { "" }, size.abs() / 100, size.abs() % 100);
    match kind {
        0 => build::uniform(&size, &from, &to),
        1 => build::linear(&size, "3.25", &from, &to),
        2 => build::area(&size, "2.4", &from, &to),
        3 => build::couple(&size, &from),
        4 => build::settlement(a % supports, &size),
        5 => build::rotation(a % supports, &size),
        6 => build::gradient(&size, &from, &to),
        _ => build::point(&size, &from),
    }
}

/// Nothing overlaps; the drawing keeps within `width`.
fn check(drawing: &Drawing, width: f64) -> Result<(), TestCaseError> {
    let found = drawing.collisions();
    if !found.is_empty() {
        super::svg::show("failing", drawing);
    }
    prop_assert!(found.is_empty(), "{found:#?}");
    if drawing.width > width + 0.01 {
        super::svg::show("failing", drawing);
    }
    prop_assert!(drawing.width <= width + 0.01, "{} mm wide: {}", drawing.width, drawing.alt);
    Ok(())
}

fn labels(drawing: &Drawing) -> Vec<String> {
    let text = |item: &Item| match item {
        Item::Text { runs, .. } => Some(runs.iter().map(|run| run.text.as_str()).collect::<String>()),
        _ => None,
    };
    drawing.items.iter().filter_map(text).collect()
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 300, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn members_of_any_shape_are_drawn_clean(member in members(), wide in any::<bool>(), chosen in any::<u32>()) {
        let width = if wide { WIDE } else { COLUMN };
        let said = all_cuts(&member);
        let sketch = elevation(&member, &said, width);
        check(&sketch, width)?;
        let text = labels(&sketch).join(" | ");
        for support in &member.supports {
            prop_assert!(text.contains(&support.name), "{} is missing", support.name);
        }
        let case = loads(&member, 0, &Words::default(), width);
        check(&case, width)?;
        let points = member.cases[0].loads.iter().filter(|load| matches!(load.kind, LoadKind::Point { .. })).count();
        let forces = labels(&case).iter().filter(|text| text.ends_with(" kN")).count();
        prop_assert_eq!(points, forces, "every point load has its figure");
        let redundants: Vec<Redundant> = (0..member.supports.len())
            .flat_map(|index| [Redundant::Force(index), Redundant::Moment(index)])
            .filter(|redundant| chosen >> (redundant.support() * 2 + usize::from(matches!(redundant, Redundant::Force(_)))) & 1 == 1)
            .collect();
        check(&released(&member, &redundants, &said, width), width)?;
        check(&free_bodies(&member, &said, width), width)?;
    }

    #[test]
    fn diagrams_of_any_shape_are_drawn_clean(
        curves in prop::collection::vec(prop::collection::vec(-1e4_f64..1e4, 2..40), 1..12),
        marked in prop::collection::vec((0_usize..12, 0_usize..40), 0..40),
        names in 1_usize..12,
    ) {
        let mut drawn: Vec<Curve> = curves
            .iter()
            .enumerate()
            .map(|(index, values)| Curve {
                label: format!("{}{index}", "C".repeat(names)),
                style: Style::Line(index),
                points: values.iter().enumerate().map(|(i, y)| (i as f64 / (values.len() - 1) as f64 * 12.0, *y)).collect(),
                marks: Vec::new(),
            })
            .collect();
        for (curve, point) in marked {
            let index = curve % drawn.len();
            let curve = &mut drawn[index];
            let (x, y) = curve.points[point % curve.points.len()];
            curve.marks.push(Mark { x, y, label: format!("{y:.1} at {x:.3} m") });
        }
        let panel = Panel { symbol: "M".into(), unit: "kN m".into(), down: true, curves: drawn, ..Panel::default() };
        let supports = (0..5).map(|i| (f64::from(i) * 3.0, format!("S{i}"))).collect();
        let count: usize = panel.curves.iter().map(|curve| curve.marks.len()).sum();
        let plot = Plot { subject: "Q".into(), from: 0.0, to: 12.0, supports, panels: vec![panel.clone(), panel] };
        let drawing = figure::diagrams(&plot, COLUMN);
        check(&drawing, COLUMN)?;
        let said = labels(&drawing).iter().filter(|text| text.contains(" at ")).count();
        prop_assert_eq!(said, 2 * count);
    }
}
