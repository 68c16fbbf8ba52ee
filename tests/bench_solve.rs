//! How the cost of a solution grows with spans and cases: printed, never asserted.
//!
//! `cargo bench --bench solve`; the last line's member has 1,000 spans and 100 cases.
#![allow(clippy::unwrap_used, clippy::disallowed_types)]

use std::fmt::Write;
use std::time::{Duration, Instant};

use proofspan::analysis;
use proofspan::calculation::{self, Calculation, both_routes};

/// A member of many spans of 5 m, each stepped, with many cases and half as many combinations.
fn deck(spans: usize, cases: usize) -> String {
    let mut text = String::from(
        "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n\
         [section.a]\nE = \"210 GPa\"\nI = \"8356 cm^4\"\nweight = \"0.42 kN/m\"\n\
         [section.b]\nE = \"210 GPa\"\nI = \"16000 cm^4\"\nweight = \"0.6 kN/m\"\n\
         [support.S0]\nat = \"0 m\"\nkind = \"pinned\"\n",
    );
    for span in 1..=spans {
        text += "[[segment]]\nlength = \"3.5 m\"\nsection = \"a\"\n[[segment]]\nlength = \"1.5 m\"\nsection = \"b\"\n";
        let _ = write!(text, "[support.S{span}]\nat = \"{} m\"\nkind = \"roller\"\n", 5 * span);
    }
    text += "[case.G]\nnature = \"permanent\"\nloads = [{ kind = \"self_weight\" }]\n";
    for case in 1..cases {
        // One span in ten under each case, and a load over the whole member.
        let points: Vec<String> = (case % 10..spans)
            .step_by(10)
            .map(|span| format!("{{ kind = \"point\", p = \"{} kN\", at = \"{} m\" }}", 5 + case % 7, 5 * span + 2))
            .collect();
        let _ = write!(
            text,
            "[case.Q{case}]\nnature = \"imposed\"\nloads = [{{ kind = \"uniform\", w = \"{case} N/m\" }}, {}]\n",
            points.join(", ")
        );
    }
    for combination in 0..cases.div_ceil(2) {
        let other = if cases > 1 { format!(", Q{} = 1.5", 1 + combination % (cases - 1)) } else { String::new() };
        let _ = write!(
            text,
            "[combination.C{combination}]\npurpose = \"serviceability\"\nfactors = {{ G = 1.35{other} }}\n"
        );
    }
    text
}

/// The shortest of a few runs: the machine does other things as well.
fn shortest<T>(runs: usize, mut run: impl FnMut() -> T) -> (Duration, T) {
    let mut once = || {
        let start = Instant::now();
        let value = run();
        (start.elapsed(), value)
    };
    let first = once();
    (1..runs).fold(first, |best, _| {
        let next = once();
        if next.0 < best.0 { next } else { best }
    })
}

/// The most memory this process has held, where the system says so.
fn memory() -> String {
    let status = std::fs::read_to_string("/proc/self/status").unwrap_or_default();
    let line = status.lines().find_map(|line| line.strip_prefix("VmHWM:"));
    line.map_or_else(|| "unknown".to_owned(), |line| line.trim().to_owned())
}

fn main() {
    println!("spans  cases   read      force method   both methods compared   everything with results");
    for (spans, cases, runs) in [(10, 10, 5), (100, 10, 5), (1000, 10, 3), (100, 100, 3), (1000, 100, 1)] {
        let text = deck(spans, cases);
        let (read, member) = shortest(runs, || calculation::member(&text).unwrap());
        let (solved, analysis) = shortest(runs, || analysis::solve(&member).unwrap());
        let (compared, rows) = shortest(runs, || both_routes(&member, &analysis).len());
        let (whole, size) = shortest(1, || Calculation::new(&text).unwrap().json(None).to_string().len());
        println!(
            "{spans:>5}  {cases:>5}   {read:<9.1?} {solved:<14.1?} {compared:<10.1?} ({rows} rows)   {whole:.1?} ({} kB of results)",
            size / 1000
        );
    }
    println!("most memory held: {}", memory());
}
