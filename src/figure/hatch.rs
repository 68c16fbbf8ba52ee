//! Hatching: parallel lines clipped to an outline.

use super::primitive::{Point, at, rounded};

/// The lines of a hatch inside a closed outline: `angle` in degrees clockwise from x, `spacing` in mm (more than zero).
///
/// The lines of equal hatches fall on one grid over the whole drawing, so that neighbouring outlines match. Outlines
/// that cross themselves are filled by the even-odd rule. Empty where the spacing is no positive number.
pub fn hatch_lines(outline: &[Point], angle: f64, spacing: f64) -> Vec<(Point, Point)> {
    if !(spacing > 0.01 && spacing.is_finite() && angle.is_finite()) {
        return Vec::new();
    }
    let (sine, cosine) = (libm::sin(angle.to_radians()), libm::cos(angle.to_radians()));
    // Turned so that the hatch lies along the first axis: `along` runs with it, `across` counts its lines.
    let turned: Vec<(f64, f64)> =
        outline.iter().map(|p| (p.x * cosine + p.y * sine, p.y * cosine - p.x * sine)).collect();
    let lowest = turned.iter().fold(f64::INFINITY, |low, p| low.min(p.1));
    let highest = turned.iter().fold(f64::NEG_INFINITY, |high, p| high.max(p.1));
    if !(lowest.is_finite() && highest.is_finite()) {
        return Vec::new();
    }
    let (first, last) = ((lowest / spacing).ceil() as i64, (highest / spacing).floor() as i64);
    let back = |along: f64, across: f64| rounded(at(along * cosine - across * sine, along * sine + across * cosine));
    let mut lines = Vec::new();
    for index in first..=last {
        let across = index as f64 * spacing;
        let places = crossings(&turned, across);
        for pair in places.chunks_exact(2) {
            if let [from, to] = pair
                && to - from > 0.05
            {
                lines.push((back(*from, across), back(*to, across)));
            }
        }
    }
    lines
}

/// Where the outline crosses the line at `across`, in order.
fn crossings(turned: &[(f64, f64)], across: f64) -> Vec<f64> {
    let next = turned.iter().cycle().skip(1);
    let mut places: Vec<f64> = turned
        .iter()
        .zip(next)
        .filter(|(a, b)| (a.1 <= across) != (b.1 <= across))
        .map(|(a, b)| a.0 + (b.0 - a.0) * (across - a.1) / (b.1 - a.1))
        .collect();
    places.sort_by(f64::total_cmp);
    places
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn hatch_lines_stay_inside_and_keep_their_distance() {
        let square = [at(0.0, 0.0), at(10.0, 0.0), at(10.0, 4.0), at(0.0, 4.0)];
        let lines = hatch_lines(&square, 0.0, 1.0);
        assert_eq!(lines.first(), Some(&(at(0.0, 0.0), at(10.0, 0.0))));
        assert_eq!(lines.len(), 4);
        let inside = |p: &Point| (-0.001..=10.001).contains(&p.x) && (-0.001..=4.001).contains(&p.y);
        assert!(hatch_lines(&square, 37.0, 0.7).iter().all(|(a, b)| inside(a) && inside(b)));
        assert!(hatch_lines(&square, 45.0, 0.0).is_empty());
    }
}
