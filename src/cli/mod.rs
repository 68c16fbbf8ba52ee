//! The command line: one thin file a command.

mod args;
mod claims;
mod extract;
mod new;
mod output;
mod review;
mod sheet;
mod solve;
mod verify;
mod write;

use std::process::ExitCode;

use clap::Parser;

use args::{Args, Command};

/// How a command ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// Done, and everything holds.
    Holds,
    /// Could not be done.
    Failed,
    /// The input is at fault; nothing was written.
    BadInput,
    /// Done, but something does not hold.
    Fails,
}

impl From<Outcome> for ExitCode {
    fn from(outcome: Outcome) -> Self {
        Self::from(match outcome {
            Outcome::Holds => 0,
            Outcome::Failed => 1,
            Outcome::BadInput => 2,
            Outcome::Fails => 3,
        })
    }
}

/// Runs the command line.
pub fn run() -> Outcome {
    let args = match Args::try_parse() {
        Ok(args) => args,
        Err(error) => {
            // Help and version are not faults.
            let fault = error.use_stderr();
            let _ = error.print();
            return if fault { Outcome::BadInput } else { Outcome::Holds };
        }
    };
    match args.command {
        Command::Sheet { deck, output, paper, detail, templates, without_attachments } => {
            sheet::run(&deck, output, &sheet::Said { paper, detail, templates, without_attachments })
        }
        Command::Solve { deck, json, working, at } => solve::run(&deck, json, working, &at),
        Command::Review { claims, sheet, deck, output, json } => {
            review::run(&review::Said { claims, sheet, deck, output, json })
        }
        Command::Claims { deck, output } => claims::run(&deck, output.as_deref()),
        Command::Extract { sheet, folder } => extract::run(&sheet, &folder),
        Command::Verify { sheet, templates } => verify::run(&sheet, templates.as_deref()),
        Command::New { file } => new::run(&file),
    }
}
