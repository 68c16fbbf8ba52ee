//! Steps typed for their looks: every way in which a line or a table of the working can be set.

use proofspan::quantity::{Decimal, Unit};
use proofspan::working::{Block, Body, Chapter, Chapters, Figure as Found, Input, Origin, Step, Working};

use super::sample::{decimal, unit};

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
