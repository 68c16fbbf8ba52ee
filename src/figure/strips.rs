//! Distributed loads as strips of arrows, stacked in levels above the member.

use super::canvas::{Canvas, HAIR, LABEL, LIGHT, NORMAL, ROW, dashed, solid};
use super::measure;
use super::primitive::{Anchor, Dash, Run, at};

/// Greatest height of a strip, mm.
pub const TALL: f64 = 5.2;
/// Paper between levels, mm.
const GAP: f64 = 0.9;

/// How a strip looks.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Look {
    /// Arrows under a line.
    Load,
    /// Arrows under a dashed line: the member's own weight.
    Weight,
    /// A band, warm above and cold below, or the reverse.
    Gradient {
        /// Whether the top is the warmer side.
        top: bool,
    },
}

/// A distributed load.
#[derive(Clone, Debug)]
pub struct Strip {
    /// Left end, mm.
    pub from: f64,
    /// Right end, mm.
    pub to: f64,
    /// Height at the left end, mm; negative where the load acts upwards.
    pub left: f64,
    /// Height at the right end.
    pub right: f64,
    /// How it looks.
    pub look: Look,
    /// Labels, each with the part of the strip it belongs to.
    pub labels: Vec<(f64, f64, Vec<Run>)>,
}

/// A label placed over its strip, or one that found no room there.
#[derive(Clone, Debug)]
enum Spot {
    Over(f64),
    Away(f64),
}

/// A strip that stands in its level.
#[derive(Debug)]
pub struct Placed {
    strip: Strip,
    spots: Vec<Spot>,
    /// y of its arrows' tips.
    base: f64,
}

impl Placed {
    /// y of the top line at x; `None` where the strip does not reach.
    pub fn line(&self, x: f64) -> Option<f64> {
        let (from, to) = (self.strip.from, self.strip.to);
        if x < from - 0.05 || x > to + 0.05 {
            return None;
        }
        let part = if to > from { ((x - from) / (to - from)).clamp(0.0, 1.0) } else { 0.0 };
        Some(self.base - (self.strip.left + (self.strip.right - self.strip.left) * part).abs())
    }

    fn height(&self) -> f64 {
        self.strip.left.abs().max(self.strip.right.abs())
    }

    /// Labels that found no room over the strip: where their leaders begin.
    pub fn away(&self) -> Vec<(f64, f64, Vec<Run>)> {
        let mut notes = Vec::new();
        for (spot, (_, _, runs)) in self.spots.iter().zip(&self.strip.labels) {
            if let Spot::Away(x) = spot {
                notes.push((*x, self.line(*x).unwrap_or(self.base), runs.clone()));
            }
        }
        notes
    }
}

/// Stacks strips in levels from `base` upwards, their labels clear of the `poles` (x of everything that stands above).
pub fn stack(strips: Vec<Strip>, poles: &[f64], base: f64, right: f64) -> Vec<Placed> {
    let mut poles = poles.to_vec();
    let spots = loop {
        let before = poles.len();
        let spots: Vec<Vec<Spot>> = strips.iter().map(|strip| spots(strip, &mut poles, right)).collect();
        if poles.len() == before {
            break spots;
        }
    };
    let mut placed: Vec<Placed> = Vec::new();
    let mut levels: Vec<Vec<Taken>> = Vec::new();
    let mut rows = Vec::new();
    for (strip, spots) in strips.into_iter().zip(spots) {
        let wants = Taken::by(&strip, &spots);
        let free = |level: &Vec<Taken>| level.iter().all(|taken| !wants.meets(taken));
        let level = levels.iter().position(free).unwrap_or(levels.len());
        if level == levels.len() {
            levels.push(Vec::new());
        }
        if let Some(taken) = levels.get_mut(level) {
            taken.push(wants);
        }
        rows.push(level);
        placed.push(Placed { strip, spots, base });
    }
    let mut y = base;
    for level in 0..levels.len() {
        let mut highest = 0.0_f64;
        for (strip, _) in placed.iter_mut().zip(&rows).filter(|(_, row)| **row == level) {
            strip.base = y;
            let label = if strip.spots.iter().any(|spot| matches!(spot, Spot::Over(_))) { ROW } else { 0.0 };
            highest = highest.max(strip.height() + label);
        }
        y -= highest + GAP;
    }
    placed
}

/// What a strip takes of its level, from and to.
struct Taken {
    strip: (f64, f64),
    labels: Vec<(f64, f64)>,
}

impl Taken {
    fn by(strip: &Strip, spots: &[Spot]) -> Self {
        let label = |(spot, (_, _, runs)): (&Spot, &(f64, f64, Vec<Run>))| match spot {
            Spot::Over(x) => {
                let half = measure::width(runs, LABEL) / 2.0;
                Some((x - half, x + half))
            }
            Spot::Away(_) => None,
        };
        Self { strip: (strip.from, strip.to), labels: spots.iter().zip(&strip.labels).filter_map(label).collect() }
    }

    /// Whether both cannot stand in one level; strips may touch end to end.
    fn meets(&self, other: &Self) -> bool {
        let overlap = |a: (f64, f64), b: (f64, f64), gap: f64| a.0 < b.1 + gap && b.0 < a.1 + gap;
        let clash = |labels: &[(f64, f64)], others: &Self| {
            labels.iter().any(|label| {
                overlap(*label, others.strip, 0.8) || others.labels.iter().any(|theirs| overlap(*label, *theirs, 0.9))
            })
        };
        overlap(self.strip, other.strip, -0.05) || clash(&self.labels, other) || clash(&other.labels, self)
    }
}

/// Where the labels of a strip stand: as near the middle of their part as the poles allow. One that finds no room gets a
/// pole of its own.
fn spots(strip: &Strip, poles: &mut Vec<f64>, right: f64) -> Vec<Spot> {
    let mut spots = Vec::new();
    for (from, to, runs) in &strip.labels {
        let half = measure::width(runs, LABEL) / 2.0;
        let middle = (from + to) / 2.0;
        let slack = ((to - from) / 2.0 - half).max(half - 1.0 - (to - from) / 2.0).max(0.0);
        let steps = (slack / 0.5).floor() as u32;
        let wishes = (0..=steps).flat_map(|step| [f64::from(step) * 0.5, f64::from(step) * -0.5]);
        let spot = wishes.map(|shift| middle + shift).find(|x| {
            let (low, high) = (x - half, x + half);
            low >= 0.0 && high <= right && poles.iter().all(|pole| *pole < low - 1.0 || *pole > high + 1.0)
        });
        match spot {
            Some(x) => spots.push(Spot::Over(x)),
            None => {
                // Once it has a pole there, that pole is its own in the next round.
                if !poles.iter().any(|pole| (pole - middle).abs() < 1e-9) {
                    poles.push(middle);
                }
                spots.push(Spot::Away(middle));
            }
        }
    }
    spots
}

/// Draws a strip and the labels that stand over it.
pub fn draw(canvas: &mut Canvas, placed: &Placed) {
    let strip = &placed.strip;
    match strip.look {
        Look::Gradient { top } => gradient(canvas, placed, top),
        Look::Load | Look::Weight => arrows(canvas, placed),
    }
    for (spot, (_, _, runs)) in placed.spots.iter().zip(&strip.labels) {
        if let Spot::Over(x) = spot {
            // The line is straight or bent towards the base, so that it is highest at an end of the label.
            let half = measure::width(runs, LABEL) / 2.0 + 0.6;
            let ends = [x - half, x + half].map(|end| end.clamp(strip.from, strip.to));
            let line = ends.into_iter().filter_map(|end| placed.line(end)).fold(placed.base - 1.0, f64::min);
            let below = measure::heights(runs, LABEL).1;
            canvas.text(at(*x, line - below - 0.4), Anchor::Middle, runs.clone());
        }
    }
}

fn arrows(canvas: &mut Canvas, placed: &Placed) {
    let strip = &placed.strip;
    let length = strip.to - strip.from;
    let count = (length / 5.0).round().max(1.0) as u32;
    let height =
        |x: f64| strip.left + (strip.right - strip.left) * if length > 0.0 { (x - strip.from) / length } else { 0.0 };
    for index in 0..=count {
        let x = strip.from + length * f64::from(index) / f64::from(count);
        let tall = height(x);
        let (line, base) = (at(x, placed.base - tall.abs()), at(x, placed.base));
        if length < 1.6 && index > 0 || tall.abs() < 0.2 {
            continue;
        }
        let head = 1.5_f64.min(tall.abs());
        if tall > 0.0 { canvas.arrow(line, base, HAIR, head) } else { canvas.arrow(base, line, HAIR, head) }
    }
    let top = if strip.look == Look::Weight { dashed(LIGHT, Dash::Short) } else { solid(LIGHT) };
    let mut points = vec![at(strip.from, placed.base - strip.left.abs())];
    if strip.left * strip.right < 0.0 {
        let turn = strip.from + length * strip.left / (strip.left - strip.right);
        points.push(at(turn, placed.base));
    }
    points.push(at(strip.to, placed.base - strip.right.abs()));
    canvas.polyline(points, top);
    canvas.line(at(strip.from, placed.base), at(strip.to, placed.base), solid(HAIR * 0.7));
}

/// A band with pluses along the warm side and minuses along the cold one.
fn gradient(canvas: &mut Canvas, placed: &Placed, top: bool) {
    let strip = &placed.strip;
    let tall = placed.height();
    for y in [placed.base, placed.base - tall] {
        canvas.line(at(strip.from, y), at(strip.to, y), dashed(LIGHT, Dash::Long));
    }
    let length = strip.to - strip.from;
    let count = (length / 8.0).round().max(1.0) as u32;
    for index in 0..count {
        let x = strip.from + length * (f64::from(index) + 0.5) / f64::from(count);
        for (y, warm) in [(placed.base - tall * 0.72, top), (placed.base - tall * 0.28, !top)] {
            canvas.line(at(x - 0.55, y), at(x + 0.55, y), solid(LIGHT));
            if warm {
                canvas.line(at(x, y - 0.55), at(x, y + 0.55), solid(LIGHT));
            }
        }
    }
    for x in [strip.from, strip.to] {
        canvas.line(at(x, placed.base), at(x, placed.base - tall), solid(NORMAL * 0.5));
    }
}
