//! Numbers put in, on one line as they are typed into a calculator: `−265.0 × 4²/(2 × 41 200)`.

use typst::syntax::{SyntaxKind, SyntaxNode, parse_math};

use super::{NotMathematics, callee, foreign};
use crate::sheet::fonts::{Face, text_width};
use crate::sheet::typeset::{FIXED, NARROW, grouped, superscript};

/// An expression of figures in Typst math as one line of text: quotients by a stroke, factors by a cross, powers raised.
///
/// A line may end before a plus or minus that stands in no bracket (a plain space); everywhere else the spaces are fixed.
///
/// # Errors
/// What is not plain mathematics is a fault of the program.
pub fn linear(source: &str) -> Result<String, NotMathematics> {
    let tree = parse_math(source);
    if let Some(found) = foreign(&tree) {
        return Err(NotMathematics { source: source.to_owned(), found });
    }
    let mut writer = Writer::default();
    writer.all(&tree);
    Ok(writer.out)
}

/// A line of figures on as many lines as it needs: the first `first` mm wide, the others `rest` mm, at a size in pt.
pub fn linear_lines(text: &str, first: f64, rest: f64, size_pt: f64) -> Vec<String> {
    let wide = |text: &str| text_width(text, Face::Regular, size_pt);
    let mut lines: Vec<String> = Vec::new();
    let mut line = String::new();
    for part in text.split(' ').flat_map(|part| divided(part, wide(part) > rest)) {
        let room = if lines.is_empty() { first } else { rest };
        let longer = if line.is_empty() { part.clone() } else { format!("{line}{FIXED}{part}") };
        if wide(&longer) > room && !line.is_empty() {
            lines.push(std::mem::replace(&mut line, part));
        } else {
            line = longer;
        }
    }
    lines.push(line);
    lines
}

/// A part too wide for a line falls apart before its signs, whatever brackets they stand in.
fn divided(part: &str, too_wide: bool) -> Vec<String> {
    if !too_wide {
        return vec![part.to_owned()];
    }
    let mut parts: Vec<String> = Vec::new();
    for word in part.split(FIXED) {
        match parts.last_mut() {
            Some(last) if !matches!(word, "+" | "−" | "×") => {
                last.push(FIXED);
                last.push_str(word);
            }
            _ => parts.push(word.to_owned()),
        }
    }
    parts
}

#[derive(Default)]
struct Writer {
    out: String,
    depth: usize,
    operand: bool,
}

impl Writer {
    fn inside(&self, node: &SyntaxNode) -> String {
        let mut inner = Self { out: String::new(), depth: self.depth + 1, operand: false };
        match node.kind() {
            SyntaxKind::MathDelimited => inner.all(node),
            _ => inner.one(node),
        }
        inner.out
    }

    fn all(&mut self, node: &SyntaxNode) {
        node.children().for_each(|child| self.one(child));
    }

    fn one(&mut self, node: &SyntaxNode) {
        use SyntaxKind as K;
        match node.kind() {
            K::Space => {}
            K::MathCall => self.call(node),
            K::MathFrac => {
                let parts: Vec<&SyntaxNode> =
                    node.children().filter(|child| !matches!(child.kind(), K::Slash | K::Space)).collect();
                self.quotient(&parts);
            }
            K::MathAttach => self.attached(node),
            K::MathDelimited => {
                let inner = self.inside(node);
                self.push(&inner);
            }
            _ if node.children().len() > 0 => node.children().for_each(|child| self.one(child)),
            _ => self.leaf(node),
        }
    }

    fn push(&mut self, text: &str) {
        self.out.push_str(text);
        self.operand = true;
    }

    fn leaf(&mut self, node: &SyntaxNode) {
        let text = node.leaf_text().as_str();
        match text {
            "+" | "-" if self.operand => {
                self.out.push(if self.depth == 0 { ' ' } else { FIXED });
                self.out.push(if text == "-" { '−' } else { '+' });
                self.out.push(FIXED);
                self.operand = false;
            }
            "+" => {}
            "-" => self.out.push('−'),
            "=" => {
                self.out.push('=');
                self.out.push(FIXED);
                self.operand = false;
            }
            "times" => self.sign('×', FIXED),
            "dot" => self.sign('·', NARROW),
            "thin" => self.out.push(NARROW),
            "(" | "[" => {
                self.out.push_str(text);
                self.operand = false;
            }
            "," => {
                self.out.push(',');
                self.out.push(FIXED);
                self.operand = false;
            }
            "\"" => {}
            _ if node.kind() == SyntaxKind::Str => self.push(text.trim_matches('"')),
            _ if text.starts_with(|c: char| c.is_ascii_digit()) => self.push(&grouped(text)),
            _ => self.push(text),
        }
    }

    fn sign(&mut self, sign: char, white: char) {
        self.out.push(white);
        self.out.push(sign);
        self.out.push(white);
        self.operand = false;
    }

    fn call(&mut self, node: &SyntaxNode) {
        let parts: Vec<&SyntaxNode> = node
            .children()
            .filter(|child| child.kind() == SyntaxKind::MathArgs)
            .flat_map(SyntaxNode::children)
            .filter(|child| {
                use SyntaxKind as K;
                !matches!(child.kind(), K::LeftParen | K::RightParen | K::Comma | K::Space)
            })
            .collect();
        match callee(node) {
            Some("frac") => self.quotient(&parts),
            Some("abs") => {
                let inner: String = parts.iter().map(|part| self.inside(part)).collect();
                self.push(&format!("|{inner}|"));
            }
            name => {
                let inner: Vec<String> = parts.iter().map(|part| self.inside(part)).collect();
                let list = inner.join(&format!(",{FIXED}"));
                self.push(&format!("{}({list})", name.unwrap_or_default()));
            }
        }
    }

    fn quotient(&mut self, parts: &[&SyntaxNode]) {
        let texts: Vec<String> = parts.iter().map(|part| self.inside(part)).collect();
        let (over, under) = (texts.first().map_or("", String::as_str), texts.get(1).map_or("", String::as_str));
        let over = if has_sign(over, &['+', '−']) { format!("({over})") } else { over.to_owned() };
        let under =
            if has_sign(under, &['+', '−', '×', '·', '/']) { format!("({under})") } else { under.to_owned() };
        self.push(&format!("{over}/{under}"));
    }

    fn attached(&mut self, node: &SyntaxNode) {
        let mut children = node.children().filter(|child| child.kind() != SyntaxKind::Space);
        let base = children.next().map(|base| self.inside(base)).unwrap_or_default();
        self.push(&base);
        let mut raised = true;
        for child in children {
            match child.kind() {
                SyntaxKind::Hat => raised = true,
                SyntaxKind::Underscore => raised = false,
                _ => {
                    let text = self.inside(child);
                    let bare = text.trim_start_matches('(').trim_end_matches(')').replace('−', "-");
                    let script: String = bare.chars().map(superscript).collect();
                    self.out.push_str(if raised { &script } else { &bare });
                }
            }
        }
    }
}

/// Whether one of the signs stands between two operands outside of brackets; but for the stroke, white stands before it.
fn has_sign(text: &str, signs: &[char]) -> bool {
    let (mut depth, mut before) = (0, '(');
    for character in text.chars() {
        match character {
            '(' => depth += 1,
            ')' => depth -= 1,
            _ if depth > 0 || !signs.contains(&character) => {}
            '/' => return true,
            _ if before.is_whitespace() => return true,
            _ => {}
        }
        before = character;
    }
    false
}

#[cfg(test)]
mod tests {
    use super::{linear, linear_lines};

    fn plain(source: &str) -> String {
        let text = linear(source).unwrap_or_else(|refused| panic!("{refused:?}"));
        text.replace(['\u{A0}', '\u{202F}'], " ")
    }

    #[test]
    fn figures_are_written_as_a_calculator_takes_them() {
        for (source, wanted) in [
            ("14.00 times 5.000 + 36.00", "14.00 × 5.000 + 36.00"),
            ("-(-1) times 5", "−(−1) × 5"),
            ("frac((-17.50) times 4^3, 3 times 41200) - frac(5 times 4^2, 2)", "(−17.50) × 4³/(3 × 41 200) − 5 × 4²/2"),
            ("frac((2 + 6) times 4, 2) + (-3.5) times 5", "(2 + 6) × 4/2 + (−3.5) × 5"),
            ("frac(1 + 2, 3)", "(1 + 2)/3"),
            ("frac(-9.5, 0.0069)", "−9.5/0.0069"),
            ("20600 times (1 dot 10^(-8))", "20 600 × (1 · 10⁻⁸)"),
            ("frac(abs(-0.607960), 36.000000)", "|−0.607960|/36.000000"),
            ("min(frac(9 times 1000, 250), 20.0)", "min(9 × 1000/250, 20.0)"),
            ("36 times (4 + frac(5, 2))", "36 × (4 + 5/2)"),
            ("-frac(14 times 5^2, 2) - 36 times 2.5", "−14 × 5²/2 − 36 × 2.5"),
        ] {
            assert_eq!(plain(source), wanted, "{source}");
        }
        assert!(linear("#read(\"a\")").is_err());
    }

    #[test]
    fn long_figures_break_before_signs_and_keep_every_term() {
        let text = linear("1.5 times 2.25 + 3 times 4 - 5 times (6.25 + 7.25 + 8.25 + 9.25 + 10.25) + 8.125").unwrap();
        let lines = linear_lines(&text, 40.0, 34.0, 10.0);
        assert!(lines.len() > 2, "{lines:?}");
        let white = |text: &str| text.replace('\u{A0}', " ");
        assert_eq!(lines.iter().map(|line| white(line)).collect::<Vec<_>>().join(" "), white(&text));
        assert!(lines.iter().skip(1).all(|line| line.starts_with(['+', '−', '×'])), "{lines:?}");
        assert_eq!(linear_lines(&text, 400.0, 400.0, 10.0).len(), 1);
    }
}
