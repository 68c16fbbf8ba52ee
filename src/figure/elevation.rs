//! The member as it stands: to scale, with supports, names, stiffnesses and dimensions.

use super::Words;
use super::band::{self, Depths, Scale};
use super::canvas::{Canvas, LABEL, ROW, plain, symbol, words};
use super::chain::chain;
use super::label::{self, Measure};
use super::measure;
use super::primitive::{Anchor, Drawing, Run, at};
use super::rows::{Layer, Note, annotate};
use super::support::{Symbol, hinge};
use crate::member::{Hold, Member, Place, Support, TaperLaw};

/// Paper kept free left of the member for walls, mm.
pub const LEFT: f64 = 6.0;

/// The member in elevation, `width` mm wide.
///
/// Lengths are to scale; so are depths where every section gives one, times a whole factor that is said below.
/// Otherwise the drawing says that depths are not to scale: they then only tell the stiffer from the softer.
pub fn elevation(member: &Member, said: &Words, width: f64) -> Drawing {
    let scale = Scale::fit(member, LEFT, width - LEFT);
    let depths = Depths::to_scale(member, scale);
    let mut canvas = Canvas::default();
    band::draw(&mut canvas, member, scale, &depths, true);
    let size = symbol_size(member, scale);
    for support in &member.supports {
        let x = support.at.x();
        Symbol::of(member, support, at(scale.x(x), 0.0), depths.half_at(member, x), size).draw(&mut canvas);
    }
    for place in member.hinges.iter().map(|hinge| hinge.at.x()) {
        hinge(&mut canvas, at(scale.x(place), 0.0), depths.half_at(member, place));
    }
    let extent = canvas.extent();
    let (top, low) = extent.map_or((0.0, 0.0), |extent| (extent.top, extent.bottom));
    let above = segment_notes(member, said, scale, &depths);
    annotate(&mut canvas, &above, Layer { edge: top - 0.5, up: true, left: 0.0, right: width, beside: false });
    let below = name_notes(member, said, scale, &depths);
    let low =
        annotate(&mut canvas, &below, Layer { edge: low + 0.2, up: false, left: 0.0, right: width, beside: false });
    let low = dimensions(&mut canvas, member, scale, low, width);
    let note = scale_note(depths.factor);
    canvas.text(at(LEFT, low + 1.2 + ROW), Anchor::Start, vec![plain(note.clone())]);
    let alt = format!("{} {note}", alt(member, said));
    canvas.finish(width, alt)
}

/// Height of support symbols: smaller where supports stand close.
pub fn symbol_size(member: &Member, scale: Scale) -> f64 {
    let next = member.supports.iter().skip(1);
    let gaps = member.supports.iter().zip(next).map(|(a, b)| scale.x(b.at.x()) - scale.x(a.at.x()));
    (gaps.fold(f64::INFINITY, f64::min) * 0.6).clamp(1.2, 3.6)
}

fn scale_note(factor: Option<f64>) -> String {
    match factor {
        None => "Lengths to scale, depths not to scale.".to_owned(),
        Some(1.0) => "Lengths and depths to one scale.".to_owned(),
        Some(factor) if factor > 1.0 => format!("Lengths to scale, depths at {factor:.0} times that scale."),
        Some(factor) => format!("Lengths to scale, depths at 1/{:.0} of that scale.", 1.0 / factor),
    }
}

/// EI of a section as a label.
fn rigidity(member: &Member, said: &Words, section: usize) -> String {
    let typed = said.rigidity.get(section).filter(|text| !text.is_empty()).cloned();
    let computed = member.sections.get(section).map_or(0.0, |s| s.modulus.value.si() * s.second_moment.value.si());
    typed.unwrap_or_else(|| label::converted(computed, Measure::Rigidity, member.title.system))
}

/// One label for each run of segments that look alike, and one for each hinge.
fn segment_notes(member: &Member, said: &Words, scale: Scale, depths: &Depths) -> Vec<Note> {
    let name = |section: usize| member.sections.get(section).map_or("", |section| section.name.as_str());
    let mut notes: Vec<Note> = Vec::new();
    let mut index = 0;
    while let Some(segment) = member.segments.get(index) {
        let alike = |other: &&crate::member::Segment| {
            segment.taper.is_none() && other.taper.is_none() && other.section == segment.section
        };
        let count = 1 + member.segments.iter().skip(index + 1).take_while(alike).count();
        let end = member.segments.get(index + count - 1).map_or(segment.to, |last| last.to);
        let middle = (segment.from.x() + end.x()) / 2.0;
        let runs = match segment.taper {
            None => vec![
                plain(format!("{}, ", name(segment.section))),
                symbol("EI"),
                plain(format!(" {}", rigidity(member, said, segment.section))),
            ],
            Some(taper) => {
                let law = if taper.law == TaperLaw::Cubic { "cubic" } else { "linear" };
                let (left, right) = (rigidity(member, said, segment.section), rigidity(member, said, taper.to));
                vec![
                    plain(format!("{} to {} ({law}), ", name(segment.section), name(taper.to))),
                    symbol("EI"),
                    plain(format!(" {left} to {right}")),
                ]
            }
        };
        notes.push(Note { x: scale.x(middle), start: Some(-depths.half_at(member, middle)), runs });
        index += count;
    }
    let hinges = member.hinges.iter().map(|hinge| Note {
        x: scale.x(hinge.at.x()),
        start: Some(-depths.half_at(member, hinge.at.x()).max(1.2)),
        runs: vec![plain(format!("hinge {}", hinge.name))],
    });
    notes.extend(hinges);
    notes
}

/// Names of supports, with their stiffnesses, and names of cuts between them; supports first, in their order.
pub fn name_notes(member: &Member, said: &Words, scale: Scale, depths: &Depths) -> Vec<Note> {
    let one = |support: &Support| {
        let text = format!("{}{}", support.name, springs(support, member));
        Note::new(scale.x(support.at.x()), vec![plain(text)])
    };
    let mut notes: Vec<Note> = member.supports.iter().map(one).collect();
    for cut in &said.cuts {
        let taken = member.supports.iter().any(|support| (support.at.x() - cut.at).abs() < 1e-9);
        if !taken {
            let start = Some(depths.half_at(member, cut.at) + 0.2);
            notes.push(Note { x: scale.x(cut.at), start, runs: vec![plain(cut.name.clone())] });
        }
    }
    notes
}

/// `, 12 kN/mm` for each spring of a support.
fn springs(support: &Support, member: &Member) -> String {
    let system = member.title.system;
    let mut text = String::new();
    if let Hold::Spring(k) = &support.vertical {
        text += &format!(", {}", label::given(&k.typed, k.value.si(), Measure::Stiffness, system, false));
    }
    if let Hold::Spring(k) = &support.rotation {
        text += &format!(", {}", label::given(&k.typed, k.value.si(), Measure::TurnStiffness, system, false));
    }
    text
}

/// Chains of segments and, where they differ, of supports and hinges; returns the lowest y.
fn dimensions(canvas: &mut Canvas, member: &Member, scale: Scale, low: f64, width: f64) -> f64 {
    let system = member.title.system;
    let segments: Vec<Place> =
        std::iter::once(Place::ZERO).chain(member.segments.iter().map(|segment| segment.to)).collect();
    let typed = |segment: &crate::member::Segment| {
        label::given(&segment.length.typed, segment.length.value.si(), Measure::Length, system, false)
    };
    let labels: Vec<Vec<Run>> = member.segments.iter().map(|segment| vec![plain(typed(segment))]).collect();
    let low = chain_of(canvas, &segments, labels, scale, low + 2.6, width);
    let mut others = vec![Place::ZERO, member.end()];
    others.extend(member.supports.iter().map(|support| support.at));
    others.extend(member.hinges.iter().map(|hinge| hinge.at));
    others.sort();
    others.dedup();
    if others == segments {
        return low;
    }
    let labels = between(&others, member);
    chain_of(canvas, &others, labels, scale, low + 2.2, width)
}

/// Distances between neighbouring places as labels.
pub fn between(places: &[Place], member: &Member) -> Vec<Vec<Run>> {
    let next = places.iter().skip(1);
    places.iter().zip(next).map(|(a, b)| vec![plain(label::distance(*a, *b, member.title.system))]).collect()
}

/// A chain through places along the member.
pub fn chain_of(canvas: &mut Canvas, places: &[Place], labels: Vec<Vec<Run>>, scale: Scale, y: f64, width: f64) -> f64 {
    let ticks: Vec<f64> = places.iter().map(|place| scale.x(place.x())).collect();
    chain(canvas, y, &ticks, labels, 0.0, width)
}

/// A caption of one or more lines below everything drawn; lines break at spaces.
pub fn caption(canvas: &mut Canvas, text: &str, left: f64, width: f64) {
    let low = canvas.extent().map_or(0.0, |extent| extent.bottom);
    let mut line = String::new();
    let mut y = low + 1.2 + measure::heights(&[], LABEL).0;
    for word in text.split(' ') {
        let longer = if line.is_empty() { word.to_owned() } else { format!("{line} {word}") };
        if !line.is_empty() && measure::width(&[plain(longer.clone())], LABEL) > width - left {
            canvas.text(at(left, y), Anchor::Start, vec![plain(std::mem::take(&mut line))]);
            y += ROW;
            line = word.to_owned();
        } else {
            line = longer;
        }
    }
    if !line.is_empty() {
        canvas.text(at(left, y), Anchor::Start, vec![plain(line)]);
    }
}

fn alt(member: &Member, said: &Words) -> String {
    let system = member.title.system;
    let length = label::distance(Place::ZERO, member.end(), system);
    let supports: Vec<String> = member
        .supports
        .iter()
        .map(|s| {
            let place = label::distance(Place::ZERO, s.at, system);
            format!("{} ({}{}) at {place}", s.name, kind_word(s), springs(s, member))
        })
        .collect();
    let scale = Scale { start: 0.0, per_metre: 1.0 };
    let depths = Depths::sketched(member, 1.0);
    let segments: Vec<String> =
        segment_notes(member, said, scale, &depths).iter().map(|note| words(&note.runs)).collect();
    format!(
        "Elevation of the member, {length} long. Supports: {}. From left to right: {}.",
        supports.join("; "),
        segments.join("; ")
    )
}

/// The deck's word for the kind of a support.
pub const fn kind_word(support: &Support) -> &'static str {
    use crate::member::SupportKind::{Elastic, Fixed, Guided, Pinned, Roller};
    match support.kind {
        Fixed => "fixed",
        Pinned => "pinned",
        Roller => "roller",
        Guided => "guided",
        Elastic => "elastic",
    }
}
