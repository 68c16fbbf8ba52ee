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
