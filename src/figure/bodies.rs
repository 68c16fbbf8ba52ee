//! The pieces of the member pulled apart, with shear and moment at each cut.

use super::Words;
use super::band::{Depths, Scale};
use super::canvas::{Canvas, HEAVY, LABEL, NORMAL, solid, sub, symbol};
use super::elevation::{LEFT, symbol_size};
use super::measure;
use super::primitive::{Anchor, Drawing, Fill, Run, at};
use super::support::{Symbol, hinge};
use crate::member::Member;

/// Half the length of a shear arrow, mm.
const SHEAR: f64 = 2.6;
/// Radius of a moment's arc, mm.
const ARC: f64 = 3.4;
/// Least length of a piece on paper, mm.
const SHORTEST: f64 = 9.0;
/// Least paper between two faces of a cut, mm; arrows of both faces and labels above them stand in it.
const APART: f64 = 13.0;
/// Height of a row of pieces, mm.
const ROW: f64 = 21.0;

/// One piece between neighbouring cuts, metres.
struct Piece {
    from: f64,
    to: f64,
    /// Name of the cut at its left end; `None` at the member's end.
    left: Option<String>,
    right: Option<String>,
}

/// The free bodies between the cuts of `said` and the member's ends, in rows.
///
/// V and M act at each face in their positive sense: V down on a right-hand face, up on a left-hand face; M sagging. A
/// support at a cut goes with the piece at its right, as in the working: V and M are those just left of it.
pub fn free_bodies(member: &Member, said: &Words, width: f64) -> Drawing {
    let pieces = pieces(member, said);
    let depths = Depths::sketched(member, 2.4);
    let size = symbol_size(member, Scale::fit(member, LEFT, width - LEFT)).min(3.0);
    let apart = pieces.iter().filter_map(|piece| piece.right.as_ref()).map(|name| gap(name)).fold(APART, f64::max);
    let mut canvas = Canvas::default();
    for (row, (line, scale)) in rows(&pieces, width, apart).into_iter().enumerate() {
        let mut x = LEFT + if row > 0 { apart / 2.0 } else { 0.0 };
        for piece in line {
            let end = x + length(piece, scale);
            let body = Body { member, depths: &depths, piece, x, end, y: ROW * row as f64, size };
            body.draw(&mut canvas);
            x = end + apart;
        }
    }
    canvas.finish(width, alt(&pieces))
}

fn pieces(member: &Member, said: &Words) -> Vec<Piece> {
    let end = member.end().x();
    let inside = |cut: &&super::Cut| cut.at > 1e-12 && cut.at < end - 1e-12;
    let mut cuts: Vec<(f64, Option<String>)> =
        said.cuts.iter().filter(inside).map(|cut| (cut.at, Some(cut.name.clone()))).collect();
    cuts.sort_by(|a, b| a.0.total_cmp(&b.0));
    let starts = std::iter::once((0.0, None)).chain(cuts.clone());
    let ends = cuts.into_iter().chain([(end, None)]);
    starts.zip(ends).map(|((from, left), (to, right))| Piece { from, to, left, right }).collect()
}

fn length(piece: &Piece, scale: f64) -> f64 {
    ((piece.to - piece.from) * scale).max(SHORTEST)
}

/// Room that the labels of one cut need between its faces.
fn gap(name: &str) -> f64 {
    let widest = measure::width(&label("M", name), LABEL).max(measure::width(&label("V", name), LABEL));
    2.0 * widest + 5.0
}

fn label(letter: &str, name: &str) -> Vec<Run> {
    vec![symbol(letter), sub(name)]
}

/// Pieces shared out over rows, each row with its scale: all in one row where their shortest lengths allow it, else as
/// many as fit, at a scale that fills each row.
fn rows(pieces: &[Piece], width: f64, apart: f64) -> Vec<(Vec<&Piece>, f64)> {
    let room = width - 2.0 * LEFT;
    let each = SHORTEST + apart;
    // A single row needs no room for half gaps at its ends.
    let single = pieces.len() as f64 * each - apart <= room;
    let most = if single { pieces.len().max(1) } else { (room / each).floor().max(1.0) as usize };
    let count = pieces.len().div_ceil(most).max(1);
    let share = pieces.len().div_ceil(count).max(1);
    pieces
        .chunks(share)
        .enumerate()
        .map(|(row, line)| {
            // A row that begins or ends with a cut needs half a gap there.
            let halves = usize::from(row > 0) + usize::from((row + 1) * share < pieces.len());
            let free = room - apart * ((line.len() - 1) as f64 + halves as f64 / 2.0);
            let line: Vec<&Piece> = line.iter().collect();
            (line.clone(), fill(&line, free))
        })
        .collect()
}

/// The scale at which pieces, none shorter than [`SHORTEST`], fill `free` mm.
fn fill(line: &[&Piece], free: f64) -> f64 {
    let (mut low, mut high) = (0.0, 1e6);
    for _ in 0..80 {
        let middle = (low + high) / 2.0;
        let sum: f64 = line.iter().map(|piece| length(piece, middle)).sum();
        if sum > free { high = middle } else { low = middle }
    }
    low
}

struct Body<'a> {
    member: &'a Member,
    depths: &'a Depths,
    piece: &'a Piece,
    x: f64,
    end: f64,
    y: f64,
    size: f64,
}

impl Body<'_> {
    fn draw(&self, canvas: &mut Canvas) {
        self.outline(canvas);
        for support in &self.member.supports {
            let place = support.at.x();
            if !self.holds(place) {
                continue;
            }
            let node = at(self.place(place) + self.inset(place, 2.2), self.y);
            let half = self.depths.half_at(self.member, place);
            let mut symbol = Symbol::of(self.member, support, node, half, self.size);
            if self.inset(place, 1.0) > 0.0 {
                symbol.side = super::support::Side::Inner;
            }
            symbol.draw(canvas);
        }
        for joint in self.member.hinges.iter().map(|hinge| hinge.at.x()).filter(|place| self.holds(*place)) {
            hinge(canvas, at(self.place(joint) + self.inset(joint, 2.2), self.y), 0.8);
        }
        if let Some(name) = &self.piece.left {
            self.face(canvas, name, self.x, -1.0);
        }
        if let Some(name) = &self.piece.right {
            self.face(canvas, name, self.end, 1.0);
        }
    }

    /// Whether what stands at a place belongs to this piece: at a cut it goes with the piece at its right.
    fn holds(&self, place: f64) -> bool {
        place >= self.piece.from - 1e-12 && (place < self.piece.to - 1e-12 || self.piece.right.is_none())
    }

    /// How far from its face something at a cut is drawn, so that the arrows stand clear.
    fn inset(&self, place: f64, by: f64) -> f64 {
        if self.piece.left.is_some() && place <= self.piece.from + 1e-12 { by } else { 0.0 }
    }

    fn place(&self, metres: f64) -> f64 {
        let part = (metres - self.piece.from) / (self.piece.to - self.piece.from);
        self.x + (self.end - self.x) * part.clamp(0.0, 1.0)
    }

    fn outline(&self, canvas: &mut Canvas) {
        for (index, segment) in self.member.segments.iter().enumerate() {
            let (from, to) = (segment.from.x().max(self.piece.from), segment.to.x().min(self.piece.to));
            if to <= from {
                continue;
            }
            let (left, right) = self.depths.ends(self.member, index);
            let half = |x: f64| {
                let whole = segment.to.x() - segment.from.x();
                left + (right - left) * ((x - segment.from.x()) / whole).clamp(0.0, 1.0)
            };
            let (a, b) = (self.place(from), self.place(to));
            let corners = vec![
                at(a, self.y - half(from)),
                at(b, self.y - half(to)),
                at(b, self.y + half(to)),
                at(a, self.y + half(from)),
            ];
            canvas.polygon(corners, Some(solid(NORMAL)), Fill::None);
        }
    }

    /// V and M at a face; `out` is 1 at a right-hand face, -1 at a left-hand one.
    fn face(&self, canvas: &mut Canvas, name: &str, x: f64, out: f64) {
        let shear = x + out * 1.1;
        let (from, to) = (self.y - out * SHEAR, self.y + out * SHEAR);
        canvas.arrow(at(shear, from), at(shear, to), HEAVY * 0.7, 1.8);
        // Sagging: counter-clockwise on a right-hand face, clockwise on a left-hand one.
        let (start, sweep) = if out > 0.0 { (52.0, -104.0) } else { (128.0, 104.0) };
        canvas.couple(at(x - out * 0.4, self.y), ARC, start, sweep, NORMAL);
        let anchor = if out > 0.0 { Anchor::Start } else { Anchor::End };
        canvas.text(at(x + out * 0.9, self.y - ARC - 1.6), anchor, label("M", name));
        canvas.text(at(x + out * 0.9, self.y + ARC + 2.9), anchor, label("V", name));
    }
}

fn alt(pieces: &[Piece]) -> String {
    let names: Vec<&str> = pieces.iter().filter_map(|piece| piece.right.as_deref()).collect();
    if names.is_empty() {
        return "The member as one free body, without cuts.".to_owned();
    }
    format!(
        "Free bodies of the member, cut at {}. At each cut the moment is sagging on both faces; the shear acts down on the \
         right-hand face of the left piece and up on the left-hand face of the right piece. A support at a cut goes with \
         the piece at its right.",
        names.join(", ")
    )
}
