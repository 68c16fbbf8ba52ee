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
    /// The number of the first sheet.
    pub first_sheet: Option<usize>,
    /// The short form instead of the full one.
    pub brief: Option<bool>,
}

impl Record {
    /// What was declared about a part.
    pub fn of(&self, part: Part) -> Option<&Declared> {
        self.declared.iter().find(|declared| declared.part == part)
    }

    /// A sentence for every value and assumption that waits for confirmation.
    pub fn unconfirmed(&self) -> Vec<String> {
        let values = self.declared.iter().filter(|declared| declared.confirm).map(|declared| {
            let mut words = declared.words.clone();
            if let Some(first) = words.get_mut(0..1) {
                first.make_ascii_uppercase();
            }
            if declared.source.is_empty() {
                format!("{words}, without a source.")
            } else {
                format!("{words}, source: {}.", declared.source.trim_end_matches('.'))
            }
        });
        let assumed = self.assumptions.iter().filter(|assumption| assumption.confirm).map(|assumption| {
            if assumption.source.is_empty() {
                assumption.text.clone()
            } else {
                format!("{} (source: {})", assumption.text, assumption.source)
            }
        });
        values.chain(assumed).collect()
    }
}
