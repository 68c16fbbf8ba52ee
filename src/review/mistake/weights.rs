//! Wrong factors: left out, squared, another combination's; forces in another unit; movements counted again in each case.

use super::edit;
use super::loads::{is_force, scaled};
use super::{Change, Mistake};
use crate::member::{Combination, Factor, LoadKind, Member, Nature, Purpose};
use crate::quantity::Decimal;
use crate::review::ask::Of;

/// What happens to the factors with which loads enter a state.
#[derive(Clone, Debug, PartialEq)]
pub enum Weights {
    /// Every factor of a combination is one; of every combination where none is named.
    One(Option<usize>),
    /// Every factor of a combination is applied twice; of every combination where none is named.
    Twice(Option<usize>),
    /// A combination takes the factors of another.
    Taken {
        /// The combination.
        combination: usize,
        /// Whose factors it takes.
        from: usize,
    },
    /// A case has another factor in a combination.
    Factor {
        /// The combination.
        combination: usize,
        /// The case.
        case: usize,
        /// The factor it gets.
        factor: Decimal,
    },
    /// Every force, couple and weight times a factor.
    Forces(Decimal),
    /// Every case that pushes holds the movements of all cases besides.
    MovementsInEachCase,
}

/// A member's states and what enters them.
pub fn weight(change: Option<&Weights>, member: &Member, of: &Of, case: usize, kind: &LoadKind) -> f64 {
    match change {
        Some(Weights::Forces(factor)) if is_force(kind) => factor.to_f64() * plain(member, of, case),
        Some(Weights::MovementsInEachCase) if is_movement(kind) => {
            pushing(member).into_iter().map(|case| plain(member, of, case)).sum()
        }
        None | Some(Weights::Forces(_) | Weights::MovementsInEachCase) => plain(member, of, case),
        Some(change) => match of {
            Of::Case(_) => plain(member, of, case),
            Of::Combination(name) => {
                let index = member.combinations.iter().position(|combination| combination.name == *name);
                index.map_or(0.0, |index| factor(change, member, index, case).value)
            }
        },
    }
}

fn plain(member: &Member, of: &Of, case: usize) -> f64 {
    match of {
        Of::Case(name) => f64::from(u8::from(member.cases.get(case).is_some_and(|known| known.name == *name))),
        Of::Combination(name) => {
            let known = member.combinations.iter().find(|combination| combination.name == *name);
            known.and_then(|known| known.factors.get(case)).map_or(0.0, |factor| factor.value)
        }
    }
}

fn is_movement(kind: &LoadKind) -> bool {
    matches!(kind, LoadKind::Settlement { .. } | LoadKind::Rotation { .. })
}

/// Cases that hold more than movements.
fn pushing(member: &Member) -> Vec<usize> {
    let pushes = |index: &usize| {
        member.cases.get(*index).is_some_and(|case| case.loads.iter().any(|load| !is_movement(&load.kind)))
    };
    (0..member.cases.len()).filter(pushes).collect()
}

fn exact(figure: Decimal) -> Factor {
    Factor { value: figure.to_f64(), figure }
}

/// The factor of a case in a combination after the change.
fn factor(change: &Weights, member: &Member, combination: usize, case: usize) -> Factor {
    let of = |index: usize| -> Factor {
        let found = member.combinations.get(index).and_then(|combination| combination.factors.get(case));
        found.copied().unwrap_or(exact(Decimal::ZERO))
    };
    let own = of(combination);
    let touched = |wanted: &Option<usize>| wanted.is_none_or(|wanted| wanted == combination);
    match change {
        Weights::One(wanted) if touched(wanted) && own.value != 0.0 => {
            exact(Decimal::new(if own.value < 0.0 { -1 } else { 1 }, 0))
        }
        Weights::Twice(wanted) if touched(wanted) => {
            let size = if own.figure.mantissa() < 0 { Decimal::ZERO.minus(own.figure) } else { Some(own.figure) };
            size.and_then(|size| own.figure.times(size)).map_or(own, exact)
        }
        Weights::Taken { combination: wanted, from } if *wanted == combination => of(*from),
        Weights::Factor { combination: wanted, case: which, factor } if *wanted == combination && *which == case => {
            exact(*factor)
        }
        _ => own,
    }
}

/// The member under the change.
pub fn apply(change: &Weights, member: &Member) -> Option<Member> {
    let mut changed = member.clone();
    match change {
        Weights::Forces(by) => {
            for load in changed.cases.iter_mut().flat_map(|case| &mut case.loads) {
                if load.kind == LoadKind::SelfWeight {
                    continue;
                }
                if is_force(&load.kind) {
                    load.kind = scaled(&load.kind, *by)?.pop()?;
                }
            }
            for section in &mut changed.sections {
                section.weight = match section.weight.take() {
                    Some(weight) => Some(lighter(weight, *by)?),
                    None => None,
                };
            }
        }
        Weights::MovementsInEachCase => {
            let movements = |index: usize| {
                let loads = member.cases.get(index).map_or(&[][..], |case| &case.loads);
                loads.iter().filter(|load| is_movement(&load.kind)).cloned().collect::<Vec<_>>()
            };
            let pushing = pushing(member);
            for (index, case) in changed.cases.iter_mut().enumerate() {
                case.loads.retain(|load| !is_movement(&load.kind));
                if pushing.contains(&index) {
                    case.loads.extend((0..member.cases.len()).flat_map(movements));
                }
            }
        }
        _ => {
            for (index, combination) in changed.combinations.iter_mut().enumerate() {
                let cases = 0..combination.factors.len();
                combination.factors = cases.map(|case| factor(change, member, index, case)).collect();
            }
        }
    }
    edit::sound(changed)
}

fn lighter(weight: crate::member::Weight, by: Decimal) -> Option<crate::member::Weight> {
    use crate::member::Weight;
    Some(match weight {
        Weight::PerLength(w) => Weight::PerLength(edit::times(&w, by)?),
        Weight::MassPerLength(mass) => Weight::MassPerLength(edit::times(&mass, by)?),
        Weight::Mass(area, density) => Weight::Mass(area, edit::times(&density, by)?),
        Weight::Specific(area, weight) => Weight::Specific(area, edit::times(&weight, by)?),
    })
}

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    let mut push = |name: &str, place: String, words: String, weights: Weights| {
        list.push(Mistake::new(name, place, words, Change::Weights(weights)));
    };
    let factored = |combination: &&Combination| {
        combination.factors.iter().any(|factor| factor.value != 0.0 && factor.value.abs() != 1.0)
    };
    let many = member.combinations.iter().filter(factored).count() > 1;
    if many {
        let place = "every combination".to_owned();
        push("factors-omitted", place.clone(), "every factor taken as one".to_owned(), Weights::One(None));
        push("factors-applied-twice", place, "every factor applied twice".to_owned(), Weights::Twice(None));
    }
    for (index, combination) in member.combinations.iter().enumerate() {
        let (name, place) = (&combination.name, format!("combination {}", combination.name));
        if factored(&combination) {
            let words = format!("every factor of combination {name} taken as one");
            push("factors-omitted", place.clone(), words, Weights::One(Some(index)));
            let words = format!("every factor of combination {name} applied twice");
            push("factors-applied-twice", place.clone(), words, Weights::Twice(Some(index)));
        }
        for (from, other) in member.combinations.iter().enumerate() {
            if from != index && other.factors != combination.factors {
                let words = format!("combination {name} with the factors of {}", other.name);
                let place = format!("{place} / combination {}", other.name);
                push("factors-of-another-combination", place, words, Weights::Taken { combination: index, from });
            }
        }
        for (case, factor) in combination.factors.iter().enumerate() {
            let Some(known) = member.cases.get(case) else { continue };
            let favourable = combination.purpose != Purpose::Serviceability
                && known.nature == Nature::Permanent
                && (0.85..=1.0).contains(&factor.value);
            let snow = known.nature == Nature::Snow && [1.0, 1.6].contains(&factor.value);
            let place = format!("combination {name}, case {}", known.name);
            if favourable {
                let words = format!("case {} counted with 1.35 in combination {name}", known.name);
                let factor = Decimal::new(135, -2);
                push(
                    "favourable-load-increased",
                    place.clone(),
                    words,
                    Weights::Factor { combination: index, case, factor },
                );
            }
            if snow {
                let factor = if factor.value == 1.0 { Decimal::new(16, -1) } else { Decimal::ONE };
                let words = format!("case {} counted with {factor} in combination {name}", known.name);
                push(
                    "snow-factor-of-another-edition",
                    place,
                    words,
                    Weights::Factor { combination: index, case, factor },
                );
            }
        }
    }
    let loads = || member.cases.iter().flat_map(|case| &case.loads);
    if loads().any(|load| is_force(&load.kind)) {
        for (factor, name, words) in [
            (1.0 / 4.448_22, "kips-read-as-kilonewtons", "every force a kip figure short: divided by 4.44822"),
            (4.448_22, "kilonewtons-read-as-kips", "every force times 4.44822"),
        ] {
            let factor = Weights::Forces(Decimal::nearest(factor, 12));
            push(name, "every load".to_owned(), words.to_owned(), factor);
        }
    }
    let movements = loads().any(|load| is_movement(&load.kind));
    if movements && pushing(member).len() > 1 {
        let words = "the movements of supports counted again in every case".to_owned();
        push("settlement-counted-per-case", "every case".to_owned(), words, Weights::MovementsInEachCase);
    }
    list
}
