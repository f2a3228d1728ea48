//! Other programs: found on the path, started in a clean environment, ended after a time limit.

use std::ffi::OsStr;
use std::io::{BufRead, BufReader, Read};
use std::path::{Path, PathBuf};
use std::process::{Child, Command, ExitStatus, Stdio};
use std::thread::JoinHandle;
use std::time::{Duration, Instant};

use crate::Outcome;

/// What cargo sets for the program it runs, which would mislead a cargo started from there.
const MISLEADING: &[&str] = &[
    "CARGO",
    "CARGO_BUILD_TARGET",
    "CARGO_ENCODED_RUSTFLAGS",
    "DYLD_FALLBACK_LIBRARY_PATH",
    "LD_LIBRARY_PATH",
    "RUSTC",
    "RUSTC_WORKSPACE_WRAPPER",
    "RUSTFLAGS",
    "RUST_RECURSION_COUNT",
];
const MISLEADING_BEGINNINGS: &[&str] = &[
    "CARGO_BIN_",
    "CARGO_MANIFEST_",
    "CARGO_PKG_",
    "CARGO_PRIMARY_",
    "RUSTUP_TOOLCHAIN",
];

/// A program to run, without what cargo put into this one's environment.
pub fn program(name: impl AsRef<OsStr>) -> Command {
    let mut command = Command::new(name);
    for (key, _) in std::env::vars_os() {
        let Some(text) = key.to_str() else { continue };
        if MISLEADING.contains(&text)
            || MISLEADING_BEGINNINGS
                .iter()
                .any(|beginning| text.starts_with(beginning))
        {
            command.env_remove(text);
        }
    }
    command
}

/// The first file of that name on the path.
pub fn on_path(name: &str) -> Option<PathBuf> {
    let path = std::env::var_os("PATH")?;
    std::env::split_paths(&path)
        .flat_map(|folder| {
            [
                folder.join(name),
                folder.join(format!("{name}.exe")),
                folder.join(format!("{name}.cmd")),
            ]
        })
        .find(|file| is_program(file))
}

/// A file that the system would start.
#[cfg(unix)]
pub fn is_program(file: &Path) -> bool {
    use std::os::unix::fs::PermissionsExt;
    file.metadata()
        .is_ok_and(|data| data.is_file() && data.permissions().mode() & 0o111 != 0)
}

/// A file that the system would start.
#[cfg(not(unix))]
pub fn is_program(file: &Path) -> bool {
    file.is_file()
}

/// May packages of the system be installed here?
pub fn is_root() -> bool {
    cfg!(unix)
        && capture(program("id").arg("-u"), Duration::from_secs(10))
            .is_ok_and(|uid| uid.trim() == "0")
}

/// Runs to the end and gives what was printed; a failure tells what was printed last.
pub fn capture(command: &mut Command, limit: Duration) -> Outcome<String> {
    command
        .stdin(Stdio::null())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped());
    let mut child = spawn(command)?;
    let output = child.stdout.take().map(drain);
    let errors = child.stderr.take().map(drain);
    let ended = wait(&mut child, limit, command);
    let output = collect(output);
    let errors = collect(errors);
    if ended?.success() {
        return Ok(output);
    }
    let lines: Vec<&str> = output.lines().chain(errors.lines()).collect();
    let tail = lines
        .get(lines.len().saturating_sub(60)..)
        .unwrap_or_default()
        .join("\n");
    Err(format!("{tail}\n{} failed.", said(command)))
}

/// Runs to the end with its output shown as it comes; says whether it succeeded, and what it printed.
pub fn stream(command: &mut Command, limit: Duration) -> Outcome<(bool, String)> {
    command
        .stdin(Stdio::null())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped());
    let mut child = spawn(command)?;
    let output = child.stdout.take().map(show);
    let errors = child.stderr.take().map(show);
    let ended = wait(&mut child, limit, command);
    let output = collect(output);
    let errors = collect(errors);
    Ok((ended?.success(), output + &errors))
}

/// The command as one would type it.
pub fn said(command: &Command) -> String {
    std::iter::once(command.get_program())
        .chain(command.get_args())
        .map(|word| word.to_string_lossy().into_owned())
        .collect::<Vec<_>>()
        .join(" ")
}

fn spawn(command: &mut Command) -> Outcome<Child> {
    command
        .spawn()
        .map_err(|error| format!("Cannot start {}: {error}.", said(command)))
}

fn wait(child: &mut Child, limit: Duration, command: &Command) -> Outcome<ExitStatus> {
    let started = Instant::now();
    loop {
        if let Some(status) = child
            .try_wait()
            .map_err(|error| format!("Cannot wait for {}: {error}.", said(command)))?
        {
            return Ok(status);
        }
        if started.elapsed() > limit {
            // A program that has just ended by itself cannot be ended: either way it is gone.
            let _ = child.kill();
            let _ = child.wait();
            return Err(format!(
                "{} was ended after {} s without a result.",
                said(command),
                limit.as_secs()
            ));
        }
        std::thread::sleep(Duration::from_millis(20));
    }
}

fn drain(mut pipe: impl Read + Send + 'static) -> JoinHandle<String> {
    std::thread::spawn(move || {
        let mut bytes = Vec::new();
        // What was read before an error is still worth showing.
        let _ = pipe.read_to_end(&mut bytes);
        String::from_utf8_lossy(&bytes).into_owned()
    })
}

fn show(pipe: impl Read + Send + 'static) -> JoinHandle<String> {
    std::thread::spawn(move || {
        let mut all = String::new();
        let mut lines = BufReader::new(pipe);
        let mut line = Vec::new();
        while lines
            .read_until(b'\n', &mut line)
            .is_ok_and(|read| read > 0)
        {
            let text = String::from_utf8_lossy(&line);
            print!("{text}");
            all.push_str(&text);
            line.clear();
        }
        all
    })
}

fn collect(reader: Option<JoinHandle<String>>) -> String {
    reader
        .and_then(|reader| reader.join().ok())
        .unwrap_or_default()
}

/// Installs packages of Debian; only for root.
pub fn apt_install(packages: &[&str]) -> Outcome<()> {
    capture(program("apt-get").arg("update"), Duration::from_secs(120))?;
    capture(
        program("apt-get")
            .args(["install", "-y", "--no-install-recommends"])
            .args(packages)
            .env("DEBIAN_FRONTEND", "noninteractive"),
        Duration::from_secs(300),
    )
    .map(drop)
}
