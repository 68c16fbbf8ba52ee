//! Hands over to the command line and turns the outcome into an exit status.

fn main() -> std::process::ExitCode {
    proofspan::cli::run().into()
}
