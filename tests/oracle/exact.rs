//! The direct stiffness method in fractions.

use num_bigint::BigInt;
use num_rational::BigRational;
use num_traits::{One, ToPrimitive, Zero};

use super::deck::{Beam, Load};

pub type Q = BigRational;

pub fn q(top: i64, bottom: i64) -> Q {
    Q::new(BigInt::from(top), BigInt::from(bottom))
}

pub fn float(value: &Q) -> f64 {
    value.to_f64().unwrap()
}

pub struct Station {
    pub v: Q,
    pub slope: [Q; 2],
    pub shear: [Q; 2],
    pub moment: [Q; 2],
}

pub struct Exact {
    pub reactions: Vec<(Q, Q)>,
    pub stations: Vec<Station>,
}

/// Degrees of freedom of a node: deflection, slope to its left, slope to its right (the same but at a hinge).
#[derive(Clone, Copy)]
struct Node {
    v: usize,
    left: usize,
    right: usize,
}

struct System {
    /// Rows by column offset from the diagonal: a band.
    rows: Vec<std::collections::BTreeMap<usize, Q>>,
    load: Vec<Q>,
}

impl System {
    fn add(&mut self, row: usize, column: usize, value: Q) {
        let slot = self.rows[row].entry(column).or_insert_with(Q::zero);
        *slot += value;
    }

    /// Gauss elimination without pivoting beyond the band; `None` where it is singular.
    fn solve(mut self) -> Option<Vec<Q>> {
        let count = self.rows.len();
        for pivot in 0..count {
            let chosen =
                (pivot..count.min(pivot + 8)).find(|row| self.rows[*row].get(&pivot).is_some_and(|x| !x.is_zero()))?;
            self.rows.swap(pivot, chosen);
            self.load.swap(pivot, chosen);
            let head = self.rows[pivot].clone();
            let first = head[&pivot].clone();
            let load = self.load[pivot].clone();
            for row in pivot + 1..count.min(pivot + 9) {
                let Some(entry) = self.rows[row].remove(&pivot).filter(|entry| !entry.is_zero()) else { continue };
                let share = entry / &first;
                for (column, value) in head.range(pivot + 1..) {
                    let slot = self.rows[row].entry(*column).or_insert_with(Q::zero);
                    *slot -= &share * value;
                }
                self.load[row] -= &share * &load;
            }
        }
        let mut x = vec![Q::zero(); count];
        for row in (0..count).rev() {
            let mut sum = self.load[row].clone();
            for (column, value) in self.rows[row].range(row + 1..) {
                sum -= value * &x[*column];
            }
            x[row] = sum / &self.rows[row][&row];
        }
        Some(x)
    }
}

/// Every place that needs a node, in order.
fn places(beam: &Beam) -> Vec<Q> {
    let mut places = vec![Q::zero()];
    places.extend(beam.segments.iter().map(|segment| segment.to.clone()));
    places.extend(beam.supports.iter().map(|support| support.at.clone()));
    places.extend(beam.hinges.iter().cloned());
    places.extend(beam.stations.iter().cloned());
    for load in &beam.loads {
        match load {
            Load::Spread { from, to, .. } | Load::Gradient { from, to, .. } => {
                places.extend([from.clone(), to.clone()])
            }
            Load::Force { at, .. } | Load::Couple { at, .. } => places.push(at.clone()),
        }
    }
    places.sort();
    places.dedup();
    places
}

fn spread(load: &Load, a: &Q, b: &Q) -> Option<(Q, Q)> {
    let Load::Spread { from, to, w0, w1 } = load else { return None };
    if from > a || to < b {
        return None;
    }
    let at = |x: &Q| w0 + (w1 - w0) * (x - from) / (to - from);
    Some((at(a), at(b)))
}

/// Solves; `None` for a mechanism.
pub fn solve(beam: &Beam) -> Option<Exact> {
    let places = places(beam);
    let mut nodes = Vec::new();
    let mut count = 0;
    for place in &places {
        let right = if beam.hinges.contains(place) { count + 2 } else { count + 1 };
        nodes.push(Node { v: count, left: count + 1, right });
        count = right + 1;
    }
    let mut system = System { rows: vec![Default::default(); count], load: vec![Q::zero(); count] };
    for (index, pair) in places.windows(2).enumerate() {
        element(&mut system, beam, pair, nodes[index], nodes[index + 1]);
    }
    point_loads(&mut system, beam, &places, &nodes);
    let free = System { rows: system.rows.clone(), load: system.load.clone() };
    let mut held: Vec<(usize, Q)> = Vec::new();
    for support in &beam.supports {
        let node = nodes[places.binary_search(&support.at).unwrap()];
        for (dof, stiffness, by) in
            [(node.v, &support.vertical, &support.settlement), (node.left, &support.rotation, &support.turn)]
        {
            match stiffness {
                Some(k) if k.is_zero() => held.push((dof, by.clone())),
                Some(k) => {
                    system.add(dof, dof, k.clone());
                    system.load[dof] += k * by;
                }
                None => {}
            }
        }
    }
    for (dof, by) in &held {
        system.rows[*dof].clear();
        system.rows[*dof].insert(*dof, Q::one());
        system.load[*dof] = by.clone();
    }
    let x = system.solve()?;
    let residual = |dof: usize| {
        let sum: Q = free.rows[dof].iter().map(|(column, value)| value * &x[*column]).sum();
        &free.load[dof] - sum
    };
    let reactions = beam.supports.iter().map(|support| {
        let node = nodes[places.binary_search(&support.at).unwrap()];
        let force = if support.vertical.is_some() { residual(node.v) } else { Q::zero() };
        let moment = if support.rotation.is_some() { residual(node.left) } else { Q::zero() };
        (force, moment)
    });
    let reactions: Vec<(Q, Q)> = reactions.collect();
    let stations = beam.stations.iter().map(|at| station(beam, &reactions, &nodes, &places, &x, at)).collect();
    Some(Exact { reactions, stations })
}

fn element(system: &mut System, beam: &Beam, pair: &[Q], near: Node, far: Node) {
    let l = &pair[1] - &pair[0];
    let ei = &beam.segments.iter().find(|segment| segment.to >= pair[1]).unwrap().ei;
    let dofs = [near.v, near.right, far.v, far.left];
    let (l2, l3) = (&l * &l, &l * &l * &l);
    let a = q(12, 1) * ei / &l3;
    let b = q(6, 1) * ei / &l2;
    let (c, d) = (q(4, 1) * ei / &l, q(2, 1) * ei / &l);
    let table = [
        [a.clone(), b.clone(), -a.clone(), b.clone()],
        [b.clone(), c.clone(), -b.clone(), d.clone()],
        [-a.clone(), -b.clone(), a, -b.clone()],
        [b.clone(), d, -b, c],
    ];
    for (i, row) in table.into_iter().enumerate() {
        for (j, value) in row.into_iter().enumerate() {
            system.add(dofs[i], dofs[j], value);
        }
    }
    for load in &beam.loads {
        if let Some((w0, w1)) = spread(load, &pair[0], &pair[1]) {
            system.load[dofs[0]] += &l * (q(7, 20) * &w0 + q(3, 20) * &w1);
            system.load[dofs[2]] += &l * (q(3, 20) * &w0 + q(7, 20) * &w1);
            system.load[dofs[1]] += &l2 * (q(3, 60) * &w0 + q(2, 60) * &w1);
            system.load[dofs[3]] -= &l2 * (q(2, 60) * &w0 + q(3, 60) * &w1);
        }
        if let Load::Gradient { from, to, kappa } = load
            && *from <= pair[0]
            && *to >= pair[1]
        {
            system.load[dofs[1]] -= ei * kappa;
            system.load[dofs[3]] += ei * kappa;
        }
    }
}

fn point_loads(system: &mut System, beam: &Beam, places: &[Q], nodes: &[Node]) {
    for load in &beam.loads {
        match load {
            Load::Force { at, p } => system.load[nodes[places.binary_search(at).unwrap()].v] += p,
            Load::Couple { at, m } => system.load[nodes[places.binary_search(at).unwrap()].left] += m,
            _ => {}
        }
    }
}

/// Shear and moment from everything to the left, by equilibrium.
fn station(beam: &Beam, reactions: &[(Q, Q)], nodes: &[Node], places: &[Q], x: &[Q], at: &Q) -> Station {
    let end = beam.segments.last().unwrap().to.clone();
    let side = |with: bool| {
        let counts = |place: &Q| place < at || (place == at && with);
        let (mut shear, mut moment) = (Q::zero(), Q::zero());
        for (support, (force, couple)) in beam.supports.iter().zip(reactions) {
            if counts(&support.at) {
                shear += force;
                moment += force * (at - &support.at) - couple;
            }
        }
        for load in &beam.loads {
            match load {
                Load::Force { at: place, p } if counts(place) => {
                    shear -= p;
                    moment -= p * (at - place);
                }
                Load::Couple { at: place, m } if counts(place) => moment += m,
                Load::Spread { from, to, w0, w1 } if from < at => {
                    let b = to.clone().min(at.clone());
                    let wb = w0 + (w1 - w0) * (&b - from) / (to - from);
                    let c = &b - from;
                    let (head, tail) = (&c * w0 / q(2, 1), &c * &wb / q(2, 1));
                    shear -= &head + &tail;
                    moment -= head * (at - from - &c / q(3, 1)) + tail * (at - from - q(2, 3) * &c);
                }
                _ => {}
            }
        }
        (shear, moment)
    };
    let node = nodes[places.binary_search(at).unwrap()];
    // At the ends of the member both sides are the inner one.
    let (left, right) = (side(at.is_zero()), side(*at != end));
    Station {
        v: x[node.v].clone(),
        slope: [x[node.left].clone(), x[node.right].clone()],
        shear: [left.0, right.0],
        moment: [left.1, right.1],
    }
}
