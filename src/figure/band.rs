//! The member as a band: scales, depths, outline.

use super::canvas::{Canvas, NORMAL, solid};
use super::primitive::{Fill, at};
use crate::member::{Member, Section};

/// What turns places along the member into x on paper.
#[derive(Clone, Copy, Debug)]
pub struct Scale {
    /// x of the member's left end, mm.
    pub start: f64,
    /// mm on paper for a metre.
    pub per_metre: f64,
}

impl Scale {
    /// The whole member between two places on paper.
    pub fn fit(member: &Member, left: f64, right: f64) -> Self {
        let length = member.end().x();
        let per_metre = if length > 0.0 { (right - left) / length } else { 1.0 };
        Self { start: left, per_metre }
    }

    /// x of a place given in metres.
    pub fn x(self, metres: f64) -> f64 {
        self.start + metres * self.per_metre
    }
}

/// Depths of sections on paper.
#[derive(Clone, Debug)]
pub struct Depths {
    /// Half the drawn depth of each section of the member, mm.
    halves: Vec<f64>,
    /// How depth relates to length: `Some(1.0)` one scale, `Some(n)` n times as large, `None` not to scale.
    pub factor: Option<f64>,
}

impl Depths {
    /// Depths at the scale of the lengths, times a whole factor where that would be too thin or too thick to draw.
    pub fn to_scale(member: &Member, scale: Scale) -> Self {
        let used = used(member);
        let depths: Option<Vec<f64>> = used.iter().map(|section| depth(member, *section)).collect();
        let Some(depths) = depths else { return Self::sketched(member, 3.2) };
        let greatest = depths.iter().fold(0.0_f64, |most, depth| most.max(*depth)) * scale.per_metre;
        const FACTORS: [f64; 12] = [0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 10.0, 20.0, 50.0];
        let factor = if greatest > 12.0 {
            FACTORS.iter().rev().copied().find(|factor| factor * greatest <= 12.0)
        } else {
            FACTORS.iter().copied().find(|factor| *factor >= 1.0 && factor * greatest >= 2.4)
        };
        let Some(factor) = factor else { return Self::sketched(member, 3.2) };
        let half = |section: &Section| {
            let depth = section.depth.as_ref().map_or(0.0, |depth| depth.value.si());
            (depth * scale.per_metre * factor / 2.0).max(0.2)
        };
        Self { halves: member.sections.iter().map(half).collect(), factor: Some(factor) }
    }

    /// Depths that only tell stiffer from softer, `most` mm for the greatest EI.
    pub fn sketched(member: &Member, most: f64) -> Self {
        let used = used(member);
        let rigidity = |section: &Section| section.modulus.value.si() * section.second_moment.value.si();
        let mut order: Vec<f64> =
            used.iter().filter_map(|section| member.sections.get(*section)).map(rigidity).collect();
        order.sort_by(f64::total_cmp);
        order.dedup();
        let half = |section: &Section| {
            let rank = order.iter().filter(|other| **other < rigidity(section)).count() as f64;
            let steps = order.len().saturating_sub(1).max(1) as f64;
            let least = most * if order.len() > 1 { 0.5 } else { 0.75 };
            (least + (most - least) * rank.min(steps) / steps) / 2.0
        };
        Self { halves: member.sections.iter().map(half).collect(), factor: None }
    }

    /// Half the drawn depth at the left and the right end of a segment, mm.
    pub fn ends(&self, member: &Member, segment: usize) -> (f64, f64) {
        let Some(segment) = member.segments.get(segment) else { return (1.0, 1.0) };
        let half = |section: usize| self.halves.get(section).copied().unwrap_or(1.0);
        let right = segment.taper.map_or(segment.section, |taper| taper.to);
        (half(segment.section), half(right))
    }

    /// The greater half depth at a place, mm; `x` in metres.
    pub fn half_at(&self, member: &Member, x: f64) -> f64 {
        let at = |(index, segment): (usize, &crate::member::Segment)| {
            let (from, to) = (segment.from.x(), segment.to.x());
            if x < from - 1e-9 || x > to + 1e-9 || to <= from {
                return None;
            }
            let (left, right) = self.ends(member, index);
            Some(left + (right - left) * ((x - from) / (to - from)).clamp(0.0, 1.0))
        };
        member.segments.iter().enumerate().filter_map(at).fold(0.4, f64::max)
    }

    /// The greatest half depth of all segments, mm.
    pub fn greatest(&self, member: &Member) -> f64 {
        (0..member.segments.len()).map(|index| self.ends(member, index)).fold(0.0, |most, (a, b)| most.max(a).max(b))
    }
}

fn depth(member: &Member, section: usize) -> Option<f64> {
    Some(member.sections.get(section)?.depth.as_ref()?.value.si())
}

/// Indices of the sections that the segments use, in the order met.
pub fn used(member: &Member) -> Vec<usize> {
    let mut used = Vec::new();
    for segment in &member.segments {
        for section in std::iter::once(segment.section).chain(segment.taper.map(|taper| taper.to)) {
            if !used.contains(&section) {
                used.push(section);
            }
        }
    }
    used
}

/// Sections in use, the stiffest first.
fn by_rigidity(member: &Member) -> Vec<usize> {
    let rigidity = |index: usize| {
        let section = member.sections.get(index);
        section.map_or(0.0, |section| section.modulus.value.si() * section.second_moment.value.si())
    };
    let mut order = used(member);
    order.sort_by(|a, b| rigidity(*b).total_cmp(&rigidity(*a)));
    order
}

/// Draws the member's outline about the axis y = 0. Neighbouring segments that look alike are drawn as one; hatching, the
/// stiffest section first, tells sections apart.
pub fn draw(canvas: &mut Canvas, member: &Member, scale: Scale, depths: &Depths, hatched: bool) {
    let used = by_rigidity(member);
    let mut index = 0;
    while let Some(segment) = member.segments.get(index) {
        let mut last = index;
        if segment.taper.is_none() {
            while member
                .segments
                .get(last + 1)
                .is_some_and(|next| next.taper.is_none() && next.section == segment.section)
            {
                last += 1;
            }
        }
        let (left, right) = (depths.ends(member, index).0, depths.ends(member, last).1);
        let end = member.segments.get(last).map_or(segment.to, |segment| segment.to);
        let (from, to) = (scale.x(segment.from.x()), scale.x(end.x()));
        let number = used.iter().position(|section| *section == segment.section);
        let fill = match (hatched && used.len() > 1 && segment.taper.is_none(), number) {
            (true, Some(0)) => Fill::Hatch { angle: 135.0, spacing: 0.9 },
            (true, Some(2)) => Fill::Hatch { angle: 45.0, spacing: 0.9 },
            (true, Some(3)) => Fill::Hatch { angle: 135.0, spacing: 1.8 },
            (true, Some(4)) => Fill::Hatch { angle: 45.0, spacing: 1.8 },
            _ => Fill::None,
        };
        let corners = vec![at(from, -left), at(to, -right), at(to, right), at(from, left)];
        canvas.polygon(corners, Some(solid(NORMAL)), fill);
        index = last + 1;
    }
}
