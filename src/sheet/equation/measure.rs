//! Widths of equations, from the advances of the fonts and the white that the compiler puts around signs.

use typst::syntax::{SyntaxKind, SyntaxNode};

use super::{callee, has_fraction};
use crate::sheet::fonts::{Face, advance};

/// Size of a part: full-size fractions outermost, then text, then subscripts.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(super) enum Level {
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

/// Width in ems, and whether an operand stands last: a sign behind it has white on both sides, any other has none.
#[derive(Clone, Debug, Default)]
pub(super) struct Measure {
    /// The width so far.
    pub total: f64,
    /// Whether a sign that follows has white on both sides.
    pub operand: bool,
}

impl Measure {
    pub fn of(node: &SyntaxNode, level: Level) -> Self {
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

    pub fn add(&mut self, node: &SyntaxNode, level: Level) {
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
