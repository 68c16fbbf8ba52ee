//! Equations: read with the compiler's own parser, held to plain mathematics, measured before they are set.

use serde::Serialize;
use typst::syntax::{SyntaxKind, SyntaxNode, parse_math};

use super::fonts::{Face, MM_PER_PT, advance};

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
        let mut tokens = Vec::new();
        flatten(&parse_math(&self.source), rest / em, &mut tokens);
        let cut = broken(&tokens, first / em, rest / em);
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

/// Size of a part: full-size fractions outermost, then text, then subscripts.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Level {
    Display,
    Text,
    Script,
}

impl Level {
    const fn scale(self) -> f64 {
        match self {
            Self::Display | Self::Text => 1.0,
            Self::Script => 0.72,
        }
    }

    const fn inside(self) -> Self {
        match self {
            Self::Display => Self::Text,
            Self::Text | Self::Script => Self::Script,
        }
    }
}

/// A piece of an equation that stays whole, with its width in ems.
struct Token {
    text: String,
    width: f64,
}

/// The pieces of an equation; brackets wider than `room` ems fall apart into theirs.
fn flatten(node: &SyntaxNode, room: f64, out: &mut Vec<Token>) {
    for child in node.children() {
        // Measured behind an operand: a sign that turns out to stand alone takes less.
        let mut measure = Measure { total: 0.0, operand: true };
        measure.add(child, Level::Display);
        let width = measure.total;
        let opens = matches!(child.kind(), SyntaxKind::MathDelimited | SyntaxKind::Math);
        if opens && width > room {
            flatten(child, room, out);
        } else {
            out.push(Token { text: child.full_text().to_string(), width });
        }
    }
}

/// Source of each line.
fn broken(tokens: &[Token], first: f64, rest: f64) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    let mut start = 0;
    while start < tokens.len() {
        let room = if lines.is_empty() { first } else { rest };
        let left = tokens.get(start..).unwrap_or_default();
        let end = start + fitting(left, room).max(1);
        let line: String = tokens.get(start..end).unwrap_or_default().iter().map(|token| token.text.as_str()).collect();
        lines.push(line.trim().to_owned());
        start = end;
    }
    lines.retain(|line| !line.is_empty());
    lines
}

/// How many tokens stand on the next line.
fn fitting(tokens: &[Token], room: f64) -> usize {
    let (mut used, mut at_sum, mut at_product) = (0.0, 0, 0);
    let mut behind_operand = false;
    for (index, token) in tokens.iter().enumerate() {
        let text = token.text.trim();
        match text {
            "+" | "-" if behind_operand => at_sum = index,
            "times" | "dot" if behind_operand => at_product = index,
            _ => {}
        }
        used += token.width;
        if used > room && at_sum.max(at_product) > 0 {
            return if at_sum > 0 { at_sum } else { at_product };
        }
        if !text.is_empty() {
            behind_operand = !matches!(text, "+" | "-" | "times" | "dot" | "=" | "(" | ",");
        }
    }
    tokens.len()
}

/// Width in ems, and whether an operand stands last: a sign behind it has white on both sides, any other has none.
#[derive(Clone, Debug, Default)]
struct Measure {
    total: f64,
    operand: bool,
}

impl Measure {
    fn of(node: &SyntaxNode, level: Level) -> Self {
        let mut measure = Self::default();
        measure.add(node, level);
        measure
    }

    fn solid(&mut self, width: f64) {
        self.total += width;
        self.operand = true;
    }

    fn sign(&mut self, width: f64, white: f64) {
        self.total += if self.operand { width + white } else { width };
        self.operand = false;
    }

    fn add(&mut self, node: &SyntaxNode, level: Level) {
        use SyntaxKind as K;
        match node.kind() {
            K::MathCall => self.call(node, level),
            K::MathFrac => {
                let parts = node.children().filter(|child| !matches!(child.kind(), K::Slash | K::Space));
                let widest = parts.map(|part| Self::of(part, level.inside()).total).fold(0.0, f64::max);
                self.solid(widest + 0.25);
            }
            K::MathAttach => {
                let mut children = node.children();
                if let Some(base) = children.next() {
                    self.solid(Self::of(base, level).total);
                }
                let scripts = children.filter(|child| !matches!(child.kind(), K::Hat | K::Underscore));
                self.solid(scripts.map(script).sum::<f64>() + 0.06);
            }
            K::MathDelimited => {
                let mut inner = Self::default();
                node.children().for_each(|child| inner.add(child, level));
                // Brackets around a fraction are drawn larger.
                self.solid(inner.total + if has_fraction(node) { 0.45 } else { 0.0 });
            }
            K::Space => {}
            K::Str => self.solid(literal(node.leaf_text().trim_matches('"')) * level.scale()),
            _ if node.children().len() > 0 => node.children().for_each(|child| self.add(child, level)),
            _ => self.leaf(node.leaf_text(), level),
        }
    }

    fn call(&mut self, node: &SyntaxNode, level: Level) {
        let arguments: Vec<&SyntaxNode> = node
            .children()
            .filter(|child| child.kind() == SyntaxKind::MathArgs)
            .flat_map(SyntaxNode::children)
            .collect();
        let is_mark = |child: &SyntaxNode| {
            matches!(
                child.kind(),
                SyntaxKind::LeftParen | SyntaxKind::RightParen | SyntaxKind::Comma | SyntaxKind::Space
            )
        };
        let parts = arguments.iter().filter(|child| !is_mark(child));
        if callee(node) == Some("frac") {
            let widest = parts.map(|part| Self::of(part, level.inside()).total).fold(0.0, f64::max);
            return self.solid(widest + 0.25);
        }
        let inner: f64 = parts.map(|part| Self::of(part, level).total).sum();
        let name = match callee(node) {
            Some(word @ ("min" | "max")) => literal(word) + 1.6,
            _ => 0.6,
        };
        self.solid(name * level.scale() + inner);
    }

    fn leaf(&mut self, text: &str, level: Level) {
        let scale = level.scale();
        let spaced = if level == Level::Script { 0.0 } else { 1.0 };
        match text {
            "+" | "-" | "times" | "minus" | "plus" => self.sign(0.778 * scale, 0.444 * spaced),
            "dot" => self.sign(0.278 * scale, 0.444 * spaced),
            "=" | "<" | ">" | "<=" | ">=" | "approx" => {
                self.solid((0.778 + 0.278 * spaced) * scale);
                // At the start of a line there is nothing to keep clear of on its left.
                if self.total > scale * 1.06 {
                    self.total += 0.278 * spaced * scale;
                }
                self.operand = false;
            }
            "(" | "[" => {
                self.solid(0.389 * scale);
                self.operand = false;
            }
            ")" | "]" => self.solid(0.389 * scale),
            "," => self.solid((0.28 + 0.17 * spaced) * scale),
            "thin" => self.solid(0.17),
            "med" => self.solid(0.23),
            "thick" => self.solid(0.28),
            "quad" => self.solid(1.0),
            "sum" | "integral" => self.solid(1.6),
            _ if text.chars().all(|c| c.is_ascii_digit() || c == '.') => self.solid(literal(text) * scale),
            _ => self.solid(text.chars().next().map_or(0.0, |c| letter(text, c)) * scale),
        }
    }
}

/// Width of a subscript or power; brackets that only hold it together are not set.
fn script(node: &SyntaxNode) -> f64 {
    let width = Measure::of(node, Level::Script).total;
    if node.kind() == SyntaxKind::MathDelimited { width - 2.0 * 0.389 * Level::Script.scale() } else { width }
}

fn literal(text: &str) -> f64 {
    text.chars().map(|c| advance(Face::Regular, c).unwrap_or(0.5)).sum()
}

/// Advance of a symbol: a slanted letter, a Greek letter by its word, or a mark.
fn letter(word: &str, first: char) -> f64 {
    let slanted = match first {
        'h' if word.len() == 1 => Some('ℎ'),
        'a'..='z' if word.len() == 1 => char::from_u32(0x1D44E + (u32::from(first) - u32::from('a'))),
        'A'..='Z' if word.len() == 1 => char::from_u32(0x1D434 + (u32::from(first) - u32::from('A'))),
        _ if word.len() > 1 => return 0.7,
        _ => Some(first),
    };
    slanted.and_then(|c| advance(Face::Mathematics, c)).unwrap_or(0.7)
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
        assert_eq!(source("As_\"deck\" = page + frac(row, psi)").as_deref(), Ok("\"As\"_\"deck\" = \"page\" + frac(\"row\", psi)"));
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
