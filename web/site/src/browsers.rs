//! The real browsers that the page tests drive.

use std::path::{Path, PathBuf};

use crate::Outcome;
use crate::command::{apt_install, is_program, is_root, on_path};

/// Where one browser may be.
struct Browser {
    /// As people call it.
    name: &'static str,
    /// The variable that names its program.
    variable: &'static str,
    /// Its programs on the path.
    programs: &'static [&'static str],
    /// Where its installers put it otherwise.
    places: &'static [&'static str],
    /// Its package in Debian.
    package: &'static str,
}

const BROWSERS: [Browser; 2] = [
    Browser {
        name: "Chromium",
        variable: "RUNGLINE_CHROMIUM",
        programs: &["chromium", "chromium-browser", "google-chrome", "chrome"],
        places: &[
            "/Applications/Chromium.app/Contents/MacOS/Chromium",
            "/Applications/Google Chrome.app/Contents/MacOS/Google Chrome",
            r"C:\Program Files\Google\Chrome\Application\chrome.exe",
        ],
        package: "chromium",
    },
    Browser {
        name: "Firefox",
        variable: "RUNGLINE_FIREFOX",
        programs: &["firefox-esr", "firefox"],
        places: &[
            "/Applications/Firefox.app/Contents/MacOS/firefox",
            r"C:\Program Files\Mozilla Firefox\firefox.exe",
        ],
        package: "firefox-esr",
    },
];

/// The program of each browser by the variable that names it; what is missing is installed where
/// that is possible, and never left out.
pub fn find_or_install() -> Outcome<(Vec<(&'static str, PathBuf)>, String)> {
    let mut missing = Vec::new();
    for browser in &BROWSERS {
        if browser.find()?.is_none() {
            missing.push(browser);
        }
    }
    let mut note = "there already".to_string();
    if !missing.is_empty() {
        let packages: Vec<&str> = missing.iter().map(|browser| browser.package).collect();
        if on_path("apt-get").is_some() && is_root() {
            println!(
                "Installing {} by apt-get (7 minutes at most) …",
                packages.join(" and ")
            );
            apt_install(&packages)?;
            note = format!("{} installed by apt-get", packages.join(" and "));
        }
    }
    let mut found = Vec::new();
    for browser in &BROWSERS {
        match browser.find()? {
            Some(program) => found.push((browser.variable, program)),
            None => {
                return Err(format!(
                    "{} was not found, and the page tests need it. Install it, for instance by\n    \
                     apt-get update && apt-get install -y {}\nor set {} to its program, and try again.",
                    browser.name, browser.package, browser.variable
                ));
            }
        }
    }
    Ok((found, note))
}

impl Browser {
    /// The variable, then the path, then the usual places. A variable that leads nowhere is a fault.
    fn find(&self) -> Outcome<Option<PathBuf>> {
        if let Some(named) = std::env::var_os(self.variable).filter(|value| !value.is_empty()) {
            let program = PathBuf::from(named);
            return if is_program(&program) {
                Ok(Some(program))
            } else {
                Err(format!(
                    "{} names {}, which is no program.",
                    self.variable,
                    program.display()
                ))
            };
        }
        Ok(self
            .programs
            .iter()
            .find_map(|name| on_path(name))
            .or_else(|| {
                self.places
                    .iter()
                    .map(Path::new)
                    .find(|place| is_program(place))
                    .map(Path::to_path_buf)
            }))
    }
}
