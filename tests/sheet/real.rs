//! A member put together by hand, solved and narrated: a working as the program writes it.

use proofspan::analysis;
use proofspan::figure::{Cut, Plot, Words};
use proofspan::member::*;
use proofspan::quantity::Decimal;
use proofspan::sheet::model::{Findings, Parts};
use proofspan::sheet::{Model, Templates};
use proofspan::working::{Demand, Working, narrate};

use crate::figure::build;

fn factor(text: &str) -> Factor {
    let figure = Decimal::parse(text).unwrap();
    Factor { value: figure.to_f64(), figure }
}

/// The propped beam of two stiffnesses with combinations and a limit.
pub fn propped() -> Member {
    let mut member = build::propped();
    member.title = Title {
        project: "Tidewater pump house".to_owned(),
        number: "TPH-014".to_owned(),
        subject: "Intake beam B3".to_owned(),
        revision: "A".to_owned(),
        date: (2026, 11, 30),
        prepared: Some("A. N. Other".to_owned()),
        client: Some("Harbour board".to_owned()),
        ..Title::default()
    };
    let cases = std::mem::take(&mut member.cases);
    let titles = [("Q", "Imposed load"), ("W", "Wind and couples"), ("S", "Settlement, turn, temperature")];
    for (name, title) in titles {
        let mut case = cases.iter().find(|case| case.name == name).unwrap().clone();
        if name == "S" {
            case.loads.truncate(2);
        }
        case.title = title.to_owned();
        member.cases.push(case);
    }
    for (name, title, purpose, factors) in [
        ("C1", "Characteristic", Purpose::Serviceability, ["1.0", "1.0", "1.0"]),
        ("C2", "Wind up", Purpose::Serviceability, ["0", "1.0", "0"]),
        ("C3", "Design", Purpose::Strength, ["1.5", "0.9", "1.0"]),
        ("C4", "Uplift", Purpose::Stability, ["0", "1.5", "0"]),
    ] {
        member.combinations.push(Combination {
            name: name.to_owned(),
            title: title.to_owned(),
            purpose,
            factors: factors.map(factor).to_vec(),
        });
    }
    member.spans.push(Span {
        name: "A-B".to_owned(),
        from: member.supports[0].at,
        to: member.supports[1].at,
        left: Some(0),
        right: Some(1),
    });
    member.limits.push(Limit {
        name: "total".to_owned(),
        ratio: Some(factor("250")),
        absolute: None,
        combinations: vec![0, 1],
        spans: vec![0],
        measured: Measured::Chord,
        cantilever_length_factor: None,
        basis: "Project specification, clause 4.2".to_owned(),
    });
    member
}

/// Solved and narrated with the demands of its limit.
pub fn working(member: &Member) -> Working {
    let analysis = analysis::solve(member).expect("a stable member");
    let mut demands = Vec::new();
    for (index, limit) in member.limits.iter().enumerate() {
        for combination in &limit.combinations {
            for span in &limit.spans {
                let field = analysis::Field::of_combination(&analysis, member, *combination).unwrap();
                let of = &member.spans[*span];
                let (left, right) = analysis::extreme::span_ends(&field, of);
                let length = of.to.beyond(of.from);
                let found = field.greatest_from(of, left, (right - left) / length);
                let allowable = length / 250.0;
                demands.push(Demand {
                    limit: index,
                    combination: *combination,
                    span: *span,
                    deflection: found.value,
                    spot: found.spot,
                    allowable,
                    utilisation: found.value.abs() / allowable,
                });
            }
        }
    }
    narrate(member, &analysis, &demands).unwrap_or_else(|faults| panic!("{faults:?}"))
}

/// The whole sheet of a member.
pub fn model(member: &Member) -> Model {
    composed(member, &working(member))
}

/// The sheet of a member without its steps.
pub fn model_without_working(member: &Member) -> Model {
    composed(member, &Working { figures: 4, settled: true, steps: Vec::new(), chapters: Vec::new() })
}

fn composed(member: &Member, working: &Working) -> Model {
    let words = Words { cuts: vec![Cut { at: 4.0, name: "C".to_owned() }], ..Words::default() };
    let findings = Findings {
        verdict: [
            "Deflection: within limits, 0.82 of the allowable (C1, span A–B).".to_owned(),
            "Strength: not checked.".to_owned(),
        ],
        uplift: vec!["Support B: net uplift of 14.1 kN in combination C4; hold-down required.".to_owned()],
        program: vec![format!("{} significant figures carried.", working.figures)],
        hashes: vec![("deck.toml".to_owned(), "0123456789abcdef".repeat(4))],
        plots: vec![("Combination C1".to_owned(), plot())],
        ..Findings::default()
    };
    let labels = Templates::default().labels().unwrap();
    Model::compose(&Parts {
        member,
        redundants: &[Redundant::Force(1)],
        working,
        words: &words,
        findings: &findings,
        file: "intake.toml",
        deck: super::sample::DECK,
        labels: &labels,
        brief: false,
    })
    .unwrap_or_else(|fault| panic!("{fault}"))
}

fn plot() -> Plot {
    use proofspan::figure::{Curve, Mark, Panel, Style};
    let panel = |symbol: &str, unit: &str, down: bool, value: fn(f64) -> f64| {
        let points: Vec<(f64, f64)> = (0..=90).map(|i| (f64::from(i) / 10.0, value(f64::from(i) / 10.0))).collect();
        let curves = vec![Curve { label: "C1".to_owned(), style: Style::Line(0), points, marks: Vec::<Mark>::new() }];
        Panel { symbol: symbol.to_owned(), unit: unit.to_owned(), down, curves, ..Panel::default() }
    };
    Plot {
        subject: "Combination C1".to_owned(),
        from: 0.0,
        to: 9.0,
        supports: vec![(0.0, "A".to_owned()), (9.0, "B".to_owned())],
        panels: vec![
            panel("V", "kN", false, |x| 100.0 - 20.0 * x),
            panel("M", "kN m", true, |x| -200.0 + 100.0 * x - 10.0 * x * x),
            panel("v", "mm", true, |x| x * x * (9.0 - x) / 5.0),
        ],
    }
}
