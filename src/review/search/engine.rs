//! Everything that can be known before a claim's figure is looked at: boards for every state of the member.

use std::cell::OnceCell;
use std::rc::Rc;

use super::board::Board;
use super::gauge::{Gauge, Ground, gone, moved};
use super::items::Items;
use crate::analysis::{self, Analysis};
use crate::member::Member;
use crate::review::ask::{Ask, Question, evaluate};
use crate::review::mistake::{self, Catalogue, Change, Mistake, Moves, Reading, Structure, Weights, loads, weights};

/// Figures of all claims; `None` where a member has no such figure.
pub type Vector = Vec<Option<f64>>;

/// One hypothesis: at most two mistakes, by their indices in the catalogue.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Hypothesis {
    /// Up to two changes that ask for a new solution.
    pub structures: [Option<usize>; 2],
    /// Up to two changes of single loads.
    pub loads: [Option<usize>; 2],
    /// A change of factors.
    pub weights: Option<usize>,
    /// A wrong reading.
    pub reading: Option<usize>,
    /// A section (every one where `None`) about its weak axis with a ratio that was fitted to the claims.
    pub ratio: Option<(Option<usize>, f64)>,
}

/// A state of the member that asked for a new solution.
struct Site {
    structure: usize,
    plain: Board,
    read: Vec<(usize, Board)>,
    weighted: Vec<(usize, Board)>,
}

/// All boards of a member for a list of questions.
pub struct Engine<'m> {
    /// The member.
    pub member: &'m Member,
    /// Its analysis.
    pub analysis: &'m Analysis,
    /// What the claims answer.
    pub questions: Vec<Question>,
    /// Every mistake.
    pub catalogue: Catalogue,
    items: Items,
    base: Board,
    sites: Vec<Site>,
    read: Vec<(usize, Board)>,
    read_weighted: Vec<(usize, usize, Board)>,
    weighted: Vec<(usize, Board)>,
    doubles: OnceCell<Vec<(usize, usize, Vector)>>,
    /// Sections about their weak axis under a row of ratios; solved when first asked for.
    pub(super) ratios: OnceCell<Vec<super::ratio::Row>>,
}

/// The most pairs of structural changes that are solved; each is a solution of its own.
const MOST_DOUBLES: usize = 6_000;
/// Structural changes times loads times pieces: the most that is solved load by load (about a microsecond each).
const MOST_WORK: usize = 3_000_000;
/// The most structural changes that are combined with factors and readings.
const MOST_SITES: usize = 400;

impl<'m> Engine<'m> {
    /// Solves the member under every change that asks for it. `None` where the items cannot be solved.
    pub fn new(member: &'m Member, analysis: &'m Analysis, questions: Vec<Question>) -> Option<Self> {
        Self::within(member, analysis, questions, MOST_WORK)
    }

    /// The same with another bound on the work (changes times loads times pieces) beyond which changes that ask for a new
    /// solution are tried alone only.
    pub fn within(member: &'m Member, analysis: &'m Analysis, questions: Vec<Question>, work: usize) -> Option<Self> {
        let catalogue = Catalogue::new(member);
        let items = Items::new(member, &catalogue.loads);
        let weigh = |change: Option<&Weights>| -> Vec<Rc<Vec<f64>>> {
            let of = |question: &Question| {
                let weight =
                    items.list.iter().map(|item| weights::weight(change, member, &question.of, item.case, &item.kind));
                Rc::new(weight.collect())
            };
            questions.iter().map(of).collect()
        };
        let plain = weigh(None);
        let changes: Vec<Vec<Rc<Vec<f64>>>> =
            catalogue.weights.iter().map(|mistake| weigh(changed_weights(mistake))).collect();
        let own = items.own;
        let full = |gauges: &[Gauge], weights: &[Rc<Vec<f64>>]| Board::new(gauges, weights, own, &items.effects);
        let bare = |gauges: &[Gauge], weights: &[Rc<Vec<f64>>]| Board::new(gauges, weights, own, &[]);
        let solved = analysis::solve(&items.member)?;
        let moves = Moves::Nothing;
        let ground = Ground { member, analysis, changed: &items.member, solved: &solved, moves };
        let gauges: Vec<Gauge> = questions.iter().map(|question| ground.gauge(question)).collect();
        let simple = mistake::simple_spans(&items.member).and_then(|changed| {
            let solved = analysis::solve(&changed)?;
            let ground = Ground { member, analysis, changed: &changed, solved: &solved, moves };
            Some(questions.iter().map(|question| ground.gauge(question)).collect::<Vec<_>>())
        });
        let readings = |ground: &Ground<'_>, gauges: &[Gauge], simple: Option<&[Gauge]>| {
            let each = catalogue.readings.iter().enumerate();
            each.filter_map(|(index, mistake)| {
                Some((index, read_gauges(ground, &questions, gauges, simple, reading(mistake)?)?))
            })
            .collect::<Vec<(usize, Vec<Gauge>)>>()
        };
        let read = readings(&ground, &gauges, simple.as_deref());
        let weighted = |gauges: &[Gauge]| {
            changes.iter().enumerate().map(|(index, weights)| (index, bare(gauges, weights))).collect::<Vec<_>>()
        };
        let mut sites = Vec::new();
        let heavy = catalogue.structures.len() * items.list.len() * analysis.model.pieces.len() > work;
        for (structure, mistake) in catalogue.structures.iter().enumerate() {
            let Some(change) = structural(mistake) else { continue };
            if heavy {
                // On a very long member each change is solved with the loads as they are, and left out of pairs.
                let vector = (change.rewrite)(member).and_then(|changed| {
                    let solved = analysis::solve(&changed)?;
                    Some(answers(&questions, member, &changed, &solved, &[change.moves]))
                });
                if let Some(vector) = vector {
                    let plain = Board::fixed(&vector);
                    sites.push(Site { structure, read: Vec::new(), weighted: Vec::new(), plain });
                }
                continue;
            }
            let Some(changed) = (change.rewrite)(&items.member) else { continue };
            let Some(solved) = analysis::solve(&changed) else { continue };
            let ground = Ground { member, analysis, changed: &changed, solved: &solved, moves: change.moves };
            let gauges: Vec<Gauge> = questions.iter().map(|question| ground.gauge(question)).collect();
            let few = sites.len() < MOST_SITES;
            let read = if few { readings(&ground, &gauges, None) } else { Vec::new() };
            sites.push(Site {
                structure,
                read: read.iter().map(|(index, gauges)| (*index, bare(gauges, &plain))).collect(),
                weighted: if few { weighted(&gauges) } else { Vec::new() },
                plain: full(&gauges, &plain),
            });
        }
        let read_weighted = read.iter().flat_map(|(index, gauges)| {
            weighted(gauges).into_iter().map(move |(weights, board)| (*index, weights, board))
        });
        Some(Self {
            base: full(&gauges, &plain),
            read_weighted: read_weighted.collect(),
            read: read.iter().map(|(index, gauges)| (*index, full(gauges, &plain))).collect(),
            weighted: changes.iter().enumerate().map(|(index, weights)| (index, full(&gauges, weights))).collect(),
            sites,
            member,
            analysis,
            catalogue,
            items,
            questions,
            doubles: OnceCell::new(),
            ratios: OnceCell::new(),
        })
    }

    /// Every single mistake with the board and the mistake about loads that give its figures.
    pub fn singles(&self, mut visit: impl FnMut(Hypothesis, &dyn Fn(usize) -> Option<f64>)) {
        for site in &self.sites {
            let hypothesis = Hypothesis { structures: [Some(site.structure), None], ..Hypothesis::default() };
            visit(hypothesis, &|claim| site.plain.value(claim, None, None));
        }
        for load in 0..self.items.effects.len() {
            let hypothesis = Hypothesis { loads: [Some(load), None], ..Hypothesis::default() };
            visit(hypothesis, &|claim| self.base.value(claim, Some(load), None));
        }
        for (weights, board) in &self.weighted {
            let hypothesis = Hypothesis { weights: Some(*weights), ..Hypothesis::default() };
            visit(hypothesis, &|claim| board.value(claim, None, None));
        }
        for (reading, board) in &self.read {
            let hypothesis = Hypothesis { reading: Some(*reading), ..Hypothesis::default() };
            visit(hypothesis, &|claim| board.value(claim, None, None));
        }
    }

    /// Every pair of mistakes that can be made together, but two that both ask for a new solution.
    pub fn pairs(&self, mut visit: impl FnMut(Hypothesis, &dyn Fn(usize) -> Option<f64>)) {
        let effects = &self.items.effects;
        for (first, one) in effects.iter().enumerate() {
            for (second, other) in effects.iter().enumerate().skip(first + 1) {
                if one.touched.iter().any(|item| other.touched.contains(item)) {
                    continue;
                }
                let hypothesis = Hypothesis { loads: [Some(first), Some(second)], ..Hypothesis::default() };
                visit(hypothesis, &|claim| self.base.value(claim, Some(first), Some(second)));
            }
        }
        let mut with_loads = |hypothesis: Hypothesis, board: &Board| {
            if board.is_fixed() {
                return;
            }
            for load in 0..effects.len() {
                let hypothesis = Hypothesis { loads: [Some(load), None], ..hypothesis };
                visit(hypothesis, &|claim| board.value(claim, Some(load), None));
            }
        };
        for site in &self.sites {
            let structures = [Some(site.structure), None];
            with_loads(Hypothesis { structures, ..Hypothesis::default() }, &site.plain);
        }
        for (weights, board) in &self.weighted {
            with_loads(Hypothesis { weights: Some(*weights), ..Hypothesis::default() }, board);
        }
        for (reading, board) in &self.read {
            with_loads(Hypothesis { reading: Some(*reading), ..Hypothesis::default() }, board);
        }
        for site in &self.sites {
            let plain = Hypothesis { structures: [Some(site.structure), None], ..Hypothesis::default() };
            for (weights, board) in &site.weighted {
                visit(Hypothesis { weights: Some(*weights), ..plain }, &|claim| board.value(claim, None, None));
            }
            for (reading, board) in &site.read {
                visit(Hypothesis { reading: Some(*reading), ..plain }, &|claim| board.value(claim, None, None));
            }
        }
        for (reading, weights, board) in &self.read_weighted {
            let hypothesis = Hypothesis { reading: Some(*reading), weights: Some(*weights), ..Hypothesis::default() };
            visit(hypothesis, &|claim| board.value(claim, None, None));
        }
    }

    /// Every pair of mistakes that both ask for a new solution; solved when first asked for.
    pub fn doubles(&self) -> &[(usize, usize, Vector)] {
        self.doubles.get_or_init(|| {
            let sites: Vec<usize> = self.sites.iter().map(|site| site.structure).collect();
            let mut list = Vec::new();
            if sites.len() * sites.len() / 2 * self.analysis.model.pieces.len().max(4) > 4 * MOST_DOUBLES {
                return list;
            }
            for (position, first) in sites.iter().enumerate() {
                for second in sites.iter().skip(position + 1) {
                    let structures = [Some(*first), Some(*second)];
                    let hypothesis = Hypothesis { structures, ..Hypothesis::default() };
                    if let Some((_, vector)) = self.exact(&hypothesis) {
                        list.push((*first, *second, vector));
                    }
                }
            }
            list
        })
    }

    /// Whether pairs of two structural changes are too many to be solved.
    pub fn doubles_left_out(&self) -> bool {
        let sites = self.sites.len();
        sites * sites / 2 * self.analysis.model.pieces.len().max(4) > 4 * MOST_DOUBLES
    }

    /// The member under a hypothesis, and where its places went; `None` for a wrong reading, or where it does not apply.
    pub fn rewritten(&self, hypothesis: &Hypothesis) -> Option<(Member, Vec<Moves>)> {
        if hypothesis.reading.is_some() {
            return None;
        }
        let mut edits = Vec::new();
        for load in hypothesis.loads.into_iter().flatten() {
            if let Change::Loads(list) = &self.catalogue.loads.get(load)?.change {
                edits.extend(list.iter().cloned());
            }
        }
        let mut member = if edits.is_empty() { self.member.clone() } else { loads::apply(self.member, &edits)? };
        if let Some(index) = hypothesis.weights {
            member = weights::apply(changed_weights(self.catalogue.weights.get(index)?)?, &member)?;
        }
        let of = |index: usize| self.catalogue.structures.get(index).and_then(structural);
        let mut changes: Vec<&Structure> = hypothesis.structures.into_iter().flatten().filter_map(of).collect();
        // What moves places goes last: other changes name places of the member as it is.
        changes.sort_by_key(|change| change.moves != Moves::Nothing);
        if changes.iter().filter(|change| change.moves != Moves::Nothing).count() > 1 {
            return None;
        }
        let mut moves = Vec::new();
        for change in changes {
            member = (change.rewrite)(&member)?;
            moves.push(change.moves);
        }
        if let Some((section, ratio)) = hypothesis.ratio {
            member = mistake::weak_axis(&member, section, ratio)?;
        }
        Some((member, moves))
    }

    /// The rewritten member, solved in full, and its figures.
    pub fn exact(&self, hypothesis: &Hypothesis) -> Option<(Member, Vector)> {
        let (member, moves) = self.rewritten(hypothesis)?;
        let analysis = analysis::solve(&member)?;
        let vector = answers(&self.questions, self.member, &member, &analysis, &moves);
        Some((member, vector))
    }

    /// The mistakes of a hypothesis.
    pub fn mistakes(&self, hypothesis: &Hypothesis) -> Vec<&Mistake> {
        let structures = hypothesis.structures.into_iter().flatten().filter_map(|i| self.catalogue.structures.get(i));
        let loads = hypothesis.loads.into_iter().flatten().filter_map(|index| self.catalogue.loads.get(index));
        let weights = hypothesis.weights.and_then(|index| self.catalogue.weights.get(index));
        let reading = hypothesis.reading.and_then(|index| self.catalogue.readings.get(index));
        structures.chain(loads).chain(weights).chain(reading).collect()
    }

    /// Whether a claim's figure is a plain sum of the items.
    pub fn quick(&self, claim: usize) -> bool {
        self.base.quick(claim)
    }
}

/// Answers on a rewritten member, solved in full.
fn answers(questions: &[Question], before: &Member, after: &Member, analysis: &Analysis, moves: &[Moves]) -> Vector {
    let answer = |question: &Question| {
        if gone(question, before, after) {
            return Some(0.0);
        }
        let question = moves.iter().fold(question.clone(), |question, moves| moved(&question, moves));
        evaluate(&question, after, analysis).ok()
    };
    questions.iter().map(answer).collect()
}

fn structural(mistake: &Mistake) -> Option<&Structure> {
    if let Change::Structure(structure) = &mistake.change { Some(structure) } else { None }
}

fn changed_weights(mistake: &Mistake) -> Option<&Weights> {
    if let Change::Weights(weights) = &mistake.change { Some(weights) } else { None }
}

fn reading(mistake: &Mistake) -> Option<Reading> {
    if let Change::Reading(reading) = mistake.change { Some(reading) } else { None }
}

/// All gauges under a wrong reading; `None` where it changes none.
fn read_gauges(
    ground: &Ground<'_>,
    questions: &[Question],
    gauges: &[Gauge],
    simple: Option<&[Gauge]>,
    reading: Reading,
) -> Option<Vec<Gauge>> {
    let mut any = false;
    let mut list = Vec::with_capacity(gauges.len());
    for (index, (question, plain)) in questions.iter().zip(gauges).enumerate() {
        let read = match reading {
            Reading::SimpleSpan { span } => {
                let over = ground.changed.spans.get(span)?;
                let concerns = match &question.ask {
                    Ask::Station { at, .. } => over.from < *at && *at < over.to,
                    Ask::Extreme { span, .. } | Ask::Utilisation { span, .. } => *span == over.name,
                    _ => false,
                };
                if concerns { Some(simple?.get(index)?.clone()) } else { None }
            }
            reading => ground.read(question, plain, reading),
        };
        any |= read.is_some();
        list.push(read.unwrap_or_else(|| plain.clone()));
    }
    any.then_some(list)
}
