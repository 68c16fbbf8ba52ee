//! Compatibility and superposition: every case solved once, every combination a sum.

use nalgebra::DMatrix;

use super::action::Acting;
use super::band::{Eliminated, Skyline};
use super::equilibrium as sums;
use super::model::Model;
use super::own::{Cut, Sway};
use super::stability::splits;
use super::state::{Loading, PieceState, Reaction, Solver, State, Window, imposed};
use crate::member::{Member, Redundant};

/// The solved member: every intermediate of the force method.
#[derive(Clone, Debug)]
pub struct Analysis {
    /// The released member.
    pub model: Model,
    /// One unit state for each redundant.
    pub units: Vec<State>,
    /// Flexibilities and their elimination.
    pub flexibility: Flexibility,
    /// Load cases, in the member's order.
    pub cases: Vec<CaseSolution>,
    /// Combinations, in the member's order.
    pub combinations: Vec<Solution>,
}

/// The flexibility matrix, with the give of released springs on its diagonal.
#[derive(Clone, Debug)]
pub struct Flexibility {
    /// f_ij from the unit state j, i >= j; symmetric but for rounding.
    pub lower: Skyline,
    /// f_ij from the unit state j, i <= j, kept as its transpose: the other route to the same numbers.
    pub upper: Skyline,
    /// After elimination; `None` for a determinate member.
    pub eliminated: Option<Eliminated>,
    /// Condition number of the matrix scaled to a unit diagonal; `None` beyond 100 redundants.
    pub condition: Option<f64>,
}

/// A solved load case.
#[derive(Clone, Debug)]
pub struct CaseSolution {
    /// What acts, by piece.
    pub actions: Vec<Vec<Acting>>,
    /// Settlement of each support, m.
    pub settlements: Vec<f64>,
    /// Imposed turn of each support, rad.
    pub turns: Vec<f64>,
    /// The released member under the case.
    pub released: State,
    /// Movement of the released member at each release, along the redundant.
    pub movements: Vec<f64>,
    /// Movement imposed at each release, along the redundant.
    pub imposed: Vec<f64>,
    /// Right-hand sides: imposed less found.
    pub gaps: Vec<f64>,
    /// Right-hand sides after elimination.
    pub reduced: Vec<f64>,
    /// The redundants.
    pub redundants: Vec<f64>,
    /// The member itself under the case.
    pub total: Solution,
}

/// Forces and movements of the member under a case or a combination.
#[derive(Clone, Debug, PartialEq)]
pub struct Solution {
    /// By support.
    pub reactions: Vec<Reaction>,
    /// In the order of the model.
    pub redundants: Vec<f64>,
    /// By piece: cuts and movements at both ends.
    pub pieces: Vec<PieceEnds>,
}

/// A piece under a case or combination.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct PieceEnds {
    /// Just right of its left end.
    pub left: Cut,
    /// At its right end, beyond whatever acts at the cut itself.
    pub right: Cut,
    /// Deflection and turn at its left end.
    pub start: Sway,
    /// Deflection and turn at its right end.
    pub end: Sway,
}

/// Most corrections of the redundants.
const CORRECTIONS: usize = 3;
/// What may stay open at a release, relative to the greatest movement of its kind: nothing a sheet could show.
const NEGLIGIBLE: f64 = 1e-13;

/// Solves the member for every case and combination. `None` only for a mechanism or a bad choice of redundants, which
/// `stability` reports with reasons, or where rounding has eaten a pivot.
pub fn solve(member: &Member) -> Option<Analysis> {
    let model = Model::new(member)?;
    let solver = Solver { member, model: &model };
    let nothing = vec![Vec::new(); model.pieces.len()];
    let unit = |redundant: &Redundant| {
        let redundants = [(*redundant, 1.0)];
        solver.solve(&Loading { actions: &nothing, redundants: &redundants, settlements: &[], turns: &[] })
    };
    let units: Vec<State> = model.redundants.iter().map(unit).collect();
    let flexibility = Flexibility::new(member, &model, &units)?;
    let cases: Option<Vec<CaseSolution>> =
        (0..member.cases.len()).map(|case| solve_case(&solver, &flexibility, case)).collect();
    let cases = cases?;
    let combinations = member
        .combinations
        .iter()
        .map(|combination| {
            let factors = combination.factors.iter().map(|factor| factor.value);
            combine(factors.zip(cases.iter().map(|case| &case.total)), &model)
        })
        .collect();
    Some(Analysis { units, flexibility, cases, combinations, model })
}

fn solve_case(solver: &Solver<'_>, flexibility: &Flexibility, case: usize) -> Option<CaseSolution> {
    let (member, model) = (solver.member, solver.model);
    let actions = model.actions(member, case);
    let (settlements, turns) = imposed(member, case);
    let loading = Loading { actions: &actions, redundants: &[], settlements: &settlements, turns: &turns };
    let released = solver.solve(&loading);
    let releases = || model.redundants.iter();
    let movements: Vec<f64> = releases().map(|redundant| movement(member, model, &released, *redundant)).collect();
    let imposed: Vec<f64> =
        releases().map(|redundant| imposed_at(member, model, &settlements, &turns, *redundant)).collect();
    let gaps: Vec<f64> = imposed.iter().zip(&movements).map(|(imposed, found)| imposed - found).collect();
    let (reduced, mut redundants) = flexibility.solve(&gaps);
    let whole_under = |redundants: &[f64]| {
        let values: Vec<(Redundant, f64)> = releases().copied().zip(redundants.iter().copied()).collect();
        solver.solve(&Loading { redundants: &values, ..loading.clone() })
    };
    let mut whole = whole_under(&redundants);
    // Where members far stiffer than their neighbours make the equations lose digits, what the whole member leaves open at
    // its releases gives them back. Members of one kind need no correction and get none.
    for _ in 0..CORRECTIONS {
        let open: Vec<f64> = releases()
            .zip(&imposed)
            .zip(&redundants)
            .map(|((redundant, imposed), x)| {
                imposed - movement(member, model, &whole, *redundant) - give(member, model, *redundant) * x
            })
            .collect();
        if releases().zip(&open).all(|(redundant, open)| open.abs() <= NEGLIGIBLE * reach(&whole, *redundant)) {
            break;
        }
        let (_, corrections) = flexibility.solve(&open);
        redundants.iter_mut().zip(&corrections).for_each(|(x, correction)| *x += correction);
        whole = whole_under(&redundants);
    }
    let total = Solution {
        reactions: (0..model.supports.len()).map(|support| whole.reactions.get(support)).collect(),
        redundants: redundants.clone(),
        pieces: (0..model.pieces.len()).map(|piece| ends(&whole.pieces, piece)).collect(),
    };
    let finite = total.pieces.iter().all(|piece| piece.end.v.is_finite() && piece.left.moment.is_finite());
    finite.then_some(CaseSolution {
        actions,
        settlements,
        turns,
        released,
        movements,
        imposed,
        gaps,
        reduced,
        redundants,
        total,
    })
}

/// The greatest movement of a state of the kind that a release makes: deflection at a force, turn at a moment.
fn reach(state: &State, redundant: Redundant) -> f64 {
    let movements = state.pieces.iter().map(|(_, piece)| match redundant {
        Redundant::Force(_) => piece.end.v.abs().max(piece.start.v.abs()),
        Redundant::Moment(_) => piece.end.psi.abs().max(piece.start.psi.abs()),
    });
    movements.fold(0.0, f64::max)
}

fn ends(pieces: &Window<PieceState>, index: usize) -> PieceEnds {
    let PieceState { left, right, start, end, .. } = pieces.get(index);
    PieceEnds { left, right, start, end }
}

/// Factors times solutions.
pub fn combine<'a>(terms: impl Iterator<Item = (f64, &'a Solution)>, model: &Model) -> Solution {
    let mut sum = Solution {
        reactions: vec![Reaction::default(); model.supports.len()],
        redundants: vec![0.0; model.redundants.len()],
        pieces: vec![PieceEnds::default(); model.pieces.len()],
    };
    let cut = |sum: &mut Cut, factor: f64, term: Cut| {
        sum.shear += factor * term.shear;
        sum.moment += factor * term.moment;
    };
    let sway = |sum: &mut Sway, factor: f64, term: Sway| {
        sum.v += factor * term.v;
        sum.psi += factor * term.psi;
    };
    for (factor, term) in terms.filter(|(factor, _)| *factor != 0.0) {
        for (sum, term) in sum.reactions.iter_mut().zip(&term.reactions) {
            sum.force += factor * term.force;
            sum.moment += factor * term.moment;
        }
        for (sum, term) in sum.redundants.iter_mut().zip(&term.redundants) {
            *sum += factor * term;
        }
        for (sum, term) in sum.pieces.iter_mut().zip(&term.pieces) {
            cut(&mut sum.left, factor, term.left);
            cut(&mut sum.right, factor, term.right);
            sway(&mut sum.start, factor, term.start);
            sway(&mut sum.end, factor, term.end);
        }
    }
    sum
}

/// Movement of a state at a release, along the redundant: upward at a force, the kink that opens at a moment.
pub fn movement(member: &Member, model: &Model, state: &State, redundant: Redundant) -> f64 {
    let Some(held) = model.supports.get(redundant.support()) else { return 0.0 };
    let after = state.pieces.get(held.cut);
    let before = held.cut.checked_sub(1).map(|piece| state.pieces.get(piece));
    let here = before.map_or(after.start, |before| before.end);
    match redundant {
        Redundant::Force(_) => -here.v,
        Redundant::Moment(_) if splits(member, redundant) => after.start.psi - here.psi,
        Redundant::Moment(_) if held.cut == 0 => here.psi,
        Redundant::Moment(_) => -here.psi,
    }
}

/// Movement imposed at a release, along the redundant.
fn imposed_at(member: &Member, model: &Model, settlements: &[f64], turns: &[f64], redundant: Redundant) -> f64 {
    let index = redundant.support();
    let at = |list: &[f64]| list.get(index).copied().unwrap_or_default();
    let at_start = model.supports.get(index).is_some_and(|held| held.cut == 0);
    match redundant {
        Redundant::Force(_) => -at(settlements),
        Redundant::Moment(_) if splits(member, redundant) => 0.0,
        Redundant::Moment(_) if at_start => at(turns),
        Redundant::Moment(_) => -at(turns),
    }
}

impl Flexibility {
    fn new(member: &Member, model: &Model, units: &[State]) -> Option<Self> {
        let count = units.len();
        // A unit state may reach a release only within its window; the release must not be missed at the window's edge.
        let reaches = |state: &State, release: &Redundant| {
            let range = state.pieces.range();
            model.supports.get(release.support()).is_some_and(|held| held.cut >= range.start && held.cut <= range.end)
        };
        let entry = |release: usize, state: usize| -> f64 {
            let (Some(redundant), Some(state_of)) = (model.redundants.get(release), units.get(state)) else {
                return 0.0;
            };
            if !reaches(state_of, redundant) {
                return 0.0;
            }
            let spring = if release == state { give(member, model, *redundant) } else { 0.0 };
            movement(member, model, state_of, *redundant) + spring
        };
        let build = |entry: &dyn Fn(usize, usize) -> f64| {
            let mut skyline = Skyline::default();
            for row in 0..count {
                let entries: Vec<f64> = (0..=row).map(|column| entry(row, column)).collect();
                let first = entries.iter().position(|entry| *entry != 0.0).unwrap_or(row);
                skyline.push(entries.get(first..).unwrap_or_default().to_vec());
            }
            skyline
        };
        let lower = build(&entry);
        let upper = build(&|row, column| entry(column, row));
        let eliminated = if count == 0 { None } else { Some(lower.eliminate()?) };
        let condition = condition(&lower);
        Some(Self { lower, upper, eliminated, condition })
    }

    /// Number of redundants.
    pub fn len(&self) -> usize {
        self.lower.len()
    }

    /// Whether the member is determinate.
    pub fn is_empty(&self) -> bool {
        self.lower.is_empty()
    }

    /// The greatest difference of f_ij and f_ji, relative to the root of f_ii f_jj.
    pub fn asymmetry(&self) -> f64 {
        let mut greatest = 0.0_f64;
        for i in 0..self.len() {
            for j in self.lower.first(i).min(self.upper.first(i))..i {
                let scale = (self.lower.get(i, i) * self.lower.get(j, j)).sqrt();
                greatest = greatest.max((self.lower.get(i, j) - self.upper.get(i, j)).abs() / scale);
            }
        }
        greatest
    }

    /// Reduced right-hand sides and redundants: a quotient for one, Cramer's rule for two, elimination for more.
    fn solve(&self, gaps: &[f64]) -> (Vec<f64>, Vec<f64>) {
        let f = |i, j| self.lower.get(i, j);
        match (gaps, &self.eliminated) {
            ([gap], _) => (gaps.to_vec(), vec![sums::single(*gap, f(0, 0))]),
            ([first, second], _) => {
                let determinant = sums::determinant(f(0, 0), f(0, 1), f(1, 0), f(1, 1));
                let x1 = sums::cramer_first(*first, *second, f(0, 1), f(1, 1), determinant);
                let x2 = sums::cramer_second(*first, *second, f(0, 0), f(1, 0), determinant);
                (gaps.to_vec(), vec![x1, x2])
            }
            (_, Some(eliminated)) => {
                let reduced = eliminated.forward(gaps);
                let redundants = eliminated.back(&reduced);
                (reduced, redundants)
            }
            (_, None) => (Vec::new(), Vec::new()),
        }
    }
}

/// Give of the spring whose own force or moment is the redundant.
pub fn give(member: &Member, model: &Model, redundant: Redundant) -> f64 {
    let Some(held) = model.supports.get(redundant.support()) else { return 0.0 };
    match redundant {
        Redundant::Force(_) => held.give,
        Redundant::Moment(_) if splits(member, redundant) => 0.0,
        Redundant::Moment(_) => held.turn_give,
    }
}

fn condition(matrix: &Skyline) -> Option<f64> {
    let count = matrix.len();
    if count > 100 {
        return None;
    }
    if count == 0 {
        return Some(1.0);
    }
    let scaled =
        DMatrix::from_fn(count, count, |i, j| matrix.get(i, j) / (matrix.get(i, i).sqrt() * matrix.get(j, j).sqrt()));
    let eigenvalues = scaled.symmetric_eigenvalues();
    Some(eigenvalues.max() / eigenvalues.min())
}
