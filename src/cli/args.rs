//! The command line's grammar; clap's types stand here only.

use std::path::PathBuf;

use clap::{Parser, Subcommand, ValueEnum};

/// Calculation sheets for beams that a checker follows by hand.
#[derive(Debug, Parser)]
#[command(name = "proofspan", version, after_help = "Example: proofspan sheet examples/intake-beam.toml")]
pub struct Args {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
}

/// What to do.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Write the calculation sheet of a deck as a PDF.
    #[command(
        after_help = "Example: proofspan sheet examples/intake-beam.toml -o intake.pdf\n\nExit status: 0 every limit holds, 1 could not be done, 2 the deck is at fault, 3 a limit is exceeded."
    )]
    Sheet {
        /// The deck.
        deck: PathBuf,
        /// Where to write; beside the deck, with the ending pdf, where nothing is said.
        #[arg(short, long)]
        output: Option<PathBuf>,
        /// The paper; where nothing is said, what the deck says, else A4.
        #[arg(long, value_enum)]
        paper: Option<PaperSize>,
        /// Every step, or answer, figures, reactions and checks alone; where nothing is said, what the deck says.
        #[arg(long, value_enum)]
        detail: Option<Detail>,
        /// A folder with the office's own files in the place of templates of the same names.
        #[arg(long, value_name = "DIR")]
        templates: Option<PathBuf>,
        /// Leave deck and results out of the PDF, for portals that refuse attachments; their hashes are printed all the same.
        #[arg(long)]
        without_attachments: bool,
    },
    /// Print results without a PDF.
    #[command(
        after_help = "Example: proofspan solve examples/intake-beam.toml --at \"2.5 m\"\n         proofspan solve examples/intake-beam.toml --json --working"
    )]
    Solve {
        /// The deck.
        deck: PathBuf,
        /// Print one JSON object in SI base units.
        #[arg(long)]
        json: bool,
        /// With --json: add the derivation.
        #[arg(long, requires = "json")]
        working: bool,
        /// A further station, as in "2.5 m"; may be repeated.
        #[arg(long, value_name = "STATION")]
        at: Vec<String>,
    },
    /// Compare somebody's figures with one's own model, and say which mistakes would reproduce the differing ones.
    #[command(
        after_help = "Example: proofspan review examples/intake-claims.toml\n         proofspan review --sheet theirs.pdf --deck mine.toml\n\nExit status: 0 all agree, 1 could not be done, 2 the input is at fault, 3 a claim differs."
    )]
    Review {
        /// The file of claims.
        #[arg(required_unless_present = "sheet", conflicts_with = "sheet")]
        claims: Option<PathBuf>,
        /// Take the claims from the results attached to a sheet instead.
        #[arg(long, value_name = "PDF", requires = "deck")]
        sheet: Option<PathBuf>,
        /// One's own deck, for --sheet.
        #[arg(long, requires = "sheet")]
        deck: Option<PathBuf>,
        /// Where to write the review; beside the claims, with the ending pdf, where nothing is said.
        #[arg(short, long)]
        output: Option<PathBuf>,
        /// Print one JSON object in SI units instead, and write no PDF unless -o names one.
        #[arg(long)]
        json: bool,
    },
    /// Write a file of claims to fill in, with every quantity that a deck reports.
    #[command(after_help = "Example: proofspan claims examples/intake-beam.toml -o claims.toml")]
    Claims {
        /// The deck.
        deck: PathBuf,
        /// The file to write, an existing one is left alone; where nothing is said it is printed.
        #[arg(short, long)]
        output: Option<PathBuf>,
    },
    /// Take deck and results out of a sheet.
    #[command(after_help = "Example: proofspan extract intake-beam.pdf intake")]
    Extract {
        /// The sheet.
        sheet: PathBuf,
        /// The folder to put them in; existing files are left alone.
        folder: PathBuf,
    },
    /// Prove a sheet from itself: solve its deck anew, compare the results, make the sheet again and compare its bytes.
    #[command(
        after_help = "Example: proofspan verify intake-beam.pdf\n\nExit status: 0 it holds, 1 could not be done, 2 no sheet of this program, 3 something was changed."
    )]
    Verify {
        /// The sheet.
        sheet: PathBuf,
        /// The folder of the office's own templates that the sheet was made with.
        #[arg(long, value_name = "DIR")]
        templates: Option<PathBuf>,
    },
    /// Write a commented starter deck that runs as it stands.
    #[command(after_help = "Example: proofspan new beam.toml")]
    New {
        /// The file to write; an existing one is left alone.
        file: PathBuf,
    },
}

/// Paper sizes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum PaperSize {
    /// 210 mm by 297 mm.
    A4,
    /// 8.5 in by 11 in.
    Letter,
}

/// How much a sheet shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Detail {
    /// Every step.
    Full,
    /// Answer, figures, reactions, checks and crosschecks.
    Brief,
}
