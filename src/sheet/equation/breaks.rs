//! Where a long equation is divided.

use typst::syntax::{SyntaxKind, SyntaxNode};

use super::measure::{Level, Measure};

/// Source of each line of an equation, narrower than `first` ems or, after the first, `rest` ems where that can be done.
pub(super) fn lines(tree: &SyntaxNode, first: f64, rest: f64) -> Vec<String> {
    let mut tokens = Vec::new();
    flatten(tree, rest, &mut tokens);
    broken(&tokens, first, rest)
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
