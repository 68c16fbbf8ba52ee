//! The closed world a sheet is compiled in: bundled templates and fonts, today unknown, everything else denied.

use std::collections::BTreeMap;

use typst::diag::{FileError, FileResult};
use typst::foundations::{Bytes, Datetime, Dict, Duration};
use typst::syntax::{FileId, RootedPath, Source, VirtualPath, VirtualRoot};
use typst::text::{Font, FontBook};
use typst::utils::LazyHash;
use typst::{Library, LibraryExt, World};

use super::fonts;

/// The world of one document.
pub(super) struct Closed {
    library: LazyHash<Library>,
    main: FileId,
    sources: BTreeMap<u16, Source>,
}

/// Name of the file that minijinja put together.
pub(super) const MAIN: &str = "/sheet.typ";

impl Closed {
    /// A world of the main text, the named modules beside it, and inputs as data.
    ///
    /// `None` when a module's name is no path.
    pub(super) fn new(main: String, modules: &[(String, String)], inputs: Dict) -> Option<Self> {
        let main_id = id(MAIN)?;
        let mut sources = BTreeMap::new();
        sources.insert(main_id.into_raw().get(), Source::new(main_id, main));
        for (name, text) in modules {
            let module = id(&format!("/{name}"))?;
            sources.insert(module.into_raw().get(), Source::new(module, text.clone()));
        }
        let library = LazyHash::new(Library::builder().with_inputs(inputs).build());
        Some(Self { library, main: main_id, sources })
    }

    /// The text that minijinja put together.
    pub(super) fn text(&self) -> &str {
        self.sources.get(&self.main.into_raw().get()).map_or("", Source::text)
    }

    /// Name, line and column (from 1) of a byte in a file of this world.
    pub(super) fn place(&self, file: FileId, byte: usize) -> Option<(String, usize, usize)> {
        let lines = self.sources.get(&file.into_raw().get())?.lines();
        let (line, column) = lines.byte_to_line_column(byte)?;
        Some((file.vpath().get_without_slash().to_string(), line + 1, column + 1))
    }
}

fn id(path: &str) -> Option<FileId> {
    Some(RootedPath::new(VirtualRoot::Project, VirtualPath::new(path).ok()?).intern())
}

impl World for Closed {
    fn library(&self) -> &LazyHash<Library> {
        &self.library
    }

    fn book(&self) -> &LazyHash<FontBook> {
        fonts::book()
    }

    fn main(&self) -> FileId {
        self.main
    }

    fn source(&self, id: FileId) -> FileResult<Source> {
        self.sources.get(&id.into_raw().get()).cloned().ok_or(FileError::AccessDenied)
    }

    fn file(&self, _: FileId) -> FileResult<Bytes> {
        Err(FileError::AccessDenied)
    }

    fn font(&self, index: usize) -> Option<Font> {
        fonts::font(index)
    }

    fn today(&self, _: Option<Duration>) -> Option<Datetime> {
        None
    }
}

#[cfg(test)]
mod tests {
    use typst::diag::Warned;
    use typst::foundations::Dict;
    use typst_layout::PagedDocument;

    use super::Closed;
    use crate::sheet::{Equation, Templates};

    /// What the compiler says of a text that cannot be compiled.
    fn refusal(main: &str) -> String {
        let world = Closed::new(main.to_owned(), &Templates::default().modules(), Dict::new()).unwrap();
        let Warned { output, .. } = typst::compile::<PagedDocument>(&world);
        output.map_or_else(|errors| errors[0].message.to_string(), |_| String::new())
    }

    #[test]
    fn nothing_outside_is_read() {
        for main in [
            "#read(\"/etc/passwd\")",
            "#read(\"style.typ\")",
            "#read(\"../Cargo.toml\")",
            "#include \"other.typ\"",
            "#import \"../style.typ\": *",
            "#image(\"a.png\")",
            "#json(\"a.json\")",
            "#plugin(\"a.wasm\")",
            "#bibliography(\"a.bib\")",
            "#import \"@preview/example:0.1.0\": *",
            "#set raw(theme: \"a.tmTheme\"); #raw(lang: \"rust\", \"a\")",
            "#eval(\"read(\\\"a\\\")\")",
        ] {
            let said = refusal(main);
            assert!(said.contains("denied") || said.contains("escape") || said.contains("cannot"), "{main}: {said}");
        }
        let today = refusal("#datetime.today()");
        assert!(today.contains("unable to get the current date"), "{today}");
    }

    /// The estimate decides what stands on one line, so it must not be short by more than a hair, nor far too long.
    #[test]
    fn estimated_widths_are_those_of_the_compiler() {
        let sources = [
            r#"R_"A" = R_"A" + R_"B" R_"A,1""#,
            r#"delta_"AC" = frac(V_"Cr" L_"1"^3, 3 E I_"deep") - frac(M_"Cr" L_"1"^2, 2 E I_"deep") + frac(w_"1" L_"1"^4, 8 E I_"deep")"#,
            r#"= -(-9.40811) times 2.7981324 - frac((-3.5) times 2.7981324^2, 2) - (-7.5)"#,
            r#"= -2.0476 dot 10^(-4) + (-1.99990 dot 10^(-4)) times 2.2018676 + (3.714 dot 10^(-5))"#,
            r#"m_"A" = frac(L_"1" (w_"2" L_"1" + w_"3" 2 L_"1"), 6) + M_"1" + w_"4" L_"2" (L_"1" + frac(L_"2", 2)) + M_"2""#,
            r#"u_"1" = frac(abs(v_"s1"), v_"a1")"#,
            r#"= min(frac(9 times 1 thin 000, 250), 20.0)"#,
            r#"psi_"Cl" = gamma_"C1_Q" psi_"Cl,Q" + gamma_"C1_W" psi_"Cl,W""#,
            "= frac(14.00 times 4.000^4, 8 times 41 thin 200)",
            "x",
        ];
        let list: Vec<String> = sources.iter().map(|source| format!("eq(\"a\", ${source}$)")).collect();
        let said = refusal(&format!(
            "#import \"style.typ\": *\n#show: sheet.with(title: \"a\", date: datetime(year: 2026, month: 1, day: 1))\n\
             #context panic(({}).map(e => str(measure(e).width / 1mm)).join(\" \"))",
            list.join(", ")
        ));
        let found: Vec<f64> = said.split(['"', ' ']).filter_map(|word| word.parse().ok()).collect();
        assert_eq!(found.len(), sources.len(), "{said}");
        for (source, found) in sources.iter().zip(found) {
            let estimate = Equation::new(*source, "").unwrap().width(10.0);
            assert!(estimate > 0.99 * found - 0.1 && estimate < 1.10 * found + 1.5, "{found} {estimate}: {source}");
        }
    }
}
