//! Equations: read with the compiler's own parser, held to plain mathematics, measured before they are set.

mod breaks;
mod linear;
mod measure;

use serde::Serialize;
use typst::syntax::{SyntaxKind, SyntaxNode, parse_math};

pub use linear::{linear, linear_lines};

use super::fonts::MM_PER_PT;
use measure::{Level, Measure};

/// An equation in Typst math, with the words that stand for it where nobody sees the page.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Equation {
    source: String,
    alt: String,
}

/// Why a text is no equation that a sheet may hold.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct NotMathematics {
    /// The source that was refused.
    pub source: String,
    /// What in it is not allowed.
    pub found: String,
}

/// Words of Typst math that an equation may use; each names a symbol or sets something, none reads or runs anything.
const WORDS: [&str; 45] = [
    "frac", "abs", "min", "max", "sqrt", "times", "dot", "Delta", "Sigma", "alpha", "beta", "gamma", "delta", "eta",
    "theta", "kappa", "lambda", "mu", "nu", "xi", "pi", "rho", "sigma", "tau", "phi", "psi", "omega", "epsilon",
    "zeta", "chi", "sum", "integral", "approx", "thin", "med", "thick", "quad", "upright", "bold", "prime", "degree",
    "minus", "plus", "percent", "dots",
];

impl Equation {
    /// Reads an equation. Only symbols, figures, quoted subscripts, fractions, roots, powers and brackets are let
    /// through: nothing that could name a file, a function of the program or a page. A word that is no symbol of
    /// mathematics is set upright as a word.
    pub fn new(source: impl Into<String>, alt: impl Into<String>) -> Result<Self, NotMathematics> {
        let source = source.into();
        let tree = parse_math(&source);
        if let Some(found) = foreign(&tree) {
            return Err(NotMathematics { source, found });
        }
        let source = if has_word(&tree) { spelt(&tree) } else { source };
        Ok(Self { source, alt: alt.into() })
    }

    /// The source, safe to stand between dollar signs.
    pub fn source(&self) -> &str {
        &self.source
    }

    /// The words.
    pub fn alt(&self) -> &str {
        &self.alt
    }

    /// Estimated width in mm at a size in pt, set on one line with full-size fractions; a little more than it takes.
    pub fn width(&self, size_pt: f64) -> f64 {
        Measure::of(&parse_math(&self.source), Level::Display).total * size_pt * MM_PER_PT
    }

    /// The equation on several lines, each narrower than `first` mm or, after the first, `rest` mm at a size in pt where
    /// that can be done: broken before a plus or minus, else before a sign of multiplication, inside brackets only where
    /// these alone are too wide. The words stay with the first line; the others say that they go on with it.
    pub fn lines(&self, first: f64, rest: f64, size_pt: f64) -> Vec<Self> {
        let em = size_pt * MM_PER_PT;
        let cut = breaks::lines(&parse_math(&self.source), first / em, rest / em);
        if cut.len() < 2 {
            return vec![self.clone()];
        }
        let line = |(index, source): (usize, String)| Self {
            source,
            alt: if index == 0 { self.alt.clone() } else { format!("line {} of the same", index + 1) },
        };
        cut.into_iter().enumerate().map(line).collect()
    }

    /// Whether it holds a fraction, which makes its line tall.
    pub fn is_tall(&self) -> bool {
        has_fraction(&parse_math(&self.source))
    }
}

/// The first part of a tree that is not plain mathematics.
fn foreign(node: &SyntaxNode) -> Option<String> {
    use SyntaxKind as K;
    let plain = match node.kind() {
        K::MathIdent => true,
        K::MathCall => callee(node).is_some_and(|word| WORDS.contains(&word)),
        K::Str => node.leaf_text().chars().all(|c| c != '\\'),
        K::Math | K::MathText | K::MathShorthand | K::MathArgs | K::MathDelimited | K::MathAttach => true,
        K::MathFrac | K::MathPrimes | K::MathRoot | K::Space | K::Slash | K::Hat | K::Underscore | K::Comma => true,
        K::LeftParen | K::RightParen | K::LeftBracket | K::RightBracket | K::Root | K::Text => true,
        _ => false,
    };
    if plain { node.children().find_map(foreign) } else { Some(node.full_text().to_string()) }
}

fn has_word(node: &SyntaxNode) -> bool {
    is_word(node) || node.children().any(has_word)
}

/// A name that mathematics does not know: to be spelt, not looked up.
fn is_word(node: &SyntaxNode) -> bool {
    node.kind() == SyntaxKind::MathIdent && !WORDS.contains(&node.leaf_text().as_str())
}

/// The source with words between quotes.
fn spelt(node: &SyntaxNode) -> String {
    if is_word(node) {
        return format!("\"{}\"", node.leaf_text());
    }
    match node.children().len() {
        0 => node.leaf_text().to_string(),
        _ => node.children().map(spelt).collect(),
    }
}

fn has_fraction(node: &SyntaxNode) -> bool {
    node.kind() == SyntaxKind::MathFrac || callee(node) == Some("frac") || node.children().any(has_fraction)
}

/// The word a call begins with.
fn callee(node: &SyntaxNode) -> Option<&str> {
    if node.kind() != SyntaxKind::MathCall {
        return None;
    }
    node.children().next().map(|head| head.leaf_text().as_str())
}

#[cfg(test)]
mod tests {
    use super::Equation;

    #[test]
    fn plain_mathematics_is_let_through() {
        for source in [
            r#"V_"C" = q L_2 + P"#,
            r#"frac(q L_"1"^4, 8 E I_"1") + frac(V_"C" L_1^3, 3 E I_1)"#,
            r#"-(14.00 times frac(5.000^2, 2) + 36.00 times 2.500)"#,
            r#"1.2 dot 10^(-5) dot abs(psi_"C,G")"#,
            r#"min(frac(L, 250), 0.02)"#,
            "a/b <= 3'",
            "As_\"deck\" = root_\"1\" EI",
        ] {
            assert!(Equation::new(source, "").is_ok(), "{source}: {:?}", Equation::new(source, ""));
        }
    }

    #[test]
    fn a_word_is_spelt_and_never_looked_up() {
        let source = |text| Equation::new(text, "").map(|equation| equation.source().to_owned());
        assert_eq!(
            source("As_\"deck\" = page + frac(row, psi)").as_deref(),
            Ok("\"As\"_\"deck\" = \"page\" + frac(\"row\", psi)")
        );
    }

    #[test]
    fn anything_else_is_refused() {
        for source in [
            "#read(\"x\")",
            "a $ b",
            "sys.inputs",
            "eval(\"1\")",
            "\\u{41}",
            "a // b",
            "a /* b */",
            "x & y",
            "image(a)",
            "\"a",
        ] {
            assert!(Equation::new(source, "").is_err(), "{source}");
        }
    }

    #[test]
    fn a_longer_equation_is_wider() {
        let Ok(short) = Equation::new("a + b", "") else { panic!() };
        let Ok(long) = Equation::new("a + b + c + d + frac(a + b + c, 2)", "") else { panic!() };
        assert!(short.width(10.0) > 5.0 && short.width(10.0) < 9.5, "{}", short.width(10.0));
        assert!(long.width(10.0) > 2.0 * short.width(10.0));
        assert!(long.is_tall() && !short.is_tall());
    }

    #[test]
    fn a_long_sum_breaks_before_its_signs_and_keeps_every_term() {
        let source =
            "= 1.5 times 2.25 + (-3) times 4 - frac(5 times 6, 7) + 8.125 - (9 + 10.5 + 11.5 + 12.5 + 13.5 + 14.5)";
        let Ok(equation) = Equation::new(source, "read out") else { panic!() };
        let lines: Vec<String> = equation.lines(40.0, 35.0, 10.0).iter().map(|line| line.source().to_owned()).collect();
        assert_eq!(lines.join(" "), source);
        assert!(lines.len() > 2, "{lines:?}");
        for line in lines.get(1..).unwrap_or_default() {
            assert!(line.starts_with(['+', '-']), "{lines:?}");
            assert!(Equation::new(line.as_str(), "").is_ok(), "{line}");
        }
        for line in equation.lines(40.0, 35.0, 10.0) {
            assert!(line.width(10.0) <= 40.0, "{line:?} {}", line.width(10.0));
        }
        assert_eq!(equation.lines(400.0, 400.0, 10.0), vec![equation]);
    }
}
