//! The core as WebAssembly with its bindings: compile, bind, optimise.

use std::path::{Path, PathBuf};
use std::time::Duration;

use wasm_bindgen_cli_support::Bindgen;

use crate::Outcome;
use crate::command::{capture, program};
use crate::digest::Stamp;
use crate::node::Node;
use crate::paths::{Paths, files_under, read_bytes, write};
use crate::profile::Profile;
use crate::steps::Steps;
use crate::target::Target;

/// A memory past this fails to grow: 1.5 GiB, in bytes.
const MAX_MEMORY: u64 = 3 << 29;

/// What the page is given of the core.
pub struct Core {
    /// The module.
    pub wasm: PathBuf,
    /// Its bindings, an ES module.
    pub bindings: PathBuf,
}

/// Compiles the core for the browser, unless nothing it is made from has changed.
pub fn build(
    paths: &Paths,
    profile: Profile,
    target: &Target,
    node: &Node,
    steps: &mut Steps,
) -> Outcome<Core> {
    let folder = paths.wasm.join("bound").join(profile.name());
    let core = Core {
        wasm: folder.join("core.wasm"),
        bindings: folder.join("rungline_web.js"),
    };
    let stamp = stamp(paths, profile, *target, &folder)?;
    if stamp.holds() && core.wasm.is_file() && core.bindings.is_file() {
        steps.step("core", || Ok("unchanged".to_string()))?;
        return Ok(core);
    }
    let compiled = steps.step_with("core, compiled", || {
        let compiled = compile(paths, profile, *target, &[])?;
        let note = size_note(&compiled)?;
        Ok((compiled, note))
    })?;
    let bound = folder.join("rungline_web_bg.wasm");
    steps.step("core, bound", || {
        bind(&compiled, &folder)?;
        size_note(&bound)
    })?;
    match profile {
        Profile::Quick => write(&core.wasm, read_bytes(&bound)?)?,
        Profile::Full => steps.step("core, optimised", || {
            optimise(paths, node, &bound, &core.wasm)?;
            size_note(&core.wasm)
        })?,
    }
    stamp.set()?;
    Ok(core)
}

/// Runs cargo for the browser and gives the module's path.
pub fn compile(
    paths: &Paths,
    profile: Profile,
    target: Target,
    features: &[&str],
) -> Outcome<PathBuf> {
    let mut cargo = program("cargo");
    cargo
        .args(["build", "--package", "rungline-web", "--lib", "--profile"])
        .arg(cargo_profile(profile))
        .arg("--target-dir")
        .arg(&paths.wasm)
        .current_dir(&paths.root)
        .env("CARGO_ENCODED_RUSTFLAGS", flags(paths));
    if !features.is_empty() {
        cargo.arg("--features").arg(features.join(","));
    }
    target.apply(&mut cargo);
    capture(&mut cargo, Duration::from_secs(900))?;
    Ok(paths
        .wasm
        .join("wasm32-unknown-unknown")
        .join(cargo_profile(profile))
        .join("rungline_web.wasm"))
}

/// What rustc is told for the browser: 128-bit vectors, which change no bit of a result; no bulk
/// copies of memory, which cost a browser more than the few bytes that most copies are; the memory's
/// maximum; and to leave this machine's folders out of what is shipped.
pub fn flags(paths: &Paths) -> String {
    let mut flags = vec![
        "-Ctarget-feature=+simd128,-bulk-memory".to_string(),
        format!("-Clink-arg=--max-memory={MAX_MEMORY}"),
        format!("--remap-path-prefix={}=.", paths.root.display()),
    ];
    for folder in package_folders() {
        flags.push(format!("--remap-path-prefix={}=packages", folder.display()));
    }
    flags.join("\u{1f}")
}

/// Where cargo unpacks the packages, one folder for each registry.
fn package_folders() -> Vec<PathBuf> {
    let home = std::env::var_os("CARGO_HOME")
        .map(PathBuf::from)
        .or_else(|| {
            let user = std::env::var_os("HOME").or_else(|| std::env::var_os("USERPROFILE"))?;
            Some(PathBuf::from(user).join(".cargo"))
        });
    let mut folders: Vec<PathBuf> = home
        .and_then(|home| std::fs::read_dir(home.join("registry").join("src")).ok())
        .map(|entries| entries.flatten().map(|entry| entry.path()).collect())
        .unwrap_or_default();
    folders.sort();
    folders
}

/// Makes the bindings as an ES module.
pub fn bind(compiled: &Path, folder: &Path) -> Outcome<()> {
    let told = |error: &dyn std::fmt::Display| format!("Cannot make the bindings: {error}.");
    Bindgen::new()
        .input_path(compiled)
        .web(true)
        .map_err(|error| told(&error))?
        .omit_default_module_path(true)
        .typescript(false)
        .remove_producers_section(true)
        .generate(folder)
        .map_err(|error| told(&format!("{error:#}")))
}

/// Makes the module smaller and faster.
pub fn optimise(paths: &Paths, node: &Node, from: &Path, to: &Path) -> Outcome<()> {
    capture(
        node.tool(paths, "binaryen/bin/wasm-opt")
            .args([
                // Shorter code, and no slower: what is worth unrolling the compiler has unrolled.
                "-Os",
                // What is called from one place alone stands there, however long.
                "--one-caller-inline-max-function-size=1000",
                // The first kilobyte is the far end of the stack, where no address is computed from.
                "--low-memory-unused",
                // Once more over what the first round has left.
                "-Os",
                // Functions of one room side by side: they are alike, and gzip sees that.
                "--reorder-functions-by-name",
                "--strip-debug",
                "--strip-producers",
            ])
            .arg(from)
            .arg("-o")
            .arg(to),
        Duration::from_secs(600),
    )
    .map(drop)
}

/// The profile of `Cargo.toml` that this build compiles with.
pub fn cargo_profile(profile: Profile) -> &'static str {
    match profile {
        Profile::Full => "shipped",
        Profile::Quick => "quick",
    }
}

fn stamp(paths: &Paths, profile: Profile, target: Target, folder: &Path) -> Outcome<Stamp> {
    let mut files = vec![
        paths.root.join("Cargo.toml"),
        paths.root.join("Cargo.lock"),
        paths.root.join("web").join("Cargo.toml"),
    ];
    files.extend(files_under(&paths.root.join("core"))?);
    files.extend(files_under(&paths.root.join("web").join("src"))?);
    let compiler = capture(program("rustc").arg("-vV"), Duration::from_secs(30))?;
    Stamp::new(
        folder,
        "core",
        &files,
        &[
            profile.name(),
            &flags(paths),
            &compiler,
            &format!("{target:?}"),
            // The build itself decides too: a changed step makes the core anew.
            include_str!("wasm.rs"),
        ],
    )
}

fn size_note(file: &Path) -> Outcome<String> {
    let bytes = read_bytes(file)?.len();
    #[expect(clippy::cast_precision_loss, reason = "shown to a person")]
    let kilobytes = bytes as f64 / 1000.0;
    Ok(format!("{kilobytes:.0} kB"))
}
