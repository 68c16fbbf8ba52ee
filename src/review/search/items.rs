//! Every load that acts or might act, one by one: the terms that all hypotheses about loads are sums of.

use std::collections::BTreeMap;

use crate::member::{Case, Load, LoadKind, Member, Nature};
use crate::review::ask::Of;
use crate::review::mistake::{Change, Instead, Mistake};

/// A load, or what a mistake would put in its stead.
#[derive(Clone, Debug, PartialEq)]
pub struct Item {
    /// Index of the case it belongs to.
    pub case: usize,
    /// What acts.
    pub kind: LoadKind,
}

/// What a mistake about loads does to the items: each counts so much more.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Effect {
    /// Indices of items and what is added to how often they count.
    pub terms: Vec<(usize, f64)>,
    /// The loads it touches.
    pub touched: Vec<usize>,
}

/// All items and all effects.
#[derive(Clone, Debug)]
pub struct Items {
    /// The member's own loads first, in the order of cases.
    pub list: Vec<Item>,
    /// How many are the member's own.
    pub own: usize,
    /// By mistake about loads.
    pub effects: Vec<Effect>,
    /// The member with every item as a case of its own, and no combination.
    pub member: Member,
}

impl Items {
    /// Collects the items of a member and of the mistakes about its loads.
    pub fn new(member: &Member, mistakes: &[Mistake]) -> Self {
        let mut list = Vec::new();
        let mut index: BTreeMap<(usize, usize), usize> = BTreeMap::new();
        for (case, held) in member.cases.iter().enumerate() {
            for (load, held) in held.loads.iter().enumerate() {
                index.insert((case, load), list.len());
                list.push(Item { case, kind: held.kind.clone() });
            }
        }
        let own = list.len();
        let mut effects = Vec::new();
        for mistake in mistakes {
            let mut effect = Effect::default();
            let Change::Loads(edits) = &mistake.change else { continue };
            for edit in edits {
                let Some(item) = index.get(&(edit.case, edit.load)) else { continue };
                effect.touched.push(*item);
                match &edit.instead {
                    Instead::Times(factor) => effect.terms.push((*item, factor.to_f64() - 1.0)),
                    Instead::Loads(kinds) => {
                        effect.terms.push((*item, -1.0));
                        for kind in kinds {
                            effect.terms.push((list.len(), 1.0));
                            list.push(Item { case: edit.case, kind: kind.clone() });
                        }
                    }
                }
            }
            effects.push(effect);
        }
        let case = |(index, item): (usize, &Item)| Case {
            name: name(index),
            title: String::new(),
            nature: Nature::Other,
            loads: vec![Load { kind: item.kind.clone(), note: None, source: None }],
        };
        let mut single = member.clone();
        single.cases = list.iter().enumerate().map(case).collect();
        single.combinations = Vec::new();
        Self { list, own, effects, member: single }
    }

    /// The state of one item.
    pub fn of(index: usize) -> Of {
        Of::Case(name(index))
    }
}

fn name(index: usize) -> String {
    format!("i{index}")
}
