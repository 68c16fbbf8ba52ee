//! Files written by hand: objects found, replaced in an appended section, or changed where they stand.

fn find(bytes: &[u8], what: &[u8], from: usize) -> Option<usize> {
    bytes[from..].windows(what.len()).position(|window| window == what).map(|at| from + at)
}

fn rfind(bytes: &[u8], what: &[u8], to: usize) -> Option<usize> {
    bytes[..to].windows(what.len()).rposition(|window| window == what)
}

fn number_before(bytes: &[u8], at: usize) -> usize {
    let digits = bytes[..at].iter().rev().take_while(|byte| byte.is_ascii_digit()).count();
    std::str::from_utf8(&bytes[at - digits..at]).unwrap().parse().unwrap()
}

/// The number of the object that a place lies in.
fn object_at(bytes: &[u8], at: usize) -> usize {
    number_before(bytes, rfind(bytes, b" 0 obj", at).unwrap())
}

/// References `12 0 R` in a text.
fn references(text: &[u8]) -> Vec<usize> {
    let mut found = Vec::new();
    let mut from = 0;
    while let Some(at) = find(text, b" 0 R", from) {
        found.push(number_before(text, at));
        from = at + 4;
    }
    found
}

/// The object of the page tree, and its pages in order.
pub fn pages(bytes: &[u8]) -> (usize, Vec<usize>) {
    let at = find(bytes, b"/Kids", 0).unwrap();
    let end = find(bytes, b"]", at).unwrap();
    (object_at(bytes, at), references(&bytes[at..end]))
}

fn object(bytes: &[u8], number: usize) -> (usize, usize) {
    let head = format!("\n{number} 0 obj");
    let start = find(bytes, head.as_bytes(), 0).unwrap() + 1;
    (start, find(bytes, b"endobj", start).unwrap())
}

/// The object that holds what a page draws.
pub fn content_of_page(bytes: &[u8], index: usize) -> usize {
    let (_, pages) = pages(bytes);
    let (start, end) = object(bytes, pages[index]);
    let at = find(&bytes[..end], b"/Contents", start).unwrap();
    references(&bytes[at..end])[0]
}

/// The object of an embedded file of a kind.
pub fn embedded(bytes: &[u8], kind: &str) -> usize {
    object_at(bytes, find(bytes, format!("/Subtype/{kind}").as_bytes(), 0).unwrap())
}

/// A stream that is not compressed.
pub fn stream(keys: &str, bytes: &[u8]) -> String {
    format!("<</Length {}{keys}>>\nstream\n{}\nendstream", bytes.len(), std::str::from_utf8(bytes).unwrap())
}

/// An embedded file.
pub fn file(kind: &str, bytes: &[u8]) -> String {
    stream(&format!("/Type/EmbeddedFile/Subtype/{kind}"), bytes)
}

/// The file with an appended section that gives an object another body, as an editor saves it.
pub fn updated(bytes: &[u8], number: usize, body: &str) -> Vec<u8> {
    let start = rfind(bytes, b"startxref", bytes.len()).unwrap();
    let digits: String = bytes[start + 9..]
        .iter()
        .map(|byte| char::from(*byte))
        .skip_while(|c| !c.is_ascii_digit())
        .take_while(char::is_ascii_digit)
        .collect();
    let trailer = rfind(bytes, b"trailer", bytes.len()).unwrap();
    let at = find(bytes, b"/Root ", trailer).unwrap();
    let root = references(&bytes[at..at + 30])[0];
    let mut out = bytes.to_vec();
    out.push(b'\n');
    let offset = out.len();
    out.extend(format!("{number} 0 obj\n{body}\nendobj\n").bytes());
    let table = out.len();
    out.extend(format!("xref\n{number} 1\n{offset:010} 00000 n\r\n").bytes());
    out.extend(format!("trailer\n<</Size 90010/Root {root} 0 R/Prev {digits}>>\nstartxref\n{table}\n%%EOF\n").bytes());
    out
}

/// The file with the mark of its first end wiped out, so that an update can no longer be told from the original.
pub fn closed(bytes: &[u8]) -> Vec<u8> {
    let mut out = bytes.to_vec();
    let at = find(&out, b"%%EOF", 0).unwrap();
    out[at..at + 5].copy_from_slice(b"%%   ");
    out
}

/// The file with the stream of an object changed where it stands.
pub fn in_place(bytes: &[u8], number: usize, change: impl FnOnce(&mut [u8])) -> Vec<u8> {
    let mut out = bytes.to_vec();
    let (start, end) = object(bytes, number);
    let from = find(bytes, b"stream", start).unwrap() + 7;
    let to = rfind(bytes, b"endstream", end).unwrap();
    change(&mut out[from..to]);
    out
}

/// The file with the first occurrence of some bytes replaced by as many others.
pub fn replaced(bytes: &[u8], what: &[u8], with: &[u8]) -> Vec<u8> {
    assert_eq!(what.len(), with.len());
    let mut out = bytes.to_vec();
    let at = find(bytes, what, 0).unwrap();
    out[at..at + with.len()].copy_from_slice(with);
    out
}
