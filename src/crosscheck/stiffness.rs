//! A stiffness solution with unknowns at supports, hinges and ends only.

use super::band::Band;
use super::element::{Element, Loaded};
use super::twofold::Twofold;
use crate::member::{Hold, LoadKind, Member, Place};

/// What the second route finds for one case.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Nodes {
    /// By support: upward force and counter-clockwise moment; zero where not held.
    pub reactions: Vec<(f64, f64)>,
    /// By node, from left to right: place and deflection.
    pub deflections: Vec<(Place, f64)>,
}

/// Numbers of the unknowns of a node: deflection, turn left, turn right. `None` where held rigidly.
#[derive(Clone, Copy, Debug)]
struct Node {
    at: Place,
    support: Option<usize>,
    v: Option<usize>,
    left: Option<usize>,
    right: Option<usize>,
}

struct Grid {
    nodes: Vec<Node>,
    elements: Vec<Element>,
    size: usize,
}

impl Grid {
    fn new(member: &Member) -> Self {
        let mut places: Vec<Place> = [Place::ZERO, member.end()]
            .into_iter()
            .chain(member.supports.iter().map(|support| support.at))
            .chain(member.hinges.iter().map(|hinge| hinge.at))
            .collect();
        places.sort_unstable();
        places.dedup();
        let mut size = 0;
        let mut next = || {
            size += 1;
            Some(size - 1)
        };
        let mut nodes = Vec::new();
        for at in &places {
            let support = member.supports.binary_search_by(|support| support.at.cmp(at)).ok();
            let held = support.and_then(|index| member.supports.get(index));
            let rigid_v = held.is_some_and(|support| matches!(support.vertical, Hold::Rigid));
            let rigid_turn = held.is_some_and(|support| matches!(support.rotation, Hold::Rigid));
            let hinged = member.hinges.iter().any(|hinge| hinge.at == *at);
            let v = if rigid_v { None } else { next() };
            let left = if rigid_turn { None } else { next() };
            let right = if hinged { next() } else { left };
            nodes.push(Node { at: *at, support, v, left, right });
        }
        let elements = places.iter().zip(places.iter().skip(1)).map(|(a, b)| Element::new(member, *a, *b)).collect();
        Self { nodes, elements, size }
    }

    fn ends(&self) -> impl Iterator<Item = (&Element, &Node, &Node)> {
        self.elements.iter().zip(self.nodes.iter().zip(self.nodes.iter().skip(1))).map(|(e, (i, j))| (e, i, j))
    }
}

/// The 4 x 4 stiffness of an element: rows and columns v_i, psi_i, v_j, psi_j.
fn matrix(element: &Element) -> [[Twofold; 4]; 4] {
    let (l, one, zero) = (Twofold::from(element.length), Twofold::from(1.0), Twofold::ZERO);
    // Movement of the tip relative to the left node: B u with B = [-T, 1].
    let b = [[-one, -l, one, zero], [zero, -one, zero, one]];
    let mut k = [[zero; 4]; 4];
    for (r, row) in k.iter_mut().enumerate() {
        for (c, slot) in row.iter_mut().enumerate() {
            for (bi, si) in b.iter().zip(&element.stiffness) {
                for (bj, s) in b.iter().zip(si) {
                    *slot += pick(bi, r) * *s * pick(bj, c);
                }
            }
        }
    }
    k
}

fn pick(row: &[Twofold; 4], index: usize) -> Twofold {
    row.get(index).copied().unwrap_or_default()
}

/// Forces of the nodes on an element, down and clockwise: left force and couple, right force and couple.
fn end_forces(element: &Element, loaded: &Loaded, u: [Twofold; 4]) -> [Twofold; 4] {
    let (length, total, moment) =
        (Twofold::from(element.length), Twofold::from(loaded.force), Twofold::from(loaded.moment));
    let [vi, pi, vj, pj] = u;
    let [tip_v, tip_psi] = loaded.tip;
    let gap = [vj - vi - pi * length - tip_v, pj - pi - tip_psi];
    let [force, couple] = element.stiffness.map(|row| row.iter().zip(&gap).map(|(k, g)| *k * *g).sum::<Twofold>());
    [-force - total, -couple - force * length - moment, force, couple]
}

/// Solves every case.
pub fn solve(member: &Member) -> Vec<Nodes> {
    let grid = Grid::new(member);
    let mut band = Band::new(grid.size);
    for (element, i, j) in grid.ends() {
        let numbers = [i.v, i.right, j.v, j.left];
        for (row, r) in matrix(element).iter().zip(numbers) {
            for (value, c) in row.iter().zip(numbers) {
                if let (Some(r), Some(c)) = (r, c) {
                    band.add(r, c, *value);
                }
            }
        }
    }
    for node in &grid.nodes {
        let Some(support) = node.support.and_then(|index| member.supports.get(index)) else { continue };
        if let (Hold::Spring(k), Some(v)) = (&support.vertical, node.v) {
            band.add(v, v, k.value.si().into());
        }
        if let (Hold::Spring(k), Some(turn)) = (&support.rotation, node.left) {
            band.add(turn, turn, k.value.si().into());
        }
    }
    band.factor();
    (0..member.cases.len()).map(|case| solve_case(member, &grid, &band, case)).collect()
}

fn imposed(member: &Member, case: usize) -> Vec<(f64, f64)> {
    let mut list = vec![(0.0, 0.0); member.supports.len()];
    for load in member.cases.get(case).map_or(&[][..], |case| &case.loads) {
        match &load.kind {
            LoadKind::Settlement { support, by } => {
                if let Some(slot) = list.get_mut(*support) {
                    slot.0 += by.value.si();
                }
            }
            LoadKind::Rotation { support, by } => {
                if let Some(slot) = list.get_mut(*support) {
                    slot.1 += by.value.si();
                }
            }
            _ => {}
        }
    }
    list
}

fn solve_case(member: &Member, grid: &Grid, band: &Band, case: usize) -> Nodes {
    let moved = imposed(member, case);
    let at = |node: &Node| node.support.and_then(|index| moved.get(index)).copied().unwrap_or_default();
    let loads: Vec<Loaded> = grid.elements.iter().map(|element| element.loaded(member, case)).collect();
    let mut b = vec![Twofold::ZERO; grid.size];
    let mut push = |number: Option<usize>, value: Twofold| {
        if let Some(slot) = number.and_then(|number| b.get_mut(number)) {
            *slot += value;
        }
    };
    // Forces that hold every unknown still, with their opposite applied.
    let still = |node: &Node, right: bool| {
        let (v, psi) = at(node);
        let turn = if right { node.right } else { node.left };
        (if node.v.is_none() { v } else { 0.0 }, if turn.is_none() { psi } else { 0.0 })
    };
    for ((element, i, j), loaded) in grid.ends().zip(&loads) {
        let ((vi, pi), (vj, pj)) = (still(i, true), still(j, false));
        let forces = end_forces(element, loaded, [vi, pi, vj, pj].map(Twofold::from));
        for (number, force) in [i.v, i.right, j.v, j.left].into_iter().zip(forces) {
            push(number, -force);
        }
    }
    for node in &grid.nodes {
        let Some(support) = node.support.and_then(|index| member.supports.get(index)) else { continue };
        let (v, psi) = at(node);
        if let Hold::Spring(k) = &support.vertical {
            push(node.v, Twofold::from(k.value.si()) * Twofold::from(v));
        }
        if let Hold::Spring(k) = &support.rotation {
            push(node.left, Twofold::from(k.value.si()) * Twofold::from(psi));
        }
    }
    let x = band.solve(b);
    let value = |number: Option<usize>, held: f64| {
        number.map_or(Twofold::from(held), |n| x.get(n).copied().unwrap_or_default())
    };
    let mut sums = vec![(Twofold::ZERO, Twofold::ZERO); grid.nodes.len()];
    for (index, ((element, i, j), loaded)) in grid.ends().zip(&loads).enumerate() {
        let u = [value(i.v, at(i).0), value(i.right, at(i).1), value(j.v, at(j).0), value(j.left, at(j).1)];
        let [fi, ci, fj, cj] = end_forces(element, loaded, u);
        for (place, force, couple) in [(index, fi, ci), (index + 1, fj, cj)] {
            if let Some(sum) = sums.get_mut(place) {
                sum.0 += force;
                sum.1 += couple;
            }
        }
    }
    let mut found = Nodes { reactions: vec![(0.0, 0.0); member.supports.len()], deflections: Vec::new() };
    for (node, (force, couple)) in grid.nodes.iter().zip(sums) {
        found.deflections.push((node.at, value(node.v, at(node).0).single()));
        let Some(index) = node.support else { continue };
        if let (Some(support), Some(slot)) = (member.supports.get(index), found.reactions.get_mut(index)) {
            slot.0 = if support.holds_deflection() { -force.single() } else { 0.0 };
            slot.1 = if support.holds_rotation() { -couple.single() } else { 0.0 };
        }
    }
    found
}
