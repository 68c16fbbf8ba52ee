//! Diagrams: shear, moment and deflection of each combination, and the envelope over all of them.

use crate::analysis::Field;
use crate::analysis::extreme::{Extreme, Range};
use crate::calculation::Calculation;
use crate::figure::{Chord, Curve, Mark, Panel, Plot, Style};
use crate::member::{Measured, Member, System};
use crate::quantity::{Decimal, Unit};
use crate::sheet::typeset;
use crate::working::{Step, Working};

/// Parts that each piece is drawn with.
const PARTS: u32 = 40;
/// Up to so many combinations are drawn beside their envelope.
const LINES: usize = 6;

/// Which of the three panels.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Of {
    Shear,
    Moment,
    Deflection,
}

impl Of {
    const ALL: [Self; 3] = [Self::Shear, Self::Moment, Self::Deflection];

    const fn symbol(self) -> &'static str {
        match self {
            Self::Shear => "V",
            Self::Moment => "M",
            Self::Deflection => "v",
        }
    }

    fn unit(self, system: System) -> Unit {
        let (force, length, small) = match system {
            System::Si => ("kN", "m", "mm"),
            System::Us => ("kip", "ft", "in"),
        };
        let atoms: &[&str] = match self {
            Self::Shear => &[force],
            Self::Moment => &[force, length],
            Self::Deflection => &[small],
        };
        Unit::of(atoms.iter().filter_map(|atom| Unit::known(atom)).map(|atom| (atom, 1)))
    }

    /// Just left and just right of a place of a piece, SI.
    fn values(self, field: &Field<'_>, piece: usize, x: f64) -> [f64; 2] {
        let values = field.inside(piece, x);
        match self {
            Self::Shear => [values.left.shear, values.right.shear],
            Self::Moment => [values.left.moment, values.right.moment],
            Self::Deflection => [values.v, values.v],
        }
    }

    fn range(self, field: &Field<'_>) -> Range {
        let extremes = field.extremes();
        match self {
            Self::Shear => extremes.shear,
            Self::Moment => extremes.moment,
            Self::Deflection => extremes.deflection,
        }
    }
}

/// One plot for each combination; the envelope first where there are several.
pub fn plots(calculation: &Calculation, working: &Working) -> Vec<(String, Plot)> {
    let member = &calculation.member;
    let fields: Vec<Field<'_>> = (0..member.combinations.len())
        .filter_map(|index| Field::of_combination(&calculation.analysis, member, index))
        .collect();
    let drawer = Drawer { calculation, working, fields: &fields };
    let mut list = Vec::new();
    if fields.len() > 1 {
        let panels = Of::ALL.map(|of| drawer.envelope(of)).into();
        let title = "Envelope of all combinations".to_owned();
        list.push((title.clone(), plot(member, title, panels)));
    }
    for (index, combination) in member.combinations.iter().enumerate() {
        let panels = Of::ALL.map(|of| drawer.combination(index, of)).into();
        let title = format!("Combination {}", combination.name);
        list.push((title.clone(), plot(member, title, panels)));
    }
    list
}

fn plot(member: &Member, subject: String, panels: Vec<Panel>) -> Plot {
    let supports = member.supports.iter().map(|support| (support.at.x(), support.name.clone())).collect();
    Plot { subject, from: 0.0, to: member.end().x(), supports, panels }
}

struct Drawer<'a> {
    calculation: &'a Calculation,
    working: &'a Working,
    fields: &'a [Field<'a>],
}

impl Drawer<'_> {
    fn frame(&self, of: Of) -> (Unit, f64, Panel) {
        let unit = of.unit(self.calculation.member.title.system);
        let scale = unit.si().unwrap_or(1.0);
        let note = if of == Of::Moment { "sagging below the axis" } else { "" };
        let panel = Panel {
            symbol: of.symbol().to_owned(),
            unit: typeset::unit(&unit),
            note: note.to_owned(),
            down: of != Of::Shear,
            ..Panel::default()
        };
        (unit, scale, panel)
    }

    fn points(&self, field: &Field<'_>, of: Of, scale: f64) -> Vec<(f64, f64)> {
        let pieces = self.calculation.analysis.model.pieces.iter().enumerate();
        let along = pieces.flat_map(|(index, piece)| {
            (0..=PARTS).map(move |step| (index, piece.x, piece.length * f64::from(step) / f64::from(PARTS)))
        });
        along.flat_map(|(index, from, x)| of.values(field, index, x).map(|y| (from + x, y / scale))).collect()
    }

    /// One combination: its line, extremes with their places, values at cuts, the governing chord.
    fn combination(&self, index: usize, of: Of) -> Panel {
        let (_, scale, mut panel) = self.frame(of);
        let Some(field) = self.fields.get(index) else { return panel };
        let mut marks: Vec<Mark> = Vec::new();
        let range = of.range(field);
        for extreme in [range.max, range.min] {
            if let Some(figure) = self.figure(index, of, extreme.value) {
                let label = format!("{figure} at {}", self.place(extreme));
                mark(&mut marks, extreme.at, extreme.value / scale, label);
            }
        }
        if of != Of::Deflection {
            for (number, piece) in self.calculation.analysis.model.pieces.iter().enumerate() {
                for (x, side) in [(0.0, 1), (piece.length, 0)] {
                    let value = of.values(field, number, x).get(side).copied().unwrap_or_default();
                    if let Some(figure) = self.figure(index, of, value) {
                        mark(&mut marks, piece.x + x, value / scale, figure);
                    }
                }
            }
        }
        panel.curves =
            vec![Curve { label: String::new(), style: Style::Line(0), points: self.points(field, of, scale), marks }];
        if of == Of::Deflection {
            panel.chords = self.chord(index, scale).into_iter().collect();
        }
        panel
    }

    /// All combinations together, and the greatest and least of them.
    fn envelope(&self, of: Of) -> Panel {
        let (_, scale, mut panel) = self.frame(of);
        let lines: Vec<Vec<(f64, f64)>> = self.fields.iter().map(|field| self.points(field, of, scale)).collect();
        let names = self.calculation.member.combinations.iter().map(|combination| combination.name.clone());
        if lines.len() <= LINES {
            for (number, (points, label)) in lines.iter().zip(names).enumerate() {
                panel.curves.push(Curve {
                    label,
                    style: Style::Line(number),
                    points: points.clone(),
                    marks: Vec::new(),
                });
            }
        }
        for greatest in [true, false] {
            let Some(first) = lines.first() else { continue };
            let pick = |place: usize, start: f64| {
                let values = lines.iter().filter_map(|line| line.get(place)).map(|(_, y)| *y);
                values.fold(start, |kept, y| if (y > kept) == greatest { y } else { kept })
            };
            let points = first.iter().enumerate().map(|(place, (x, y))| (*x, pick(place, *y))).collect();
            let marks = self.outermost(of, scale, greatest).into_iter().collect();
            panel.curves.push(Curve { label: String::new(), style: Style::Envelope, points, marks });
        }
        panel
    }

    /// The greatest or least value of all combinations, with its combination.
    fn outermost(&self, of: Of, scale: f64, greatest: bool) -> Option<Mark> {
        let each = self.fields.iter().enumerate().map(|(index, field)| {
            let range = of.range(field);
            (index, if greatest { range.max } else { range.min })
        });
        let (index, extreme) = each.reduce(|kept, next| {
            let beyond = if greatest { next.1.value > kept.1.value } else { next.1.value < kept.1.value };
            if beyond { next } else { kept }
        })?;
        let figure = self.figure(index, of, extreme.value)?;
        let name = &self.calculation.member.combinations.get(index)?.name;
        let label = format!("{figure} at {} ({name})", self.place(extreme));
        Some(Mark { x: extreme.at, y: extreme.value / scale, label })
    }

    /// The chord of the combination's governing check, with the ordinate from it.
    fn chord(&self, combination: usize, scale: f64) -> Option<Chord> {
        let (member, analysis) = (&self.calculation.member, &self.calculation.analysis);
        let checks = self.calculation.verdict.checks.iter().filter(|check| {
            check.combination == combination
                && member.limits.get(check.limit).is_some_and(|limit| limit.measured == Measured::Chord)
        });
        let check = checks.max_by(|a, b| a.utilisation.total_cmp(&b.utilisation))?;
        let span = member.spans.get(check.span)?;
        let (_, _) = (span.left?, span.right?);
        let field = self.fields.get(combination)?;
        let end = |place: crate::member::Place| (place.x(), field.at(place).v / scale);
        let (from, to) = (end(span.from), end(span.to));
        let at = analysis.model.pieces.get(check.spot.piece)?.x + check.spot.x;
        let part = (at - from.0) / (to.0 - from.0);
        let height = from.1 + (to.1 - from.1) * part;
        let shown = Decimal::nearest(check.deflection / scale, 4);
        let label = format!("{} from the chord", typeset::figure(shown));
        Some(Chord { from, to, ordinate: Some((at, height, height + check.deflection / scale, label)) })
    }

    /// `4.354 m`.
    fn place(&self, extreme: Extreme) -> String {
        let (size, unit) = match self.calculation.member.title.system {
            System::Si => (1.0, "m"),
            System::Us => (0.3048, "ft"),
        };
        format!("{}\u{A0}{unit}", typeset::figure(Decimal::nearest(extreme.at / size, 4)))
    }

    /// The printed figure of a step of the combination that has this value, to four digits; none for zero.
    fn figure(&self, combination: usize, of: Of, value: f64) -> Option<String> {
        let tag = self.calculation.member.combinations.get(combination)?.name.as_str();
        let close = |step: &&Step| {
            step.case.as_deref() == Some(tag)
                && step.symbol.starts_with(of.symbol())
                && (step.result.value - value).abs() <= 1e-9 * value.abs()
        };
        let step = self.working.steps.iter().rev().find(close).filter(|_| value != 0.0)?;
        let scale = of.unit(self.calculation.member.title.system).si().unwrap_or(1.0);
        let figure = step.result.printed.to_f64() * step.result.unit.si().unwrap_or(1.0) / scale;
        Some(typeset::figure(Decimal::nearest(figure, 4)))
    }
}

fn mark(marks: &mut Vec<Mark>, x: f64, y: f64, label: String) {
    let near = |known: &Mark| (known.x - x).abs() < 1e-9 && (known.y - y).abs() <= 1e-9 * y.abs();
    if !marks.iter().any(near) {
        marks.push(Mark { x, y, label });
    }
}
