//! Labels in layers beside a drawing: centred where they fit, else on poles in rows, else standing upright.

use super::canvas::{Canvas, HAIR, LABEL, ROW, solid};
use super::measure;
use super::primitive::{Anchor, Run, at};

/// A label that belongs to a place.
#[derive(Clone, Debug)]
pub struct Note {
    /// The place, mm.
    pub x: f64,
    /// Where its leader begins, where it needs one; `None`: at the edge of the layer.
    pub start: Option<f64>,
    /// What it says.
    pub runs: Vec<Run>,
}

impl Note {
    /// A label whose leader begins at the edge of its layer.
    pub const fn new(x: f64, runs: Vec<Run>) -> Self {
        Self { x, start: None, runs }
    }

    /// Width of the label, mm.
    pub fn width(&self) -> f64 {
        measure::width(&self.runs, LABEL)
    }
}

/// A layer of labels: it begins at `edge` and grows away from the drawing.
#[derive(Clone, Copy, Debug)]
pub struct Layer {
    /// Where it begins, mm.
    pub edge: f64,
    /// Whether it grows upwards.
    pub up: bool,
    /// How far labels may reach to the left, mm.
    pub left: f64,
    /// And to the right.
    pub right: f64,
    /// Whether a shaft stands below the edge at every label, beside which the first row may stand.
    pub beside: bool,
}

/// Clear paper between labels of one row, mm.
const GAP: f64 = 1.8;
/// Clear paper between a pole and its label, mm.
const BESIDE: f64 = 0.9;
/// Least distance of poles, mm.
const POLES: f64 = 1.3;
/// Least distance of upright labels, mm.
const UPRIGHT: f64 = 3.0;
/// Distance of an upright label and a pole beside it, mm.
const BETWEEN: f64 = 1.8;
/// Height of the zone in which poles fan out, mm.
const FAN: f64 = 2.2;
/// How much higher rows may grow than upright labels, which are harder to read.
const PATIENCE: f64 = 1.2;

/// Places all notes; returns the far edge of the layer. Nothing is left out, whatever the number of notes.
pub fn annotate(canvas: &mut Canvas, notes: &[Note], layer: Layer) -> f64 {
    if notes.is_empty() {
        return layer.edge;
    }
    let mut notes = notes.to_vec();
    notes.sort_by(|a, b| a.x.total_cmp(&b.x));
    if !layer.beside
        && let Some(centres) = centred(&notes, layer)
    {
        return row(canvas, &notes, &centres, layer);
    }
    if let Some(flags) = mixed(&notes, layer) {
        return raise(canvas, &notes, &flags, layer);
    }
    let flags = flags(&notes, layer);
    let rows = flags.iter().map(|flag| flag.row + 1).max().unwrap_or(1);
    let longest = notes.iter().map(Note::width).fold(0.0, f64::max);
    let places = if rows as f64 * ROW > PATIENCE * longest { upright(&notes, layer) } else { None };
    match places {
        Some((places, tiers)) => stand(canvas, &notes, (&places, tiers), layer),
        None => raise(canvas, &notes, &flags, layer),
    }
}

/// Whether all notes fit in one centred row.
pub fn one_row(notes: &[Note], layer: Layer) -> bool {
    centred(notes, layer).is_some()
}

/// The centres of all notes where they fit in one row without being moved more than a third of their width.
fn centred(notes: &[Note], layer: Layer) -> Option<Vec<f64>> {
    let widths: Vec<f64> = notes.iter().map(Note::width).collect();
    let next = widths.iter().skip(1);
    let apart: Vec<f64> = widths.iter().zip(next).map(|(a, b)| (a + b) / 2.0 + GAP).collect();
    let wish: Vec<f64> = notes.iter().map(|note| note.x).collect();
    let low: Vec<f64> = widths.iter().map(|w| layer.left + w / 2.0).collect();
    let high: Vec<f64> = widths.iter().map(|w| layer.right - w / 2.0).collect();
    let centres = spread(&wish, &apart, &low, &high)?;
    let near = centres.iter().zip(&wish).zip(&widths).all(|((c, x), w)| (c - x).abs() <= (w * 0.35).max(0.2));
    near.then_some(centres)
}

fn row(canvas: &mut Canvas, notes: &[Note], centres: &[f64], layer: Layer) -> f64 {
    let (above, below) = tallest(notes);
    let base = if layer.up { layer.edge - below - 0.4 } else { layer.edge + above + 0.4 };
    for (note, centre) in notes.iter().zip(centres) {
        canvas.text(at(*centre, base), Anchor::Middle, note.runs.clone());
    }
    if layer.up { base - above } else { base + below }
}

/// A pole with its label to the right, or a label of the first row centred on its place.
struct Flag {
    pole: f64,
    row: usize,
    centred: bool,
}

/// Labels that meet no other stand centred in the first row, the others on poles; `None` where the poles would have to
/// move, or where that saves nothing.
fn mixed(notes: &[Note], layer: Layer) -> Option<Vec<Flag>> {
    if layer.beside {
        return None;
    }
    let half = |note: &Note| (note.width() + GAP) / 2.0;
    let alone = |index: usize, note: &Note| {
        let meets = |(other, theirs): (usize, &Note)| {
            other != index && (note.x - theirs.x).abs() < half(note) + half(theirs) + BESIDE
        };
        !notes.iter().enumerate().any(meets) && note.x - half(note) >= layer.left && note.x + half(note) <= layer.right
    };
    let alone: Vec<bool> = notes.iter().enumerate().map(|(index, note)| alone(index, note)).collect();
    if !alone.contains(&true) {
        return None;
    }
    let mut placed: Vec<Flag> = Vec::new();
    for (note, alone) in notes.iter().zip(&alone).rev() {
        if *alone {
            placed.push(Flag { pole: note.x, row: 0, centred: true });
            continue;
        }
        let end = note.x + BESIDE + note.width() + BESIDE;
        let crowded = placed.iter().any(|other| !other.centred && other.pole < note.x + POLES);
        if end > layer.right + BESIDE || crowded {
            return None;
        }
        let left = |index: usize| {
            let other = notes.get(notes.len() - 1 - index);
            other.map_or(f64::INFINITY, |other| other.x - half(other))
        };
        let hit = placed.iter().enumerate().filter(
            |(index, other)| {
                if other.centred { left(*index) < end } else { other.pole < end }
            },
        );
        let row = hit.map(|(_, other)| other.row + 1).max().unwrap_or(0);
        placed.push(Flag { pole: note.x, row, centred: false });
    }
    placed.reverse();
    Some(placed)
}

/// Poles and rows for all notes. Taken from the right, each label stands just beyond every pole that it would hit.
fn flags(notes: &[Note], layer: Layer) -> Vec<Flag> {
    let wish: Vec<f64> = notes.iter().map(|note| note.x).collect();
    let apart = vec![POLES; notes.len().saturating_sub(1)];
    let low = vec![layer.left; notes.len()];
    let mut high: Vec<f64> = notes.iter().map(|note| layer.right - BESIDE - note.width()).collect();
    // Later poles stand further right: what bounds them bounds the earlier ones as well.
    for index in (1..high.len()).rev() {
        let bound = high.get(index).copied().unwrap_or(layer.right) - POLES;
        if let Some(earlier) = high.get_mut(index - 1) {
            *earlier = earlier.min(bound);
        }
    }
    let loose = vec![f64::NEG_INFINITY; notes.len()];
    let poles = spread(&wish, &apart, &low, &high)
        .or_else(|| spread(&wish, &apart, &loose, &high))
        .unwrap_or_else(|| wish.clone());
    let mut placed: Vec<Flag> = Vec::new();
    for (note, pole) in notes.iter().zip(&poles).rev() {
        let end = pole + BESIDE + note.width() + BESIDE;
        let hit = placed.iter().filter(|other| other.pole < end).map(|other| other.row + 1).max();
        placed.push(Flag { pole: *pole, row: hit.unwrap_or(0), centred: false });
    }
    placed.reverse();
    placed
}

fn raise(canvas: &mut Canvas, notes: &[Note], flags: &[Flag], layer: Layer) -> f64 {
    let (above, below) = tallest(notes);
    let fan = notes.iter().zip(flags).any(|(note, flag)| (note.x - flag.pole).abs() > 0.05);
    let away = if layer.up { -1.0 } else { 1.0 };
    let knee = layer.edge + away * if fan { FAN } else { 0.0 };
    let first = match (layer.up, layer.beside && !fan) {
        (true, true) => knee + above,
        (true, false) => knee - below - 0.5,
        (false, _) => knee + above + 0.5,
    };
    let pitch = ROW.max(above + below + 0.6);
    let mut far = knee;
    for (note, flag) in notes.iter().zip(flags) {
        let base = first + away * pitch * flag.row as f64;
        far = if layer.up { far.min(base - above) } else { far.max(base + below) };
        if flag.centred {
            canvas.text(at(flag.pole, base), Anchor::Middle, note.runs.clone());
            continue;
        }
        // The pole ends level with the far side of its label.
        let end = if layer.up { base - above } else { base + below * 0.5 };
        let mut points: Vec<_> = note.start.iter().map(|start| at(note.x, *start)).collect();
        if fan || note.start.is_none() {
            points.push(at(note.x, layer.edge));
        }
        if fan {
            points.push(at(flag.pole, knee));
        }
        let reaches = if layer.up { end < knee - 0.05 } else { end > knee + 0.05 };
        if reaches || note.start.is_some() {
            points.push(at(flag.pole, end));
        }
        canvas.polyline(points, solid(HAIR));
        canvas.text(at(flag.pole + BESIDE, base), Anchor::Start, note.runs.clone());
    }
    far
}

/// Places of upright labels and the number of their tiers: one, or two with the poles of the far tier between the labels
/// of the near one.
fn upright(notes: &[Note], layer: Layer) -> Option<(Vec<f64>, usize)> {
    let wish: Vec<f64> = notes.iter().map(|note| note.x).collect();
    let low = vec![layer.left + UPRIGHT / 2.0; notes.len()];
    let high = vec![layer.right - UPRIGHT / 2.0; notes.len()];
    [(UPRIGHT, 1), (BETWEEN, 2)].into_iter().find_map(|(pitch, tiers)| {
        let apart = vec![pitch; notes.len().saturating_sub(1)];
        Some((spread(&wish, &apart, &low, &high)?, tiers))
    })
}

fn stand(canvas: &mut Canvas, notes: &[Note], (places, tiers): (&[f64], usize), layer: Layer) -> f64 {
    let fan = notes.iter().zip(places).any(|(note, place)| (note.x - place).abs() > 0.05);
    let away = if layer.up { -1.0 } else { 1.0 };
    let knee = layer.edge + away * if fan { FAN } else { 0.3 };
    let (above, below) = tallest(notes);
    let longest = notes.iter().map(Note::width).fold(0.0, f64::max) + 1.0;
    for (index, (note, place)) in notes.iter().zip(places).enumerate() {
        let foot = knee + away * longest * (index % tiers) as f64;
        let mut points: Vec<_> = note.start.iter().map(|start| at(note.x, *start)).collect();
        if fan || tiers > 1 || note.start.is_some() || layer.beside {
            points.extend([at(note.x, layer.edge), at(*place, knee)]);
        }
        if tiers > 1 {
            points.push(at(*place, foot));
        }
        canvas.polyline(points, solid(HAIR));
        let anchor = if layer.up { Anchor::Start } else { Anchor::End };
        canvas.turned(at(place + (above - below) / 2.0, foot + away * 0.5), anchor, note.runs.clone());
    }
    knee + away * longest * tiers as f64
}

fn tallest(notes: &[Note]) -> (f64, f64) {
    notes
        .iter()
        .map(|note| measure::heights(&note.runs, LABEL))
        .fold((0.0, 0.0), |sum, h| (sum.0.max(h.0), sum.1.max(h.1)))
}

/// Places as near as possible (least squares) to what each would like, in order, `apart` from the next, within `low` and
/// `high`; `None` where that leaves no room. Neighbours that push each other are pooled.
pub fn spread(wish: &[f64], apart: &[f64], low: &[f64], high: &[f64]) -> Option<Vec<f64>> {
    let offsets: Vec<f64> = std::iter::once(0.0)
        .chain(apart.iter().scan(0.0, |sum, d| {
            *sum += d;
            Some(*sum)
        }))
        .collect();
    // Pools of (sum, count), their means rising.
    let mut pools: Vec<(f64, f64)> = Vec::new();
    for (x, offset) in wish.iter().zip(&offsets) {
        let mut pool = (x - offset, 1.0);
        while let Some(last) = pools.last()
            && last.0 / last.1 > pool.0 / pool.1
        {
            pool = (pool.0 + last.0, pool.1 + last.1);
            pools.pop();
        }
        pools.push(pool);
    }
    let mut level: Vec<f64> =
        pools.iter().flat_map(|(sum, count)| std::iter::repeat_n(sum / count, *count as usize)).collect();
    let mut floor = f64::NEG_INFINITY;
    for ((value, low), offset) in level.iter_mut().zip(low).zip(&offsets) {
        floor = floor.max(low - offset);
        *value = value.max(floor);
    }
    let mut ceiling = f64::INFINITY;
    for ((value, high), offset) in level.iter_mut().zip(high).zip(&offsets).rev() {
        ceiling = ceiling.min(high - offset);
        *value = value.min(ceiling);
    }
    let places: Vec<f64> = level.iter().zip(&offsets).map(|(value, offset)| value + offset).collect();
    let inside = places.iter().zip(low).all(|(place, low)| *place >= low - 1e-9);
    inside.then_some(places)
}

#[cfg(test)]
mod tests {
    use super::spread;

    #[test]
    fn what_has_room_stays_where_it_is() {
        let free = [f64::NEG_INFINITY; 3];
        let places = spread(&[0.0, 5.0, 10.0], &[3.0, 3.0], &free, &[f64::INFINITY; 3]);
        assert_eq!(places, Some(vec![0.0, 5.0, 10.0]));
    }

    #[test]
    fn neighbours_at_one_place_part_about_it() {
        let free = [f64::NEG_INFINITY; 3];
        let places = spread(&[5.0; 3], &[2.0, 2.0], &free, &[f64::INFINITY; 3]);
        assert_eq!(places, Some(vec![3.0, 5.0, 7.0]));
        assert_eq!(spread(&[5.0; 3], &[2.0, 2.0], &[4.0; 3], &[9.0; 3]), Some(vec![4.0, 6.0, 8.0]));
        assert_eq!(spread(&[5.0; 3], &[2.0, 2.0], &[4.0; 3], &[7.0; 3]), None);
    }
}
