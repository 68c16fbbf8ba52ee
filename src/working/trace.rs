//! A number that remembers how it was made.

use std::ops::{Add, Div, Mul, Neg, Sub};
use std::rc::Rc;

use super::exact::Exact;
use crate::number::Number;

/// What a variable of an expression stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Source {
    /// A figure typed in the deck, by index into the drafted figures.
    Deck(usize),
    /// An earlier step, by index.
    Step(usize),
}

/// An expression as a tree.
#[derive(Debug)]
pub enum Node {
    /// A figure found or given.
    Var(Source),
    /// A whole constant.
    Whole(i64),
    /// Sum.
    Add(Traced, Traced),
    /// Difference.
    Sub(Traced, Traced),
    /// Product.
    Mul(Traced, Traced),
    /// Quotient.
    Div(Traced, Traced),
    /// Opposite.
    Neg(Traced),
    /// Whole power.
    Power(Traced, u32),
    /// Absolute value.
    Abs(Traced),
    /// The smaller of two.
    Min(Traced, Traced),
    /// The greater of two.
    Max(Traced, Traced),
}

/// A number that remembers how it was made; zeros and ones fold away, so that what does not act is not printed.
#[derive(Clone, Debug)]
pub struct Traced(Rc<Node>);

impl Traced {
    /// A variable.
    pub fn var(source: Source) -> Self {
        Self(Rc::new(Node::Var(source)))
    }

    /// Zero.
    pub fn zero() -> Self {
        Self::whole(0)
    }

    /// The tree.
    pub fn node(&self) -> &Node {
        &self.0
    }

    /// The constant it has folded to.
    pub fn constant(&self) -> Option<i64> {
        match self.node() {
            Node::Whole(n) => Some(*n),
            _ => None,
        }
    }

    /// Whether nothing is left of it.
    pub fn is_zero(&self) -> bool {
        self.constant() == Some(0)
    }

    /// The source, where it is a bare variable.
    pub fn source(&self) -> Option<Source> {
        match self.node() {
            Node::Var(source) => Some(*source),
            _ => None,
        }
    }

    /// Every source, in the order of first appearance.
    pub fn sources(&self) -> Vec<Source> {
        let mut list = Vec::new();
        self.collect(&mut list);
        list
    }

    fn collect(&self, list: &mut Vec<Source>) {
        match self.node() {
            Node::Var(source) => {
                if !list.contains(source) {
                    list.push(*source);
                }
            }
            Node::Whole(_) => {}
            Node::Neg(a) | Node::Power(a, _) | Node::Abs(a) => a.collect(list),
            Node::Add(a, b)
            | Node::Sub(a, b)
            | Node::Mul(a, b)
            | Node::Div(a, b)
            | Node::Min(a, b)
            | Node::Max(a, b) => {
                a.collect(list);
                b.collect(list);
            }
        }
    }

    /// Whether two expressions have the same tree, whatever their variables stand for.
    pub fn same_shape(&self, other: &Self) -> bool {
        use Node as N;
        match (self.node(), other.node()) {
            (N::Var(_), N::Var(_)) => true,
            (N::Whole(a), N::Whole(b)) => a == b,
            (N::Neg(a), N::Neg(b)) | (N::Abs(a), N::Abs(b)) => a.same_shape(b),
            (N::Power(a, n), N::Power(b, m)) => n == m && a.same_shape(b),
            (N::Add(a, b), N::Add(c, d))
            | (N::Sub(a, b), N::Sub(c, d))
            | (N::Mul(a, b), N::Mul(c, d))
            | (N::Div(a, b), N::Div(c, d))
            | (N::Min(a, b), N::Min(c, d))
            | (N::Max(a, b), N::Max(c, d)) => a.same_shape(c) && b.same_shape(d),
            _ => false,
        }
    }

    /// The value in `f64`, given the variables' values.
    pub fn value(&self, of: &impl Fn(Source) -> f64) -> f64 {
        let value = |a: &Self| a.value(of);
        match self.node() {
            Node::Var(source) => of(*source),
            Node::Whole(n) => f64::whole(*n),
            Node::Add(a, b) => value(a) + value(b),
            Node::Sub(a, b) => value(a) - value(b),
            Node::Mul(a, b) => value(a) * value(b),
            Node::Div(a, b) => value(a) / value(b),
            Node::Neg(a) => -value(a),
            Node::Power(a, n) => value(a).power(*n),
            Node::Abs(a) => value(a).magnitude(),
            Node::Min(a, b) => value(a).smaller(value(b)),
            Node::Max(a, b) => value(a).greater(value(b)),
        }
    }

    /// The sum of the sizes of its terms: the scale that a rounding of the result is measured by.
    pub fn scale(&self, of: &impl Fn(Source) -> f64) -> f64 {
        let scale = |a: &Self| a.scale(of);
        match self.node() {
            Node::Add(a, b) | Node::Sub(a, b) => scale(a) + scale(b),
            Node::Mul(a, b) => scale(a) * scale(b),
            Node::Div(a, b) => scale(a) / b.value(of).abs(),
            Node::Neg(a) | Node::Abs(a) => scale(a),
            Node::Power(a, n) => scale(a).power(*n),
            Node::Min(a, b) | Node::Max(a, b) => scale(a).greater(scale(b)),
            Node::Var(_) | Node::Whole(_) => self.value(of).abs(),
        }
    }

    /// The exact value, given the variables' printed figures. `None` where a divisor is zero.
    pub fn exact(&self, of: &impl Fn(Source) -> Exact) -> Option<Exact> {
        let exact = |a: &Self| a.exact(of);
        Some(match self.node() {
            Node::Var(source) => of(*source),
            Node::Whole(n) => Exact::whole(*n),
            Node::Add(a, b) => exact(a)?.plus(&exact(b)?),
            Node::Sub(a, b) => exact(a)?.plus(&exact(b)?.opposite()),
            Node::Mul(a, b) => exact(a)?.times(&exact(b)?),
            Node::Div(a, b) => exact(a)?.over(&exact(b)?)?,
            Node::Neg(a) => exact(a)?.opposite(),
            Node::Power(a, n) => exact(a)?.power(*n),
            Node::Abs(a) => exact(a)?.absolute(),
            Node::Min(a, b) => exact(a)?.least(exact(b)?),
            Node::Max(a, b) => exact(b)?.opposite().least(exact(a)?.opposite()).opposite(),
        })
    }

    fn made(node: Node) -> Self {
        Self(Rc::new(node))
    }
}

impl Add for Traced {
    type Output = Self;

    fn add(self, other: Self) -> Self {
        match (self.constant(), other.constant()) {
            (Some(0), _) => other,
            (_, Some(0)) => self,
            (Some(a), Some(b)) => Self::whole(a + b),
            _ => match other.node() {
                Node::Neg(opposite) => Self::made(Node::Sub(self, opposite.clone())),
                _ => Self::made(Node::Add(self, other)),
            },
        }
    }
}

impl Sub for Traced {
    type Output = Self;

    fn sub(self, other: Self) -> Self {
        match (self.constant(), other.constant()) {
            (Some(0), _) => -other,
            (_, Some(0)) => self,
            (Some(a), Some(b)) => Self::whole(a - b),
            _ if self.source().is_some() && self.source() == other.source() => Self::zero(),
            _ => match other.node() {
                Node::Neg(opposite) => Self::made(Node::Add(self, opposite.clone())),
                _ => Self::made(Node::Sub(self, other)),
            },
        }
    }
}

impl Mul for Traced {
    type Output = Self;

    fn mul(self, other: Self) -> Self {
        match (self.constant(), other.constant()) {
            (Some(0), _) | (_, Some(0)) => Self::zero(),
            (Some(1), _) => other,
            (_, Some(1)) => self,
            (Some(-1), _) => -other,
            (_, Some(-1)) => -self,
            (Some(a), Some(b)) => Self::whole(a * b),
            _ => match self.node() {
                Node::Neg(opposite) => -(opposite.clone() * other),
                _ => Self::made(Node::Mul(self, other)),
            },
        }
    }
}

impl Div for Traced {
    type Output = Self;

    fn div(self, other: Self) -> Self {
        match (self.constant(), other.constant()) {
            (Some(0), _) => Self::zero(),
            (_, Some(1)) => self,
            _ => match self.node() {
                Node::Neg(opposite) => -(opposite.clone() / other),
                _ => Self::made(Node::Div(self, other)),
            },
        }
    }
}

impl Neg for Traced {
    type Output = Self;

    fn neg(self) -> Self {
        match self.node() {
            Node::Whole(n) => Self::whole(-n),
            Node::Neg(inner) => inner.clone(),
            Node::Sub(a, b) => Self::made(Node::Sub(b.clone(), a.clone())),
            _ => Self::made(Node::Neg(self)),
        }
    }
}

impl Number for Traced {
    fn whole(n: i64) -> Self {
        Self(Rc::new(Node::Whole(n)))
    }

    fn power(self, n: u32) -> Self {
        match self.constant() {
            Some(0) => Self::zero(),
            Some(1) => Self::whole(1),
            _ if n == 1 => self,
            _ => Self::made(Node::Power(self, n)),
        }
    }

    fn magnitude(self) -> Self {
        match self.constant() {
            Some(n) => Self::whole(n.abs()),
            None => Self::made(Node::Abs(self)),
        }
    }

    fn smaller(self, other: Self) -> Self {
        Self::made(Node::Min(self, other))
    }

    fn greater(self, other: Self) -> Self {
        Self::made(Node::Max(self, other))
    }
}
