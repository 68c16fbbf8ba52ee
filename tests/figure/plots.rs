//! Diagrams.

use proofspan::figure::{COLUMN, Chord, Curve, Mark, Panel, Plot, Style, diagrams};

use super::clean;

/// Points of a function over `[0, length]`.
fn sampled(length: f64, count: u32, value: impl Fn(f64) -> f64) -> Vec<(f64, f64)> {
    (0..=count).map(|i| length * f64::from(i) / f64::from(count)).map(|x| (x, value(x))).collect()
}

fn curve(label: &str, style: Style, points: Vec<(f64, f64)>, marks: &[(f64, f64)]) -> Curve {
    let mark = |(x, y): &(f64, f64)| Mark { x: *x, y: *y, label: format!("{y:.1} at {x:.3} m").replace('-', "−") };
    Curve { label: label.to_owned(), style, points, marks: marks.iter().map(mark).collect() }
}

/// A quantity over x.
type Value<'a> = &'a dyn Fn(f64) -> f64;

/// A propped beam under a uniform load: V, M and a curve of deflection with its chord, for several factors.
fn propped(count: usize) -> Plot {
    let (w, length) = (14.0, 9.0);
    let reaction = 3.0 / 8.0 * w * length;
    let shear = |x: f64| w * length - reaction - w * x;
    let moment = |x: f64| reaction * (length - x) - w * (length - x) * (length - x) / 2.0;
    let sag =
        |x: f64| 8.0 * (x / length) * (x / length) * (1.0 - x / length) * (3.0 - 2.0 * x / length) + 6.0 * x / length;
    let mut panels = vec![
        Panel { symbol: "V".into(), unit: "kN".into(), ..Panel::default() },
        Panel {
            symbol: "M".into(),
            unit: "kN m".into(),
            note: "sagging below the axis".into(),
            down: true,
            ..Panel::default()
        },
        Panel {
            symbol: "v".into(),
            unit: "mm".into(),
            note: "downward below the axis".into(),
            down: true,
            ..Panel::default()
        },
    ];
    for index in 0..count {
        let factor = 1.0 - 0.07 * index as f64;
        let name = format!("C{}", index + 1);
        let style = Style::Line(index);
        let top = length - reaction / w;
        let data: [(Value, Vec<f64>); 3] = [(&shear, vec![0.0, length]), (&moment, vec![0.0, top]), (&sag, vec![5.4])];
        for (panel, (value, places)) in panels.iter_mut().zip(data) {
            let marks: Vec<(f64, f64)> = places.iter().map(|x| (*x, factor * value(*x))).collect();
            let marks = if index == 0 { marks } else { Vec::new() };
            panel.curves.push(curve(&name, style, sampled(length, 90, |x| factor * value(x)), &marks));
        }
    }
    let ordinate = (5.0, 6.0 * 5.0 / 9.0, sag(5.0), "2.94 from the chord".to_owned());
    panels[2].chords.push(Chord { from: (0.0, 0.0), to: (9.0, 6.0), ordinate: Some(ordinate) });
    Plot {
        subject: "Combination C1".into(),
        from: 0.0,
        to: length,
        supports: vec![(0.0, "A".into()), (9.0, "B".into())],
        panels,
    }
}

/// Eight spans, many combinations, marks at every extreme of every line.
fn crowded(combinations: usize) -> Plot {
    let supports: Vec<(f64, String)> = (0..9).map(|i| (f64::from(i) * 6.0, format!("S{i}"))).collect();
    let wave = |x: f64, k: usize| {
        let turn = x / 6.0 * std::f64::consts::PI;
        (100.0 - 5.0 * k as f64) * libm::sin(turn) + 12.0 * libm::cos(k as f64 * 0.7 + x * 0.3)
    };
    let curves = (0..combinations)
        .map(|k| {
            let marks: Vec<(f64, f64)> = (0..16).map(|i| f64::from(i) * 3.0 + 0.2).map(|x| (x, wave(x, k))).collect();
            curve(&format!("C{k}"), Style::Line(k), sampled(48.0, 240, |x| wave(x, k)), &marks)
        })
        .collect();
    let panel = Panel { symbol: "M".into(), unit: "kN m".into(), down: true, curves, ..Panel::default() };
    Plot { subject: "All combinations".into(), from: 0.0, to: 48.0, supports, panels: vec![panel] }
}

#[test]
fn diagrams_are_clean() {
    clean("plot-propped", &diagrams(&propped(1), COLUMN));
    clean("plot-four", &diagrams(&propped(4), COLUMN));
    clean("plot-twelve", &diagrams(&propped(12), COLUMN));
    clean("plot-crowded-1", &diagrams(&crowded(1), COLUMN));
    clean("plot-crowded-4", &diagrams(&crowded(4), COLUMN));
}

#[test]
fn an_envelope_stands_out_and_its_extremes_are_said() {
    let mut plot = propped(3);
    plot.panels[1].curves[0].style = Style::Envelope;
    let drawing = diagrams(&plot, COLUMN);
    clean("plot-envelope", &drawing);
    assert!(drawing.alt.contains("−141.8 at 0.000 m"), "{}", drawing.alt);
}
