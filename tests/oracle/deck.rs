//! Random members, as decks and as exact figures.

use std::fmt::Write;

use num_rational::BigRational;
use num_traits::{ToPrimitive, Zero};

use super::exact::{Q, q};

pub struct Segment {
    pub to: Q,
    pub ei: Q,
    pub text: String,
}

pub struct Support {
    pub name: String,
    pub at: Q,
    /// `None` free, zero rigid, else the stiffness.
    pub vertical: Option<Q>,
    pub rotation: Option<Q>,
    pub settlement: Q,
    pub turn: Q,
    kind: String,
}

pub enum Load {
    Spread { from: Q, to: Q, w0: Q, w1: Q },
    Force { at: Q, p: Q },
    Couple { at: Q, m: Q },
    Gradient { from: Q, to: Q, kappa: Q },
}

pub struct Beam {
    pub segments: Vec<Segment>,
    pub supports: Vec<Support>,
    pub hinges: Vec<Q>,
    pub loads: Vec<Load>,
    pub stations: Vec<Q>,
    load_text: String,
    hinge_text: String,
}

/// A small generator of its own: the seed is proptest's.
struct Dice(u64);

impl Dice {
    fn next(&mut self, sides: u64) -> u64 {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 11) % sides
    }
}

fn metres(milli: i64) -> Q {
    q(milli, 1_000_000)
}

/// Micrometres as metres, exactly.
fn text(micro: i64) -> String {
    format!("{}.{:06} m", micro / 1_000_000, micro % 1_000_000)
}

impl Beam {
    pub fn random(seed: u64, spans: usize) -> Self {
        let mut dice = Dice(seed | 1);
        for _ in 0..8 {
            dice.next(2);
        }
        let mut places: Vec<i64> = vec![0];
        let mut segments = Vec::new();
        let mut ends: Vec<i64> = Vec::new();
        let mut x = 0_i64;
        let mut whole = 0_i64;
        for _ in 0..spans {
            let pieces = 1 + dice.next(2);
            for piece in 0..pieces {
                // Some are a millionth of a span long, but no span is: two supports do not stand in one place.
                let length = if piece > 0 && dice.next(3) == 0 {
                    2 + dice.next(9) as i64
                } else {
                    400_000 + 1000 * dice.next(6000) as i64
                };
                // The general rule is a ratio to 9e6; a tenth of the members goes to 9e9.
                let power = dice.next(if seed.is_multiple_of(10) { 10 } else { 7 }) as i32;
                let digit = 1 + dice.next(9) as i64;
                x += length;
                // E is 200 GPa; I from 1e-9 to 9 times 1 m^4.
                let i = q(digit, 1) / q(10_i64.pow(power as u32), 1);
                segments.push(Segment {
                    to: metres(x),
                    ei: q(200_000_000_000, 1) * i,
                    text: format!("[section.s{0}]\nE = \"200 GPa\"\nI = \"{digit}e-{power} m^4\"\ndepth = \"500 mm\"\nalpha = \"1e-5 1/K\"\n[[segment]]\nlength = \"{1}\"\nsection = \"s{0}\"\n", segments.len(), text(length)),
                });
                ends.push(x);
            }
            places.push(x);
            whole = x;
        }
        let mut supports = Vec::new();
        let mut taken: Vec<i64> = Vec::new();
        for (index, place) in places.iter().enumerate() {
            let inner = index > 0 && index < spans;
            if dice.next(8) == 0 {
                continue;
            }
            let rigid = || Some(Q::zero());
            let (kind, vertical, rotation) = match dice.next(if inner { 10 } else { 7 }) {
                0 => ("kind = \"fixed\"".to_owned(), rigid(), rigid()),
                1 => ("kind = \"pinned\"".to_owned(), rigid(), None),
                2 => ("kind = \"guided\"".to_owned(), None, rigid()),
                3 => {
                    let k = 1 + dice.next(90) as i64;
                    let c = 1 + dice.next(90) as i64;
                    let kind = format!("kind = \"elastic\"\nvertical = \"{k} kN/mm\"\nrotation = \"{c} MN m/rad\"");
                    (kind, Some(q(k * 1_000_000, 1)), Some(q(c * 1_000_000, 1)))
                }
                4 => {
                    let k = 1 + dice.next(90) as i64;
                    (
                        format!("kind = \"elastic\"\nvertical = \"{k} kN/mm\"\nrotation = \"free\""),
                        Some(q(k * 1_000_000, 1)),
                        None,
                    )
                }
                _ => ("kind = \"roller\"".to_owned(), rigid(), None),
            };
            taken.push(*place);
            let settles = vertical.is_some() && dice.next(6) == 0;
            let turns = rotation.is_some() && dice.next(6) == 0;
            supports.push(Support {
                name: format!("P{index}"),
                at: metres(*place),
                vertical,
                rotation,
                settlement: if settles { q(1 + dice.next(9) as i64, 1000) } else { Q::zero() },
                turn: if turns { q(1 + dice.next(9) as i64, 1000) } else { Q::zero() },
                kind,
            });
        }
        let mut beam = Self {
            segments,
            supports,
            hinges: Vec::new(),
            loads: Vec::new(),
            stations: Vec::new(),
            load_text: String::new(),
            hinge_text: String::new(),
        };
        let inside = |dice: &mut Dice| 1 + dice.next(whole as u64 - 1) as i64;
        let mut hinges: Vec<i64> = Vec::new();
        for _ in 0..dice.next(2 + spans as u64 / 3) {
            let at = inside(&mut dice);
            if !taken.contains(&at) && !hinges.contains(&at) {
                hinges.push(at);
                let _ = writeln!(beam.hinge_text, "[hinge.H{}]\nat = \"{}\"", hinges.len(), text(at));
                beam.hinges.push(metres(at));
            }
        }
        for count in 0..1 + dice.next(4) + spans as u64 / 2 {
            beam.load(&mut dice, whole, &hinges, count == 0);
        }
        for support in &beam.supports {
            if !support.settlement.is_zero() {
                let milli = (&support.settlement * q(1000, 1)).to_integer();
                let _ = writeln!(
                    beam.load_text,
                    "{{ kind = \"settlement\", support = \"{}\", by = \"{milli} mm\" }},",
                    support.name
                );
            }
            if !support.turn.is_zero() {
                let milli = (&support.turn * q(1000, 1)).to_integer();
                let _ = writeln!(
                    beam.load_text,
                    "{{ kind = \"rotation\", support = \"{}\", by = \"{milli} mrad\" }},",
                    support.name
                );
            }
        }
        let mut stations: Vec<i64> =
            ends.iter().step_by(1 + spans / 8).copied().chain([0, whole, inside(&mut dice)]).collect();
        // A hinge has two slopes; it is reported on both sides like any jump.
        stations.extend(hinges.iter().take(2));
        stations.sort_unstable();
        stations.dedup();
        beam.stations = stations.into_iter().map(metres).collect();
        beam
    }

    fn load(&mut self, dice: &mut Dice, whole: i64, hinges: &[i64], first: bool) {
        let (a, b) = (dice.next(whole as u64) as i64, dice.next(whole as u64) as i64);
        let (from, to) = (a.min(b), a.max(b) + 1);
        let size = 1 + dice.next(40) as i64;
        let range = format!("from = \"{}\", to = \"{}\"", text(from), text(to));
        let line = match if first { 0 } else { dice.next(6) } {
            0 => {
                self.loads.push(Load::Spread {
                    from: q(0, 1),
                    to: metres(whole),
                    w0: q(size * 1000, 1),
                    w1: q(size * 1000, 1),
                });
                format!("{{ kind = \"uniform\", w = \"{size} kN/m\" }},")
            }
            1 => {
                self.loads.push(Load::Spread {
                    from: metres(from),
                    to: metres(to),
                    w0: q(size * 1000, 1),
                    w1: q(size * 1000, 1),
                });
                format!("{{ kind = \"area\", q = \"{size} kPa\", width = \"1 m\", {range} }},")
            }
            2 => {
                let other = dice.next(30) as i64 - 10;
                self.loads.push(Load::Spread {
                    from: metres(from),
                    to: metres(to),
                    w0: q(size * 1000, 1),
                    w1: q(other * 1000, 1),
                });
                format!("{{ kind = \"linear\", w = [\"{size} kN/m\", \"{other} kN/m\"], {range} }},")
            }
            3 => {
                self.loads.push(Load::Force { at: metres(to), p: q(size * 1000, 1) });
                format!("{{ kind = \"point\", p = \"{size} kN\", at = \"{}\" }},", text(to))
            }
            4 if !hinges.contains(&to) => {
                self.loads.push(Load::Couple { at: metres(to), m: q(size * 1000, 1) });
                format!("{{ kind = \"couple\", m = \"{size} kN m\", at = \"{}\" }},", text(to))
            }
            _ => {
                // alpha dT / depth = 1e-5 * size / 0.5.
                self.loads.push(Load::Gradient { from: metres(from), to: metres(to), kappa: q(size * 2, 100_000) });
                format!("{{ kind = \"gradient\", difference = \"{size} K\", {range} }},")
            }
        };
        let _ = writeln!(self.load_text, "{line}");
    }

    pub fn text(&self) -> String {
        let mut text = "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n".to_owned();
        text.extend(self.segments.iter().map(|segment| segment.text.as_str()));
        let list: Vec<String> = self.stations.iter().map(|at| format!("\"{}\"", plain(at))).collect();
        let _ = writeln!(text, "[member]\nstations = [{}]", list.join(", "));
        for support in &self.supports {
            let _ = writeln!(text, "[support.{}]\nat = \"{}\"\n{}", support.name, plain(&support.at), support.kind);
        }
        if self.supports.is_empty() {
            text.push_str("[support.X]\nat = \"0 m\"\nkind = \"roller\"\n");
        }
        text.push_str(&self.hinge_text);
        let _ = write!(text, "[case.L]\nnature = \"other\"\nloads = [\n{}]\n", self.load_text);
        text + "[combination.C]\npurpose = \"serviceability\"\nfactors = { L = 1.0 }\n"
    }

    /// The size of the loads, N.
    pub fn load_size(&self) -> f64 {
        let each = self.loads.iter().map(|load| match load {
            Load::Spread { from, to, w0, w1 } => float(&((to - from) * w0)).abs() + float(&((to - from) * w1)).abs(),
            Load::Force { p, .. } => float(p).abs(),
            _ => 0.0,
        });
        each.fold(1.0, f64::max)
    }
}

fn float(value: &BigRational) -> f64 {
    value.to_f64().unwrap()
}

fn plain(at: &Q) -> String {
    text((at * q(1_000_000, 1)).to_integer().to_i64().unwrap())
}
