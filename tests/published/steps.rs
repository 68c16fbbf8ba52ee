//! Stepped members.
//!
//! Sources: Gere *Mechanics of Materials* 9.7-1 and 9.7-2 (seen), a solutions manual's Prob. 10.72 (seen; its printed answer
//! was not, so the figure is the one computed from it); closed forms and fractions computed independently.

use crate::support::{deck, look, solve};

use super::{CANTILEVER, FIXED, PROPPED, UNIFORM, couple, holds, part, point, settle, turn};

#[test]
fn a_cantilever_of_two_halves() {
    // T1: the ratio to the prismatic cantilever for I2/I1 = 1 to 5, as tabulated.
    let tip = |ratio: f64| look(&solve(&deck(&[(0.5, ratio), (0.5, 1.0)], CANTILEVER, UNIFORM, &[1.0])), "v 1");
    for (ratio, printed) in [(1.0, 1.00), (2.0, 0.53), (3.0, 0.38), (4.0, 0.30), (5.0, 0.25)] {
        let found = tip(ratio) / tip(1.0);
        assert!((found - printed).abs() <= 0.005_01, "I2/I1 = {ratio}: {found}, printed {printed}");
    }
    for ratio in [2.0, 5.0] {
        let halves: &[(f64, f64)] = &[(0.5, ratio), (0.5, 1.0)];
        holds(&[
            ("T1, at the step", halves, CANTILEVER, UNIFORM, "v 0.5", 17.0 / 384.0 / ratio),
            ("T1, at the step", halves, CANTILEVER, UNIFORM, "slope 0.5", 7.0 / 48.0 / ratio),
            ("T2", halves, CANTILEVER, &point(1.0, 1.0), "v 1", (1.0 + 7.0 / ratio) / 24.0),
        ]);
    }
}

#[test]
fn a_cantilever_of_any_two_lengths() {
    // Root EIr, outer length a EIt.
    for (inner, a, root, tip) in [(0.75, 0.25_f64, 3.0, 1.0), (0.4, 0.6, 2.0, 5.0), (0.1, 0.9, 1e6, 1.0)] {
        let segments: &[(f64, f64)] = &[(inner, root), (a, tip)];
        let (a2, a3, a4) = (a * a, a * a * a, a * a * a * a);
        holds(&[
            ("tip force", segments, CANTILEVER, &point(1.0, 1.0), "v 1", (1.0 - a3) / (3.0 * root) + a3 / (3.0 * tip)),
            ("uniform", segments, CANTILEVER, UNIFORM, "v 1", (1.0 - a4) / (8.0 * root) + a4 / (8.0 * tip)),
            ("couple", segments, CANTILEVER, &couple(1.0, 1.0), "v 1", (1.0 - a2) / (2.0 * root) + a2 / (2.0 * tip)),
            ("couple", segments, CANTILEVER, &couple(1.0, 1.0), "slope 1", (1.0 - a) / root + a / tip),
        ]);
    }
}

#[test]
fn a_propped_beam_of_two_halves() {
    let rows = [
        (1.0, 3.0 / 8.0, 5.0 / 16.0),
        (2.0, 17.0 / 48.0, 5.0 / 18.0),
        (3.0, 27.0 / 80.0, 1.0 / 4.0),
        (4.0, 57.0 / 176.0, 5.0 / 22.0),
    ];
    for (ratio, uniform, middle) in rows {
        let halves: &[(f64, f64)] = &[(0.5, ratio), (0.5, 1.0)];
        holds(&[
            ("propped, uniform", halves, PROPPED, UNIFORM, "R B", uniform),
            ("propped, force in the middle", halves, PROPPED, &point(1.0, 0.5), "R B", middle),
        ]);
    }
    let three: &[(f64, f64)] = &[(0.5, 3.0), (0.5, 1.0)];
    holds(&[
        ("propped, ratio 3", three, PROPPED, &point(1.0, 0.5), "M 0", -1.0 / 4.0),
        ("propped, ratio 3", three, PROPPED, &point(1.0, 0.5), "v 0.5", 1.0 / 192.0),
    ]);
    // T4: 60 lb/ft on 16 ft, EI = 200e6 lb in² at the root and twice that at the prop: 0.13271 in in the middle.
    let text = deck(&[(1.0, 1.0), (1.0, 1.0)], "A 0 fixed; B 2 roller", r#"{ kind = "uniform", w = "60 plf" }"#, &[]);
    let text = text
        .replace("length = \"1 m\"", "length = \"8 ft\"")
        .replace("at = \"2 m\"", "at = \"16 ft\"")
        .replace("stations = []", "stations = [\"8 ft\"]")
        .replace("E = \"1 kPa\"", "E = \"1000 ksi\"")
        .replacen("I = \"0.001 m^4\"", "I = \"200 in^4\"", 1)
        .replacen("I = \"0.001 m^4\"", "I = \"400 in^4\"", 1);
    let found = look(&solve(&text), "v 2.4384") / 0.0254;
    assert!((found - 0.13271).abs() < 5.1e-6, "T4: {found} in");
}

#[test]
fn a_fixed_beam_of_two_halves() {
    let two: &[(f64, f64)] = &[(0.5, 2.0), (0.5, 1.0)];
    let (left, right) = (turn("A", 1.0), turn("B", 1.0));
    holds(&[
        ("uniform", two, FIXED, UNIFORM, "M 0", -17.0 / 176.0),
        ("uniform", two, FIXED, UNIFORM, "M 1", -13.0 / 176.0),
        ("force in the middle", two, FIXED, &point(1.0, 0.5), "M 0", -5.0 / 33.0),
        ("force in the middle", two, FIXED, &point(1.0, 0.5), "M 1", -7.0 / 66.0),
        ("stiffness of A", two, FIXED, &left, "m A", -80.0 / 11.0),
        ("carried to B, 2/5", two, FIXED, &left, "m B", -80.0 / 11.0 * 2.0 / 5.0),
        ("stiffness of B", two, FIXED, &right, "m B", -48.0 / 11.0),
        ("carried to A, 2/3", two, FIXED, &right, "m A", -48.0 / 11.0 * 2.0 / 3.0),
        ("B sinks", two, FIXED, &settle("B", 1.0), "M 0", -112.0 / 11.0),
        ("B sinks", two, FIXED, &settle("B", 1.0), "M 1", 80.0 / 11.0),
        (
            "load on the root half alone is the whole less the other half",
            two,
            CANTILEVER,
            &part(1.0, 0.0, 0.5),
            "v 1",
            7.0 / 384.0 / 2.0,
        ),
    ]);
}
