//! Blocks of one pattern set side by side: steps that share an expression stand as one table under one formula.

use super::draft::{Builder, Draft, DraftBlock, Likes, Set};
use super::trace::Source;

impl Builder {
    /// Joins blocks of one pattern as the columns of a grid, wherever every step still comes after what it uses.
    pub fn gather(&mut self) {
        for chapter in 0..self.chapters.len() {
            let Some(blocks) = self.chapters.get_mut(chapter).map(|chapter| std::mem::take(&mut chapter.blocks)) else {
                continue;
            };
            let blocks = self.gathered(blocks);
            if let Some(chapter) = self.chapters.get_mut(chapter) {
                chapter.blocks = fused(blocks);
            }
        }
    }

    fn gathered(&self, mut blocks: Vec<DraftBlock>) -> Vec<DraftBlock> {
        blocks.retain(|block| !block.steps.is_empty());
        let mut index = 0;
        while index < blocks.len() {
            let alike = self.alike(&blocks, index);
            let fewest = blocks.get(index).and_then(|block| block.likes.as_ref()).map_or(usize::MAX, |l| l.fewest);
            if alike.len() >= fewest {
                let first = alike.first().copied().unwrap_or(index);
                let last = alike.last().copied().unwrap_or(index);
                for place in [first, last] {
                    let joined = join(&blocks, &alike, place);
                    if self.in_order(&joined) {
                        blocks = joined;
                        break;
                    }
                }
            }
            index += 1;
        }
        blocks
    }

    /// This block and those after it that have its pattern.
    fn alike(&self, blocks: &[DraftBlock], index: usize) -> Vec<usize> {
        let Some(first) = blocks.get(index) else { return Vec::new() };
        let Some(likes) = first.likes.as_ref().filter(|_| first.set == Set::Apart) else { return Vec::new() };
        let same = |block: &DraftBlock| {
            block.set == Set::Apart
                && block.likes.as_ref().is_some_and(|other| other.key == likes.key)
                && self.same_pattern(&first.steps, &block.steps)
        };
        (index..blocks.len()).filter(|place| blocks.get(*place).is_some_and(same)).collect()
    }

    fn same_pattern(&self, left: &[usize], right: &[usize]) -> bool {
        let draft = |index: &usize| self.drafts.get(*index);
        left.len() == right.len()
            && left.iter().zip(right).all(|(l, r)| match (draft(l), draft(r)) {
                (Some(l), Some(r)) => same_line(l, r) && self.same_units(l, r),
                _ => false,
            })
    }

    /// Whether inputs at like places have like units: a column prints one unit a row.
    fn same_units(&self, left: &Draft, right: &Draft) -> bool {
        let unit = |source: &Source| match *source {
            Source::Deck(index) => self.figures.get(index).map(|figure| &figure.unit),
            Source::Step(index) => self.drafts.get(index).map(|draft| &draft.unit),
        };
        let sources = |draft: &Draft| draft.expression.as_ref().map(super::trace::Traced::sources).unwrap_or_default();
        let (left, right) = (sources(left), sources(right));
        left.len() == right.len() && left.iter().zip(&right).all(|(l, r)| unit(l) == unit(r))
    }

    /// Whether every step of these blocks that uses another of them comes after it.
    fn in_order(&self, blocks: &[DraftBlock]) -> bool {
        let order: Vec<usize> = blocks.iter().flat_map(|block| block.steps.iter().copied()).collect();
        let mut place = vec![None; self.drafts.len()];
        for (rank, step) in order.iter().enumerate() {
            if let Some(slot) = place.get_mut(*step) {
                *slot = Some(rank);
            }
        }
        order.iter().enumerate().all(|(rank, step)| {
            let expression = self.drafts.get(*step).and_then(|draft| draft.expression.as_ref());
            expression.is_none_or(|expression| {
                expression.sources().into_iter().all(|source| match source {
                    Source::Step(used) => place.get(used).copied().flatten().is_none_or(|used| used < rank),
                    Source::Deck(_) => true,
                })
            })
        })
    }
}

fn same_line(left: &Draft, right: &Draft) -> bool {
    let shapes = match (&left.expression, &right.expression) {
        (None, None) => true,
        (Some(left), Some(right)) => left.same_shape(right),
        _ => false,
    };
    shapes && left.symbol.base == right.symbol.base && left.unit == right.unit
}

/// The blocks with some of them joined at the place of one.
fn join(blocks: &[DraftBlock], members: &[usize], at: usize) -> Vec<DraftBlock> {
    let chosen = || members.iter().filter_map(|index| blocks.get(*index));
    let likes = || chosen().filter_map(|block| block.likes.as_ref());
    let heads = likes().map(|likes| likes.head.clone()).collect();
    let sentence = likes().next().map(|likes: &Likes| likes.sentence.clone()).unwrap_or_default();
    let steps = chosen().flat_map(|block| block.steps.iter().copied()).collect();
    let grid = DraftBlock { sentence, steps, likes: likes().next().cloned(), set: Set::Grid(heads) };
    let others = blocks.iter().enumerate().filter_map(|(index, block)| {
        if index == at {
            Some(grid.clone())
        } else if members.contains(&index) {
            None
        } else {
            Some(block.clone())
        }
    });
    others.collect()
}

/// Neighbours that were not joined and say the same sentence are one block again.
fn fused(blocks: Vec<DraftBlock>) -> Vec<DraftBlock> {
    let mut list: Vec<DraftBlock> = Vec::new();
    for block in blocks {
        match list.last_mut() {
            Some(last) if last.set == Set::Apart && block.set == Set::Apart && last.sentence == block.sentence => {
                last.steps.extend(block.steps);
            }
            _ => list.push(block),
        }
    }
    list
}
