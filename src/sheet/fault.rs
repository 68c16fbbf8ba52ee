//! Why a sheet could not be made: data with the place, never a page that lacks something.

use std::fmt;

/// Why a sheet could not be made.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Fault {
    /// A text holds a character that no embedded font can print.
    Glyph {
        /// The character.
        character: char,
        /// Where it stands in the view model: `running.project`.
        place: String,
    },
    /// A template is at fault.
    Template {
        /// The template's file.
        file: String,
        /// Line in it, from 1; 0 where it is not known.
        line: usize,
        /// What is wrong.
        message: String,
    },
    /// The labels cannot be read.
    Labels {
        /// What is wrong.
        message: String,
    },
    /// A name under which no template is used.
    UnknownTemplate {
        /// The name.
        name: String,
        /// The names there are.
        known: Vec<String>,
    },
    /// The page could not be set.
    Setting {
        /// File of the Typst text, line and column from 1, where known.
        place: Option<(String, usize, usize)>,
        /// What is wrong.
        message: String,
    },
    /// An equation of the working is not plain mathematics: a fault of the program.
    Equation {
        /// Its source.
        source: String,
        /// What in it is not allowed.
        found: String,
    },
    /// A view model that points at a drawing it does not hold: a fault of the program.
    Picture {
        /// The index.
        index: usize,
    },
}

impl From<super::NotMathematics> for Fault {
    fn from(refused: super::NotMathematics) -> Self {
        Self::Equation { source: refused.source, found: refused.found }
    }
}

impl fmt::Display for Fault {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Glyph { character, place } => {
                let code = u32::from(*character);
                write!(out, "no font of the sheet can print the character {character:?} (U+{code:04X}) in {place}")
            }
            Self::Template { file, line, message } => write!(out, "template {file}, line {line}: {message}"),
            Self::Labels { message } => write!(out, "labels.toml: {message}"),
            Self::UnknownTemplate { name, known } => {
                write!(out, "no template is called {name:?}; there are {}", known.join(", "))
            }
            Self::Setting { place: Some((file, line, column)), message } => {
                write!(out, "setting the sheet, {file}, line {line}, column {column}: {message}")
            }
            Self::Setting { place: None, message } => write!(out, "setting the sheet: {message}"),
            Self::Equation { source, found } => write!(out, "the equation {source:?} holds {found:?}"),
            Self::Picture { index } => write!(out, "the sheet refers to drawing {index}, which does not exist"),
        }
    }
}

impl std::error::Error for Fault {}
