//! Mistakes: published figures, both routes to a hypothesis, planted mistakes found, invented ones not.

mod decks;
mod planted;
mod routes;
mod table;

use proofspan::analysis::{Analysis, solve};
use proofspan::calculation;
use proofspan::member::{Measured, Member, Place};
use proofspan::quantity::Decimal;
use proofspan::review::ask::{Along, Ask, Of, Question, Side};
use proofspan::review::search::{Evidence, Vector};

/// A member and its analysis.
pub fn solved(deck: &str) -> (Member, Analysis) {
    let member = calculation::member(deck).unwrap_or_else(|faults| panic!("{faults:?}\n{deck}"));
    let analysis = solve(&member).unwrap();
    (member, analysis)
}

pub fn place(metres: &str) -> Place {
    Place::metres(Decimal::parse(metres).unwrap().trimmed())
}

/// A question in short: `R B`, `m A`, `M 3`, `v 7.5`, `vmax A-B`, `Mmax A-B`, `Mmin A-B`, `X R.B`, `u B-end`, `a B-end`, `ok`.
pub fn question(of: &Of, what: &str) -> Question {
    let (kind, rest) = what.split_once(' ').unwrap_or((what, ""));
    let station =
        |along: Along, side: Side| Ask::Station { along, at: place(rest), side, measured: Measured::Absolute };
    let extreme =
        |along: Along, max: bool, measured: Measured| Ask::Extreme { along, span: rest.to_owned(), max, measured };
    let ask = match kind {
        "R" => Ask::Reaction { support: rest.to_owned() },
        "m" => Ask::ReactionMoment { support: rest.to_owned() },
        "X" => Ask::Redundant { name: rest.to_owned() },
        "M" => station(Along::Moment, Side::Left),
        "V" => station(Along::Shear, Side::Right),
        "v" => station(Along::Deflection, Side::Left),
        "t" => station(Along::Slope, Side::Left),
        "vmax" => extreme(Along::Deflection, true, Measured::Absolute),
        "cmax" => extreme(Along::Deflection, true, Measured::Chord),
        "cmin" => extreme(Along::Deflection, false, Measured::Chord),
        "Mmax" => extreme(Along::Moment, true, Measured::Absolute),
        "Mmin" => extreme(Along::Moment, false, Measured::Absolute),
        "Vmax" => extreme(Along::Shear, true, Measured::Absolute),
        "tmax" => extreme(Along::Slope, true, Measured::Absolute),
        "u" => Ask::Utilisation { span: rest.to_owned(), limit: None },
        "a" => Ask::Allowable { span: rest.to_owned(), limit: None },
        "ok" => Ask::Verdict { span: None, limit: None },
        _ => panic!("{what}"),
    };
    Question { of: of.clone(), ask }
}

pub fn combination(name: &str) -> Of {
    Of::Combination(name.to_owned())
}

/// Rounded to three significant digits.
pub fn three(value: f64) -> f64 {
    Decimal::nearest(value, 3).to_f64()
}

/// Half a unit of the third digit, or half a per cent, the larger.
pub fn tolerance(claimed: f64) -> f64 {
    if claimed == 0.0 {
        return 1e-9;
    }
    let lead = libm::floor(libm::log10(claimed.abs()));
    (0.5 * libm::pow(10.0, lead - 2.0)).max(0.005 * claimed.abs())
}

/// Claims out of figures, against the checker's own.
pub fn evidence(questions: &[Question], own: &Vector, claimed: &Vector) -> Vec<Evidence> {
    let each = questions.iter().zip(own.iter().zip(claimed));
    each.filter_map(|(question, (own, claimed))| {
        let (own, claimed) = ((*own)?, three((*claimed)?));
        // Nobody writes rounding down.
        let claimed = if claimed.abs() < 1e-9 * own.abs() { 0.0 } else { claimed };
        let tolerance = tolerance(claimed);
        let differs = (own - claimed).abs() > tolerance;
        Some(Evidence { question: question.clone(), claimed, tolerance, differs })
    })
    .collect()
}
