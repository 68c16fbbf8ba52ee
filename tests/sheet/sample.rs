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
use proofspan::working::{Block, Body, Chapter, Chapters, Figure as Found, Input, Origin, Step, Working};

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

/// Writes steps with ids in their order.
struct Writer {
    working: Working,
}

struct Said<'a> {
    symbol: &'a str,
    math: &'a str,
    numbers: &'a str,
    result: &'a str,
    unit: &'a str,
    inputs: &'a [&'a str],
}

impl Writer {
    fn chapter(&mut self, about: Chapters, title: &str) {
        let number = self.working.chapters.len() + 1;
        self.working.chapters.push(Chapter { about, number, title: title.to_owned(), blocks: Vec::new() });
    }

    fn block(&mut self, sentence: &str, notes: &[&str], said: &[Said], case: Option<&str>, table: bool) {
        let chapter = self.working.chapters.last_mut().unwrap();
        let number = format!("{}.{}", chapter.number, chapter.blocks.len() + 1);
        let mut indices = Vec::new();
        for (line, one) in said.iter().enumerate() {
            let bold = one.symbol.starts_with('*');
            let symbol = one.symbol.trim_start_matches('*');
            let inputs = one.inputs.iter().map(|name| {
                let place = self.working.steps.iter().rposition(|step| step.symbol == *name);
                let known = place.and_then(|place| self.working.steps.get(place));
                Input {
                    name: (*name).to_owned(),
                    math: quoted(name),
                    printed: known.map_or(Decimal::ONE, |step| step.result.printed),
                    unit: known.map_or_else(Unit::none, |step| step.result.unit.clone()),
                    from: place.map_or(Origin::Deck, Origin::Step),
                }
            });
            let inputs = inputs.collect();
            let spoken = format!("{symbol} equals {}, which is {} {}", one.math.replace('"', ""), one.result, one.unit);
            indices.push(self.working.steps.len());
            self.working.steps.push(Step {
                id: format!("{number}.{}", line + 1),
                title: symbol.to_owned(),
                case: case.map(str::to_owned),
                symbol: symbol.to_owned(),
                expression: Some(String::new()),
                math: one.math.to_owned(),
                numbers: one.numbers.to_owned(),
                math_symbol: quoted(symbol),
                spoken,
                inputs,
                result: Found { printed: decimal(one.result), unit: unit(one.unit), value: 0.0 },
                basis: String::new(),
                bold,
            });
        }
        chapter.blocks.push(Block {
            number,
            sentence: sentence.to_owned(),
            notes: notes.iter().map(|note| (*note).to_owned()).collect(),
            body: if table { Body::Table(indices) } else { Body::Lines(indices) },
        });
    }
}

fn quoted(symbol: &str) -> String {
    let (base, sub) = symbol.split_once('_').unwrap_or((symbol, ""));
    let base = if base == "EI" { "E I" } else { base };
    if sub.is_empty() { base.to_owned() } else { format!("{base}_\"{}\"", sub.replace('_', ",")) }
}

macro_rules! says {
    ($($symbol:literal, $math:literal, $numbers:literal, $result:literal, $unit:literal, [$($input:literal),*];)*) => {
        &[$(Said { symbol: $symbol, math: $math, numbers: $numbers, result: $result, unit: $unit, inputs: &[$($input),*] }),*]
    };
}

pub fn working() -> Working {
    let mut w = Writer { working: Working { figures: 4, settled: true, steps: Vec::new(), chapters: Vec::new() } };
    w.chapter(Chapters::Given, "Figures of the input in kN and m");
    w.block(
        "Conversions from the units typed to those of the working.",
        &[],
        says! {
            "k_1", "", "", "1000000", "kN/m^2 GPa", [];
            "k_2", "", "", "0.00000001", "m^4/cm^4", [];
        },
        None,
        false,
    );
    w.block(
        "The bending stiffness of each section.",
        &["I from the section's table."],
        says! {
            "*EI_1", r#"E dot k_"1" times I_"1" k_"2""#, "200 times 1000000 times 20600 times 1.0 dot 10^(-8)", "41200", "kN m^2", ["k_1", "k_2"];
            "*EI_2", r#"E dot k_"1" times I_"2" k_"2""#, "200 times 1000000 times 10300 times 1.0 dot 10^(-8)", "20600", "kN m^2", ["k_1", "k_2"];
        },
        None,
        false,
    );
    w.block(
        "The lengths of the pieces.",
        &[],
        says! { "L_1", r#"L_"1""#, "4.000", "4.000", "m", []; "L_2", r#"L_"2""#, "5.000", "5.000", "m", []; },
        None,
        false,
    );
    w.chapter(Chapters::UnitState(0), "Unit state: R_B = 1 kN upward on the released member");
    w.block(
        "Shear and moment at the cut C hold the free body C–B in equilibrium.",
        &[],
        says! { "V_C", r#"-R_"B""#, "-1", "-1.000", "kN", []; "M_C", r#"R_"B" L_"2""#, "1 times 5.000", "5.000", "kN m", ["L_2"]; },
        None,
        false,
    );
    w.block(
        "Piece A–C is a cantilever held at A; cut force and cut moment bend it.",
        &["Cases T1, T3"],
        says! {
            "v_C", r#"frac(V_"C" L_"1"^3, 3 E I_"1") - frac(M_"C" L_"1"^2, 2 E I_"1")"#,
                "frac((-1.000) times 4.000^3, 3 times 41200) - frac(5.000 times 4.000^2, 2 times 41200)", "-0.001489", "m", ["V_C", "L_1", "EI_1", "M_C"];
            "psi_C", r#"frac(V_"C" L_"1"^2, 2 E I_"1") - frac(M_"C" L_"1", E I_"1")"#,
                "frac((-1.000) times 4.000^2, 2 times 41200) - frac(5.000 times 4.000, 41200)", "-0.0006796", "rad", ["V_C", "L_1", "EI_1", "M_C"];
        },
        None,
        false,
    );
    w.block(
        "Shift, turn times length and own bending give the movement of B: the flexibility.",
        &["Case T1"],
        says! {
            "*f_BB", r#"-(v_"C" + psi_"C" L_"2" - frac(R_"B" L_"2"^3, 3 E I_"2"))"#,
                "-(-0.001489 + (-0.0006796) times 5.000 - frac(1 times 5.000^3, 3 times 20600))", "0.006910", "m", ["v_C", "psi_C", "L_2", "EI_2"];
        },
        None,
        false,
    );
    for (index, (case, title)) in
        [("G", "Permanent load"), ("Q", "Imposed load"), ("S", "Settlement of B")].iter().enumerate()
    {
        w.chapter(Chapters::Case(index), &format!("Load case {case} on the released member: {title}"));
        w.block(
            "Equilibrium of the piece C–B gives the force and the moment at the cut.",
            &["No reaction at B: it is released."],
            says! {
                "V_C", r#"q L_"2" + P"#, "14.00 times 5.000 + 36.00", "106.0", "kN", ["L_2"];
                "M_C", r#"-(frac(q L_"2"^2, 2) + P b)"#, "-(frac(14.00 times 5.000^2, 2) + 36.00 times 2.500)", "-265.0", "kN m", ["L_2"];
            },
            Some(case),
            false,
        );
        w.block(
            "The wall of the piece C–B moves with C: load, cut force and cut moment bend A–C.",
            &["Cases T5, T1, T3"],
            says! {
                "v_C", r#"frac(q L_"1"^4, 8 E I_"1") + frac(V_"C" L_"1"^3, 3 E I_"1") - frac(M_"C" L_"1"^2, 2 E I_"1")"#,
                    "frac(14.00 times 4.000^4, 8 times 41200) + frac(106.0 times 4.000^3, 3 times 41200) - frac((-265.0) times 4.000^2, 2 times 41200)",
                    "0.1172", "m", ["L_1", "EI_1", "V_C", "M_C"];
                "psi_C", r#"frac(q L_"1"^3, 6 E I_"1") + frac(V_"C" L_"1"^2, 2 E I_"1") - frac(M_"C" L_"1", E I_"1")"#,
                    "0.003625 + 0.02058 + 0.02573", "0.04994", "rad", ["L_1", "EI_1", "V_C", "M_C"];
            },
            Some(case),
            false,
        );
        w.block(
            "Shift of the wall, turn times length, and own bending add up to the movement of B.",
            &["Cases T5, T2"],
            says! {
                "*v_B0", r#"v_"C" + psi_"C" L_"2" + v_"B,q" + v_"B,P""#, "0.1172 + 0.04994 times 5.000 + 0.05310 + 0.02275", "0.4428", "m",
                    ["v_C", "psi_C", "L_2"];
            },
            Some(case),
            false,
        );
        w.block(
            "B must come back to its support: compatibility gives the redundant.",
            &["Support B does not settle in this case."],
            says! { "*R_B", r#"frac(v_"B0", f_"BB")"#, "frac(0.4428, 0.006910)", "64.08", "kN", ["v_B0", "f_BB"]; },
            Some(case),
            false,
        );
        w.block(
            "The remaining reactions follow from equilibrium of the whole member.",
            &[],
            says! {
                "*R_A", r#"q L + P - R_"B""#, "14.00 times 9.000 + 36.00 - 64.08", "97.92", "kN", ["R_B"];
                "*M_A", r#"frac(q L^2, 2) + P a - R_"B" L"#, "frac(14.00 times 9.000^2, 2) + 36.00 times 6.500 - 64.08 times 9.000", "224.3", "kN m", ["R_B"];
            },
            Some(case),
            false,
        );
    }
    w.chapter(Chapters::Sums, "Sums over the cases");
    for (name, base) in [("R_A", 97), ("R_B", 64), ("M_A", 224)] {
        let rows: Vec<(String, String)> = (1..=4)
            .map(|c| {
                (
                    format!("1.35 times {base}.92 + {c} times {base}.50 + 0 times 1.250"),
                    format!("{}.37", base * (c + 1)),
                )
            })
            .collect();
        let said: Vec<Said> = rows
            .iter()
            .map(|(numbers, result)| Said {
                symbol: name,
                math: r#"g_"G" R_"G" + g_"Q" R_"Q" + g_"S" R_"S""#,
                numbers,
                result,
                unit: if name == "M_A" { "kN m" } else { "kN" },
                inputs: &["R_A", "R_B", "M_A"],
            })
            .collect();
        w.block(
            &format!("{name} in every combination: factors times cases."),
            &["Superposition"],
            &said,
            Some("C1"),
            true,
        );
    }
    let rows: Vec<String> = (0..14).map(|place| format!("{}", 12345 + place * 1111)).collect();
    let said: Vec<Said> = rows
        .iter()
        .map(|result| Said {
            symbol: "M_x",
            math: "M - V x",
            numbers: "1 - 1 times 2",
            result,
            unit: "kN m",
            inputs: &["M_A", "R_A", "L_1"],
        })
        .collect();
    w.block("Moments at the stations.", &[], &said, Some("C1"), true);
    w.chapter(Chapters::Checks, "What is allowed against what was found");
    w.block(
        "The governing deflection in span A–B, measured from the chord, against its limit.",
        &["Limit total: Project specification, clause 4.2"],
        says! {
            "*d", r#"v_"x" - (v_"A" + (v_"B" - v_"A") frac(x - x_"A", L))"#, "0.01824 - (0 + (0.006000 - 0) times frac(5.114 - 0, 9.000))", "0.01483", "m", ["v_C"];
            "d_max", r#"frac(2 L, 250)"#, "frac(2 times 9.000, 250)", "0.07200", "m", [];
            "*u", r#"frac(abs(d), d_"max")"#, "frac(abs(0.01483), 0.07200)", "0.2060", "", [];
            "S", r#"frac(a_"1" + a_"2" + a_"3" + a_"4" + a_"5" + a_"6" + a_"7" + a_"8" + a_"9" + a_"10" + a_"11" + a_"12" + a_"13" + a_"14" + a_"15" + a_"16", 3 E I_"1")"#,
                "frac(1.5 + 2.5 + 3.5 + 4.5 + 5.5 + 6.5 + 7.5, 3 times 41200)", "0.0002549", "m", ["EI_1"];
            "T", r#"a_"1" + a_"2" + a_"3" + a_"4" + a_"5" + a_"6" + a_"7" + a_"8" + a_"9" + a_"10" + a_"11" + a_"12" + a_"13" + a_"14" + a_"15" + a_"16""#,
                "1.50000 + 2.50000 + 3.50000 + 4.50000 + 5.50000 + 6.50000 + 7.50000 + 8.50000 + 9.50000 + 10.50000 + 11.50000 + 12.50000", "84.00000", "m", [];
        },
        Some("C2"),
        false,
    );
    w.working
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
        let mut list = chapters(&working(), &Templates::default().labels().unwrap()).unwrap();
        for chapter in &mut list {
            if chapter.about == "case" {
                chapter.figures.push(figure(""));
            }
        }
        list
    };
    Model {
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
        attachments: Attachments { deck: Some(DECK.as_bytes().to_vec()), results: Some(b"{\"format\": 1}\n".to_vec()) },
        ident: "0123456789abcdef".to_owned(),
        ..Options::default()
    }
}
