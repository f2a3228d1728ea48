//! Where things are.

use std::path::{Path, PathBuf};

use crate::Outcome;

/// The rooms that the build reads and writes.
pub struct Paths {
    /// The workspace.
    pub root: PathBuf,
    /// The hand-written page.
    pub www: PathBuf,
    /// The page tests, with the one `package.json`.
    pub page_tests: PathBuf,
    /// Everything for the browser that cargo and the later steps make.
    pub wasm: PathBuf,
    /// The static site with the one file in it.
    pub site: PathBuf,
}

impl Paths {
    /// Finds the workspace from where this package lies.
    pub fn find() -> Outcome<Self> {
        let package = std::env::var_os("CARGO_MANIFEST_DIR")
            .map_or_else(|| PathBuf::from(env!("CARGO_MANIFEST_DIR")), PathBuf::from);
        let root = package
            .ancestors()
            .nth(2)
            .map(Path::to_path_buf)
            .filter(|root| root.join("www").is_dir() && root.join("core").is_dir())
            .ok_or_else(|| {
                format!(
                    "The folders www and core are not two levels above {}.",
                    package.display()
                )
            })?;
        Ok(Paths {
            www: root.join("www"),
            page_tests: root.join("tests").join("page"),
            wasm: root.join("target").join("wasm"),
            site: root.join("target").join("site"),
            root,
        })
    }
}

/// Reads a text file.
pub fn read(path: &Path) -> Outcome<String> {
    std::fs::read_to_string(path)
        .map_err(|error| format!("Cannot read {}: {error}.", path.display()))
}

/// Reads a file.
pub fn read_bytes(path: &Path) -> Outcome<Vec<u8>> {
    std::fs::read(path).map_err(|error| format!("Cannot read {}: {error}.", path.display()))
}

/// Writes a file and the folders above it.
pub fn write(path: &Path, bytes: impl AsRef<[u8]>) -> Outcome<()> {
    let written = match path.parent() {
        Some(folder) => std::fs::create_dir_all(folder),
        None => Ok(()),
    }
    .and_then(|()| std::fs::write(path, bytes));
    written.map_err(|error| format!("Cannot write {}: {error}.", path.display()))
}

/// Every file under `folder`, sorted by path.
pub fn files_under(folder: &Path) -> Outcome<Vec<PathBuf>> {
    let told = |error: std::io::Error| format!("Cannot list {}: {error}.", folder.display());
    let mut files = Vec::new();
    for entry in std::fs::read_dir(folder).map_err(told)? {
        let path = entry.map_err(told)?.path();
        if path.is_dir() {
            files.extend(files_under(&path)?);
        } else {
            files.push(path);
        }
    }
    files.sort();
    Ok(files)
}
