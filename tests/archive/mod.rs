//! Sheets proved from themselves, and every kind of tampering named.

mod pdf;

use std::process::Command;
use std::sync::LazyLock;

use pdf::{closed, content_of_page, embedded, in_place, replaced, updated};
use proofspan::archive::{Attachment, Fault, Report, attachments, verify};
use proofspan::calculation::Calculation;
use proofspan::issue::{self, Wishes};
use proofspan::sheet::Templates;

const DECK: &str = include_str!("../../examples/intake-beam.toml");

fn sheet_of(deck: &str, change: impl FnOnce(&mut Wishes)) -> Vec<u8> {
    let calculation = Calculation::new(deck).unwrap();
    let working = calculation.working().unwrap();
    let mut wishes = Wishes::of(&calculation.member, "intake-beam.toml");
    change(&mut wishes);
    issue::print(&calculation, &working, deck, &wishes).unwrap().pdf
}

static SHEET: LazyLock<Vec<u8>> = LazyLock::new(|| sheet_of(DECK, |wishes| wishes.brief = true));

fn proved(bytes: &[u8]) -> Report {
    verify(bytes, &Templates::default()).unwrap_or_else(|fault| panic!("{fault}"))
}

fn broken(bytes: &[u8]) -> String {
    let report = proved(bytes);
    assert!(!report.broken.is_empty(), "nothing was found: {report:?}");
    report.broken.join("\n")
}

#[test]
fn a_sheet_as_issued_holds() {
    let report = proved(&SHEET);
    assert_eq!(report.broken, Vec::<String>::new());
    assert!(report.holds.iter().any(|said| said.contains("byte for byte")), "{report:?}");
}

#[test]
fn options_travel_with_the_sheet() {
    for letter in [false, true] {
        let sheet = sheet_of(DECK, |wishes| {
            wishes.brief = true;
            wishes.first_sheet = 7;
            if letter {
                wishes.paper = proofspan::sheet::Paper::Letter;
            }
        });
        assert_eq!(proved(&sheet).broken, Vec::<String>::new());
    }
}

#[test]
fn what_travels_inside_comes_out_byte_for_byte() {
    let files = attachments(&SHEET).unwrap();
    let deck = files.iter().find(|file| file.name == "deck.toml").unwrap();
    assert_eq!((deck.bytes.as_slice(), deck.relationship.as_str()), (DECK.as_bytes(), "Source"));
    let results = files.iter().find(|file| file.name == "results.json").unwrap();
    let results: serde_json::Value = serde_json::from_slice(&results.bytes).unwrap();
    assert_eq!(results["format"], 1);
}

#[test]
fn a_page_whose_figures_were_changed_is_named() {
    let sheet = SHEET.as_slice();
    let object = content_of_page(sheet, 2);
    let forged = updated(sheet, object, &pdf::stream("", b"BT ET"));
    assert!(broken(&forged).contains("an addition changes page 3"), "{}", broken(&forged));
    // The same with the traces of the update wiped out.
    assert!(broken(&closed(&forged)).contains("page 3"), "{}", broken(&closed(&forged)));
    // And one bit of a page's own stream.
    let flipped = in_place(sheet, object, |stream| stream[stream.len() / 2] ^= 1);
    assert!(broken(&flipped).contains("page 3"), "{}", broken(&flipped));
}

#[test]
fn a_changed_deck_is_named() {
    let object = embedded(&SHEET, "application#2Ftoml");
    let other = DECK.replace("9 kN", "8 kN");
    let forged = updated(&SHEET, object, &pdf::file("application#2Ftoml", other.as_bytes()));
    assert!(broken(&forged).contains("the attachment deck.toml"), "{}", broken(&forged));
    let said = broken(&closed(&forged));
    assert!(said.contains("belong to another deck") && said.contains("results differ at"), "{said}");
}

#[test]
fn a_changed_result_is_named_with_its_place() {
    let object = embedded(&SHEET, "application#2Fjson");
    let files = attachments(&SHEET).unwrap();
    let text = String::from_utf8(files.iter().find(|file| file.name == "results.json").unwrap().bytes.clone()).unwrap();
    let mut results: serde_json::Value = serde_json::from_str(&text).unwrap();
    results["combinations"]["S1"]["reactions"]["A"]["force"] = 48_000.0.into();
    let forged = updated(&SHEET, object, &pdf::file("application#2Fjson", results.to_string().as_bytes()));
    let said = broken(&closed(&forged));
    assert!(said.contains("results differ at combinations.S1.reactions.A.force: 48000.0 attached"), "{said}");
    let nonsense = closed(&updated(&SHEET, object, &pdf::file("application#2Fjson", b"{")));
    assert!(broken(&nonsense).contains("no JSON"));
}

#[test]
fn a_deck_that_no_longer_reads_is_named() {
    let object = embedded(&SHEET, "application#2Ftoml");
    let forged = closed(&updated(&SHEET, object, &pdf::file("application#2Ftoml", b"format = 1")));
    assert!(broken(&forged).contains("cannot be solved any more"));
}

#[test]
fn another_version_is_said_plainly() {
    let object = embedded(&SHEET, "application#2Fjson");
    let files = attachments(&SHEET).unwrap();
    let text = String::from_utf8(files.iter().find(|file| file.name == "results.json").unwrap().bytes.clone()).unwrap();
    let version = concat!("\"version\":\"", env!("CARGO_PKG_VERSION"), "\"");
    assert!(text.contains(version));
    let other = text.replace(version, "\"version\":\"0.0.7\"");
    let report = proved(&closed(&updated(&SHEET, object, &pdf::file("application#2Fjson", other.as_bytes()))));
    assert_eq!(report.broken, Vec::<String>::new());
    assert!(report.holds.iter().any(|said| said.contains("0.0.7") && said.contains("attachments alone")), "{report:?}");
}

#[test]
fn swapped_and_missing_pages_are_named() {
    let (object, pages) = pdf::pages(&SHEET);
    assert!(pages.len() >= 3);
    let list = |order: &[usize]| {
        let kids: Vec<String> = order.iter().map(|index| format!("{} 0 R", pages[*index])).collect();
        format!("<</Type/Pages/Count {}/Kids[{}]>>", order.len(), kids.join(" "))
    };
    let swapped = updated(&SHEET, object, &list(&[0, 2, 1]));
    assert!(broken(&swapped).contains("pages 2, 3"), "{}", broken(&swapped));
    let missing = updated(&SHEET, object, &list(&[0, 1]));
    assert!(broken(&missing).contains("the number of pages: 2 instead of 3"), "{}", broken(&missing));
}

#[test]
fn a_file_that_is_damaged_or_none_of_ours_is_said_so() {
    assert_eq!(verify(b"not a PDF at all", &Templates::default()), Err(Fault::NoPdf));
    let bare = sheet_of(DECK, |wishes| {
        wishes.brief = true;
        wishes.attach = false;
    });
    assert_eq!(verify(&bare, &Templates::default()), Err(Fault::NoAttachments));
    let gone = replaced(&SHEET, b"/AF[", b"/XX[");
    assert_eq!(verify(&gone, &Templates::default()), Err(Fault::NoAttachments));
    // A file cut short: no panic, and never taken for whole.
    for part in 1..20 {
        let cut = &SHEET[..SHEET.len() * part / 20];
        let holds = verify(cut, &Templates::default()).is_ok_and(|report| report.broken.is_empty());
        assert!(!holds, "{part} of 20 parts were taken for the whole");
    }
}

#[test]
fn additions_of_other_programs_leave_the_original_intact() {
    let once = updated(&SHEET, 90_001, "<</Type/Annot/Subtype/Text/Rect[0 0 9 9]/Contents(seen)>>");
    let twice = updated(&once, 90_002, "<</Type/Sig/Filter/Adobe.PPKLite>>");
    for (bytes, said) in [(&once, "original intact, 1 addition"), (&twice, "original intact, 2 additions")] {
        let report = proved(bytes);
        assert_eq!(report.broken, Vec::<String>::new());
        assert!(report.holds.iter().any(|found| found == said), "{report:?}");
    }
    let mut scribbled = SHEET.clone();
    scribbled.extend(b"\n% a remark that is no addition\n");
    assert!(broken(&scribbled).contains("no addition a PDF program would write"));
}

#[test]
fn a_change_outside_pages_and_attachments_is_found_too() {
    let title = replaced(&SHEET, b"/Title", b"/Tytle");
    assert!(broken(&title).contains("outside its pages and attachments"));
}

#[test]
fn names_of_attachments_cannot_leave_their_folder() {
    let safe =
        |name: &str| Attachment { name: name.to_owned(), relationship: String::new(), bytes: Vec::new() }.safe_name();
    assert_eq!(safe("deck.toml"), "deck.toml");
    assert_eq!(safe("../../etc/passwd"), "passwd");
    assert_eq!(safe("C:\\windows\\x.bat"), "x.bat");
    assert_eq!(safe("/abs/olute"), "olute");
    assert_eq!(safe("a\0b"), "a_b");
    assert_eq!(safe(""), "attachment");
    assert_eq!(safe(".."), "attachment");
    assert_eq!(safe(".hidden"), "hidden");
    assert!(safe(&"x".repeat(300)).len() <= 80);
}

#[test]
fn the_same_bytes_whatever_the_day_zone_language_folder_and_threads() {
    let program = env!("CARGO_BIN_EXE_proofspan");
    let run = |zone: &str, language: &str, threads: &str| {
        let folder = tempfile::tempdir().unwrap();
        let deck = folder.path().join("intake-beam.toml");
        std::fs::write(&deck, DECK).unwrap();
        let out = folder.path().join("out.pdf");
        let status = Command::new(program)
            .args(["sheet", "--detail", "brief"])
            .arg(&deck)
            .arg("-o")
            .arg(&out)
            .current_dir(folder.path())
            .env("TZ", zone)
            .env("LANG", language)
            .env("LC_ALL", language)
            .env("RAYON_NUM_THREADS", threads)
            .output()
            .unwrap();
        assert_eq!(status.status.code(), Some(0));
        std::fs::read(out).unwrap()
    };
    let one = run("UTC", "C", "1");
    assert!(one == run("Pacific/Auckland", "de_DE.UTF-8", "4"), "the bytes differ");
    assert!(one == *SHEET, "the command and the library write different bytes");
}

#[test]
fn extract_and_verify_speak_on_the_command_line() {
    let program = env!("CARGO_BIN_EXE_proofspan");
    let folder = tempfile::tempdir().unwrap();
    let pdf = folder.path().join("sheet.pdf");
    std::fs::write(&pdf, SHEET.as_slice()).unwrap();
    let run = |arguments: &[&std::ffi::OsStr]| Command::new(program).args(arguments).output().unwrap();
    let inside = folder.path().join("inside");
    let extract = ["extract".as_ref(), pdf.as_os_str(), inside.as_os_str()];
    assert_eq!(run(&extract).status.code(), Some(0));
    assert_eq!(std::fs::read(inside.join("deck.toml")).unwrap(), DECK.as_bytes());
    assert_eq!(run(&extract).status.code(), Some(1), "nothing is overwritten");
    assert_eq!(run(&["verify".as_ref(), pdf.as_os_str()]).status.code(), Some(0));
    let object = content_of_page(&SHEET, 0);
    std::fs::write(&pdf, updated(&SHEET, object, &pdf::stream("", b"BT ET"))).unwrap();
    let found = run(&["verify".as_ref(), pdf.as_os_str()]);
    assert_eq!(found.status.code(), Some(3));
    assert!(String::from_utf8_lossy(&found.stdout).contains("BROKEN"));
    std::fs::write(&pdf, b"hello").unwrap();
    assert_eq!(run(&["verify".as_ref(), pdf.as_os_str()]).status.code(), Some(2));
    assert_eq!(run(&["verify".as_ref(), inside.as_os_str()]).status.code(), Some(1));
}
