//! Node and the npm packages.

use std::process::Command;
use std::time::Duration;

use crate::Outcome;
use crate::command::{capture, on_path, program};
use crate::digest::Stamp;
use crate::paths::Paths;

/// The oldest Node that runs the packages of the lock file and these tests.
const OLDEST: (u32, u32) = (20, 19);

/// A Node that is new enough.
pub struct Node {
    npm: std::path::PathBuf,
}

impl Node {
    /// Looks on the path.
    pub fn find() -> Outcome<Self> {
        let wanted = format!(
            "Install Node {}.{} or newer with npm and try again.",
            OLDEST.0, OLDEST.1
        );
        let version = capture(program("node").arg("--version"), Duration::from_secs(20))
            .map_err(|_| format!("Node was not found. {wanted}"))?;
        let mut numbers = version
            .trim()
            .trim_start_matches('v')
            .split('.')
            .map_while(|number| number.parse::<u32>().ok());
        let found = (numbers.next().unwrap_or(0), numbers.next().unwrap_or(0));
        if found < OLDEST {
            return Err(format!("Node {} is too old. {wanted}", version.trim()));
        }
        let npm = on_path("npm").ok_or_else(|| format!("npm was not found. {wanted}"))?;
        Ok(Node { npm })
    }

    /// The packages exactly as the lock file names them, unless they are there already.
    pub fn install(&self, paths: &Paths) -> Outcome<String> {
        let folder = &paths.page_tests;
        let modules = folder.join("node_modules");
        let lock = [
            folder.join("package.json"),
            folder.join("package-lock.json"),
        ];
        let stamp = Stamp::new(&modules, "installed", &lock, &[])?;
        if stamp.holds() {
            return Ok("there already".to_string());
        }
        capture(
            program(&self.npm)
                .args(["ci", "--no-audit", "--no-fund", "--ignore-scripts"])
                .current_dir(folder),
            Duration::from_secs(300),
        )
        .map_err(|error| format!("{error}\nThe npm packages could not be installed."))?;
        stamp.set()?;
        Ok("installed by the lock file".to_string())
    }

    /// A program out of an npm package.
    pub fn tool(&self, paths: &Paths, script: &str) -> Command {
        let mut command = program("node");
        command.arg(paths.page_tests.join("node_modules").join(script));
        command
    }

    /// Node itself.
    pub fn program(&self) -> Command {
        program("node")
    }
}
