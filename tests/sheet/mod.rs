//! The sheet: printed, read back, and made to hold hostile text.

mod hostile;
mod office;
mod readback;
mod real;
mod sample;
mod scorecard;
mod told;

use proofspan::sheet::print;

/// Where a test leaves a PDF to be looked at.
fn leave(name: &str, pdf: &[u8]) {
    std::fs::write(std::path::Path::new(env!("CARGO_TARGET_TMPDIR")).join(name), pdf).unwrap();
}

#[test]
fn the_sample_prints_without_a_warning() {
    let printed = print(&sample::model(), &sample::options()).unwrap_or_else(|fault| panic!("{fault}"));
    leave("sample.pdf", &printed.pdf);
    assert_eq!(printed.warnings, Vec::<String>::new());
    assert!(printed.pages > 8, "{}", printed.pages);
}

#[test]
fn a_composed_sheet_prints() {
    let printed = print(&real::model(&real::propped()), &sample::options()).unwrap_or_else(|fault| panic!("{fault}"));
    leave("real.pdf", &printed.pdf);
    assert_eq!(printed.warnings, Vec::<String>::new());
}
