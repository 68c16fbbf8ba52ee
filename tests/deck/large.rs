//! Large decks: what is lawful stays lawful, what is beyond all measure is refused at once.

use proofspan::calculation::member;

/// A member of so many spans with so many cases, each with a load on every tenth span.
fn member_of(spans: usize, cases: usize) -> String {
    let mut text = String::from(
        "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n\
         [section.s]\nE = \"210 GPa\"\nI = \"8356 cm^4\"\nweight = \"0.4 kN/m\"\n",
    );
    for _ in 0..spans {
        text += "[[segment]]\nlength = \"4.2 m\"\nsection = \"s\"\n";
    }
    for support in 0..=spans {
        text += &format!("[support.S{support}]\nat = \"{:.1} m\"\nkind = \"roller\"\n", 4.2 * support as f64);
    }
    for case in 0..cases {
        text += &format!("[case.C{case}]\nnature = \"imposed\"\nloads = [{{ kind = \"self_weight\" }},\n");
        for span in (0..spans).step_by(10) {
            text += &format!("{{ kind = \"point\", p = \"2 kN\", at = \"{:.1} m\" }},\n", 4.2 * span as f64 + 1.0);
        }
        text += "]\n";
    }
    let factors: Vec<String> = (0..cases).map(|case| format!("C{case} = 1.0")).collect();
    text + &format!("[combination.K]\npurpose = \"serviceability\"\nfactors = {{ {} }}\n", factors.join(", "))
}

#[test]
fn a_thousand_spans_with_a_hundred_cases_are_lawful() {
    let member = member(&member_of(1_000, 100)).unwrap();
    assert_eq!((member.spans.len(), member.cases.len()), (1_000, 100));
    assert_eq!(member.cases[99].loads.len(), 101);
}

#[test]
fn too_many_segments_loads_and_tables_are_refused() {
    let one = |text: &str, words: &str| {
        let faults = member(text).unwrap_err();
        assert!(faults.len() == 1 && faults[0].message.contains(words), "{:?}", faults.first());
        assert!(faults[0].line_column(text).is_some());
    };
    let base = member_of(2, 1);
    let segments = "[[segment]]\nlength = \"1 mm\"\nsection = \"s\"\n".repeat(20_000);
    one(&(base.clone() + &segments), "more than 20000 items in segment");
    let loads = "{ kind = \"self_weight\" },\n".repeat(20_001);
    one(&base.replace("loads = [", &format!("loads = [{loads}")), "more than 20000 items in loads");
    let hinges: String = (0..2_001).map(|h| format!("[hinge.H{h}]\nat = \"0.{h:04}1 m\"\n")).collect();
    let faults = member(&(base.clone() + &hinges)).unwrap_err();
    assert!(faults.iter().any(|fault| fault.message.contains("more than 2,000 tables under hinge")), "{:?}", faults[0]);
    one(&format!("{base}# {}", "x".repeat(proofspan::deck::LONGEST)), "longer than 16000000 bytes");
}

#[test]
fn a_thousand_faults_are_counted_but_not_all_listed() {
    let text = member_of(1_000, 2).replace("kind = \"roller\"", "kind = \"rolling\"");
    let faults = member(&text).unwrap_err();
    assert_eq!(faults.len(), 501);
    let last = faults.last().unwrap();
    assert!(last.message.contains("501 further faults"), "{last:?}");
}
