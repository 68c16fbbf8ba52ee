//! Symbols of supports and hinges.

use super::canvas::{Canvas, HAIR, NORMAL, dashed, solid};
use super::primitive::{Dash, Fill, Point, Stroke, at};
use crate::member::{Hold, Member, Support, SupportKind};

/// How one movement is held, without its stiffness.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Held {
    /// Not at all.
    Free,
    /// Rigidly.
    Rigid,
    /// By a spring.
    Spring,
}

impl<K> From<&Hold<K>> for Held {
    fn from(hold: &Hold<K>) -> Self {
        match hold {
            Hold::Free => Self::Free,
            Hold::Rigid => Self::Rigid,
            Hold::Spring(_) => Self::Spring,
        }
    }
}

/// On which side of a support the member lies.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// The support stands at the member's left end.
    Start,
    /// Somewhere between.
    Inner,
    /// At its right end.
    End,
}

/// What a symbol shows.
#[derive(Clone, Copy, Debug)]
pub struct Symbol {
    /// Where the member's axis meets it, mm.
    pub node: Point,
    /// Half the member's depth there, mm.
    pub half: f64,
    /// Height of a triangle, mm; everything else follows.
    pub size: f64,
    /// How deflection is held.
    pub vertical: Held,
    /// How the turn is held.
    pub rotation: Held,
    /// Where the member lies.
    pub side: Side,
    /// A roller's symbol rather than a pin's.
    pub roller: bool,
}

impl Symbol {
    /// The symbol of a support of the member.
    pub fn of(member: &Member, support: &Support, node: Point, half: f64, size: f64) -> Self {
        let side = if support.at == crate::member::Place::ZERO {
            Side::Start
        } else if support.at == member.end() {
            Side::End
        } else {
            Side::Inner
        };
        let (vertical, rotation) = (Held::from(&support.vertical), Held::from(&support.rotation));
        Self { node, half, size, vertical, rotation, side, roller: support.kind == SupportKind::Roller }
    }

    /// Draws it; returns its lowest y.
    pub fn draw(self, canvas: &mut Canvas) -> f64 {
        match (self.vertical, self.rotation) {
            (Held::Rigid, Held::Rigid) => self.clamp(canvas),
            (Held::Rigid, Held::Free) => self.triangle(canvas),
            (Held::Rigid, Held::Spring) => {
                let low = self.triangle(canvas);
                self.coil(canvas, low)
            }
            (Held::Spring, Held::Free) => self.spring(canvas, self.foot()),
            (Held::Spring, Held::Rigid) => {
                let low = self.guide(canvas);
                self.spring(canvas, if self.side == Side::Inner { low } else { self.foot() }).max(low)
            }
            (Held::Spring, Held::Spring) => {
                let low = self.spring(canvas, self.foot());
                self.coil(canvas, low)
            }
            (Held::Free, Held::Rigid) => self.guide(canvas),
            (Held::Free, Held::Spring) => {
                let low = self.foot() + self.size;
                let low = self.coil(canvas, low);
                self.rollers(canvas, low)
            }
            (Held::Free, Held::Free) => {
                let foot = self.foot();
                canvas.line(at(self.node.x, foot), at(self.node.x, foot + self.size), dashed(HAIR, Dash::Short));
                foot + self.size
            }
        }
    }

    fn foot(self) -> f64 {
        self.node.y + self.half
    }

    /// Hatched ground below, from left to right.
    fn ground(self, canvas: &mut Canvas, y: f64, left: f64, right: f64) -> f64 {
        canvas.ground(at(self.node.x + right, y), at(self.node.x + left, y));
        y + 0.9
    }

    fn triangle(self, canvas: &mut Canvas) -> f64 {
        let (x, top, half) = (self.node.x, self.foot(), self.size * 0.55);
        let base = top + self.size;
        canvas.polygon(vec![at(x, top), at(x + half, base), at(x - half, base)], Some(solid(NORMAL)), Fill::White);
        let ground = if self.roller { base + 0.2 * self.size } else { base };
        self.ground(canvas, ground, -half - 0.5, half + 0.5)
    }

    /// A wall at an end; a footing in between.
    fn clamp(self, canvas: &mut Canvas) -> f64 {
        let (x, y) = (self.node.x, self.node.y);
        let reach = self.half + self.size * 0.65;
        match self.side {
            Side::Start => canvas.ground(at(x, y + reach), at(x, y - reach)),
            Side::End => canvas.ground(at(x, y - reach), at(x, y + reach)),
            Side::Inner => {
                let (half, base) = (self.size * 0.4, self.foot() + self.size * 0.8);
                for place in [x - half, x + half] {
                    canvas.line(at(place, self.foot()), at(place, base), solid(NORMAL));
                }
                return self.ground(canvas, base, -half - 0.9, half + 0.9);
            }
        }
        y + reach + 0.4
    }

    /// A plate that slides along a wall.
    fn guide(self, canvas: &mut Canvas) -> f64 {
        let (x, y) = (self.node.x, self.node.y);
        let (reach, radius) = (self.half + self.size * 0.5, self.size * 0.15);
        let away = match self.side {
            Side::Start => -1.0,
            Side::End => 1.0,
            Side::Inner => return self.rollers(canvas, self.foot()),
        };
        canvas.line(at(x, y - reach), at(x, y + reach), solid(NORMAL * 1.5));
        for place in [y - reach * 0.55, y + reach * 0.55] {
            canvas.circle(at(x + away * (radius + NORMAL), place), radius, solid(HAIR), Fill::White);
        }
        let wall = x + away * (2.0 * radius + 1.5 * NORMAL);
        let (low, high) = (at(wall, y + reach + 0.5), at(wall, y - reach - 0.5));
        if away < 0.0 {
            canvas.ground(low, high)
        } else {
            canvas.ground(high, low)
        }
        y + reach + 0.9
    }

    /// A block below the member that slides up and down along a wall at its right.
    fn rollers(self, canvas: &mut Canvas, top: f64) -> f64 {
        let (x, half, base) = (self.node.x, self.size * 0.22, top + self.size * 0.95);
        let radius = self.size * 0.13;
        let corners = vec![at(x - half, top), at(x + half, top), at(x + half, base), at(x - half, base)];
        canvas.polygon(corners, Some(solid(NORMAL)), Fill::White);
        for part in [0.27, 0.73] {
            let place = top + (base - top) * part;
            canvas.circle(at(x + half + radius + NORMAL * 0.7, place), radius, solid(HAIR), Fill::White);
        }
        let wall = x + half + 2.0 * radius + NORMAL * 1.2;
        canvas.ground(at(wall, top + 0.1), at(wall, base + 0.2));
        base + 0.2
    }

    /// A zigzag down to the ground.
    fn spring(self, canvas: &mut Canvas, top: f64) -> f64 {
        let (x, half) = (self.node.x, self.size * 0.28);
        let (lead, pitch) = (self.size * 0.2, self.size * 0.16);
        let mut points = vec![at(x, top), at(x, top + lead)];
        for index in 0..6 {
            let sign = if index % 2 == 0 { 1.0 } else { -1.0 };
            points.push(at(x + sign * half, top + lead + pitch * (f64::from(index) + 0.5)));
        }
        let end = top + lead + 6.0 * pitch;
        points.push(at(x, end));
        points.push(at(x, end + lead));
        canvas.polyline(points, solid(NORMAL));
        self.ground(canvas, end + lead, -self.size * 0.5, self.size * 0.5)
    }

    /// A spiral about the node, its outer end held by the ground at `base`.
    fn coil(self, canvas: &mut Canvas, base: f64) -> f64 {
        let outer = (self.size * 0.55).max(self.half + self.size * 0.2).min(3.2);
        let turns = 1.75;
        let spiral = (0..=42).map(|index| {
            let part = f64::from(index) / 42.0;
            let radius = outer * (0.2 + 0.8 * part);
            // It ends at the left of the node, heading down.
            super::primitive::on_circle(self.node, radius, 180.0 + (1.0 - part) * turns * 360.0)
        });
        canvas.polyline(spiral.collect(), solid(NORMAL * 0.8));
        let ground = base - 0.9;
        let x = self.node.x - outer;
        canvas.line(at(x, self.node.y), at(x, ground), solid(NORMAL * 0.8));
        canvas.ground(at(x + 0.8, ground), at(x - 1.0, ground));
        base
    }
}

/// A hinge: a small circle on the axis.
pub fn hinge(canvas: &mut Canvas, node: Point, half: f64) {
    canvas.circle(node, half.clamp(0.65, 1.0), solid(NORMAL), Fill::White);
}

/// The outline of a released support, dashed.
pub fn ghost(canvas: &mut Canvas, node: Point, half: f64, size: f64) -> f64 {
    let stroke = Stroke { weight: HAIR * 1.2, dash: Dash::Short };
    let (x, top, side) = (node.x, node.y + half, size * 0.55);
    let base = top + size;
    let corners = [at(x, top), at(x + side, base), at(x - side, base), at(x, top)];
    canvas.polyline(corners.to_vec(), stroke);
    canvas.line(at(x - side - 0.5, base), at(x + side + 0.5, base), stroke);
    base + 0.2
}
