//! Files are written whole or not at all.

use std::io::{self, Write};
use std::path::Path;

use tempfile::NamedTempFile;

/// Writes to a temporary name beside the target, syncs, renames.
pub fn whole(path: &Path, bytes: &[u8]) -> io::Result<()> {
    prepared(path, bytes)?.persist(path).map(|_| ()).map_err(|error| error.error)
}

/// The same, but leaves an existing file alone.
pub fn fresh(path: &Path, bytes: &[u8]) -> io::Result<()> {
    prepared(path, bytes)?.persist_noclobber(path).map(|_| ()).map_err(|error| error.error)
}

fn prepared(path: &Path, bytes: &[u8]) -> io::Result<NamedTempFile> {
    let folder = path.parent().filter(|folder| !folder.as_os_str().is_empty()).unwrap_or_else(|| Path::new("."));
    let mut file = NamedTempFile::new_in(folder)?;
    file.write_all(bytes)?;
    file.as_file().sync_all()?;
    Ok(file)
}
