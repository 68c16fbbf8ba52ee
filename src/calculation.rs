//! One deck from text to everything that is known about its member.

use sha2::{Digest, Sha256};

use crate::analysis::stability::{self, BadChoice, Mechanism, Movement};
use crate::analysis::{self, Analysis};
use crate::diagnostic::Diagnostic;
use crate::member::build::{self, Reading};
use crate::member::{Member, Place};
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
        let member = member(text).map_err(Fault::Input)?;
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
    let Reading { member, redundants, whole, .. } = build::read(text)?;
    if let Some(mechanism) = stability::mechanism(&member) {
        let message = format!("the member is a mechanism: {}", moving(&member, mechanism));
        return Err(vec![
            Diagnostic::error(whole, message).hint("add a support, let a support hold rotation, or take out a hinge"),
        ]);
    }
    let Some(chosen) = &member.redundants else { return Ok(member) };
    let fault = match stability::check_choice(&member, chosen) {
        Ok(()) => return Ok(member),
        Err(BadChoice::Count { needed, chosen }) => {
            let place = redundants.first().cloned().unwrap_or(whole);
            Diagnostic::error(place, format!("the member has {needed} redundants, but {chosen} are chosen"))
                .hint("choose as many as the degree of indeterminacy, or leave the choice out")
        }
        Err(BadChoice::Dependent { index, mechanism }) => {
            let place = redundants.get(index).cloned().unwrap_or(whole);
            let name = chosen.get(index).map_or_else(String::new, |redundant| redundant.name(&member));
            let message = format!("{name} cannot be released as well: {}", moving(&member, mechanism));
            Diagnostic::error(place, message).hint("choose redundants that leave a stable member")
        }
    };
    Err(vec![fault])
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

fn crosscheck(_member: &Member, _analysis: &Analysis) -> Result<Agreement, Fault> {
    Ok(Agreement::default())
}
