//! Members put together by hand for the tests of drawings.

use proofspan::member::*;
use proofspan::quantity::*;

/// A typed quantity: `given("8.5", &[("kN", 1), ("m", -1)])`.
pub fn given<T: Physical>(figure: &str, unit: &[(&str, i8)]) -> Given<T> {
    let unit = Unit::of(unit.iter().map(|(text, power)| (Unit::known(text).expect("a known unit"), *power)));
    let decimal = Decimal::parse(figure).expect("a figure");
    let value = T::from_si(decimal.to_f64() * unit.si().expect("a size")).expect("finite");
    Given { value, typed: Typed { terms: vec![Term { figure: decimal, unit }] } }
}

pub fn place(metres: &str) -> Place {
    Place::metres(Decimal::parse(metres).expect("a figure"))
}

pub fn over(from: &str, to: &str) -> Stretch {
    Stretch { from: place(from), to: place(to) }
}

pub fn uniform(w: &str, from: &str, to: &str) -> LoadKind {
    LoadKind::Uniform { w: given(w, &[("kN", 1), ("m", -1)]), over: over(from, to) }
}

pub fn linear(left: &str, right: &str, from: &str, to: &str) -> LoadKind {
    let w = |text| given(text, &[("kN", 1), ("m", -1)]);
    LoadKind::Linear { left: w(left), right: w(right), over: over(from, to) }
}

pub fn area(q: &str, width: &str, from: &str, to: &str) -> LoadKind {
    let q = given(q, &[("kN", 1), ("m", -2)]);
    LoadKind::Area { q, width: given(width, &[("m", 1)]), over: over(from, to) }
}

pub fn point(p: &str, at: &str) -> LoadKind {
    LoadKind::Point { p: given(p, &[("kN", 1)]), at: place(at) }
}

pub fn couple(m: &str, at: &str) -> LoadKind {
    LoadKind::Couple { m: given(m, &[("kN", 1), ("m", 1)]), at: place(at) }
}

pub fn settlement(support: usize, by: &str) -> LoadKind {
    LoadKind::Settlement { support, by: given(by, &[("mm", 1)]) }
}

pub fn rotation(support: usize, by: &str) -> LoadKind {
    LoadKind::Rotation { support, by: given(by, &[("mrad", 1)]) }
}

pub fn gradient(difference: &str, from: &str, to: &str) -> LoadKind {
    LoadKind::Gradient { difference: given(difference, &[("K", 1)]), over: over(from, to) }
}

pub fn section(name: &str, cm4: &str, depth_mm: Option<&str>) -> Section {
    Section {
        name: name.to_owned(),
        modulus: given("200", &[("GPa", 1)]),
        second_moment: given(cm4, &[("cm", 4)]),
        weight: None,
        depth: depth_mm.map(|depth| given(depth, &[("mm", 1)])),
        expansion: None,
        shear: None,
    }
}

/// `F` fixed, `P` pinned, `R` roller, `G` guided; `e` vertical spring, `c` pinned with a coil, `b` both springs, `g`
/// guided on a spring, `t` coil alone.
pub fn support(name: &str, at: &str, code: char) -> Support {
    let k = || Hold::Spring(given("12", &[("kN", 1), ("mm", -1)]));
    let coil = || Hold::Spring(given("5", &[("MN", 1), ("m", 1), ("rad", -1)]));
    let (kind, vertical, rotation) = match code {
        'F' => (SupportKind::Fixed, Hold::Rigid, Hold::Rigid),
        'P' => (SupportKind::Pinned, Hold::Rigid, Hold::Free),
        'R' => (SupportKind::Roller, Hold::Rigid, Hold::Free),
        'G' => (SupportKind::Guided, Hold::Free, Hold::Rigid),
        'e' => (SupportKind::Elastic, k(), Hold::Free),
        'c' => (SupportKind::Elastic, Hold::Rigid, coil()),
        'b' => (SupportKind::Elastic, k(), coil()),
        'g' => (SupportKind::Elastic, k(), Hold::Rigid),
        't' => (SupportKind::Elastic, Hold::Free, coil()),
        other => panic!("no support {other}"),
    };
    Support { name: name.to_owned(), at: place(at), kind, vertical, rotation }
}

/// A member of segments `(length, section, taper)`, supports and hinges, without loads.
pub fn member(
    sections: Vec<Section>,
    segments: &[(&str, usize, Option<Taper>)],
    supports: Vec<Support>,
    hinges: &[(&str, &str)],
) -> Member {
    let mut from = Decimal::ZERO;
    let segments = segments
        .iter()
        .map(|(length, section, taper)| {
            let to = from.plus(Decimal::parse(length).unwrap()).unwrap();
            let segment = Segment {
                length: given(length, &[("m", 1)]),
                from: Place::metres(from),
                to: Place::metres(to),
                section: *section,
                taper: *taper,
            };
            from = to;
            segment
        })
        .collect();
    Member {
        title: Title::default(),
        sections,
        segments,
        supports,
        hinges: hinges.iter().map(|(name, at)| Hinge { name: (*name).to_owned(), at: place(at) }).collect(),
        stations: Vec::new(),
        redundants: None,
        cases: Vec::new(),
        combinations: Vec::new(),
        spans: Vec::new(),
        limits: Vec::new(),
        typed_places: std::collections::BTreeMap::new(),
        record: proofspan::member::Record::default(),
        warnings: Vec::new(),
    }
}

pub fn case(name: &str, loads: Vec<LoadKind>) -> Case {
    let loads = loads.into_iter().map(|kind| Load { kind, note: None, source: None }).collect();
    Case { name: name.to_owned(), title: "Imposed load".to_owned(), nature: Nature::Imposed, loads }
}

/// The propped beam of two stiffnesses.
pub fn propped() -> Member {
    let sections = vec![section("deep", "20600", Some("500")), section("light", "10300", Some("330"))];
    let supports = vec![support("A", "0", 'F'), support("B", "9.000", 'R')];
    let mut member = member(sections, &[("4.000", 0, None), ("5.000", 1, None)], supports, &[]);
    member.cases = vec![
        case("Q", vec![uniform("14.00", "0", "9"), point("36.00", "6.5")]),
        case("W", vec![linear("2", "6", "0", "4"), uniform("-3.5", "4", "9"), couple("5", "4"), couple("-7.5", "9")]),
        case("S", vec![settlement(1, "6"), rotation(0, "2"), gradient("20", "0", "4")]),
        case("M", vec![LoadKind::SelfWeight, area("3.5", "2.4", "0", "9"), uniform("4", "2", "6"), point("-12", "3")]),
    ];
    member
}

/// Eight spans with every kind of support, springs, hinges and tapers, and thirty loads.
pub fn crowded() -> Member {
    let sections = vec![section("deep", "20600", None), section("light", "10300", None), section("mid", "15000", None)];
    let taper = |to| Some(Taper { to, law: TaperLaw::Cubic });
    let segments: Vec<(&str, usize, Option<Taper>)> = vec![
        ("3.2", 0, None),
        ("0.05", 1, None),
        ("2.75", 2, taper(1)),
        ("6", 1, None),
        ("0.000006", 0, None),
        ("0.000006", 1, None),
        ("11.999988", 2, None),
        ("12", 0, taper(2)),
        ("12", 1, None),
    ];
    let codes = ['b', 'P', 'e', 'F', 'R', 'c', 'g', 'P', 'F'];
    let supports = codes
        .iter()
        .enumerate()
        .map(|(index, code)| support(&format!("Support_{index}"), &format!("{}", index * 6), *code))
        .collect();
    let mut member = member(sections, &segments, supports, &[("H1", "4"), ("H2", "40.5")]);
    let mut loads: Vec<LoadKind> =
        (0..18).map(|i| point(&format!("{}.25", 10 + i), &format!("{:.1}", 1.1 + f64::from(i) * 2.3))).collect();
    loads.extend((0..6).map(|i| uniform(&format!("{}.5", i + 1), &format!("{}", i * 6), &format!("{}", i * 6 + 9))));
    loads.extend([couple("12.5", "6"), couple("-3", "13"), couple("4", "13.01")]);
    loads.extend([settlement(3, "4"), rotation(5, "-2"), area("3.5", "2.4", "0", "48")]);
    member.cases = vec![case("Q", loads)];
    member
}

/// Three spans and an overhang on a spring, as a pump house might have.
pub fn three_spans() -> Member {
    let sections = vec![section("deep", "23130", Some("400")), section("light", "8356", Some("300"))];
    let supports =
        vec![support("A", "0", 'P'), support("B", "4.5", 'R'), support("C", "9.6", 'e'), support("D", "14", 'R')];
    let segments = [("3.6", 1, None), ("2.1", 0, None), ("3.9", 1, None), ("6.2", 1, None)];
    let mut member = member(sections, &segments, supports, &[("H", "7")]);
    member.cases = vec![
        case("G", vec![LoadKind::SelfWeight, uniform("8.4", "0", "15.8"), point("12.5", "15.8")]),
        case(
            "Q",
            vec![
                uniform("12", "0", "4.5"),
                linear("0", "15", "4.5", "9.6"),
                point("30", "11.2"),
                point("30", "12.4"),
                point("18.5", "12.6"),
                couple("9", "2"),
            ],
        ),
        case("T", vec![gradient("-15", "0", "15.8"), settlement(2, "5"), settlement(3, "-2")]),
    ];
    member
}

/// A tapered cantilever with a prop.
pub fn tapered() -> Member {
    let sections = vec![section("root", "60000", Some("700")), section("tip", "9000", Some("280"))];
    let taper = Some(Taper { to: 1, law: TaperLaw::Cubic });
    let supports = vec![support("A", "0", 'F'), support("P", "3.2", 'R')];
    let mut member = member(sections, &[("3.2", 0, taper), ("0.8", 1, None)], supports, &[]);
    member.cases =
        vec![case("Q", vec![linear("20", "5", "0", "4"), point("6", "4"), settlement(1, "3"), rotation(0, "-1.5")])];
    member
}
