//! A member solved rightly and read wrongly.

use super::{Change, Mistake};
use crate::member::{LoadKind, Member};

/// How a figure is read.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Reading {
    /// Deflections of a cantilever span without the turn of its support times the distance.
    SlopeCarryDropped {
        /// Index of the span.
        span: usize,
    },
    /// Deflections of a cantilever span without the settlement of its support.
    SettlementDropped {
        /// Index of the span.
        span: usize,
    },
    /// Deflections from the line between supports given for deflections from where the member lay.
    ChordAsAbsolute,
    /// The other way round.
    AbsoluteAsChord,
    /// The deflection in the middle of a span taken for the greatest.
    MidspanDeflection {
        /// Index of the span.
        span: usize,
    },
    /// The moment in the middle of a span taken for the greatest.
    MidspanMoment {
        /// Index of the span.
        span: usize,
    },
    /// A support that is pulled up reported as carrying nothing.
    UpliftClipped {
        /// Index of the support.
        support: usize,
    },
    /// Moments and deflections of a span by the coefficients of a simple span, everything else as it is.
    SimpleSpan {
        /// Index of the span.
        span: usize,
    },
}

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    let mut push = |name: &str, place: String, words: String, reading: Reading| {
        list.push(Mistake::new(name, place, words, Change::Reading(reading)));
    };
    let settles = |support: usize| {
        member.cases.iter().flat_map(|case| &case.loads).any(|load| match load.kind {
            LoadKind::Settlement { support: index, .. } => index == support,
            _ => false,
        })
    };
    for (span, known) in member.spans.iter().enumerate() {
        let place = format!("span {}", known.name);
        match (known.left, known.right) {
            (Some(_), Some(_)) => {
                let words = format!("the deflection in the middle of span {} taken for its greatest", known.name);
                push("midspan-taken-as-greatest", place.clone(), words, Reading::MidspanDeflection { span });
                let words = format!("the moment in the middle of span {} taken for its greatest", known.name);
                push("midspan-taken-as-greatest", place.clone(), words, Reading::MidspanMoment { span });
                let words = format!("moments and deflections of span {} as of a simple span", known.name);
                push("simple-span-coefficient", place, words, Reading::SimpleSpan { span });
            }
            (Some(support), None) | (None, Some(support)) => {
                // At a fixed support nothing is carried.
                if member.supports.get(support).is_some_and(|support| !support.holds_rotation()) {
                    let words =
                        format!("leaving the turn of the support out of the deflections of span {}", known.name);
                    push("slope-carry-dropped", place.clone(), words, Reading::SlopeCarryDropped { span });
                }
                if settles(support) {
                    let words = format!("leaving the settlement out of the deflections of span {}", known.name);
                    push("settlement-dropped-at-tip", place, words, Reading::SettlementDropped { span });
                }
            }
            (None, None) => {}
        }
    }
    let movable = member.supports.iter().any(|support| matches!(support.vertical, crate::member::Hold::Spring(_)))
        || (0..member.supports.len()).any(settles);
    if movable {
        let words = "deflections measured from the line between the supports".to_owned();
        push("chord-read-as-absolute", "every deflection".to_owned(), words, Reading::ChordAsAbsolute);
        let words = "deflections measured from where the member lay unloaded".to_owned();
        push("absolute-read-as-chord", "every deflection".to_owned(), words, Reading::AbsoluteAsChord);
    }
    for (support, known) in member.supports.iter().enumerate().filter(|(_, support)| support.holds_deflection()) {
        let words = format!("the uplift of support {} taken as nought", known.name);
        push("uplift-clipped", format!("support {}", known.name), words, Reading::UpliftClipped { support });
    }
    list
}
