//! Drawings: no label on a line or on another label, on fixed, crowded and random members.

pub mod build;
mod plots;
mod random;
mod svg;

use proofspan::figure::{self, COLUMN, Cut, Drawing, Words};
use proofspan::member::Redundant::{Force, Moment};
use svg::show;

/// Shows the drawing where asked, and fails with every collision.
fn clean(name: &str, drawing: &Drawing) {
    show(name, drawing);
    let found = drawing.collisions();
    assert!(found.is_empty(), "{name}: {found:#?}");
    assert!(!drawing.alt.is_empty() && drawing.height > 1.0, "{name}");
}

fn said() -> Words {
    Words { cuts: vec![Cut { at: 4.0, name: "C".to_owned() }], ..Words::default() }
}

#[test]
fn elevations_are_clean() {
    clean("elevation-propped", &figure::elevation(&build::propped(), &said(), COLUMN));
    clean("elevation-crowded", &figure::elevation(&build::crowded(), &Words::default(), COLUMN));
}

#[test]
fn load_cases_are_clean() {
    let member = build::propped();
    for (index, case) in member.cases.iter().enumerate() {
        let said =
            Words { total: "Total load 126.0 kN downward.".to_owned(), self_weight: "0.42 kN/m".to_owned(), ..said() };
        clean(&format!("loads-propped-{}", case.name), &figure::loads(&member, index, &said, COLUMN));
    }
    clean("loads-crowded", &figure::loads(&build::crowded(), 0, &Words::default(), COLUMN));
}

#[test]
fn released_members_are_clean() {
    let propped = build::propped();
    clean("released-propped", &figure::released(&propped, &[Force(1)], &said(), COLUMN));
    clean("released-wall", &figure::released(&propped, &[Moment(0)], &said(), COLUMN));
    let crowded = build::crowded();
    let chosen = [Moment(1), Moment(2), Moment(3), Force(3), Moment(4), Force(5), Moment(8), Force(6)];
    clean("released-crowded", &figure::released(&crowded, &chosen, &Words::default(), COLUMN));
}

/// A cut at every segment end, support and hinge, as the working cuts.
fn all_cuts(member: &proofspan::member::Member) -> Words {
    let mut places: Vec<_> = member.segments.iter().map(|s| (s.to, String::new())).collect();
    places.extend(member.hinges.iter().map(|hinge| (hinge.at, hinge.name.clone())));
    places.extend(member.supports.iter().map(|support| (support.at, support.name.clone())));
    places.sort_by(|a, b| a.0.cmp(&b.0).then(b.1.cmp(&a.1)));
    places.dedup_by_key(|place| place.0);
    let cut = |(index, (place, name)): (usize, (proofspan::member::Place, String))| Cut {
        at: place.x(),
        name: if name.is_empty() { format!("c{index}") } else { name },
    };
    Words { cuts: places.into_iter().enumerate().map(cut).collect(), ..Words::default() }
}

#[test]
fn free_bodies_are_clean() {
    clean("bodies-propped", &figure::free_bodies(&build::propped(), &said(), COLUMN));
    let crowded = build::crowded();
    clean("bodies-crowded", &figure::free_bodies(&crowded, &all_cuts(&crowded), COLUMN));
}

#[test]
fn pictures_of_the_method_are_clean() {
    for width in [COLUMN, figure::WIDE] {
        clean(&format!("chained-{width}"), &figure::chained(width));
        clean(&format!("signs-{width}"), &figure::signs(width));
    }
}

/// The check that holds all other checks here: it must see what it is there to see.
#[test]
fn the_collision_check_catches_what_overlaps() {
    use proofspan::figure::{CollisionKind, Item};
    let clean = figure::loads(&build::propped(), 0, &said(), COLUMN);
    assert!(clean.collisions().is_empty());
    let kinds = |drawing: &Drawing| -> Vec<CollisionKind> { drawing.collisions().iter().map(|c| c.kind).collect() };
    let texts: Vec<usize> =
        (0..clean.items.len()).filter(|index| matches!(clean.items[*index], Item::Text { .. })).collect();
    let moved = |index: usize, dx: f64, dy: f64| {
        let mut drawing = clean.clone();
        if let Item::Text { at, .. } = &mut drawing.items[index] {
            (at.x, at.y) = (at.x + dx, at.y + dy);
        }
        drawing
    };
    // A label laid over its neighbour.
    let mut twice = clean.clone();
    twice.items.push(clean.items[texts[0]].clone());
    assert!(kinds(&twice).contains(&CollisionKind::TextText));
    // The figure of the uniform load pushed down onto its line, and out of the paper.
    let load = texts.iter().find(|index| format!("{:?}", clean.items[**index]).contains("14.00")).unwrap();
    assert!(kinds(&moved(*load, 0.0, 1.2)).contains(&CollisionKind::TextLine));
    assert!(kinds(&moved(*load, -500.0, 0.0)).contains(&CollisionKind::Outside));
    // Far enough down it lies across the member's outline.
    let hits =
        (1..120).any(|step| kinds(&moved(*load, 0.0, f64::from(step) * 0.1)).contains(&CollisionKind::TextOutline));
    assert!(hits);
}

#[test]
fn the_same_member_gives_the_same_drawing_in_thousandths() {
    let (first, second) = (build::crowded(), build::crowded());
    let drawing = figure::loads(&first, 0, &Words::default(), COLUMN);
    assert_eq!(drawing, figure::loads(&second, 0, &Words::default(), COLUMN));
    let text = serde_json::to_string(&drawing).unwrap();
    assert!(text.len() > 1000);
    for figure in text.split(|c: char| !(c.is_ascii_digit() || c == '.' || c == '-')) {
        let places = figure.split_once('.').map_or(0, |(_, fraction)| fraction.len());
        assert!(places <= 3 || figure.starts_with("0."), "{figure}");
    }
}

#[test]
fn alternative_texts_say_what_is_shown() {
    let member = build::propped();
    let sketch = figure::elevation(&member, &said(), COLUMN).alt;
    assert!(sketch.contains("A (fixed) at 0 m") && sketch.contains("41\u{2009}200 kN m²"), "{sketch}");
    let load = figure::loads(&member, 1, &said(), COLUMN).alt;
    for part in ["2 kN/m downward to 6 kN/m downward from 0 m to 4 m", "3.5 kN/m upward", "7.5 kN m counter-clockwise"]
    {
        assert!(load.contains(part), "{load}");
    }
    let released = figure::released(&member, &[Force(1)], &said(), COLUMN).alt;
    assert!(released.contains("R.B, the upward force of support B"), "{released}");
}

#[test]
fn ordinary_members_are_clean() {
    for (name, member) in [("three", build::three_spans()), ("tapered", build::tapered())] {
        let said = all_cuts(&member);
        clean(&format!("{name}-elevation"), &figure::elevation(&member, &said, COLUMN));
        for (index, case) in member.cases.iter().enumerate() {
            clean(&format!("{name}-loads-{}", case.name), &figure::loads(&member, index, &Words::default(), COLUMN));
        }
        clean(&format!("{name}-released"), &figure::released(&member, &[Moment(1)], &said, COLUMN));
        clean(&format!("{name}-bodies"), &figure::free_bodies(&member, &said, COLUMN));
    }
}

#[test]
fn a_member_read_from_a_deck_is_drawn_clean() {
    let member = proofspan::member::build::read(proofspan::deck::starter()).unwrap().member;
    let said = all_cuts(&member);
    clean("starter-elevation", &figure::elevation(&member, &said, COLUMN));
    for (index, case) in member.cases.iter().enumerate() {
        clean(&format!("starter-loads-{}", case.name), &figure::loads(&member, index, &said, COLUMN));
    }
    clean("starter-bodies", &figure::free_bodies(&member, &said, COLUMN));
}
