//! An expression written out: as text, as Typst math, with numbers put in, and as words.

use super::trace::{Node, Source, Traced};

/// How one rendering names the variables of an expression.
pub trait Names {
    /// The name (or figure) of a source.
    fn name(&self, source: Source) -> String;
    /// Whether the name is a negative figure, which needs parentheses behind an operator.
    fn negative(&self, _: Source) -> bool {
        false
    }
}

/// Strength of the outermost operator.
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
enum Bind {
    Sum,
    Sign,
    Product,
    Power,
    Atom,
}

fn bind(node: &Node) -> Bind {
    match node {
        Node::Add(..) | Node::Sub(..) => Bind::Sum,
        Node::Neg(_) => Bind::Sign,
        Node::Mul(..) | Node::Div(..) => Bind::Product,
        Node::Power(..) => Bind::Power,
        Node::Whole(n) if *n < 0 => Bind::Sign,
        Node::Var(_) | Node::Whole(_) | Node::Abs(_) | Node::Min(..) | Node::Max(..) => Bind::Atom,
    }
}

/// The expression in the grammar of the results: `P * L^3 / (3 * EI)`.
pub fn text(expression: &Traced, names: &impl Names) -> String {
    let at_least = |part: &Traced, least: Bind| {
        let inner = text(part, names);
        if bind(part.node()) < least { format!("({inner})") } else { inner }
    };
    match expression.node() {
        Node::Var(source) => names.name(*source),
        Node::Whole(n) => n.to_string(),
        Node::Add(a, b) => format!("{} + {}", at_least(a, Bind::Sum), at_least(b, Bind::Product)),
        Node::Sub(a, b) => format!("{} - {}", at_least(a, Bind::Sum), at_least(b, Bind::Product)),
        Node::Mul(a, b) => format!("{} * {}", at_least(a, Bind::Product), at_least(b, Bind::Power)),
        Node::Div(a, b) => format!("{} / {}", at_least(a, Bind::Product), at_least(b, Bind::Power)),
        Node::Neg(a) => format!("-{}", at_least(a, Bind::Product)),
        Node::Power(a, n) => format!("{}^{n}", at_least(a, Bind::Atom)),
        Node::Abs(a) => format!("abs({})", text(a, names)),
        Node::Min(a, b) => format!("min({}, {})", text(a, names), text(b, names)),
        Node::Max(a, b) => format!("max({}, {})", text(a, names), text(b, names)),
    }
}

/// The expression in Typst math; quotients as fractions.
///
/// `numbers` sets a multiplication sign between factors, since juxtaposed figures would run together.
pub fn math(expression: &Traced, names: &impl Names, numbers: bool) -> String {
    let inner = |part: &Traced| math(part, names, numbers);
    let negative = |part: &Traced| part.source().is_some_and(|source| names.negative(source));
    let at_least = |part: &Traced, least: Bind| {
        let loose = bind(part.node()) < least || negative(part);
        if loose { format!("({})", inner(part)) } else { inner(part) }
    };
    let times = if numbers { "times" } else { "" };
    match expression.node() {
        Node::Var(source) => names.name(*source),
        Node::Whole(n) => n.to_string(),
        Node::Add(a, b) => format!("{} + {}", inner(a), at_least(b, Bind::Product)),
        Node::Sub(a, b) => format!("{} - {}", inner(a), at_least(b, Bind::Product)),
        // A factor behind a whole constant and in front of one needs its sign even between symbols.
        Node::Mul(a, b) if b.constant().is_some() => {
            format!("{} dot {}", at_least(a, Bind::Product), at_least(b, Bind::Power))
        }
        Node::Mul(a, b) => format!("{} {times} {}", at_least(a, Bind::Product), at_least(b, Bind::Product)),
        Node::Div(a, b) => format!("frac({}, {})", inner(a), inner(b)),
        Node::Neg(a) => format!("-{}", at_least(a, Bind::Product)),
        Node::Power(a, n) => format!("{}^{n}", at_least(a, Bind::Atom)),
        Node::Abs(a) => format!("abs({})", inner(a)),
        Node::Min(a, b) => format!("min({}, {})", inner(a), inner(b)),
        Node::Max(a, b) => format!("max({}, {})", inner(a), inner(b)),
    }
}

/// The expression in words.
pub fn spoken(expression: &Traced, names: &impl Names) -> String {
    let inner = |part: &Traced| spoken(part, names);
    let group = |part: &Traced, least: Bind| {
        if bind(part.node()) < least { format!("open bracket {} close bracket", inner(part)) } else { inner(part) }
    };
    match expression.node() {
        Node::Var(source) => names.name(*source),
        Node::Whole(n) => n.to_string(),
        Node::Add(a, b) => format!("{} plus {}", inner(a), group(b, Bind::Product)),
        Node::Sub(a, b) => format!("{} minus {}", inner(a), group(b, Bind::Product)),
        Node::Mul(a, b) => format!("{} times {}", group(a, Bind::Product), group(b, Bind::Power)),
        Node::Div(a, b) => format!("{} over {}", group(a, Bind::Product), group(b, Bind::Power)),
        Node::Neg(a) => format!("minus {}", group(a, Bind::Product)),
        Node::Power(a, 2) => format!("{} squared", group(a, Bind::Atom)),
        Node::Power(a, 3) => format!("{} cubed", group(a, Bind::Atom)),
        Node::Power(a, n) => format!("{} to the power {n}", group(a, Bind::Atom)),
        Node::Abs(a) => format!("the size of {}", inner(a)),
        Node::Min(a, b) => format!("the smaller of {} and {}", inner(a), inner(b)),
        Node::Max(a, b) => format!("the greater of {} and {}", inner(a), inner(b)),
    }
}
