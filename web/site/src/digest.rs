//! SHA-256 in its two spellings, gzip, and the stamps that let a step be left out.

use std::io::Write;
use std::path::{Path, PathBuf};

use base64::Engine as _;
use base64::engine::general_purpose::STANDARD;
use sha2::{Digest, Sha256};

use crate::Outcome;
use crate::paths::{read_bytes, write};

/// SHA-256 in hexadecimal digits.
pub fn hex(bytes: &[u8]) -> String {
    Sha256::digest(bytes)
        .iter()
        .map(|byte| format!("{byte:02x}"))
        .collect()
}

/// SHA-256 as content policies and `integrity` spell it.
pub fn integrity(bytes: &[u8]) -> String {
    format!("sha256-{}", STANDARD.encode(Sha256::digest(bytes)))
}

/// gzip in the smallest form that is found, without a time in it: the same input gives the same
/// bytes. `quick` takes a larger form that is found at once.
pub fn gzip(bytes: &[u8], quick: bool) -> Outcome<Vec<u8>> {
    let told = |error: std::io::Error| format!("Cannot compress: {error}.");
    if quick {
        let mut encoder = flate2::GzBuilder::new().write(Vec::new(), flate2::Compression::fast());
        encoder.write_all(bytes).map_err(told)?;
        return encoder.finish().map_err(told);
    }
    let mut packed = Vec::new();
    zopfli::compress(
        zopfli::Options::default(),
        zopfli::Format::Gzip,
        bytes,
        &mut packed,
    )
    .map_err(told)?;
    Ok(packed)
}

/// Remembers from what a step was last made.
pub struct Stamp {
    file: PathBuf,
    key: String,
}

impl Stamp {
    /// The stamp of a step made from these files and settings.
    pub fn new(folder: &Path, step: &str, files: &[PathBuf], settings: &[&str]) -> Outcome<Self> {
        let mut hash = Sha256::new();
        for setting in settings {
            hash.update(setting.as_bytes());
            hash.update([0]);
        }
        for file in files {
            hash.update(file.to_string_lossy().as_bytes());
            hash.update([0]);
            hash.update(Sha256::digest(read_bytes(file)?));
        }
        Ok(Stamp {
            file: folder.join(format!("{step}.stamp")),
            key: hash.finalize().iter().map(|b| format!("{b:02x}")).collect(),
        })
    }

    /// Is what was made last still right?
    pub fn holds(&self) -> bool {
        std::fs::read_to_string(&self.file).is_ok_and(|key| key == self.key)
    }

    /// The step has been done.
    pub fn set(&self) -> Outcome<()> {
        write(&self.file, &self.key)
    }
}

#[cfg(test)]
mod tests {
    use std::io::Read;

    use super::*;

    /// FIPS 180-4, example of one block: SHA-256("abc").
    #[test]
    fn sha256_of_the_published_example() {
        assert_eq!(
            hex(b"abc"),
            "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
        );
        assert_eq!(
            integrity(b"abc"),
            "sha256-ungWv48Bz+pBQUDeXa4iI7ADYaOWF3qctBD/YfIAFa0="
        );
    }

    #[test]
    fn packed_bytes_come_back_whole_and_the_same_each_time() {
        let text = "level 3d6 4s2 5D4; ".repeat(200);
        for quick in [true, false] {
            let packed = gzip(text.as_bytes(), quick).expect("packed");
            assert_eq!(gzip(text.as_bytes(), quick).as_ref(), Ok(&packed));
            let mut unpacked = String::new();
            flate2::read::GzDecoder::new(packed.as_slice())
                .read_to_string(&mut unpacked)
                .expect("unpacked");
            assert_eq!(unpacked, text);
        }
    }
}
