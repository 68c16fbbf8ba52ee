//! Writes drawings as SVG so that they can be looked at; only where PROOFSPAN_DRAWINGS names a folder.

use std::fmt::Write;

use proofspan::figure::{Anchor, Drawing, Fill, Item, Point, Stroke, hatch_lines};

/// Writes `name.svg` when asked to.
pub fn show(name: &str, drawing: &Drawing) {
    let Ok(folder) = std::env::var("PROOFSPAN_DRAWINGS") else { return };
    std::fs::create_dir_all(&folder).unwrap();
    std::fs::write(format!("{folder}/{name}.svg"), svg(drawing)).unwrap();
}

fn stroke(stroke: Stroke) -> String {
    let dash: Vec<String> = stroke.dash.pattern().iter().map(f64::to_string).collect();
    let dash = if dash.is_empty() { String::new() } else { format!(r#" stroke-dasharray="{}""#, dash.join(" ")) };
    format!(
        r#"stroke="black" stroke-linecap="{}" stroke-linejoin="round" stroke-width="{}"{dash}"#,
        if stroke.dash.pattern().is_empty() { "round" } else { "butt" },
        stroke.weight
    )
}

fn fill(fill: Fill) -> &'static str {
    match fill {
        Fill::None | Fill::Hatch { .. } => "none",
        Fill::White => "white",
        Fill::Black => "black",
    }
}

fn points(points: &[Point]) -> String {
    points.iter().map(|p| format!("{},{}", p.x, p.y)).collect::<Vec<_>>().join(" ")
}

fn svg(drawing: &Drawing) -> String {
    let (w, h) = (drawing.width, drawing.height);
    let mut out = format!(
        r#"<svg xmlns="http://www.w3.org/2000/svg" width="{w}mm" height="{h}mm" viewBox="0 0 {w} {h}"><rect width="{w}" height="{h}" fill="white"/>"#
    );
    for item in &drawing.items {
        out.push_str(&element(item));
        out.push('\n');
    }
    out.push_str("</svg>");
    out
}

fn element(item: &Item) -> String {
    match item {
        Item::Line { from, to, stroke: s } => {
            format!(r#"<line x1="{}" y1="{}" x2="{}" y2="{}" {}/>"#, from.x, from.y, to.x, to.y, stroke(*s))
        }
        Item::Polyline { points: p, stroke: s } => {
            format!(r#"<polyline fill="none" points="{}" {}/>"#, points(p), stroke(*s))
        }
        Item::Polygon { points: p, stroke: s, fill: f } => {
            let mut out = format!(r#"<polygon points="{}" fill="{}" "#, points(p), fill(*f));
            out += &s.map_or_else(|| r#"stroke="none""#.to_owned(), stroke);
            out += "/>";
            if let Fill::Hatch { angle, spacing } = f {
                for (a, b) in hatch_lines(p, *angle, *spacing) {
                    let _ = write!(
                        out,
                        r#"<line x1="{}" y1="{}" x2="{}" y2="{}" stroke="black" stroke-width="0.08"/>"#,
                        a.x, a.y, b.x, b.y
                    );
                }
            }
            out
        }
        Item::Circle { stroke: s, fill: f, .. } => curves(item, *s, fill(*f)),
        Item::Arc { stroke: s, .. } => curves(item, *s, "none"),
        Item::Text { at, anchor, size_pt, turned, runs, .. } => {
            let anchor = match anchor {
                Anchor::Start => "start",
                Anchor::Middle => "middle",
                Anchor::End => "end",
            };
            let size = size_pt * 25.4 / 72.0;
            let turn = if *turned { format!(r#" transform="rotate(-90 {} {})""#, at.x, at.y) } else { String::new() };
            let mut out = format!(
                r#"<text x="{}" y="{}" font-family="Libertinus Serif" font-size="{size}" text-anchor="{anchor}" xml:space="preserve"{turn}>"#,
                at.x, at.y
            );
            for run in runs {
                let style = if run.italic { r#" font-style="italic""# } else { "" };
                let text = run.text.replace('&', "&amp;").replace('<', "&lt;");
                if run.sub {
                    let (dy, small) = (size * 0.2, size * 0.7);
                    let _ = write!(
                        out,
                        r#"<tspan{style} dy="{dy}" font-size="{small}">{text}</tspan><tspan dy="-{dy}">&#8203;</tspan>"#
                    );
                } else {
                    let _ = write!(out, "<tspan{style}>{text}</tspan>");
                }
            }
            out + "</text>"
        }
    }
}

fn curves(item: &Item, s: Stroke, fill: &str) -> String {
    let curves = item.curves();
    let start = curves[0][0];
    let mut path = format!("M{} {}", start.x, start.y);
    for [_, b, c, d] in curves {
        let _ = write!(path, " C{} {} {} {} {} {}", b.x, b.y, c.x, c.y, d.x, d.y);
    }
    format!(r#"<path d="{path}" fill="{fill}" {}/>"#, stroke(s))
}
