//! The WebAssembly standard library: there, buildable from Debian's sources, or to be installed.

use std::path::Path;
use std::process::Command;
use std::time::Duration;

use crate::Outcome;
use crate::command::{capture, is_root, on_path, program};

const TRIPLE: &str = "wasm32-unknown-unknown";
const DEBIAN_RUSTC: &str = "/usr/bin/rustc";
const DEBIAN_PACKAGES: &[&str] = &[
    "rustc-web",
    "cargo-web",
    "rust-web-src",
    "rust-web-llvm",
    "lld-22",
];

/// How the core is compiled for the browser.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub enum Target {
    /// The usual compiler has the target's library.
    Installed,
    /// Debian's compiler builds the library from its sources.
    FromDebianSources,
}

impl Target {
    /// Makes a cargo command compile for the browser.
    pub fn apply(self, cargo: &mut Command) {
        cargo.args(["--target", TRIPLE]);
        if self == Target::FromDebianSources {
            cargo
                .arg("-Zbuild-std=std,panic_abort")
                .env("RUSTC", DEBIAN_RUSTC)
                .env("RUSTC_BOOTSTRAP", "1");
        }
    }
}

/// Finds the target or installs it, in this order: there already; Debian's compiler with its
/// sources; rustup; apt-get as root.
pub fn find_or_install() -> Outcome<(Target, String)> {
    if library_is_there("rustc") {
        return Ok((Target::Installed, "there already".to_string()));
    }
    if debian_sources_are_there() {
        return Ok((
            Target::FromDebianSources,
            "built from the sources of Debian's compiler".to_string(),
        ));
    }
    let mut tried = Vec::new();
    if on_path("rustup").is_some() {
        println!("The WebAssembly target is missing; asking rustup for it (60 s at most) …");
        match capture(
            program("rustup").args(["target", "add", TRIPLE]),
            Duration::from_secs(60),
        ) {
            Ok(_) if library_is_there("rustc") => {
                return Ok((Target::Installed, "installed by rustup".to_string()));
            }
            Ok(_) => tried.push("rustup installed it for another toolchain.".to_string()),
            Err(error) => tried.push(error),
        }
    }
    if on_path("apt-get").is_some() && is_root() {
        println!("rustup could not; installing Debian's compiler for it (5 minutes at most) …");
        match install_debian() {
            Ok(()) if debian_sources_are_there() => {
                return Ok((
                    Target::FromDebianSources,
                    "installed by apt-get; built from the sources of Debian's compiler".to_string(),
                ));
            }
            Ok(()) => {
                tried.push("apt-get installed it, but the sources are not there.".to_string())
            }
            Err(error) => tried.push(error),
        }
    }
    Err(format!(
        "{}\nThe Rust target {TRIPLE} is missing. Install it by one of\n    \
         rustup target add {TRIPLE}\n    apt-get update && apt-get install -y \
         --no-install-recommends {}\nand try again.",
        tried.join("\n"),
        DEBIAN_PACKAGES.join(" ")
    ))
}

/// Has this compiler the library of the browser's target?
pub fn library_is_there(rustc: &str) -> bool {
    capture(
        program(rustc).args(["--print", "target-libdir", "--target", TRIPLE]),
        Duration::from_secs(30),
    )
    .is_ok_and(|folder| Path::new(folder.trim()).is_dir())
}

fn debian_sources_are_there() -> bool {
    capture(
        program(DEBIAN_RUSTC).args(["--print", "sysroot"]),
        Duration::from_secs(30),
    )
    .is_ok_and(|sysroot| {
        Path::new(sysroot.trim())
            .join("lib/rustlib/src/rust/library/std/Cargo.toml")
            .is_file()
    })
}

fn install_debian() -> Outcome<()> {
    crate::command::apt_install(DEBIAN_PACKAGES)
}
