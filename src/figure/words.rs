//! What only the working can say: names of cuts and derived figures, as text.

/// A cut of the member: a place and its name.
#[derive(Clone, Debug, PartialEq)]
pub struct Cut {
    /// Metres from the member's left end.
    pub at: f64,
    /// Its name in the working.
    pub name: String,
}

/// Texts for labels that come from steps, so that a drawing prints no figure of its own.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Words {
    /// Names of cuts; a cut at a support goes by the support's name.
    pub cuts: Vec<Cut>,
    /// EI of each section with its unit; where it is absent or empty, E times I to five figures is shown.
    pub rigidity: Vec<String>,
    /// Weight of the member, for the load that stands for it: `0.42 kN/m`; may be empty.
    pub self_weight: String,
    /// Sentence on the total load of a case; may be empty.
    pub total: String,
}
