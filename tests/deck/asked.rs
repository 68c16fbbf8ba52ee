//! One mistake, one fault: starter decks with one thing changed.

use proofspan::calculation::member;
use proofspan::deck::starter;

/// The starter deck with texts replaced.
fn changed(changes: &[(&str, &str)]) -> String {
    changes.iter().fold(starter().to_owned(), |text, (from, to)| {
        assert!(text.contains(from), "{from}");
        text.replacen(from, to, 1)
    })
}

fn one(changes: &[(&str, &str)], words: &str) {
    let text = changed(changes);
    let found = member(&text).err().unwrap_or_default();
    assert!(found.len() == 1 && found[0].message.contains(words), "{words}: {found:?}");
}

/// A table of the starter deck, with its heading, up to the next one.
fn table(heading: &str) -> String {
    let text = starter();
    let from = text.find(heading).unwrap();
    let rest = &text[from..];
    let to = rest.get(1..).unwrap().find("\n[").map_or(rest.len(), |at| at + 2);
    rest[..to].to_owned()
}

#[test]
fn a_missing_table_is_one_fault_however_much_needs_it() {
    let (deep, light) = (table("[section.deep]"), table("[section.light]"));
    one(&[(&deep, ""), (&light, "")], "the deck has no section");
    let (g, q) = (table("[case.G]"), table("[case.Q]"));
    one(&[(&g, ""), (&q, "")], "the deck has no load case");
    let (s, u) = (table("[combination.S1]"), table("[combination.U1]"));
    one(&[(&s, ""), (&u, "")], "the deck has no combination");
    let (a, b) = (table("[support.A]"), table("[support.B]"));
    one(&[(&a, ""), (&b, "")], "the member has no support");
    let title = table("[title]");
    one(&[(&title, "")], "the deck has no title");
}

#[test]
fn a_misspelt_key_is_not_missed_as_well() {
    one(&[("basis = ", "reason = ")], "unknown key \"reason\"");
    one(&[("w = \"3.5 kN/m\"", "q = \"3.5 kN/m\"")], "unknown key \"q\"");
    one(&[("basis = ", "bassis = ")], "unknown key \"bassis\"");
    one(&[("nature = \"permanent\"", "natur = \"permanent\"")], "unknown key \"natur\"");
    one(&[("E = \"210 GPa\"", "e = \"210 GPa\"")], "unknown key \"e\"");
    one(&[("E = \"210 GPa\"", "Emod = \"210 GPa\"")], "unknown key \"Emod\"");
    one(&[("p = \"9 kN\"", "point = \"9 kN\"")], "unknown key \"point\"");
    one(&[("length = \"3.2 m\"", "lenght = \"3.2 m\"")], "unknown key \"lenght\"");
    one(&[("[combination.S1]", "[combinations.S1]")], "unknown key \"combinations\"");
    one(&[("kind = \"self_weight\"", "knd = \"self_weight\"")], "unknown key \"knd\"");
    one(&[("density = \"7850 kg/m^3\"", "densty = \"7850 kg/m^3\"")], "unknown key \"densty\"");
}

#[test]
fn what_cannot_be_read_is_not_reported_by_what_needs_it() {
    one(&[("A = \"53.8 cm^2\"             # with density: gives the self-weight\n", "")], "density without A");
    one(&[("A = \"53.8 cm^2\"", "A = \"53.8 cm^3\"")], "not a unit of area");
    one(&[("density = \"7850 kg/m^3\"", "density = \"7850 kg\"")], "not a unit of");
    one(&[("length = \"4 m\"", "length = \"4\"")], "a unit is missing");
    one(&[("length = \"3.2 m\"", "length = \"0 m\"")], "greater than zero");
    one(&[("kind = \"fixed\"", "kind = \"fixt\"")], "kind cannot be \"fixt\"");
    one(&[("purpose = \"serviceability\"\nfactors", "purpose = \"service\"\nfactors")], "purpose cannot be");
    let settled = "{ kind = \"settlement\", support = \"B\", by = \"4 mm\" }";
    one(&[("kind = \"roller\"", "kind = \"rolling\""), ("{ kind = \"self_weight\" }", settled)], "kind cannot be");
}

#[test]
fn an_elastic_support_holds_what_it_names() {
    let elastic = |keys: &str| {
        let elastic = format!("kind = \"elastic\"\n{keys}");
        let text = changed(&[("kind = \"roller\"", &elastic), ("ratio = 250", "absolute = \"20 mm\"")]);
        member(&text).map(|member| member.warnings.into_iter().map(|w| w.message).collect::<Vec<_>>())
    };
    let warned = elastic("vertical = \"12 kN/mm\"").unwrap();
    assert_eq!(warned, ["support B says nothing of rotation, which is taken as free"]);
    assert_eq!(elastic("vertical = \"12 kN/mm\"\nrotation = \"free\"").unwrap(), [""; 0]);
    assert_eq!(elastic("rotation = \"5 MN m/rad\"").unwrap().len(), 1);
    for keys in ["", "vertical = \"free\"\nrotation = \"free\""] {
        let faults = elastic(keys).unwrap_err();
        assert!(faults.len() == 1 && faults[0].message.contains("holds nothing"), "{faults:?}");
    }
    let faults = elastic("vertcal = \"12 kN/mm\"").unwrap_err();
    assert!(faults.len() == 1, "{faults:?}");
}

#[test]
fn sizes_beyond_all_structures_are_refused() {
    one(&[("8356 cm^4", "1e40 cm^4")], "beyond what can be computed");
    one(&[("8356 cm^4", "1e-40 cm^4")], "beyond what can be computed");
    one(&[("length = \"4 m\"", "length = \"1e7 m\"")], "beyond what can be computed");
    one(&[("length = \"4 m\"", "length = \"1e-10 m\"")], "beyond what can be computed");
    one(&[("ratio = 250", "ratio = 1e40")], "beyond what can be computed");
    assert!(member(&changed(&[("p = \"9 kN\"", "p = \"0 kN\"")])).is_ok(), "a load of zero is odd, not a fault");
}

#[test]
fn the_date_is_a_day() {
    for wrong in ["2026-11-30T10:00:00", "2026-11-30T10:00:00Z", "10:00:00", "\"2026-11-30\"", "20261130"] {
        one(&[("date = 2026-11-30", &format!("date = {wrong}"))], "date must be a date");
    }
}

#[test]
fn the_unit_itself_is_underlined() {
    let text = changed(&[("I = \"8356 cm^4\"", "I = \"8356 cm\"")]);
    let fault = &member(&text).unwrap_err()[0];
    assert_eq!(&text[fault.span.clone().unwrap()], "cm");
}

#[test]
fn a_mechanism_is_told_of_beside_other_faults() {
    let text = changed(&[("kind = \"fixed\" ", "kind = \"roller\" "), ("at = \"end\"", "at = \"0.0 m\"")]);
    let faults = member(&text).unwrap_err();
    assert!(faults.len() == 1 && faults[0].message.contains("same place"), "{faults:?}");
    let hinge = "[hinge.H]\nat = \"2 m\"\n[hinge.J]\nat = \"4 m\"\n[support.B]";
    let text = changed(&[("[support.B]", hinge), ("w = \"3.5 kN/m\"", "w = \"3.5 kN\"")]);
    let faults = member(&text).unwrap_err();
    assert!(faults.len() == 2 && faults[0].message.contains("mechanism"), "{faults:?}");
    assert_eq!(&text[faults[0].span.clone().unwrap()], "B");
}

#[test]
fn a_point_load_over_a_support_is_nothing_odd() {
    let text = changed(&[("p = \"9 kN\", at = \"5.5 m\"", "p = \"9 kN\", at = \"end\"")]);
    assert!(member(&text).unwrap().warnings.is_empty());
    assert!(member(starter()).unwrap().warnings.is_empty());
}
