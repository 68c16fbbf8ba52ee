//! Drawings: no label on a line or on another label, on fixed, crowded and random members.

pub mod build;
mod plots;
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
        let said = Words { total: "Total load 126.0 kN downward.".to_owned(), self_weight: "0.42 kN/m".to_owned(), ..said() };
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
