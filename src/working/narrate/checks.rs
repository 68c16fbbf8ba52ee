//! Allowable deflections against found ones.

use super::places::{Worked, near};
use super::sums::Totals;
use super::{Demand, Narrator, finding};
use crate::analysis::equilibrium as sums;
use crate::member::{Limit, Measured, Place, Span};
use crate::quantity::{Decimal, Unit};
use crate::working::draft::{Likes, Symbol};
use crate::working::step::Chapters;
use crate::working::trace::Traced;
use crate::working::units::What;

impl Narrator<'_> {
    /// Every limit against every combination and span it covers.
    pub fn checks(&mut self, combinations: &[Totals], places: &[Worked], demands: &[Demand]) {
        self.builder.chapter(Chapters::Checks, "Checks against allowable deflections");
        let base = self.builder.base.clone();
        let conversion = if demands.is_empty() {
            Traced::zero()
        } else {
            self.builder.block("Deflections are compared in the small unit of length.");
            let unit = base.small_per_length();
            let figure = if self.member.title.system == crate::member::System::Si {
                Decimal::new(1000, 0)
            } else {
                Decimal::new(12, 0)
            };
            self.builder.choose("small units of length in one", Symbol::new("k", "s"), figure, unit, 1.0)
        };
        let order = governing_first(demands);
        let governing = order.first().copied();
        for number in order {
            let Some(demand) = demands.get(number) else { continue };
            let (Some(limit), Some(span)) =
                (self.member.limits.get(demand.limit).cloned(), self.member.spans.get(demand.span).cloned())
            else {
                continue;
            };
            let place = places.iter().find(|place| {
                place.combination == demand.combination && near(place.spot, demand.spot, self.member.end().x())
            });
            let (Some(place), Some(totals)) = (place.cloned(), combinations.get(demand.combination)) else { continue };
            let name = self.member.combinations.get(demand.combination).map(|c| c.name.clone()).unwrap_or_default();
            self.builder.tag(name.clone());
            let sentence = format!("Limit {}, combination {name}, span {}.", limit.name, span.name);
            // The governing check stands by itself, in full.
            if Some(number) == governing {
                self.builder.block(format!("The governing check. {sentence}"));
            } else {
                let likes = Likes {
                    key: format!("check {}", limit.name),
                    head: (name.clone(), span.name.replace('-', "–")),
                    fewest: 2,
                    sentence: format!(
                        "Limit {}, each combination and span. Symbols are those of the first column.",
                        limit.name
                    ),
                };
                self.builder.block_like(sentence, likes);
            }
            let ordinate = self.ordinate(&limit, &span, totals, &place, demand, number + 1);
            let small = base.shown_deflection();
            let what = finding(
                "deflection to be compared",
                Symbol::new("v", format!("s{}", number + 1)),
                (What::Deflection, small.clone()),
                demand.deflection,
            );
            let shown = self.builder.state(what.bold().last(), Some(ordinate * conversion.clone()));
            let allowed = self.allowed(&limit, &span, &conversion, demand.allowable, number + 1);
            let what = finding(
                "utilisation",
                Symbol::new("u", (number + 1).to_string()),
                (What::Utilisation, Unit::none()),
                demand.utilisation,
            );
            self.builder.state(what.bold().last(), Some(sums::utilisation(shown, allowed)));
        }
        self.builder.tag("");
    }

    /// The deflection as the limit measures it.
    fn ordinate(
        &mut self,
        limit: &Limit,
        span: &Span,
        totals: &Totals,
        place: &Worked,
        demand: &Demand,
        number: usize,
    ) -> Traced {
        if limit.measured == Measured::Absolute {
            return place.v.clone();
        }
        let unit = self.plain().v;
        let at = |narrator: &Self, place: Place| {
            let cut = narrator.analysis.model.cut_at(place)?;
            match cut.checked_sub(1) {
                Some(piece) => totals.end.get(piece).map(|pair| pair.0.clone()),
                None => totals.start.first().map(|pair| pair.0.clone()),
            }
        };
        let left = span.left.and_then(|_| at(self, span.from));
        let right = span.right.and_then(|_| at(self, span.to));
        let chord = match (left, right) {
            (Some(left), Some(right)) => {
                let Some(piece) = self.analysis.model.pieces.get(place.spot.piece).copied() else {
                    return place.v.clone();
                };
                let offset = self.distance(span.from, piece.from);
                let value = piece.from.beyond(span.from) + place.spot.x;
                let unit_of_length = self.builder.base.coherent(0, 1);
                let what = finding(
                    format!("distance from {}", self.place_name(span.from)),
                    Symbol::new("s", number.to_string()),
                    (What::Other, unit_of_length),
                    value,
                );
                let along = self.builder.find(what, offset + place.x.clone());
                let length = self.distance(span.from, span.to);
                let expression = sums::chord_at(left, right, along, length);
                let value = self.builder.value(&expression);
                let what =
                    finding("height of the chord there", Symbol::new("c", number.to_string()), unit.clone(), value);
                self.builder.find(what, expression)
            }
            (Some(held), None) | (None, Some(held)) => held,
            (None, None) => Traced::zero(),
        };
        let what =
            finding("deflection from the chord", Symbol::new("v", format!("c{number}")), unit, demand.deflection);
        self.builder.find(what, sums::from_chord(place.v.clone(), chord))
    }

    /// The allowable deflection: length over ratio, an absolute figure, or the smaller of both.
    fn allowed(&mut self, limit: &Limit, span: &Span, conversion: &Traced, allowable: f64, number: usize) -> Traced {
        let small = self.builder.base.shown_deflection();
        let by_ratio = limit.ratio.map(|ratio| {
            let key = Symbol::new("n", limit.name.clone());
            let ratio = self.constant_number("ratio of the limit", key, ratio.figure);
            let length = self.distance(span.from, span.to);
            let factor = limit.cantilever_length_factor.filter(|_| span.is_cantilever());
            let reference = match factor {
                Some(factor) => {
                    let key = Symbol::new("c", format!("l{}", limit.name));
                    self.constant_number("cantilever length factor", key, factor.figure) * length
                }
                None => length,
            };
            sums::allowable(reference * conversion.clone(), ratio)
        });
        let absolute = limit.absolute.as_ref().map(|absolute| {
            let symbol = Symbol::new("a", limit.name.clone());
            match self.book.constants.get(&symbol) {
                Some(known) => known.clone(),
                None => {
                    let slot = self.book.derived;
                    let (typed, si) = (absolute.typed.clone(), absolute.value.si());
                    let (unit, name) = (small.clone(), symbol.clone());
                    let step =
                        self.builder.aside(slot, |builder| builder.given("absolute limit", name, &typed, &unit, si));
                    self.book.constants.insert(symbol, step.clone());
                    step
                }
            }
        });
        let expression = match (by_ratio, absolute) {
            (Some(ratio), Some(absolute)) => crate::number::Number::smaller(ratio, absolute),
            (Some(only), None) | (None, Some(only)) => only,
            (None, None) => Traced::zero(),
        };
        let what = finding(
            "allowable deflection",
            Symbol::new("v", format!("a{number}")),
            (What::Deflection, small),
            allowable,
        );
        self.builder.state(what.bold(), Some(expression))
    }

    fn constant_number(&mut self, title: &str, symbol: Symbol, figure: Decimal) -> Traced {
        if let Some(known) = self.book.constants.get(&symbol) {
            return known.clone();
        }
        let slot = self.book.derived;
        let name = symbol.clone();
        let step = self.builder.aside(slot, |builder| builder.given_number(title, name, figure));
        self.book.constants.insert(symbol, step.clone());
        step
    }
}

/// Indices of the demands, the one of greatest utilisation first.
fn governing_first(demands: &[Demand]) -> Vec<usize> {
    let greatest = (0..demands.len()).max_by(|a, b| {
        let of = |index: &usize| demands.get(*index).map_or(0.0, |demand| demand.utilisation);
        of(a).total_cmp(&of(b)).then(b.cmp(a))
    });
    greatest.into_iter().chain((0..demands.len()).filter(|index| Some(*index) != greatest)).collect()
}
