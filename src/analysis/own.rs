//! Own bending: what a piece adds between its wall and its tip.

use super::action::Action;
use super::cantilever as tip;
use super::gauss;
use super::stiffness::{Stiffness, Tapered};

/// Shear and bending moment at a cut, N and N·m.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Cut {
    /// V = dM/dx.
    pub shear: f64,
    /// Sagging positive.
    pub moment: f64,
}

/// Deflection and turn, m and rad.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Sway {
    /// Downward.
    pub v: f64,
    /// Clockwise.
    pub psi: f64,
}

impl Sway {
    fn plus(self, (v, psi): (f64, f64)) -> Self {
        Self { v: self.v + v, psi: self.psi + psi }
    }
}

/// Shear and moment at the near end of a length `l` from those at its far end and what acts between.
pub fn near_end<'a>(far: Cut, l: f64, actions: impl IntoIterator<Item = &'a Action>) -> Cut {
    let start = Cut { shear: far.shear, moment: far.moment - far.shear * l };
    actions.into_iter().fold(start, |cut, action| Cut {
        shear: cut.shear + action.resultant(),
        moment: cut.moment - action.moment(0.0),
    })
}

/// Deflection and turn of the tip of a piece's first length `x`, its wall held: by the cut at its tip and what acts on it.
pub fn own_bending(stiffness: &Stiffness, x: f64, cut: Cut, head: &[Action]) -> Sway {
    if x <= 0.0 {
        return Sway::default();
    }
    match stiffness {
        Stiffness::Constant { ei, ga, depth } => {
            let shear = ga.map_or(0.0, |ga| tip::shear_force_v(cut.shear, x, ga));
            let ends = Sway {
                v: tip::tip_force_v(cut.shear, x, *ei) - tip::tip_couple_v(cut.moment, x, *ei) + shear,
                psi: tip::tip_force_psi(cut.shear, x, *ei) - tip::tip_couple_psi(cut.moment, x, *ei),
            };
            head.iter().fold(ends, |sum, action| sum.plus(action.tip(x, *ei, *ga, *depth)))
        }
        Stiffness::Tapered(tapered) => stations(tapered, x, cut, head).iter().fold(Sway::default(), |sum, station| {
            sum.plus((station.weight * station.deflecting(x), station.weight * station.bend()))
        }),
    }
}

/// One sample of a tapered piece: everything the weighted sum needs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Station {
    /// Left end of its panel, from the piece's left end, m.
    pub panel: gauss::Panel,
    /// Its place in the panel as a fraction.
    pub fraction: f64,
    /// Its weight as a fraction of the panel.
    pub share: f64,
    /// Distance from the piece's left end, m.
    pub x: f64,
    /// Length times weight, m.
    pub weight: f64,
    /// EI there, N·m².
    pub ei: f64,
    /// G times shear area there, N.
    pub ga: Option<f64>,
    /// Shear and moment there.
    pub cut: Cut,
    /// Curvature imposed there by temperature, 1/m.
    pub curvature: f64,
}

impl Station {
    /// Turn per length: -M/EI + imposed curvature.
    pub fn bend(&self) -> f64 {
        self.curvature - self.cut.moment / self.ei
    }

    /// Deflection at the distance `x` that a length of one here causes.
    pub fn deflecting(&self, x: f64) -> f64 {
        self.bend() * (x - self.x) + self.ga.map_or(0.0, |ga| self.cut.shear / ga)
    }
}

/// The samples over the first length `x` of a tapered piece: panels end where a load begins or ends.
pub fn stations(tapered: &Tapered, x: f64, cut: Cut, head: &[Action]) -> Vec<Station> {
    let mut ends = vec![0.0, x];
    for action in head {
        match *action {
            Action::Force { a, .. } | Action::Couple { a, .. } => ends.push(a),
            Action::Spread { a, c, .. } | Action::Gradient { a, c, .. } => ends.extend([a, a + c]),
        }
    }
    ends.retain(|end| (0.0..=x).contains(end));
    ends.sort_by(f64::total_cmp);
    // Neighbouring loads meet at the same place up to a rounding; no panel is made of that.
    ends.dedup_by(|right, left| *right - *left <= 1e-12 * x);
    let driver = |at: f64| {
        let (left, right) = tapered.driver(0.0, x);
        left + (right - left) * at / x
    };
    let pairs = ends.iter().zip(ends.iter().skip(1));
    pairs
        .flat_map(|(from, to)| gauss::panels(*from, *to, driver))
        .flat_map(|panel| gauss::samples(panel.points).into_iter().map(move |sample| (panel, sample)))
        .map(|(panel, sample)| station(tapered, x, cut, head, panel, sample))
        .collect()
}

fn station(
    tapered: &Tapered,
    x: f64,
    cut: Cut,
    head: &[Action],
    panel: gauss::Panel,
    sample: gauss::Sample,
) -> Station {
    let at = panel.from + panel.length * sample.fraction;
    let tails: Vec<Action> = head.iter().filter_map(|action| action.tail(at, true)).collect();
    let strain: f64 = head
        .iter()
        .filter_map(|action| match *action {
            Action::Gradient { strain, a, c } if a <= at && at < a + c => Some(strain),
            _ => None,
        })
        .sum();
    Station {
        panel,
        fraction: sample.fraction,
        share: sample.weight,
        x: at,
        weight: panel.length * sample.weight,
        ei: tapered.ei(at),
        ga: tapered.ga(at),
        cut: near_end(cut, x - at, &tails),
        curvature: if strain == 0.0 { 0.0 } else { strain / tapered.depth(at) },
    }
}
