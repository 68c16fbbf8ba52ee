//! Templates: the structure of a sheet as minijinja files that put Typst code together.

use std::collections::BTreeMap;

use minijinja::syntax::SyntaxConfig;
use minijinja::value::{Serde, Value};
use minijinja::{AutoEscape, Environment, Error, ErrorKind, Output, State, UndefinedBehavior};

use super::drawing::{self, plain};
use super::prose::{self, literal, short};
use super::{Equation, Fault};
use crate::figure::Drawing;

/// The file that includes the others.
const MAIN: &str = "sheet.typ.j2";
/// Labels: every word that a template prints of its own.
const LABELS: &str = "labels.toml";
/// The module of Typst functions that the templates call.
const STYLE: &str = "style.typ";

/// Size of running heads, for cutting them.
const HEAD_PT: f64 = 9.0;

macro_rules! embedded {
    ($($name:literal),* $(,)?) => {
        [$(($name, include_str!(concat!("../../templates/", $name)))),*]
    };
}

/// Every file, as it was when the program was built.
const FILES: [(&str, &str); 15] = embedded![
    "sheet.typ.j2",
    "parts.typ.j2",
    "answer.typ.j2",
    "given.typ.j2",
    "method.typ.j2",
    "working.typ.j2",
    "sums.typ.j2",
    "diagrams.typ.j2",
    "checks.typ.j2",
    "trust.typ.j2",
    "annex.typ.j2",
    "brief.typ.j2",
    "review.typ.j2",
    "style.typ",
    "labels.toml",
];

/// The files a sheet is put together from.
#[derive(Clone, Debug)]
pub struct Templates {
    files: BTreeMap<String, String>,
}

impl Default for Templates {
    fn default() -> Self {
        Self { files: FILES.iter().map(|(name, text)| ((*name).to_owned(), (*text).to_owned())).collect() }
    }
}

impl Templates {
    /// Puts an office's own file in the place of the embedded one of that name.
    pub fn replace(&mut self, name: &str, text: impl Into<String>) -> Result<(), Fault> {
        match self.files.get_mut(name) {
            Some(file) => {
                *file = text.into();
                Ok(())
            }
            None => Err(Fault::UnknownTemplate { name: name.to_owned(), known: self.files.keys().cloned().collect() }),
        }
    }

    /// SHA-256 of the files that are not the embedded ones, with their names; `None` where all are.
    pub fn own_hash(&self) -> Option<String> {
        use sha2::{Digest, Sha256};
        let own = FILES.iter().filter_map(|(name, text)| {
            let now = self.files.get(*name)?;
            (now != text).then_some((*name, now))
        });
        let mut hash = Sha256::new();
        let mut any = false;
        for (name, text) in own {
            any = true;
            hash.update(format!("{name} {}\n{text}", text.len()));
        }
        any.then(|| hash.finalize().iter().map(|byte| format!("{byte:02x}")).collect())
    }

    /// The labels as a tree of tables and words.
    pub fn labels(&self) -> Result<Labels, Fault> {
        let text = self.files.get(LABELS).map_or("", String::as_str);
        let tree = toml::from_str(text).map_err(|error| Fault::Labels { message: error.to_string() })?;
        Ok(Labels { tree })
    }

    /// Where in the templates a line of the text they were put together to comes from: the file that the last mark before
    /// it names, and the line there that begins most like it; 0 where none does.
    pub(super) fn origin(&self, text: &str, line: usize) -> Option<(String, usize)> {
        let above: Vec<&str> = text.lines().take(line).collect();
        let wanted = above.last()?.trim();
        let name = above.iter().rev().find_map(|line| line.trim().strip_prefix("//@ "))?.trim().to_owned();
        let alike = |line: &str| line.trim().chars().zip(wanted.chars()).take_while(|(a, b)| a == b).count();
        let lines = self.files.get(&name)?.lines().enumerate();
        let best =
            lines.map(|(index, line)| (alike(line), index + 1)).max_by_key(|(same, index)| (*same, usize::MAX - index));
        Some((name, best.filter(|(same, _)| *same >= 4).map_or(0, |(_, index)| index)))
    }

    /// The Typst module beside the sheet: its name and text.
    pub(super) fn modules(&self) -> Vec<(String, String)> {
        self.files.iter().filter(|(name, _)| *name == STYLE).map(|(name, text)| (name.clone(), text.clone())).collect()
    }

    /// Puts the sheet together.
    pub(super) fn fill(&self, view: &Value, drawings: &[Drawing], extra: Value) -> Result<String, Fault> {
        let mut environment = Environment::new();
        environment.set_undefined_behavior(UndefinedBehavior::Strict);
        environment.set_auto_escape_callback(|_| AutoEscape::Custom("typst".into()));
        environment.set_formatter(format_value);
        environment.set_syntax(SyntaxConfig::builder().trim_blocks(true).lstrip_blocks(true).build().map_err(fault)?);
        for (name, text) in self.files.iter().filter(|(name, _)| name.ends_with(".j2")) {
            environment.add_template(name, text).map_err(fault)?;
        }
        environment.add_global("label", Value::from(Serde(self.labels()?.tree)));
        for name in ["safe", "escape", "e"] {
            environment.remove_filter(name);
        }
        environment.add_filter("prose", |text: &str| code(prose::prose(text)));
        environment.add_filter("figures", |text: &str| code(prose::undivided(text)));
        environment.add_filter("plain", |text: &str| code(prose::plain(text)));
        environment.add_filter("short", |text: &str, width: f64| short(text, width, HEAD_PT));
        environment.add_filter("mm", |value: f64| code(format!("{}mm", plain(value))));
        environment.add_filter("em", |value: f64| code(format!("{}em", plain(value))));
        environment.add_filter("count", |value: i64| code(value.to_string()));
        environment.add_filter("number", |value: i64| value.to_string());
        environment.add_filter("word", |text: &str| code(text.chars().filter(char::is_ascii_alphabetic).collect()));
        environment.add_filter("flag", |value: bool| code(value.to_string()));
        environment.add_filter("math", math);
        let drawings: Vec<String> = drawings.iter().map(drawing::code).collect();
        environment.add_filter("picture", move |index: usize| {
            let text = drawings.get(index).cloned().map(code);
            text.ok_or_else(|| Error::new(ErrorKind::InvalidOperation, format!("there is no drawing {index}")))
        });
        let context = minijinja::context! { ..extra, ..view.clone() };
        let template = environment.get_template(MAIN).map_err(fault)?;
        template.render(context).map_err(fault)
    }
}

/// Typst code made by this program. The mark that minijinja calls safe has no other source here: the filters by which a
/// template could set it are taken away.
fn code(text: String) -> Value {
    Value::from_safe_string(text)
}

/// Strings become literals; code of this program, and what macros put together from both, stands as it is; all else is
/// refused, so that no figure reaches a page but through the view model.
fn format_value(out: &mut Output<'_>, _: &mut State<'_, '_>, value: &Value) -> Result<(), Error> {
    let written = match value.as_str() {
        Some(text) if value.is_safe() => out.write_str(text),
        Some(text) => out.write_str(&literal(text)),
        None => {
            let message = format!("only text, or a value behind a filter, can be printed; this is {}", value.kind());
            return Err(Error::new(ErrorKind::BadEscape, message));
        }
    };
    written.map_err(Error::from)
}

/// An equation of the view model, checked once more.
fn math(equation: &Value) -> Result<Value, Error> {
    let part = |name: &str| equation.get_attr(name).map(|value| value.as_str().unwrap_or_default().to_owned());
    let (source, alt) = (part("source")?, part("alt")?);
    let equation = Equation::new(source, alt).map_err(|refused| {
        Error::new(ErrorKind::InvalidOperation, format!("not plain mathematics: {}", refused.source))
    })?;
    Ok(code(format!("eq({}, ${}$)", literal(equation.alt()), equation.source())))
}

/// The innermost of nested errors: that of the file at fault, not of those that include it.
fn fault(error: Error) -> Fault {
    let mut inner: &Error = &error;
    while let Some(next) = std::error::Error::source(inner).and_then(|source| source.downcast_ref::<Error>()) {
        inner = next;
    }
    let kind = inner.kind().to_string();
    let message = inner.detail().map_or(kind.clone(), |detail| format!("{kind}: {detail}"));
    Fault::Template { file: inner.name().unwrap_or(MAIN).to_owned(), line: inner.line().unwrap_or_default(), message }
}

/// The words of the templates.
#[derive(Clone, Debug)]
pub struct Labels {
    tree: toml::Table,
}

impl Labels {
    /// A word by its path: `given.limits`.
    pub fn get(&self, path: &str) -> Result<&str, Fault> {
        let missing = || Fault::Labels { message: format!("there is no label {path}") };
        let mut parts = path.split('.');
        let first = parts.next().and_then(|part| self.tree.get(part)).ok_or_else(missing)?;
        let found = parts.try_fold(first, |value, part| value.get(part)).ok_or_else(missing)?;
        found.as_str().ok_or_else(missing)
    }

    /// A word by its path, with `{}` in it replaced.
    pub fn with(&self, path: &str, value: &str) -> Result<String, Fault> {
        Ok(self.get(path)?.replace("{}", value))
    }

    /// A list of words by its path: `months`.
    pub fn list(&self, path: &str) -> Result<Vec<String>, Fault> {
        let missing = || Fault::Labels { message: format!("there is no list of labels {path}") };
        let list = self.tree.get(path).and_then(toml::Value::as_array).ok_or_else(missing)?;
        Ok(list.iter().filter_map(toml::Value::as_str).map(str::to_owned).collect())
    }
}
