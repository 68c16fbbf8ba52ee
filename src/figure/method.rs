//! Two pictures that are the same for every member: how pieces are chained, and which way is positive.

use super::canvas::{Canvas, HAIR, HEAVY, LIGHT, NORMAL, dashed, plain, solid, sub, symbol};
use super::primitive::{Anchor, Dash, Drawing, Fill, Point, Run, at};

/// One piece as a cantilever whose wall moves, exaggerated: its tip goes down by the shift of the wall, by the turn of the
/// wall times its length, and by its own bending.
pub fn chained(width: f64) -> Drawing {
    let mut canvas = Canvas::default();
    let (left, right) = (22.0, (width - 40.0).max(60.0));
    let length = right - left;
    let slope = 0.19;
    let (shift, turn, own) = (8.0, slope * length, 9.0);
    // Where the piece lay unloaded.
    canvas.line(at(left - 6.0, 0.0), at(right + 9.0, 0.0), dashed(LIGHT, Dash::DashDot));
    // Shifted; then shifted and turned.
    canvas.line(at(left, shift), at(right + 9.0, shift), dashed(LIGHT, Dash::Short));
    canvas.line(at(left, shift), at(right + 9.0, shift + slope * (length + 9.0)), dashed(LIGHT, Dash::Long));
    wall(&mut canvas, at(left, shift), slope);
    let bent = |part: f64| {
        // The line of a cantilever under a force at its tip: (3 t^2 - t^3) / 2.
        let own = own * (3.0 * part * part - part * part * part) / 2.0;
        at(left + part * length, shift + turn * part + own)
    };
    canvas.polyline((0..=40).map(|index| bent(f64::from(index) / 40.0)).collect(), solid(HEAVY * 1.4));
    canvas.circle(bent(1.0), 0.5, solid(NORMAL), Fill::Black);
    let x = right + 5.0;
    let levels = [0.0, shift, shift + slope * (length + 5.0), shift + turn + own];
    canvas.line(bent(1.0), at(x + 1.5, shift + turn + own), solid(HAIR));
    let names = [
        vec![plain("shift of the wall, "), symbol("v"), sub("1")],
        vec![plain("turn × length, "), symbol("ψ"), sub("1"), symbol("L")],
        vec![plain("own bending")],
    ];
    for ((from, to), runs) in levels.iter().zip(levels.iter().skip(1)).zip(names) {
        measured(&mut canvas, x, *from, *to);
        canvas.text(at(x + 3.2, (from + to) / 2.0 + 0.9), Anchor::Start, runs);
    }
    // The turn, as an angle at the wall.
    let radius = 26.0;
    let sweep = libm::atan(slope).to_degrees();
    canvas.items.push(super::Item::Arc { centre: at(left, shift), radius, start: 0.0, sweep, stroke: solid(LIGHT) });
    canvas.text(
        at(left + radius + 1.6, shift + slope * radius * 0.5 + 0.75),
        Anchor::Start,
        vec![symbol("ψ"), sub("1")],
    );
    measured(&mut canvas, left - 4.5, 0.0, shift);
    canvas.text(at(left - 6.2, shift / 2.0 + 0.9), Anchor::End, vec![symbol("v"), sub("1")]);
    span(&mut canvas, left, right, -4.0);
    canvas.text(at((left + right) / 2.0, -5.0), Anchor::Middle, vec![symbol("L")]);
    let alt = "One piece of the member, exaggerated, as a cantilever whose wall has moved with the piece at its left. Its \
               right end goes down by three parts: the shift v1 of the wall, the turn psi1 of the wall times the length L, \
               and the piece's own bending."
        .to_owned();
    canvas.finish(width, alt)
}

/// A hatched wall across a line of the given slope.
fn wall(canvas: &mut Canvas, node: Point, slope: f64) {
    let half = 4.0;
    canvas.ground(at(node.x - slope * half, node.y + half), at(node.x + slope * half, node.y - half));
}

/// An upright measure between two heights.
fn measured(canvas: &mut Canvas, x: f64, from: f64, to: f64) {
    let middle = (from + to) / 2.0;
    canvas.arrow(at(x, middle), at(x, from), LIGHT, 1.5);
    canvas.arrow(at(x, middle), at(x, to), LIGHT, 1.5);
}

/// A level measure between two places.
fn span(canvas: &mut Canvas, left: f64, right: f64, y: f64) {
    let middle = (left + right) / 2.0;
    for end in [left, right] {
        canvas.arrow(at(middle, y), at(end, y), LIGHT, 1.5);
        canvas.line(at(end, y - 1.2), at(end, y + 1.2), solid(HAIR));
    }
}

/// Which way is positive, one small picture for each quantity.
pub fn signs(width: f64) -> Drawing {
    let mut canvas = Canvas::default();
    let cell = width / 4.0;
    type Picture = fn(&mut Canvas, Point);
    let pictures: [(Picture, [&str; 2]); 8] = [
        (load, ["load: down", ""]),
        (deflection, ["deflection *v*,", "settlement: down"]),
        (clockwise, ["applied couple, imposed", "rotation: clockwise"]),
        (slope, ["slope, turn *ψ*:", "clockwise"]),
        (reaction, ["reaction force: up", ""]),
        (reaction_moment, ["reaction moment:", "counter-clockwise"]),
        (moment, ["bending moment *M*:", "sagging"]),
        (shear, ["shear *V* = d*M*/d*x*", ""]),
    ];
    for (index, (picture, lines)) in pictures.iter().enumerate() {
        let (column, row) = ((index % 4) as f64, (index / 4) as f64);
        let centre = at(cell * (column + 0.5), row * 25.0);
        picture(&mut canvas, centre);
        for (line, text) in lines.iter().enumerate().filter(|(_, text)| !text.is_empty()) {
            let place = at(centre.x, centre.y + 11.0 + 3.3 * line as f64);
            canvas.text(place, Anchor::Middle, styled(text));
        }
    }
    let alt = "Positive senses. Loads, deflections and settlements act down; applied couples, imposed rotations, slopes \
               and turns are clockwise; reaction forces act up; reaction moments are counter-clockwise; bending moments \
               are positive when sagging; shear is the derivative of the bending moment: up on a left-hand face, down on \
               a right-hand face."
        .to_owned();
    canvas.finish(width, alt)
}

/// Text in which stars set symbols off.
fn styled(text: &str) -> Vec<Run> {
    let part = |(index, text): (usize, &str)| if index % 2 == 1 { symbol(text) } else { plain(text) };
    text.split('*').enumerate().map(part).filter(|run| !run.text.is_empty()).collect()
}

/// Half the length of the piece of member in each picture, mm.
const BAR: f64 = 8.0;

fn bar(canvas: &mut Canvas, centre: Point, half: f64) {
    let (left, right) = (centre.x - half, centre.x + half);
    let corners =
        vec![at(left, centre.y - 0.9), at(right, centre.y - 0.9), at(right, centre.y + 0.9), at(left, centre.y + 0.9)];
    canvas.polygon(corners, Some(solid(NORMAL)), Fill::None);
}

fn load(canvas: &mut Canvas, centre: Point) {
    bar(canvas, centre, BAR);
    canvas.arrow(at(centre.x, centre.y - 7.5), at(centre.x, centre.y - 1.1), HEAVY * 0.8, 2.2);
}

fn deflection(canvas: &mut Canvas, centre: Point) {
    canvas.line(at(centre.x - BAR, centre.y - 2.5), at(centre.x + BAR, centre.y - 2.5), dashed(LIGHT, Dash::DashDot));
    let sag = |index: i32| {
        let part = f64::from(index) / 10.0;
        at(centre.x + BAR * part, centre.y - 2.5 + 6.5 * (1.0 - part * part))
    };
    canvas.polyline((-10..=10).map(sag).collect(), solid(HEAVY));
    canvas.arrow(at(centre.x, centre.y - 2.5), at(centre.x, centre.y + 3.7), NORMAL, 1.8);
}

fn clockwise(canvas: &mut Canvas, centre: Point) {
    bar(canvas, centre, BAR);
    canvas.couple(centre, 3.6, 135.0, 270.0, HEAVY * 0.8);
    canvas.circle(centre, 0.35, solid(NORMAL), Fill::Black);
}

fn slope(canvas: &mut Canvas, centre: Point) {
    let start = at(centre.x - BAR, centre.y - 2.0);
    canvas.line(start, at(centre.x + BAR, start.y), dashed(LIGHT, Dash::DashDot));
    let degrees = 20.0_f64;
    let end = super::primitive::on_circle(start, 2.0 * BAR, degrees);
    canvas.line(start, end, solid(HEAVY));
    canvas.couple(start, 11.5, 0.0, degrees - 1.0, NORMAL);
}

fn reaction(canvas: &mut Canvas, centre: Point) {
    bar(canvas, centre, BAR);
    canvas.arrow(at(centre.x, centre.y + 7.5), at(centre.x, centre.y + 1.1), HEAVY * 0.8, 2.2);
}

fn reaction_moment(canvas: &mut Canvas, centre: Point) {
    bar(canvas, centre, BAR);
    canvas.couple(at(centre.x - BAR, centre.y), 3.6, 110.0, -220.0, HEAVY * 0.8);
}

fn moment(canvas: &mut Canvas, centre: Point) {
    bar(canvas, centre, 4.5);
    canvas.couple(at(centre.x - 4.9, centre.y), 3.4, 125.0, 110.0, HEAVY * 0.8);
    canvas.couple(at(centre.x + 4.9, centre.y), 3.4, 55.0, -110.0, HEAVY * 0.8);
}

fn shear(canvas: &mut Canvas, centre: Point) {
    bar(canvas, centre, 4.5);
    canvas.arrow(at(centre.x - 6.0, centre.y + 3.2), at(centre.x - 6.0, centre.y - 3.2), HEAVY * 0.8, 2.0);
    canvas.arrow(at(centre.x + 6.0, centre.y - 3.2), at(centre.x + 6.0, centre.y + 3.2), HEAVY * 0.8, 2.0);
}
