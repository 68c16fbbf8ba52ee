//! Hands over to the command line and turns the outcome into an exit status.

fn main() {
    let path = std::env::args().nth(1).unwrap_or_default();
    let text = std::fs::read_to_string(path).unwrap_or_default();
    match proofspan::calculation::Calculation::new(&text) {
        Ok(c) => match c.working() {
            Ok(w) => println!("{}", c.json(Some(&w))),
            Err(e) => println!("{} {:?}", c.json(None), e),
        },
        Err(e) => println!("{e:?}"),
    }
}
