//! A hand-made view model of a propped stepped beam, to print and look at. Its figures are typed here for their looks
//! (rounded to four figures) and prove nothing about the analysis.

use proofspan::figure::primitive::at;
use proofspan::figure::{Anchor, Dash, Drawing, Fill, Item, Run, Stroke};
use proofspan::quantity::{Decimal, Unit};
use proofspan::sheet::model::{
    Align, Annex, Answer, Cell, Checks, Column, Document, Figure, Given, Method, Picture, Row, Running, Signature,
    Sums, Table, Trust, aligned, chapters,
};
use proofspan::sheet::{Attachments, Model, Options, Templates};

use super::told;

pub const DECK: &str = include_str!("sample.toml");

pub fn unit(text: &str) -> Unit {
    let (top, bottom) = text.split_once('/').unwrap_or((text, ""));
    let part = |words: &str, sign: i8| -> Vec<_> {
        words
            .split_whitespace()
            .map(|word| {
                let (atom, power) = word.split_once('^').unwrap_or((word, "1"));
                (Unit::known(atom).expect(atom), sign * power.parse::<i8>().unwrap())
            })
            .collect()
    };
    Unit::of(part(top, 1).into_iter().chain(part(bottom, -1)))
}

pub fn decimal(text: &str) -> Decimal {
    Decimal::parse(text).expect(text)
}

fn stroke(weight: f64, dash: Dash) -> Stroke {
    Stroke { weight, dash }
}

fn text(x: f64, y: f64, anchor: Anchor, words: &str) -> Item {
    let runs = vec![Run { text: words.to_owned(), italic: false, sub: false }];
    Item::Text { at: at(x, y), anchor, size_pt: 8.0, width: words.chars().count() as f64 * 1.25, turned: false, runs }
}

/// A propped beam with a load, roughly.
pub fn drawing() -> Drawing {
    let thin = stroke(0.15, Dash::Solid);
    let heavy = stroke(0.4, Dash::Solid);
    let mut items = vec![
        Item::Polygon {
            points: vec![at(5.0, 18.0), at(50.0, 18.0), at(50.0, 23.0), at(5.0, 23.0)],
            stroke: Some(heavy),
            fill: Fill::Hatch { angle: 45.0, spacing: 1.2 },
        },
        Item::Polygon {
            points: vec![at(50.0, 19.0), at(110.0, 19.0), at(110.0, 22.0), at(50.0, 22.0)],
            stroke: Some(heavy),
            fill: Fill::White,
        },
        Item::Line { from: at(5.0, 14.0), to: at(5.0, 27.0), stroke: heavy },
        Item::Polygon {
            points: vec![at(110.0, 22.0), at(107.5, 26.0), at(112.5, 26.0)],
            stroke: Some(heavy),
            fill: Fill::White,
        },
        Item::Circle { centre: at(50.0, 20.5), radius: 1.0, stroke: thin, fill: Fill::White },
        Item::Arc { centre: at(5.0, 20.5), radius: 4.0, start: 120.0, sweep: 120.0, stroke: stroke(0.25, Dash::Short) },
        Item::Line { from: at(5.0, 8.0), to: at(110.0, 8.0), stroke: thin },
        text(57.0, 5.0, Anchor::Middle, "14.00 kN/m"),
        text(5.0, 31.0, Anchor::Middle, "A"),
        text(110.0, 31.0, Anchor::Middle, "B"),
    ];
    for index in 0..=20 {
        let x = 5.0 + 5.25 * f64::from(index);
        items.push(Item::Line { from: at(x, 8.0), to: at(x, 17.0), stroke: thin });
        items.push(Item::Polygon {
            points: vec![at(x, 18.0), at(x - 0.6, 16.0), at(x + 0.6, 16.0)],
            stroke: None,
            fill: Fill::Black,
        });
    }
    Drawing {
        width: 120.0,
        height: 34.0,
        alt: "Beam A to B, fixed at A, on a roller at B, uniform load 14 kN/m".to_owned(),
        items,
    }
}

fn words(head: &str, rows: &[(&str, &str, &str)]) -> Table {
    let mut table = Table::new(
        head,
        head,
        vec![Column::text("What").wide(46.0), Column::text("Given").wide(38.0), Column::text("Source")],
    );
    table.rows = rows.iter().map(|(a, b, c)| Row::of(vec![Cell::text(*a), Cell::text(*b), Cell::text(*c)])).collect();
    table
}

fn combinations() -> Table {
    let kn = Unit::none();
    let mut table = Table::new(
        "",
        "Factors of the cases in each combination",
        vec![Column::text("Combination").wide(50.0), Column::text("Purpose").wide(30.0)],
    );
    let columns = [["1.0", "1.0", "1.35", "0.9"], ["0", "1.0", "1.5", "0"], ["0", "1.0", "1.0", "1.0"]];
    for name in ["G", "Q", "S"] {
        table.columns.push(Column::figures(Cell::text(name), &kn, 13.0));
    }
    let cells: Vec<Vec<Cell>> = columns.iter().map(|column| aligned(&column.map(decimal))).collect();
    for (index, name) in ["C1 Permanent", "C2 Characteristic", "C3 Design", "C4 Uplift"].iter().enumerate() {
        let mut row =
            vec![Cell::text(*name), Cell::text(["serviceability", "serviceability", "strength", "stability"][index])];
        row.extend(cells.iter().map(|column| column[index].clone()));
        table.rows.push(Row::of(row));
    }
    table
}

fn reactions() -> Table {
    let mut table = Table::new("By case, unfactored", "Reactions by case", vec![Column::text("Reaction").wide(40.0)]);
    for name in ["G", "Q", "S"] {
        table.columns.push(Column { align: Align::Right, ..Column::figures(Cell::text(name), &unit("kN"), 22.0) });
    }
    let cells: Vec<Vec<Cell>> = [["97.92", "64.08", "224.3"], ["1297.92", "-64.08", "10224"], ["0", "0.125", "-0.5"]]
        .iter()
        .map(|column| aligned(&column.map(decimal)))
        .collect();
    for (index, name) in ["R_A", "R_B", "M_A"].iter().enumerate() {
        let mut row = Row::of(
            std::iter::once(Cell::prose(*name)).chain(cells.iter().map(|column| column[index].clone())).collect(),
        );
        row.rule = index == 2;
        row.bold = index == 1;
        table.rows.push(row);
    }
    table
}

fn texts(list: &[&str]) -> Vec<String> {
    list.iter().map(|text| (*text).to_owned()).collect()
}

fn figure(title: &str) -> Figure {
    Figure { title: title.to_owned(), note: String::new(), picture: Picture(0) }
}

pub fn model() -> Model {
    let chapters = {
        let mut list = chapters(&told::working(), &Templates::default().labels().unwrap()).unwrap();
        for chapter in &mut list {
            if chapter.about == "case" {
                chapter.figures.push(figure(""));
            }
        }
        list
    };
    Model {
        brief: false,
        review: None,
        document: Document {
            title: "TPH-014 Intake beam B3".to_owned(),
            author: "A. N. Other".to_owned(),
            keywords: texts(&["calculation sheet", "beam"]),
            date: (2026, 11, 30),
        },
        running: Running {
            project: "Tidewater pump house".to_owned(),
            number: "TPH-014".to_owned(),
            revision: "A".to_owned(),
            subject: "Intake beam B3".to_owned(),
            client: "Harbour board".to_owned(),
            office: String::new(),
            prepared: "A. N. Other".to_owned(),
            checked: String::new(),
            approved: String::new(),
            date: "30 November 2026".to_owned(),
        },
        answer: Answer {
            verdict: [
                "Deflection: within limits, 0.81 of the allowable (C2, span A–B).".to_owned(),
                "Strength: not checked.".to_owned(),
            ],
            fails: false,
            uplift: texts(&["Support B: net uplift of 12.4 kN in combination C4; hold-down required."]),
            purpose: "To justify this member.".to_owned(),
            unconfirmed: texts(&["Settlement of support B, 6 mm: geotechnical report outstanding."]),
            not_covered: texts(&[
                "Lateral-torsional and local buckling, web bearing, connections.",
                "Axial force, torsion, interaction, fatigue, vibration, ponding.",
            ]),
            member: Some(figure("")),
            signatures: ["Prepared", "Checked", "Approved", "Seal"]
                .map(|role| Signature {
                    role: role.to_owned(),
                    name: if role == "Prepared" { "A. N. Other".to_owned() } else { String::new() },
                })
                .to_vec(),
        },
        given: Given {
            limits: Some(words(
                "",
                &[("total, span A–B", "span/250 = 36 mm, from the chord", "Project specification, clause 4.2")],
            )),
            inputs: vec![
                words(
                    "Sections",
                    &[
                        ("deep: E", "200 GPa", "steel table"),
                        ("deep: I", "20 600 cm⁴", "section table"),
                        ("light: I", "10 300 cm⁴", "section table"),
                    ],
                ),
                words("Supports", &[("A at 0 m", "fixed", "drawing 12"), ("B at 9 m", "roller", "drawing 12")]),
            ],
            combinations: combinations(),
            signs: Some(figure("")),
            loads: vec![figure("G: permanent load, 126.0 kN in all"), figure("Q: imposed load, 162.0 kN in all")],
            warnings: texts(&["Section “spare” is used by no segment."]),
        },
        method: Method {
            sentences: texts(&[
                "The member holds one restraint more than equilibrium needs; the force of support B is released.",
                "The released member is cut at every change of section; each piece is a cantilever whose wall moves with its left neighbour.",
                "Shear and moment at each cut come from the equilibrium of what lies to its right.",
                "Each piece's own bending is a sum of tabulated cases; shift, turn times length and own bending are chained from left to right.",
                "The released support must come back to its place: f_BB R_B = v_B0 less the settlement; the rest is superposition.",
            ]),
            drawings: vec![figure("Released member")],
            cases: Some(words(
                "",
                &[
                    ("T1 force at the tip", "v = PL³/3EI, ψ = PL²/2EI", "any handbook"),
                    ("T5 uniform load", "v = wL⁴/8EI", "any handbook"),
                ],
            )),
        },
        chapters,
        sums: Sums { tables: Vec::new(), reactions: vec![reactions()] },
        diagrams: vec![figure("Combination C2")],
        checks: Checks {
            findings: texts(&[
                "All deflections are within their limits; the greatest utilisation is 0.81 (C2, span A–B).",
            ]),
            table: Some(words(
                "",
                &[
                    ("C2, A–B, total", "29.2 mm of 36.0 mm, 0.81", "within"),
                    ("C1, A–B, total", "12.1 mm of 36.0 mm, 0.34", "within"),
                ],
            )),
        },
        trust: Trust {
            agreement: "Both methods agree.".to_owned(),
            events: None,
            crosschecks: vec![reactions()],
            assumptions: texts(&[
                "Euler–Bernoulli bending, small deflections, linear material.",
                "Sections are constant between the cuts.",
            ]),
            cautions: texts(&["This sheet does not replace the judgement of a licensed engineer."]),
            deference: texts(&[
                "Local codes and licensed practice come first wherever they differ from what is shown here.",
            ]),
            sources: texts(&["Cantilever cases: see the table of the method."]),
            revisions: Some(words("", &[("A", "30 November 2026", "first issue")])),
            program: texts(&["Proofspan 0.1.0, 4 significant figures carried."]),
            hashes: Some(words(
                "",
                &[("deck.toml", "SHA-256", "e3b0c44298fc1c149afbf4c8996fb924 27ae41e4649b934ca495991b7852b855")],
            )),
        },
        annex: Annex { file: "intake.toml".to_owned(), lines: DECK.lines().map(str::to_owned).collect() },
        drawings: vec![drawing()],
    }
}

pub fn options() -> Options {
    Options {
        attachments: Attachments {
            deck: Some(DECK.as_bytes().to_vec()),
            results: Some(b"{\"format\": 1}\n".to_vec()),
            claims: None,
        },
        ident: "0123456789abcdef".to_owned(),
        ..Options::default()
    }
}
