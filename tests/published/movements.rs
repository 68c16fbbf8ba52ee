//! Settlements, imposed turns, temperature, springs, hinges, and the base model of the table of wrong assumptions.
//!
//! Sources: slope-deflection and its tables (settlements, turns: any text on structures), Roark Table 8.1 case 6d (from
//! memory; seen in a stored page), Gere & Goodno *Mechanics of Materials* 9.11-3 (seen); the rest was computed independently
//! as exact fractions. Gere 9.11-4(b), a temperature difference that grows with x², is no load of the deck.
//! Lengths, EI, alpha and depth are one unless named. The deck's gradient is top less bottom: a bottom that is warmer by one
//! is a difference of -1 and bends the free member to sag.

use crate::support::{deck, look, solve, with_hinges};

use super::{CANTILEVER, FIXED, ONE, PROPPED, SIMPLE, TWO, UNIFORM, WARM, holds, part, point, settle, turn};

/// The bottom warmer by one over a part.
fn sagging(from: f64, to: f64) -> String {
    format!(r#"{{ kind = "gradient", difference = "-1 K", from = "{from} m", to = "{to} m" }}"#)
}

const TWO_SPANS: &str = "A 0 pinned; B 1 roller; C 2 roller";
const THREE_SPANS: &str = "A 0 pinned; B 1 roller; C 2 roller; D 3 roller";
const THREE: &[(f64, f64)] = &[(3.0, 1.0)];

#[test]
fn settlements_and_imposed_turns() {
    let (down_b, down_c, down_d) = (settle("B", 1.0), settle("C", 1.0), settle("D", 1.0));
    holds(&[
        ("fixed, B sinks", ONE, FIXED, &down_b, "m A", 6.0),
        ("fixed, B sinks", ONE, FIXED, &down_b, "m B", 6.0),
        ("fixed, B sinks", ONE, FIXED, &down_b, "R A", 12.0),
        ("fixed, B sinks", ONE, FIXED, &down_b, "R B", -12.0),
        ("propped, B sinks", ONE, PROPPED, &down_b, "m A", 3.0),
        ("propped, B sinks", ONE, PROPPED, &down_b, "R B", -3.0),
        ("near end turned", ONE, FIXED, &turn("A", 1.0), "m A", -4.0),
        ("near end turned", ONE, FIXED, &turn("A", 1.0), "m B", -2.0),
        ("far end turned", ONE, FIXED, &turn("B", 1.0), "m A", -2.0),
        ("two spans, middle sinks", TWO, TWO_SPANS, &down_b, "M 1", 3.0),
        ("two spans, middle sinks", TWO, TWO_SPANS, &down_b, "R A", 3.0),
        ("two spans, middle sinks", TWO, TWO_SPANS, &down_b, "R B", -6.0),
        ("two spans, middle sinks", TWO, TWO_SPANS, &down_b, "R C", 3.0),
        ("two spans, end sinks", TWO, TWO_SPANS, &down_c, "M 1", -1.5),
        ("three spans, B sinks", THREE, THREE_SPANS, &down_b, "M 1", 18.0 / 5.0),
        ("three spans, B sinks", THREE, THREE_SPANS, &down_b, "M 2", -12.0 / 5.0),
        ("three spans, D sinks", THREE, THREE_SPANS, &down_d, "M 1", 2.0 / 5.0),
        ("three spans, D sinks", THREE, THREE_SPANS, &down_d, "M 2", -8.0 / 5.0),
    ]);
    // Two unequal spans of unequal EI: M_B = 3 d (1/L1 + 1/L2) / (L1/EI1 + L2/EI2); uniform on a prismatic member:
    // M_B = -w (L1³ + L2³) / 8 (L1 + L2).
    let unequal = "A 0 pinned; B 2 roller; C 5 roller";
    holds(&[
        (
            "unequal spans, middle sinks",
            &[(2.0, 4.0), (3.0, 1.5)],
            unequal,
            &down_b,
            "M 2",
            3.0 * (1.0 / 2.0 + 1.0 / 3.0) / (2.0 / 4.0 + 3.0 / 1.5),
        ),
        ("unequal spans, uniform", &[(5.0, 1.0)], unequal, UNIFORM, "M 2", -(8.0 + 27.0) / (8.0 * 5.0)),
    ]);
    // A middle support set low under two loaded spans: R = 5 w L / 4 - 6 EI d / L³, until contact is lost.
    for d in [0.0, 0.05, 0.2, 0.3] {
        let loads = format!("{UNIFORM}, {}", settle("B", d));
        holds(&[("support set low", TWO, TWO_SPANS, &loads, "R B", 5.0 / 4.0 - 6.0 * d)]);
    }
}

#[test]
fn temperature() {
    let (whole, two, three) = (sagging(0.0, 1.0), sagging(0.0, 2.0), sagging(0.0, 3.0));
    let a = 0.3;
    let partial = sagging(a, 1.0);
    holds(&[
        ("fixed", ONE, FIXED, &whole, "Mmin", -1.0),
        ("fixed", ONE, FIXED, &whole, "Mmax", -1.0),
        ("propped", ONE, PROPPED, &whole, "Mmin", -1.5),
        ("propped", ONE, PROPPED, &whole, "R A", 1.5),
        ("propped", ONE, PROPPED, &whole, "R B", -1.5),
        ("two spans", TWO, TWO_SPANS, &two, "M 1", -1.5),
        ("three spans", THREE, THREE_SPANS, &three, "M 1", -1.2),
        ("three spans", THREE, THREE_SPANS, &three, "M 2", -1.2),
        ("simple", ONE, SIMPLE, &whole, "v 0.5", 1.0 / 8.0),
        ("cantilever, bottom warmer: it rises", ONE, CANTILEVER, &whole, "v 1", -0.5),
        ("cantilever, top warmer: it sinks", ONE, CANTILEVER, WARM, "v 1", 0.5),
        // Roark 8.1, 6d: fixed ends, warmed from a to the right end. Its moments are bending moments.
        ("R6d", ONE, FIXED, &partial, "R A", -6.0 * a * (1.0 - a)),
        ("R6d", ONE, FIXED, &partial, "M 0", (1.0 - a) * (3.0 * a - 1.0)),
        ("R6d", ONE, FIXED, &partial, "M 1", -(1.0 - a) * (3.0 * a + 1.0)),
    ]);
    // Gere 9.11-3: guided at the left, a roller at L, an overhang a: turn kappa (L + a), deflection kappa (2 L a + a²) / 2.
    let gere = "A 0 guided; B 1 roller";
    let over: &[(f64, f64)] = &[(1.4, 1.0)];
    holds(&[
        ("Gere 9.11-3", over, gere, WARM, "slope 1.4", 1.4),
        ("Gere 9.11-3", over, gere, WARM, "v 1.4", (2.0 * 0.4 + 0.16) / 2.0),
    ]);
}

#[test]
fn springs() {
    for k in [0.5, 7.0, 300.0] {
        let middle = format!("A 0 pinned; B 0.5 elastic {k} free; C 1 roller");
        let tip = format!("A 0 fixed; B 1 elastic {k} free");
        let inner = format!("A 0 pinned; B 1 elastic {k} free; C 2 roller");
        let turning = format!("A 0 elastic rigid {k}; B 1 elastic rigid {k}");
        holds(&[
            ("spring in the middle of a simple beam", ONE, &middle, &point(1.0, 0.5), "R B", k / (k + 48.0)),
            ("spring at a cantilever's tip", ONE, &tip, UNIFORM, "R B", 3.0 / 8.0 * k / (k + 3.0)),
            ("spring between two spans", TWO, &inner, UNIFORM, "R B", 5.0 / 4.0 * k / (k + 6.0)),
            ("rotational springs", ONE, &turning, UNIFORM, "M 0", -1.0 / 12.0 * k / (k + 2.0)),
            ("rotational springs", ONE, &turning, UNIFORM, "M 1", -1.0 / 12.0 * k / (k + 2.0)),
        ]);
    }
}

#[test]
fn hinges() {
    let hold = |name: &str, deck: String, hinges: &[(&str, f64)], figures: &[(&str, f64)]| {
        let results = solve(&with_hinges(deck, hinges));
        for (what, exact) in figures {
            let found = look(&results, what);
            assert!((found - exact).abs() < 1e-11, "{name}: {what} is {found}, exact {exact}");
        }
    };
    hold(
        "fixed, hinge, roller",
        deck(TWO, "A 0 fixed; B 2 roller", &part(1.0, 1.0, 2.0), &[0.0, 1.0]),
        &[("H", 1.0)],
        &[("R A", 0.5), ("R B", 0.5), ("M 0", -0.5), ("M 1", 0.0), ("v 1", 1.0 / 6.0)],
    );
    hold(
        "Gerber beam",
        deck(THREE, THREE_SPANS, UNIFORM, &[1.0, 2.0]),
        &[("G", 1.2), ("H", 1.8)],
        &[("R A", 21.0 / 50.0), ("R B", 27.0 / 25.0), ("R C", 27.0 / 25.0), ("M 1", -2.0 / 25.0), ("M 2", -2.0 / 25.0)],
    );
    hold(
        "fixed, roller, hinge, force, roller",
        deck(&[(4.0, 1.0)], "A 0 fixed; B 1 roller; C 4 roller", &point(1.0, 3.0), &[0.0, 2.0]),
        &[("H", 2.0)],
        &[("R A", -0.75), ("R B", 1.25), ("R C", 0.5), ("M 0", 0.25), ("v 2", 7.0 / 24.0)],
    );
}

#[test]
fn a_moving_pair_of_wheels() {
    // Equal wheels a apart on a simple span: the greatest moment is P (L - a/2)² / 2 L, under a wheel at L/2 - a/4.
    let a = 0.24;
    let greatest = |x: f64| {
        let loads = format!("{}, {}", point(1.0, x), point(1.0, x + a));
        look(&solve(&deck(ONE, SIMPLE, &loads, &[])), "Mmax")
    };
    let exact = (1.0 - a / 2.0) * (1.0 - a / 2.0) / 2.0;
    assert!((greatest(0.44) - exact).abs() < 1e-12);
    for beside in [0.43, 0.45, 0.38] {
        assert!(greatest(beside) < exact - 1e-6, "{beside}");
    }
}

#[test]
fn base_model_of_the_table_of_wrong_assumptions() {
    let text = "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n\
        [section.strong]\nE = \"200 GPa\"\nI = \"20000 cm^4\"\nweight = \"0.65 kN/m\"\n\
        [section.weak]\nE = \"200 GPa\"\nI = \"8000 cm^4\"\nweight = \"0.65 kN/m\"\n\
        [[segment]]\nlength = \"3 m\"\nsection = \"strong\"\n[[segment]]\nlength = \"4.5 m\"\nsection = \"weak\"\n\
        [support.A]\nat = \"0 m\"\nkind = \"fixed\"\n[support.B]\nat = \"6 m\"\nkind = \"roller\"\n\
        [member]\nstations = [\"3 m\", \"7.5 m\"]\n\
        [case.G]\nnature = \"permanent\"\nloads = [{ kind = \"self_weight\" }, { kind = \"uniform\", w = \"3.35 kN/m\" }]\n\
        [case.Q]\nnature = \"imposed\"\nloads = [\n\
        { kind = \"uniform\", w = \"9 kN/m\", from = \"0 m\", to = \"6 m\" },\n\
        { kind = \"point\", p = \"20 kN\", at = \"3 m\" }, { kind = \"couple\", m = \"12 kN m\", at = \"end\" },\n]\n\
        [case.S]\nnature = \"movement\"\nloads = [{ kind = \"settlement\", support = \"B\", by = \"8 mm\" }]\n\
        [combination.C]\npurpose = \"serviceability\"\nfactors = { G = 1.0, Q = 1.0, S = 1.0 }\n\
        [limit.L]\nratio = 360\npurpose = \"serviceability\"\nmeasured = \"absolute\"\ncantilever_length_factor = 2\nbasis = \"b\"\n";
    let results = solve(text);
    for (what, exact) in [("R B", 53_677.0 / 1368.0 * 1e3), ("m A", 25_325.0 / 228.0 * 1e3)] {
        let found = look(&results, what);
        assert!((found / exact - 1.0).abs() < 1e-12, "{what} {found} {exact}");
    }
    for (what, printed) in [("v 3", 6.3070e-3), ("v 7.5", 8.8658e-3)] {
        assert!((look(&results, what) - printed).abs() < 5.1e-8, "{what} {}", look(&results, what));
    }
    // The value at the step is not the greatest: 8.326 mm at 4.727 m. The cantilever is allowed 2 L / 360.
    let checks = results["checks"].as_array().unwrap();
    let check = |span: &str| checks.iter().find(|check| check["span"] == span).unwrap();
    let number = |span: &str, key: &str| check(span)[key].as_f64().unwrap();
    assert!((number("A-B", "deflection") - 8.326e-3).abs() < 5.1e-7 && (number("A-B", "at") - 4.727).abs() < 5.1e-4);
    assert!((number("A-B", "allowable") - 6.0 / 360.0).abs() < 1e-12);
    assert!((number("B-end", "allowable") - 8.333e-3).abs() < 5.1e-7);
}
