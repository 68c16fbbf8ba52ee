//! What a deck says about itself as a document: revisions, assumptions, sources, and how its sheet is to be printed.

/// The paper side of a deck.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Record {
    /// Revisions, in the deck's order.
    pub revisions: Vec<Revision>,
    /// Assumptions, in the deck's order.
    pub assumptions: Vec<Assumption>,
    /// Sources of sections, segments, supports, loads and limits, and which of them wait for confirmation.
    pub declared: Vec<Declared>,
    /// How the sheet is to be printed.
    pub sheet: SheetWishes,
    /// How long the calculation is to be kept, in words.
    pub retention: Option<String>,
}

/// One revision.
#[derive(Clone, Debug, PartialEq)]
pub struct Revision {
    /// Its letter or number.
    pub letter: String,
    /// Year, month, day.
    pub date: (u16, u8, u8),
    /// What changed.
    pub what: String,
    /// Why it changed.
    pub why: String,
    /// Which results moved; may be empty.
    pub moved: String,
}

/// An assumption.
#[derive(Clone, Debug, PartialEq)]
pub struct Assumption {
    /// What is assumed.
    pub text: String,
    /// Whether it waits for confirmation.
    pub confirm: bool,
    /// Where it comes from; may be empty.
    pub source: String,
}

/// What a part of the deck a source or a mark belongs to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Part {
    /// The section with this index.
    Section(usize),
    /// The segment with this index.
    Segment(usize),
    /// The support with this index.
    Support(usize),
    /// A load: its case and its number there.
    Load(usize, usize),
    /// The limit with this index.
    Limit(usize),
}

/// Where something typed comes from, and whether it waits for confirmation.
#[derive(Clone, Debug, PartialEq)]
pub struct Declared {
    /// What it is about.
    pub part: Part,
    /// The same in words: `section deep`.
    pub words: String,
    /// Its source; may be empty.
    pub source: String,
    /// Whether it waits for confirmation.
    pub confirm: bool,
}

/// How the sheet is to be printed; the command line may say otherwise.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct SheetWishes {
    /// Letter paper instead of A4.
    pub letter: Option<bool>,
    /// The number of the first sheet, 1 to 9999.
    pub first_sheet: Option<usize>,
    /// The short form instead of the full one.
    pub brief: Option<bool>,
    /// Decimals of the figures that are not part of the working's arithmetic.
    pub decimals: Decimals,
    /// A comma instead of a point before the decimals.
    pub decimal_comma: bool,
}

/// Decimals asked for by quantity, 0 to 9 each, in the unit the quantity is printed in; `None` where the sheet chooses.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct Decimals {
    /// Forces, shear, reactions: kN or kip.
    pub force: Option<u8>,
    /// Moments: kN m or kip ft.
    pub moment: Option<u8>,
    /// Deflections and settlements: mm or in.
    pub deflection: Option<u8>,
    /// Turns and slopes: mrad.
    pub turn: Option<u8>,
    /// Places and lengths: m or ft.
    pub length: Option<u8>,
    /// Loads per length: kN/m or kip/ft.
    pub intensity: Option<u8>,
    /// Demand over what is allowed.
    pub utilisation: Option<u8>,
}

impl Decimals {
    /// The deck's word for each quantity.
    pub const KEYS: [&'static str; 7] = ["force", "moment", "deflection", "turn", "length", "intensity", "utilisation"];

    /// The decimals of a quantity by the deck's word for it.
    pub(super) fn slot(&mut self, key: &str) -> Option<&mut Option<u8>> {
        Some(match key {
            "force" => &mut self.force,
            "moment" => &mut self.moment,
            "deflection" => &mut self.deflection,
            "turn" => &mut self.turn,
            "length" => &mut self.length,
            "intensity" => &mut self.intensity,
            "utilisation" => &mut self.utilisation,
            _ => return None,
        })
    }
}

impl Record {
    /// What was declared about a part.
    pub fn of(&self, part: Part) -> Option<&Declared> {
        self.declared.iter().find(|declared| declared.part == part)
    }

    /// A sentence for every value and assumption that waits for confirmation, in the order of the deck's tables:
    /// sections, segments, supports, loads, limits, assumptions.
    pub fn unconfirmed(&self) -> Vec<String> {
        let waiting = |source: &str| {
            let source = source.trim().trim_end_matches('.');
            let source = if source.is_empty() { String::new() } else { format!(" (source: {source})") };
            format!("waits for confirmation{source}")
        };
        let values = self.declared.iter().filter(|declared| declared.confirm).map(|declared| {
            let mut words = declared.words.clone();
            if let Some(first) = words.get_mut(0..1) {
                first.make_ascii_uppercase();
            }
            format!("{words}: {}.", waiting(&declared.source))
        });
        let assumed = self.assumptions.iter().enumerate().filter(|(_, assumption)| assumption.confirm);
        let assumed = assumed.map(|(index, assumption)| {
            let text = assumption.text.trim().trim_end_matches('.');
            format!("Assumption {}: {}: {text}.", index + 1, waiting(&assumption.source))
        });
        values.chain(assumed).collect()
    }
}
