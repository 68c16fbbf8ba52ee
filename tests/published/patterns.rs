//! Equal spans under loads on some of them: one case a span, one combination a pattern, so that it is superposition that is
//! held to the tables.
//!
//! Sources: T. G. Hicks, *Civil Engineering Formulas*, Table 2.1 p. 50 (all spans loaded); AISC *Steel Construction Manual*
//! Table 3-22c and 3-23 and AWC *Design Aid No. 6* (patterns; titles from memory; the four-span rows were seen). The
//! envelopes, the deflections and the exact fractions were computed independently, as was every row. Printed decimals are
//! held to half a unit of their last digit, fractions to 1e-9.

use proofspan::analysis::Field;
use proofspan::calculation::Calculation;
use serde_json::Value;

use crate::support::deck;

/// A printed figure, decimal or fraction, and how far off it may be.
fn printed(text: &str) -> (f64, f64) {
    if let Some((top, bottom)) = text.split_once('/') {
        return (top.parse::<f64>().unwrap() / bottom.parse::<f64>().unwrap(), 1e-9);
    }
    let digits = text.split_once('.').map_or(0, |(_, digits)| digits.len());
    (text.parse().unwrap(), 0.500_001 * libm::pow(10.0, -(digits as f64)))
}

fn off(found: f64, text: &str) -> bool {
    let (value, half) = printed(text);
    let close = (found - value).abs() <= half;
    !close
}

/// All patterns of a member of equal spans of one: what stands in a span, given its left end.
struct Patterns {
    spans: usize,
    calculation: Calculation,
    results: Value,
}

impl Patterns {
    fn new(spans: usize, load: impl Fn(usize) -> String) -> Self {
        let supports: Vec<String> = (0..=spans).map(|at| format!("S{at} {at} roller")).collect();
        let stations: Vec<f64> = (0..=spans).map(|at| at as f64).collect();
        let text = deck(&[(spans as f64, 1.0)], &supports.join("; "), "", &stations);
        let head = text.split("[case.G]").next().unwrap();
        let mut text = head.to_owned();
        for span in 0..spans {
            text += &format!("[case.L{}]\nnature = \"imposed\"\nloads = [{}]\n", span + 1, load(span));
        }
        for pattern in 1..1_usize << spans {
            let on = |span: usize| pattern >> span & 1;
            let factors: Vec<String> = (0..spans).filter(|s| on(*s) == 1).map(|s| format!("L{} = 1", s + 1)).collect();
            text += &format!(
                "[combination.C{pattern}]\npurpose = \"serviceability\"\nfactors = {{ {} }}\n",
                factors.join(", ")
            );
        }
        let calculation = Calculation::new(&text).unwrap_or_else(|fault| panic!("{fault:?}\n{text}"));
        let results = calculation.json(None);
        Self { spans, calculation, results }
    }

    fn uniform(spans: usize) -> Self {
        Self::new(spans, |span| {
            format!(r#"{{ kind = "uniform", w = "1 N/m", from = "{span} m", to = "{} m" }}"#, span + 1)
        })
    }

    /// The combination that loads these spans, counted from one.
    fn pattern(loaded: &[usize]) -> usize {
        loaded.iter().map(|span| 1 << (span - 1)).sum()
    }

    fn combination(&self, pattern: usize) -> &Value {
        &self.results["combinations"][format!("C{pattern}")]
    }

    fn reaction(&self, pattern: usize, support: usize) -> f64 {
        self.combination(pattern)["reactions"][format!("S{support}")]["force"].as_f64().unwrap()
    }

    fn support_moment(&self, pattern: usize, support: usize) -> f64 {
        self.combination(pattern)["stations"][support]["moment"][0].as_f64().unwrap()
    }

    /// The moment where shear vanishes in a span under one newton a metre.
    fn span_moment(&self, pattern: usize, span: usize) -> f64 {
        let Calculation { member, analysis, .. } = &self.calculation;
        let field = Field::of_combination(analysis, member, pattern - 1).unwrap();
        let left = field.ends(span - 1).left;
        assert!(left.shear > 0.0 && left.shear < 1.0);
        let there = field.inside(span - 1, left.shear).right;
        assert!(there.shear.abs() < 1e-12);
        there.moment
    }

    fn deflection(&self, pattern: usize, end: &str) -> (f64, f64) {
        let extreme = &self.combination(pattern)["extremes"]["deflection"][end];
        (extreme["value"].as_f64().unwrap(), extreme["at"].as_f64().unwrap())
    }

    /// The greatest and the smallest of a figure over every pattern.
    fn envelope(&self, figure: impl Fn(usize) -> f64) -> (f64, f64) {
        (1..1 << self.spans)
            .map(figure)
            .fold((f64::NEG_INFINITY, f64::INFINITY), |(most, least), value| (most.max(value), least.min(value)))
    }
}

/// A row: which spans are loaded; reactions from the left (as many as printed); moments over the inner supports; greatest
/// moments of the loaded spans; greatest deflection and, where printed, its place.
type Row<'a> = (&'a [usize], &'a [&'a str], &'a [&'a str], &'a [(usize, &'a str)], &'a str, Option<(f64, f64)>);

/// What a row says that is not so.
fn differences(patterns: &Patterns, row: &Row<'_>) -> Vec<String> {
    let (loaded, reactions, moments, spans, deepest, place) = row;
    let pattern = Patterns::pattern(loaded);
    let mut wrong = Vec::new();
    let mut hold = |what: String, found: f64, text: &str| {
        if off(found, text) {
            wrong.push(format!("{} spans, {loaded:?}: {what} is {found}, printed {text}", patterns.spans));
        }
    };
    for (support, text) in reactions.iter().enumerate() {
        hold(format!("R{support}"), patterns.reaction(pattern, support), text);
    }
    for (index, text) in moments.iter().enumerate() {
        hold(format!("M{}", index + 1), patterns.support_moment(pattern, index + 1), text);
    }
    for (span, text) in *spans {
        hold(format!("M+ in span {span}"), patterns.span_moment(pattern, *span), text);
    }
    let (value, at) = patterns.deflection(pattern, "max");
    hold("greatest deflection".to_owned(), value, deepest);
    if let Some((printed, half)) = place {
        // Symmetric members have it twice; the other is its mirror image.
        let mirrored = patterns.spans as f64 - at;
        if (at - printed).abs() > *half && (mirrored - printed).abs() > *half {
            wrong.push(format!("{} spans, {loaded:?}: deepest at {at}, printed {printed}", patterns.spans));
        }
    }
    wrong
}

const H: f64 = 0.000_051;

#[test]
fn all_spans_loaded() {
    let rows: [(usize, Row<'_>); 4] = [
        (2, (&[1, 2], &["3/8", "5/4", "3/8"], &["-1/8"], &[(1, "9/128")], "0.005416", Some((0.4215, H)))),
        (
            3,
            (
                &[1, 2, 3],
                &["2/5", "11/10", "11/10", "2/5"],
                &["-1/10", "-1/10"],
                &[(1, "0.0800"), (2, "0.0250")],
                "0.006884",
                Some((0.4460, H)),
            ),
        ),
        (
            4,
            (
                &[1, 2, 3, 4],
                &["11/28", "8/7", "13/14", "8/7", "11/28"],
                &["-3/28", "-1/14", "-3/28"],
                &[(1, "0.07717"), (2, "0.03635")],
                "0.006460",
                Some((0.4397, H)),
            ),
        ),
        (
            5,
            (
                &[1, 2, 3, 4, 5],
                &["15/38", "43/38", "37/38", "37/38", "43/38", "15/38"],
                &["-2/19", "-3/38", "-3/38", "-2/19"],
                &[(1, "0.07791"), (2, "0.03324"), (3, "0.04605")],
                "0.006572",
                Some((0.4414, H)),
            ),
        ),
    ];
    for (spans, row) in rows {
        let wrong = differences(&Patterns::uniform(spans), &row);
        assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    }
}

#[test]
fn some_spans_loaded() {
    let two = Patterns::uniform(2);
    let three = Patterns::uniform(3);
    let four = Patterns::uniform(4);
    let five = Patterns::uniform(5);
    let rows: [(&Patterns, Row<'_>); 10] = [
        (&two, (&[1], &["0.4375", "0.6250", "-0.0625"], &["-1/16"], &[(1, "0.0957")], "0.009151", Some((0.4724, H)))),
        (
            &three,
            (
                &[1, 2],
                &["0.3833", "1.2000", "0.4500", "-0.0333"],
                &["-7/60", "-1/30"],
                &[(1, "0.0735"), (2, "0.0535")],
                "0.005900",
                Some((0.4305, H)),
            ),
        ),
        (
            &three,
            (
                &[1, 3],
                &["9/20", "11/20", "11/20", "9/20"],
                &["-1/20", "-1/20"],
                &[(1, "81/800"), (3, "0.10125")],
                "0.009917",
                Some((0.4793, H)),
            ),
        ),
        (
            &three,
            (
                &[2],
                &["-1/20", "11/20", "11/20", "-1/20"],
                &["-1/20", "-1/20"],
                &[(2, "0.0750")],
                "0.006771",
                Some((1.5, H)),
            ),
        ),
        (
            &four,
            (
                &[1, 2, 4],
                &["0.3795", "1.2232", "0.3571", "0.5982", "0.4420"],
                &["-0.12054", "-0.01786", "-0.05804"],
                &[(1, "0.0720"), (2, "0.0611"), (4, "0.0977")],
                "0.009424",
                Some((3.525, 0.000_51)),
            ),
        ),
        (
            &four,
            (
                &[1, 3],
                &["25/56", "4/7", "13/28", "4/7", "-3/56"],
                &["-3/56", "-1/28", "-3/56"],
                &[(1, "0.09965"), (3, "0.08052")],
                "0.009698",
                Some((0.4774, H)),
            ),
        ),
        (
            &four,
            (
                &[2, 3],
                &["-0.0357", "0.4643", "1.1429", "0.4643", "-0.0357"],
                &["-1/28", "-3/28", "-1/28"],
                &[(2, "0.0561"), (3, "0.0561")],
                "0.004173",
                None,
            ),
        ),
        (
            &five,
            (
                &[1, 3, 5],
                &["0.4474", "0.5658", "0.4868", "0.4868", "0.5658", "0.4474"],
                &["-1/19", "-3/76", "-3/76", "-1/19"],
                &[(1, "0.10007"), (3, "0.08553")],
                "0.009756",
                None,
            ),
        ),
        (
            &five,
            (
                &[2, 4],
                &["-0.0526", "0.5658", "0.4868", "0.4868", "0.5658", "-0.0526"],
                &["-1/19", "-3/76", "-3/76", "-1/19"],
                &[(2, "0.07903"), (4, "0.07903")],
                "0.007266",
                None,
            ),
        ),
        (
            &five,
            (
                &[2, 3, 5],
                &["-0.0347", "0.4581", "1.1675", "0.3720", "0.5945", "0.4426"],
                &["-0.03469", "-93/836", "-0.02033", "-0.05742"],
                &[(2, "0.0550"), (3, "0.0633"), (5, "0.0979")],
                "0.009462",
                None,
            ),
        ),
    ];
    let wrong: Vec<String> = rows.iter().flat_map(|(patterns, row)| differences(patterns, row)).collect();
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    // Unloaded spans rise.
    for (patterns, loaded, text) in [(&two, &[1][..], "-0.004009"), (&three, &[1, 3], "-0.006250")] {
        let (rise, _) = patterns.deflection(Patterns::pattern(loaded), "min");
        assert!(!off(rise, text), "{rise} {text}");
    }
    // A row with one digit changed is noticed: 0.805 for 0.0805 is the misprint of the four-span page as stored.
    let misprint: Row<'_> = (&[1, 3], &["25/56"], &[], &[(3, "0.805")], "0.009698", None);
    assert_eq!(differences(&four, &misprint).len(), 1);
}

#[test]
fn envelopes_over_every_pattern() {
    let mut wrong = Vec::new();
    let mut hold = |what: &str, found: f64, text: &str| {
        if off(found, text) {
            wrong.push(format!("{what} is {found}, exact {text}"));
        }
    };
    // Spans; greatest moments in the spans from the end; least moments over the supports from the end; greatest force of
    // the first inner support; least force of a support, and which.
    type Envelope<'a> = (usize, &'a [&'a str], &'a [&'a str], Option<&'a str>, Option<(usize, &'a str)>);
    let rows: [Envelope<'_>; 4] = [
        (2, &["49/512"], &["-1/8"], None, Some((0, "-1/16"))),
        (3, &["81/800", "3/40"], &["-7/60"], Some("6/5"), Some((1, "-1/10"))),
        (4, &["625/6272", "505/6272"], &["-27/224", "-3/28"], Some("137/112"), Some((2, "-3/14"))),
        (5, &["289/2888", "913/11552", "13/152"], &["-25/209", "-93/836"], Some("509/418"), None),
    ];
    for (spans, sagging, hogging, first, least) in rows {
        let patterns = Patterns::uniform(spans);
        for (index, text) in sagging.iter().enumerate() {
            // The greatest moment stands where the span is loaded.
            let loaded = |pattern: usize| pattern >> index & 1 == 1;
            let span = |pattern| if loaded(pattern) { patterns.span_moment(pattern, index + 1) } else { f64::MIN };
            hold(&format!("{spans} spans, M+ in span {}", index + 1), patterns.envelope(span).0, text);
        }
        for (index, text) in hogging.iter().enumerate() {
            let over = |pattern| patterns.support_moment(pattern, index + 1);
            hold(&format!("{spans} spans, least M{}", index + 1), patterns.envelope(over).1, text);
        }
        if let Some(text) = first {
            hold(
                &format!("{spans} spans, greatest R1"),
                patterns.envelope(|pattern| patterns.reaction(pattern, 1)).0,
                text,
            );
        }
        if let Some((support, text)) = least {
            let force = patterns.envelope(|pattern| patterns.reaction(pattern, support)).1;
            hold(&format!("{spans} spans, least R{support}"), force, text);
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
}

#[test]
fn point_loads_in_the_middle_of_spans() {
    let rows: [(usize, &[&str], &[&str]); 4] = [
        (2, &["0.3125", "1.375"], &["-0.1875"]),
        (3, &["0.35", "1.15"], &["-0.15"]),
        (4, &["0.3393", "1.2143", "0.8929"], &["-0.1607", "-0.1071"]),
        (5, &["0.3421", "1.1974", "0.9605"], &["-0.1579", "-0.1184"]),
    ];
    let middle = |span: usize| format!(r#"{{ kind = "point", p = "1 N", at = "{span}.5 m" }}"#);
    for (spans, reactions, moments) in rows {
        let patterns = Patterns::new(spans, middle);
        let every = (1 << spans) - 1;
        for (support, text) in reactions.iter().enumerate() {
            let found = patterns.reaction(every, support);
            assert!(!off(found, text), "{spans} spans, R{support} {found} {text}");
        }
        for (index, text) in moments.iter().enumerate() {
            let found = patterns.support_moment(every, index + 1);
            assert!(!off(found, text), "{spans} spans, M{} {found} {text}", index + 1);
        }
    }
    // Two spans, one loaded.
    let two = Patterns::new(2, middle);
    for (support, text) in ["13/32", "11/16", "-3/32"].iter().enumerate() {
        assert!(!off(two.reaction(1, support), text), "R{support}");
    }
    assert!(!off(two.support_moment(1, 1), "-3/32"));
    let (deepest, at) = two.deflection(1, "max");
    assert!(!off(deepest, "0.015012") && (at - 0.4804).abs() < H, "{deepest} at {at}");
}
