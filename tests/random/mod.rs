//! Random decks: the force method against the stiffness method, and the working replayed.

use proptest::prelude::*;

use proofspan::calculation::{Calculation, both_routes};

use crate::support::deck;

/// Segments, supports, loads of a random member; stiffness ratios to 1e9, segments down to 1e-6 of the length.
fn member() -> impl Strategy<Value = (Vec<(f64, f64)>, String, String)> {
    let segment = (prop_oneof![Just(2.0), Just(3.5), Just(0.000_01), Just(1.25)], 0_i32..=9);
    let kind =
        prop_oneof![Just("roller"), Just("pinned"), Just("elastic 40 free"), Just("elastic 900 3"), Just("fixed")];
    (1_usize..6, proptest::collection::vec(segment, 2..8), proptest::collection::vec(kind, 6), 1_u32..6).prop_map(
        |(spans, segments, kinds, seed)| {
            let mut parts: Vec<(f64, f64)> =
                segments.iter().map(|(length, power)| (*length, 10.0 * libm::pow(10.0, f64::from(*power)))).collect();
            parts.push((5.0, 100.0));
            let total: f64 = parts.iter().map(|(length, _)| length).sum();
            let total = (total * 1e5).round() / 1e5;
            let mut supports = vec!["A 0 fixed".to_owned()];
            for (index, kind) in kinds.iter().enumerate().skip(1).take(spans) {
                let at = (total * index as f64 / (spans as f64 + 0.5) * 1e3).floor() / 1e3;
                supports.push(format!("S{index} {at} {kind}"));
            }
            let load = format!(
                r#"{{ kind = "uniform", w = "{seed} N/m" }}, {{ kind = "point", p = "7 N", at = "{} m" }}, {{ kind = "settlement", support = "S1", by = "0.001 m" }}, {{ kind = "linear", w = ["0 N/m", "3 N/m"], from = "0.5 m", to = "{} m" }}"#,
                (total * 0.37 * 1e3).floor() / 1e3,
                (total * 0.9 * 1e3).floor() / 1e3,
            );
            (parts, supports.join("; "), load)
        },
    )
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn both_routes_agree((segments, supports, loads) in member()) {
        let text = deck(&segments, &supports, &loads, &[]);
        let calculation = Calculation::new(&text).map_err(|fault| TestCaseError::fail(format!("{fault:?}\n{text}")))?;
        for row in both_routes(&calculation.member, &calculation.analysis) {
            prop_assert!(row.difference < 1e-6, "{row:?}\n{text}");
        }
    }
}
