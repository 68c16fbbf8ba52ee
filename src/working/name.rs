//! How figures are called within one step.

use super::draft::{Builder, Draft, Symbol};
use super::notation::{self, Names};
use super::trace::{Source, Traced};
use crate::quantity::Decimal;

/// A symbol in ASCII, with what tells it apart: `v_C_G`.
pub fn ascii(symbol: &Symbol, tag: &str) -> String {
    let parts = [symbol.base, symbol.sub.as_str(), tag].into_iter().filter(|part| !part.is_empty());
    parts.collect::<Vec<_>>().join("_")
}

/// A symbol in Typst math. Subscripts are quoted text of letters, digits and underscores only, as names of decks are.
pub fn typeset(symbol: &Symbol, tag: &str) -> String {
    let base = match symbol.base {
        "EI" => "E I",
        "GA" => "G A",
        "dT" => "Delta T",
        "As" => "A",
        other => other,
    };
    let shear = if symbol.base == "As" { "s" } else { "" };
    let parts: Vec<&str> = [shear, symbol.sub.as_str(), tag].into_iter().filter(|part| !part.is_empty()).collect();
    let plain = |part: &str| -> String {
        part.chars().filter(|c| c.is_ascii_alphanumeric() || matches!(c, '_' | '.' | '-')).collect()
    };
    if parts.is_empty() {
        return base.to_owned();
    }
    let sub: Vec<String> = parts.iter().map(|part| plain(part)).collect();
    format!("{base}_\"{}\"", sub.join(","))
}

/// A figure in Typst math: small ones as a power of ten.
pub fn figure(decimal: Decimal) -> String {
    match powers(decimal) {
        Some((mantissa, power)) => format!("{mantissa} dot 10^({power})"),
        None => decimal.to_string(),
    }
}

/// Mantissa and power of ten of a figure too small (or large) to be read with its zeros; `None` for others.
pub fn powers(decimal: Decimal) -> Option<(Decimal, i32)> {
    if decimal.is_zero() {
        return None;
    }
    let digits = i32::try_from(decimal.mantissa().unsigned_abs().to_string().len()).ok()?;
    let lead = digits - 1 + decimal.exponent();
    (!(-3..=9).contains(&lead)).then(|| (Decimal::new(decimal.mantissa(), 1 - digits), lead))
}

/// The names of one step's inputs.
pub struct Naming<'a> {
    expression: Option<&'a Traced>,
    draft: &'a Draft,
    inputs: Vec<(Source, String, String, Option<Decimal>)>,
}

/// Which rendering is wanted.
#[derive(Clone, Copy)]
enum Style {
    Ascii,
    Math,
    Figures,
    Words,
}

struct Styled<'a>(&'a Naming<'a>, Style);

impl Names for Styled<'_> {
    fn name(&self, source: Source) -> String {
        let Some((_, ascii, math, printed)) = self.0.entry(source) else { return String::new() };
        match self.1 {
            Style::Ascii => ascii.clone(),
            Style::Math => math.clone(),
            Style::Figures => printed.map_or_else(String::new, figure),
            Style::Words => ascii.replace('_', " "),
        }
    }

    fn negative(&self, source: Source) -> bool {
        let Some((.., Some(printed))) = self.0.entry(source) else { return false };
        matches!(self.1, Style::Figures) && (printed.mantissa() < 0 || powers(*printed).is_some())
    }
}

impl<'a> Naming<'a> {
    /// Names every input of a draft so that no two are alike.
    pub fn new(builder: &'a Builder, draft: &'a Draft, printed: &[Option<Decimal>]) -> Self {
        let expression = draft.expression.as_ref();
        let sources = expression.map(Traced::sources).unwrap_or_default();
        let mut inputs: Vec<(Source, String, String, Option<Decimal>)> = Vec::new();
        for source in sources {
            let (symbol, tag, figure) = match source {
                Source::Deck(index) => match builder.figures.get(index) {
                    Some(figure) => (&figure.symbol, "", Some(figure.figure)),
                    None => continue,
                },
                Source::Step(index) => match builder.drafts.get(index) {
                    Some(input) => {
                        let same = input.tag == draft.tag;
                        (
                            &input.symbol,
                            if same { "" } else { input.tag.as_str() },
                            printed.get(index).copied().flatten(),
                        )
                    }
                    None => continue,
                },
            };
            let (mut name, mut math) = (ascii(symbol, tag), typeset(symbol, tag));
            let mut copy = 1;
            while inputs.iter().any(|(_, known, ..)| *known == name) {
                copy += 1;
                let tagged = if tag.is_empty() { copy.to_string() } else { format!("{tag}_{copy}") };
                (name, math) = (ascii(symbol, &tagged), typeset(symbol, &tagged));
            }
            inputs.push((source, name, math, figure));
        }
        Self { expression, draft, inputs }
    }

    fn entry(&self, source: Source) -> Option<&(Source, String, String, Option<Decimal>)> {
        self.inputs.iter().find(|(known, ..)| *known == source)
    }

    /// The sources in the order of first appearance.
    pub fn sources(&self) -> Vec<Source> {
        self.inputs.iter().map(|(source, ..)| *source).collect()
    }

    /// ASCII name of a source.
    pub fn ascii(&self, source: Source) -> String {
        Styled(self, Style::Ascii).name(source)
    }

    /// The same in Typst math.
    pub fn typeset(&self, source: Source) -> String {
        Styled(self, Style::Math).name(source)
    }

    /// The expression in the grammar of the results.
    pub fn expression(&self) -> Option<String> {
        Some(notation::text(self.expression?, &Styled(self, Style::Ascii)))
    }

    /// The expression in Typst math.
    pub fn math(&self) -> String {
        self.expression.map_or_else(String::new, |e| notation::math(e, &Styled(self, Style::Math), false))
    }

    /// The same with numbers put in.
    pub fn numbers(&self) -> String {
        self.expression.map_or_else(String::new, |e| notation::math(e, &Styled(self, Style::Figures), true))
    }

    /// The step read out.
    pub fn spoken(&self, result: Decimal) -> String {
        let name = ascii(&self.draft.symbol, "").replace('_', " ");
        let unit = self.draft.unit.to_string();
        let end = format!("{result} {unit}");
        match self.expression {
            None => format!("{name} equals {}", end.trim_end()),
            Some(e) => {
                let words = notation::spoken(e, &Styled(self, Style::Words));
                let numbers = notation::spoken(e, &Styled(self, Style::Figures));
                format!("{name} equals {words}, that is {numbers}, which is {}", end.trim_end())
            }
        }
    }
}
