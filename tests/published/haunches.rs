//! Tapered and haunched members.
//!
//! Sources: PCA *Handbook of Frame Constants* as reproduced in Hibbeler, *Structural Analysis*, Table 13-2 (parabolic
//! haunches, seen), and Ex. 13-1 / Table 13-1 (straight haunches, from memory); the other straight rows and the closed
//! forms of tapers were computed independently, by a second method as well. Depth runs from h(1 + r) at the face to h over
//! the length a L, width is constant, so that I goes with the cube of the depth: the cubic law.
//! k = (fixed-end stiffness) L / E I of the middle, C the carry-over, FEM the fixed-end moment over w L².

use crate::support::{deck, look, solve};

use super::{CANTILEVER, FIXED, PROPPED, UNIFORM, couple, point, turn};

/// Length, I, and where it tapers I at its right end and the law.
pub type Segment<'a> = (f64, f64, Option<(f64, &'a str)>);

/// A deck of segments that each run from one EI to another by a law; `None` for a prismatic one.
pub fn tapered(segments: &[Segment<'_>], supports: &str, loads: &str) -> String {
    let prismatic: Vec<(f64, f64)> = segments.iter().map(|(length, ei, _)| (*length, *ei)).collect();
    let mut text = deck(&prismatic, supports, loads, &[1.0]);
    for (index, (_, _, taper)) in segments.iter().enumerate() {
        let Some((ei, law)) = taper else { continue };
        let section = format!(
            "[section.t{index}]\nE = \"1 kPa\"\nI = \"{} m^4\"\ndepth = \"1 m\"\nalpha = \"1 1/K\"\n",
            ei / 1000.0
        );
        let line = format!("section = \"s{index}\"\n");
        assert_eq!(text.matches(&line).count(), 1);
        text = text.replacen(&line, &format!("{line}taper = {{ to = \"t{index}\", law = \"{law}\" }}\n"), 1);
        text += &section;
    }
    text
}

fn cube(depth: f64) -> f64 {
    depth * depth * depth
}

/// Stiffness and carry-over from either end, fixed-end moments at both.
struct Constants {
    k: [f64; 2],
    c: [f64; 2],
    fem: [f64; 2],
}

fn constants(segments: &[Segment<'_>]) -> Constants {
    let moments = |loads: &str| {
        let results = solve(&tapered(segments, FIXED, loads));
        [look(&results, "m A"), look(&results, "m B")]
    };
    let (left, right, load) = (moments(&turn("A", 1.0)), moments(&turn("B", 1.0)), moments(UNIFORM));
    assert!((left[1] - right[0]).abs() < 1e-9 * left[0].abs(), "Maxwell: {left:?} {right:?}");
    Constants { k: [-left[0], -right[1]], c: [left[1] / left[0], right[0] / right[1]], fem: [load[0], -load[1]] }
}

/// A straight haunch of depth 1 + r over a at both ends, or at the left alone.
fn straight(a: f64, r: f64, both: bool) -> Vec<Segment<'static>> {
    let face = cube(1.0 + r);
    let middle = 1.0 - if both { 2.0 * a } else { a };
    let mut list = vec![(a, face, Some((1.0, "cubic")))];
    if middle > 1e-12 {
        list.push((libm::round(middle * 1e6) / 1e6, 1.0, None));
    }
    if both {
        list.push((a, 1.0, Some((face, "cubic"))));
    }
    list
}

fn near(what: &str, found: f64, printed: f64, share: f64) {
    assert!((found - printed).abs() <= share * printed.abs(), "{what}: {found}, printed {printed}");
}

#[test]
fn straight_haunches() {
    // a, r, C, k, FEM, as computed by the other method to the digits given.
    for (a, r, c, k, fem) in [
        (0.2, 1.0, 0.6586, 7.812, 0.0993),
        (0.3, 0.6, 0.6470, 8.041, 0.0982),
        (0.3, 1.0, 0.7052, 10.855, 0.1034),
        (0.5, 1.0, 0.6924, 17.341, 0.1023),
    ] {
        let found = constants(&straight(a, r, true));
        for end in 0..2 {
            assert!((found.c[end] - c).abs() <= 0.000_051, "C at a = {a}, r = {r}: {} {c}", found.c[end]);
            assert!((found.k[end] - k).abs() <= 0.000_51, "k at a = {a}, r = {r}: {} {k}", found.k[end]);
            assert!((found.fem[end] - fem).abs() <= 0.000_051, "FEM at a = {a}, r = {r}: {} {fem}", found.fem[end]);
        }
    }
    // Hibbeler's example prints three digits.
    let found = constants(&straight(0.3, 1.0, true));
    near("H5 C", found.c[0], 0.705, 0.002);
    near("H5 k", found.k[0], 10.85, 0.002);
    near("H5 FEM", found.fem[0], 0.1034, 0.002);
    // A haunch over the whole length.
    let found = constants(&straight(1.0, 1.0, false));
    for (what, found, printed, half) in [
        ("C_AB", found.c[0], 0.2943, 0.000_051),
        ("C_BA", found.c[1], 0.8343, 0.000_051),
        ("k_AB", found.k[0], 19.45, 0.005_1),
        ("k_BA", found.k[1], 6.863, 0.000_51),
        ("FEM_AB", found.fem[0], 0.1216, 0.000_051),
        ("FEM_BA", found.fem[1], 0.0529, 0.000_051),
    ] {
        assert!((found - printed).abs() <= half, "one-ended {what}: {found}, printed {printed}");
    }
    // I linear in x instead of depth linear in x, the classic mistake, is far outside.
    let mut wrong = straight(0.3, 1.0, true);
    wrong[0].2 = Some((1.0, "linear"));
    wrong[2].2 = Some((8.0, "linear"));
    assert!((constants(&wrong).k[0] / 10.855 - 1.0).abs() > 0.05);
}

/// A parabolic haunch, its slope zero at the inner end, in short straight ones; from the face inwards.
fn parabolic(a: f64, r: f64, parts: usize) -> Vec<Segment<'static>> {
    let depth = |part: usize| {
        let rest = 1.0 - part as f64 / parts as f64;
        1.0 + r * rest * rest
    };
    (0..parts).map(|part| (a / parts as f64, cube(depth(part)), Some((cube(depth(part + 1)), "cubic")))).collect()
}

#[test]
fn parabolic_haunches() {
    // r_B, then C_AB, C_BA, k_AB, k_BA, FEM_AB, FEM_BA as printed; a = 0.2 at both ends, r_A = 1.
    for (r, printed) in [
        (0.4, [0.558, 0.627, 6.08, 5.40, 0.1022, 0.0841]),
        (0.6, [0.582, 0.624, 6.21, 5.80, 0.0995, 0.0887]),
        (1.0, [0.619, 0.619, 6.41, 6.41, 0.0956, 0.0956]),
    ] {
        let mut segments = parabolic(0.2, 1.0, 16);
        segments.push((0.6, 1.0, None));
        let mirrored = parabolic(0.2, r, 16).into_iter().rev().map(|(length, face, taper)| {
            let (inner, law) = taper.unwrap();
            (length, inner, Some((face, law)))
        });
        segments.extend(mirrored);
        let found = constants(&segments);
        let found = [found.c[0], found.c[1], found.k[0], found.k[1], found.fem[0], found.fem[1]];
        for ((what, found), printed) in
            ["C_AB", "C_BA", "k_AB", "k_BA", "FEM_AB", "FEM_BA"].iter().zip(found).zip(printed)
        {
            near(&format!("H4, r_B = {r}, {what}"), found, printed, 0.002);
        }
    }
}

#[test]
fn tapered_cantilevers_and_propped_beams() {
    let ln2 = std::f64::consts::LN_2;
    // H2: I of the tip times (1 + s)^n, s from the tip. n = 2 and n = 4 are no law of the deck.
    let one = [(1.0, 2.0, Some((1.0, "linear")))];
    let three = [(1.0, 8.0, Some((1.0, "cubic")))];
    for (name, segments, loads, exact) in [
        ("n = 1, tip force", &one, point(1.0, 1.0), ln2 - 0.5),
        ("n = 1, uniform", &one, UNIFORM.to_owned(), 5.0 / 12.0 - 0.5 * ln2),
        ("n = 1, tip couple", &one, couple(1.0, 1.0), 1.0 - ln2),
        ("n = 3, tip force", &three, point(1.0, 1.0), ln2 - 5.0 / 8.0),
        ("n = 3, uniform", &three, UNIFORM.to_owned(), 17.0 / 16.0 - 1.5 * ln2),
        ("n = 3, tip couple", &three, couple(1.0, 1.0), 1.0 / 8.0),
    ] {
        let found = look(&solve(&tapered(segments, CANTILEVER, &loads)), "v 1");
        assert!((found - exact).abs() < 1e-11, "H2 {name}: {found} {exact}");
    }
    // H3: propped, uniform, thick at the fixed end.
    let found = look(&solve(&tapered(&one, PROPPED, UNIFORM)), "R B");
    assert!((found - 0.362_899_82).abs() < 5.1e-9, "H3 {found}");
}
