//! One deck from text to everything that is known about its member.

use sha2::{Digest, Sha256};

use crate::analysis::stability::{self, BadChoice, Mechanism, Movement};
use crate::analysis::{self, Analysis};
use crate::crosscheck::{self, Row};
use crate::diagnostic::{Diagnostic, Severity};
use crate::member::build::{self, Attempt, Reading};
use crate::member::{Member, Place};
use crate::quantity::{Decimal, Length, Physical, parse_quantity};
use crate::results::{self, Agreement};
use crate::verdict::{self, Verdict};
use crate::working::{self, Demand, Mismatch, Working};

/// A solved deck.
#[derive(Clone, Debug)]
pub struct Calculation {
    /// The member.
    pub member: Member,
    /// Every intermediate.
    pub analysis: Analysis,
    /// What is found about it.
    pub verdict: Verdict,
    /// How well the independent checks agree.
    pub agreement: Agreement,
    /// SHA-256 of the deck, in hexadecimal.
    pub deck_sha256: String,
}

/// Why a deck has no results.
#[derive(Clone, Debug, PartialEq)]
pub enum Fault {
    /// The input is at fault.
    Input(Vec<Diagnostic>),
    /// Two routes to the same numbers disagree: the rows that do.
    Disagreement(Vec<String>),
    /// A fault of the program.
    Program(String),
}

impl Calculation {
    /// Reads and solves a deck.
    ///
    /// # Errors
    /// Faults of the deck; disagreement of the crosschecks; a fault of the program.
    pub fn new(text: &str) -> Result<Self, Fault> {
        Self::with_stations(text, &[])
    }

    /// The same with further stations, each typed as a length.
    ///
    /// # Errors
    /// As [`Self::new`]; a station that is no length on the member.
    pub fn with_stations(text: &str, stations: &[String]) -> Result<Self, Fault> {
        let mut member = member(text).map_err(Fault::Input)?;
        for station in stations {
            add_station(&mut member, station)?;
        }
        let analysis = analysis::solve(&member)
            .ok_or_else(|| Fault::Program("the equations of compatibility could not be solved".to_owned()))?;
        let verdict = verdict::weigh(&member, &analysis);
        let agreement = crosscheck(&member, &analysis)?;
        let deck_sha256 = hexadecimal(&Sha256::digest(text.as_bytes()));
        Ok(Self { member, analysis, verdict, agreement, deck_sha256 })
    }

    /// The derivation.
    ///
    /// # Errors
    /// A step whose replay differs from the analysis: a fault of the program.
    pub fn working(&self) -> Result<Working, Fault> {
        let demands: Vec<Demand> = self
            .verdict
            .checks
            .iter()
            .map(|check| Demand {
                limit: check.limit,
                combination: check.combination,
                span: check.span,
                deflection: check.deflection,
                spot: check.spot,
                allowable: check.allowable,
                utilisation: check.utilisation,
            })
            .collect();
        working::narrate(&self.member, &self.analysis, &demands)
            .map_err(|mismatches| Fault::Program(differing(&mismatches)))
    }

    /// The results as JSON, with the derivation where it is given.
    pub fn json(&self, working: Option<&Working>) -> serde_json::Value {
        results::json(&self.member, &self.analysis, &self.verdict, self.agreement, &self.deck_sha256, working)
    }
}

fn add_station(member: &mut Member, text: &str) -> Result<(), Fault> {
    let refused = |message: String| {
        let finding = Diagnostic {
            severity: Severity::Error,
            span: None,
            message,
            hint: "a station is a length from the left end, as in \"2.5 m\"".to_owned(),
        };
        Fault::Input(vec![finding])
    };
    let typed = parse_quantity(text).map_err(|fault| refused(format!("station \"{text}\": {}", fault.message)))?;
    let exact = typed.terms.iter().try_fold(Decimal::ZERO, |sum, term| {
        let length = term.unit.dimension() == Length::DIMENSION;
        length.then_some(())?;
        sum.plus(term.figure.times(term.unit.size()?.0)?)
    });
    let place = exact.map(|exact| Place::metres(exact.trimmed()));
    let Some(place) = place.filter(|place| *place >= Place::ZERO && *place <= member.end()) else {
        return Err(refused(format!("station \"{text}\" is no place on the member")));
    };
    if !member.stations.contains(&place) {
        member.stations.push(place);
        member.stations.sort_unstable();
        member.typed_places.entry(place).or_insert(typed);
    }
    Ok(())
}

fn differing(mismatches: &[Mismatch]) -> String {
    let rows = mismatches
        .iter()
        .take(5)
        .map(|m| format!("{}: {:e} in the analysis, {:e} replayed", m.title, m.expected, m.found));
    format!("{} steps differ from the analysis: {}", mismatches.len(), rows.collect::<Vec<_>>().join("; "))
}

/// Bytes in hexadecimal.
pub fn hexadecimal(bytes: &[u8]) -> String {
    bytes.iter().map(|byte| format!("{byte:02x}")).collect()
}

/// A stable member with a usable choice of redundants.
///
/// # Errors
/// Every fault of the deck, a mechanism, or the reason why the chosen redundants cannot be released.
pub fn member(text: &str) -> Result<Member, Vec<Diagnostic>> {
    let Attempt { reading, mut faults, geometry, redundants } = build::attempt(text);
    if geometry {
        faults.extend(unstable(&reading, redundants));
        faults.sort_by_key(|fault| fault.span.as_ref().map(|span| span.start));
    }
    if faults.is_empty() { Ok(reading.member) } else { Err(faults) }
}

/// What keeps a member from being solved: a mechanism, or redundants that cannot be released.
fn unstable(reading: &Reading, redundants: bool) -> Option<Diagnostic> {
    let Reading { member, supports, redundants: places, whole } = reading;
    if let Some(mechanism) = stability::mechanism(member) {
        let message = format!("the member is a mechanism: {}", moving(member, mechanism));
        let within = |place: Place| place >= mechanism.from && place <= mechanism.to;
        let near = member.supports.iter().zip(supports).find(|(support, _)| within(support.at)).map(|(_, span)| span);
        let place = near.or_else(|| supports.first()).unwrap_or(whole);
        let hint = "add a support, let a support hold rotation, or take out a hinge";
        return Some(Diagnostic::error(place.clone(), message).hint(hint));
    }
    let chosen = member.redundants.as_ref().filter(|_| redundants)?;
    match stability::check_choice(member, chosen).err()? {
        BadChoice::Count { needed, chosen } => {
            let count = if needed == 1 { "1 redundant".to_owned() } else { format!("{needed} redundants") };
            let verb = if chosen == 1 { "is" } else { "are" };
            let message = format!("the member has {count}, but {chosen} {verb} chosen");
            let hint = "choose as many as the degree of indeterminacy, or leave the choice out";
            Some(Diagnostic::error(whole.clone(), message).hint(hint))
        }
        BadChoice::Dependent { index, mechanism } => {
            let place = places.get(index).unwrap_or(whole);
            let name = chosen.get(index).map_or_else(String::new, |redundant| redundant.name(member));
            let message = format!("{name} cannot be released as well: {}", moving(member, mechanism));
            Some(Diagnostic::error(place.clone(), message).hint("choose redundants that leave a stable member"))
        }
    }
}

/// The movement that nothing holds, in words.
fn moving(member: &Member, mechanism: Mechanism) -> String {
    let part = format!("the part from {} to {}", called(member, mechanism.from), called(member, mechanism.to));
    match mechanism.movement {
        Movement::Any => format!("nothing holds {part}: it can shift and turn"),
        Movement::Turn(about) => format!("nothing holds the turn of {part} about {}", called(member, about)),
        Movement::Shift => format!("nothing holds the vertical shift of {part}"),
    }
}

fn called(member: &Member, place: Place) -> String {
    let support =
        member.supports.iter().find(|support| support.at == place).map(|support| format!("support {}", support.name));
    let hinge = member.hinges.iter().find(|hinge| hinge.at == place).map(|hinge| format!("hinge {}", hinge.name));
    hinge.or(support).unwrap_or_else(|| format!("x = {} m", place.exact()))
}

/// The largest relative disagreement that is taken for rounding.
const TOLERANCE: f64 = 1e-6;

/// Figures by the first and the second route, case by case.
pub fn both_routes(member: &Member, analysis: &Analysis) -> Vec<Row> {
    let mut rows = Vec::new();
    for (index, ((case, first), second)) in
        member.cases.iter().zip(&analysis.cases).zip(crosscheck::solve(member)).enumerate()
    {
        let mut forces = Vec::new();
        let mut moments = Vec::new();
        let pairs = first.total.reactions.iter().zip(&second.reactions);
        for (support, (ours, theirs)) in member.supports.iter().zip(pairs) {
            let name = |what: &str| format!("{what} of support {} in case {}", support.name, case.name);
            if support.holds_deflection() {
                forces.push((name("force"), ours.force, theirs.0));
            }
            if support.holds_rotation() {
                moments.push((name("moment"), ours.moment, theirs.1));
            }
        }
        // Moments are measured by the greatest moment anywhere, not only where a support takes one.
        let arms = member.end().x() * forces.iter().map(|(_, force, _)| force.abs()).fold(0.0, f64::max) * 1e-3;
        let Some(field) = analysis::Field::of_case(analysis, index) else { continue };
        let at = |place: Place| match field.model.cut_at(place) {
            Some(0) => field.ends(0).start.v,
            Some(cut) => field.ends(cut - 1).end.v,
            None => 0.0,
        };
        // Supports may all stand still: deflections are measured by the greatest one, the middles of pieces included.
        let pieces = analysis.model.pieces.iter().enumerate();
        let inside = pieces.flat_map(|(piece, geometry)| {
            [field.ends(piece).start.v, field.ends(piece).end.v, field.inside(piece, geometry.length / 2.0).v]
        });
        let greatest = inside.map(f64::abs).fold(0.0, f64::max);
        let named = |place: Place| format!("deflection at x = {} m in case {}", place.exact(), case.name);
        let mut deflections: Vec<(String, f64, f64)> =
            second.deflections.iter().map(|(place, v)| (named(*place), at(*place), *v)).collect();
        deflections.push((String::new(), greatest, greatest));
        moments.push((String::new(), arms, arms));
        // Where nothing but movements is imposed, forces are measured by what so stiff a member would need for them.
        let stiff = least_rigidity(member) * greatest / (member.end().x() * member.end().x()) * 1e-6;
        moments.push((String::new(), stiff, stiff));
        forces.push((String::new(), stiff / member.end().x(), stiff / member.end().x()));
        let pushes = moments.iter().map(|(_, moment, _)| moment.abs()).fold(0.0, f64::max) / member.end().x();
        forces.push((String::new(), pushes, pushes));
        let cuts = first.total.pieces.iter().flat_map(|piece| [piece.left, piece.right]);
        let (shear, moment) = cuts.fold((0.0_f64, 0.0_f64), |(shear, moment), cut| {
            (shear.max(cut.shear.abs()), moment.max(cut.moment.abs()))
        });
        forces.push((String::new(), shear.max(moment / member.end().x()), shear.max(moment / member.end().x())));
        moments.push((String::new(), moment, moment));
        for list in [forces, moments, deflections] {
            rows.extend(crosscheck::compare(&list).into_iter().filter(|row| !row.what.is_empty()));
        }
    }
    rows
}

/// The least EI of the member, N·m².
fn least_rigidity(member: &Member) -> f64 {
    let sections = member.segments.iter().flat_map(|s| [Some(s.section), s.taper.map(|taper| taper.to)]).flatten();
    let rigidity = sections.filter_map(|index| member.sections.get(index)).map(analysis::stiffness::rigidity);
    rigidity.fold(f64::INFINITY, f64::min)
}

/// Every independent check of a solved member.
///
/// # Errors
/// [`Fault::Disagreement`] with the figures that differ by more than 1e-6.
pub fn crosscheck(member: &Member, analysis: &Analysis) -> Result<Agreement, Fault> {
    let rows = both_routes(member, analysis);
    let pairs = |solution: &analysis::Solution| -> Vec<(f64, f64)> {
        solution.reactions.iter().map(|reaction| (reaction.force, reaction.moment)).collect()
    };
    let count = member.cases.len();
    let single = |case: usize| (0..count).map(|index| if index == case { 1.0 } else { 0.0 }).collect::<Vec<f64>>();
    let cases = analysis
        .cases
        .iter()
        .enumerate()
        .map(|(case, solution)| crosscheck::residual(member, &single(case), &pairs(&solution.total)));
    let combinations = member.combinations.iter().zip(&analysis.combinations).map(|(combination, solution)| {
        let factors: Vec<f64> = combination.factors.iter().map(|factor| factor.value).collect();
        crosscheck::residual(member, &factors, &pairs(solution))
    });
    let agreement = Agreement {
        equilibrium: cases.chain(combinations).fold(0.0, f64::max),
        second_method: crosscheck::largest(&rows),
        reciprocity: analysis.flexibility.asymmetry(),
    };
    let mut disagreeing: Vec<String> = rows
        .iter()
        .filter(|row| row.difference > TOLERANCE || row.difference.is_nan())
        .map(|row| {
            format!("{}: {:e} by the force method, {:e} by the stiffness method", row.what, row.first, row.second)
        })
        .collect();
    if agreement.equilibrium > TOLERANCE {
        disagreeing.push(format!("loads and reactions are out of balance by {:e} of their sum", agreement.equilibrium));
    }
    if agreement.reciprocity > TOLERANCE {
        disagreeing.push(format!("the flexibilities are not symmetric: {:e}", agreement.reciprocity));
    }
    if disagreeing.is_empty() { Ok(agreement) } else { Err(Fault::Disagreement(disagreeing)) }
}
