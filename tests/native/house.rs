//! The house rules that a compiler does not check: modules depend downwards only, files hold one
//! concept, and nothing typed by a person can make the core panic or answer differently elsewhere.

use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

/// The packages of the core with their modules; each module may use those before it and none after it.
const PACKAGES: &[(&str, &[&str])] = &[
    (
        "core/kernel/src",
        &[
            "constants",
            "problem",
            "quantity",
            "json_text",
            "numerics",
            "angular",
            "configuration",
            "projections",
            "weights",
            "radial",
            "structure",
            "splitting",
        ],
    ),
    (
        "core/src",
        &[
            "quantity",
            "elements",
            "configuration",
            "terms",
            "radiation",
            "splitting",
            "sheet",
        ],
    ),
];

/// Lines that a file may have; empty ones, comments and a Rust file's test module are not counted.
const MOST_LINES: usize = 600;

/// What the core may not hold, and why.
const BANNED: &[(&str, &str)] = &[
    (".unwrap()", "an input may make it panic"),
    (".expect(", "an input may make it panic"),
    ("panic!(", "no input may make the core panic"),
    ("todo!(", "no stubs"),
    ("unimplemented!(", "no stubs"),
    ("unreachable!(", "an input may reach it"),
    ("assert!(", "no input may make the core panic"),
    ("assert_eq!(", "no input may make the core panic"),
    ("HashMap", "its order differs from run to run"),
    ("HashSet", "its order differs from run to run"),
    ("std::thread", "the core has no threads"),
    ("std::time", "the core has no clock"),
    ("SystemTime", "the core has no clock"),
    ("Instant", "the core has no clock"),
    ("std::env", "the core has no surroundings"),
    ("std::fs", "the core reads no files"),
    ("std::io", "the core has no input or output"),
    ("mul_add", "fused arithmetic differs by machine"),
];

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("..")
}

/// Every file under `folder` with one of these endings, what is built or installed left out.
fn files(folder: &Path, endings: &[&str]) -> Vec<PathBuf> {
    let mut found = Vec::new();
    let entries =
        std::fs::read_dir(folder).unwrap_or_else(|error| panic!("{}: {error}", folder.display()));
    for entry in entries {
        let path = entry.expect("a readable folder").path();
        let name = path
            .file_name()
            .and_then(|n| n.to_str())
            .unwrap_or_default();
        if path.is_dir() {
            if !["target", "node_modules"].contains(&name) {
                found.extend(files(&path, endings));
            }
        } else if endings.iter().any(|ending| name.ends_with(ending)) {
            found.push(path);
        }
    }
    found.sort();
    found
}

fn core_files() -> Vec<PathBuf> {
    PACKAGES
        .iter()
        .flat_map(|(package, _)| files(&root().join(package), &[".rs"]))
        .collect()
}

/// The code of a Rust file: its test modules, comments and the contents of its texts left out, one
/// line for each line.
fn code(file: &Path) -> Vec<String> {
    let text = std::fs::read_to_string(file).expect("a readable file");
    let text = match text.find("#[cfg(test)]") {
        // What follows it is the test module, the last of the file.
        Some(start) => text.get(..start).unwrap_or_default().to_string(),
        None => text,
    };
    let mut lines = vec![String::new()];
    let mut characters = text.chars().peekable();
    while let Some(character) = characters.next() {
        match character {
            '\n' => lines.push(String::new()),
            '/' if characters.peek() == Some(&'/') => {
                while characters.peek().is_some_and(|&c| c != '\n') {
                    characters.next();
                }
            }
            '"' => skip_text(&mut characters, &mut lines),
            '\'' => {
                // A character, or the name of a lifetime, which has no closing quote.
                let rest: String = characters.clone().take(4).collect();
                let escaped = rest.starts_with('\\');
                if escaped || rest.chars().nth(1) == Some('\'') {
                    if escaped {
                        characters.next();
                    }
                    characters.next();
                    while characters.next().is_some_and(|c| c != '\'') {}
                }
            }
            other => {
                if let Some(line) = lines.last_mut() {
                    line.push(other);
                }
            }
        }
    }
    lines
}

fn skip_text(characters: &mut std::iter::Peekable<std::str::Chars<'_>>, lines: &mut Vec<String>) {
    if let Some(line) = lines.last_mut() {
        line.push_str("\"\"");
    }
    while let Some(character) = characters.next() {
        match character {
            '\\' if characters.next() == Some('\n') => lines.push(String::new()),
            '"' => return,
            '\n' => lines.push(String::new()),
            _ => {}
        }
    }
}

/// The package of the core that a file belongs to, and its place inside.
fn package_of(file: &Path) -> (&'static [&'static str], PathBuf) {
    PACKAGES
        .iter()
        .find_map(|(package, modules)| {
            let inside = file.strip_prefix(root().join(package)).ok()?;
            Some((*modules, inside.to_path_buf()))
        })
        .expect("a file of the core")
}

/// The module of the core that a file belongs to; nothing for a package's root and its programs.
fn module_of(file: &Path) -> Option<String> {
    let (_, inside) = package_of(file);
    let first = inside
        .components()
        .next()?
        .as_os_str()
        .to_str()?
        .to_string();
    let module = first.trim_end_matches(".rs").to_string();
    (!["lib", "bin"].contains(&module.as_str())).then_some(module)
}

/// The modules that a piece of code names after `crate::`, in braces too.
fn modules_named(code: &str) -> BTreeSet<String> {
    let mut named = BTreeSet::new();
    for (place, _) in code.match_indices("crate::") {
        let rest = code.get(place + "crate::".len()..).unwrap_or_default();
        let mut depth = 0_usize;
        let mut word = String::new();
        let mut path_goes_on = false;
        for character in rest.chars() {
            match character {
                c if c.is_alphanumeric() || c == '_' => {
                    if !path_goes_on {
                        word.push(c);
                    }
                }
                '{' => {
                    depth += 1;
                    if depth > 1 {
                        path_goes_on = true;
                    }
                }
                ':' => path_goes_on = true,
                ',' | '}' if depth <= 1 => {
                    named.insert(std::mem::take(&mut word));
                    path_goes_on = false;
                    if character == '}' || depth == 0 {
                        break;
                    }
                }
                '}' => {
                    depth -= 1;
                    // What was named before the inner braces is still the module.
                    path_goes_on = true;
                }
                c if depth > 0 && (c == ',' || c == '*' || c.is_whitespace()) => {}
                _ => break,
            }
        }
        named.insert(word);
    }
    named.remove("");
    named
}

/// How many steps of `super` lead from a file's module to the crate.
fn depth(file: &Path) -> usize {
    let is_folder = file.file_name().is_some_and(|name| name == "mod.rs");
    package_of(file).1.components().count() - usize::from(is_folder)
}

fn place_of(modules: &[&str], module: &str) -> Option<usize> {
    modules.iter().position(|each| *each == module)
}

#[test]
fn every_module_has_its_place_in_the_order() {
    for (package, order) in PACKAGES {
        let library = code(&root().join(package).join("lib.rs")).join("\n");
        let modules: Vec<&str> = library
            .lines()
            .filter_map(|line| {
                let line = line.trim();
                line.strip_prefix("pub mod ")
                    .or_else(|| line.strip_prefix("mod "))?
                    .strip_suffix(';')
            })
            .collect();
        assert!(!modules.is_empty());
        for module in modules {
            assert!(
                place_of(order, module).is_some(),
                "{module} of {package} has no place in the order"
            );
        }
    }
}

#[test]
fn modules_depend_downwards_only() {
    let mut upward = Vec::new();
    for file in core_files() {
        let Some(module) = module_of(&file) else {
            continue;
        };
        let (order, _) = package_of(&file);
        let own = place_of(order, &module).unwrap_or_else(|| panic!("{module} has no place"));
        let code = code(&file).join("\n");
        for named in modules_named(&code) {
            // A macro or a type of the crate's root is no module.
            if place_of(order, &named).is_some_and(|place| place > own) {
                upward.push(format!("{} uses {named}", file.display()));
            }
        }
        let above = "super::".repeat(depth(&file));
        if code.contains(&above) {
            upward.push(format!(
                "{} reaches around the order by {above}",
                file.display()
            ));
        }
    }
    assert!(upward.is_empty(), "{}", upward.join("\n"));
}

#[test]
fn the_search_for_dependencies_sees_every_spelling() {
    let named = |code: &str| modules_named(code).into_iter().collect::<Vec<_>>();
    assert_eq!(named("use crate::terms::Term;"), ["terms"]);
    assert_eq!(
        named("use crate::{angular::{wigner_3j, equivalent::classify}, sheet};"),
        ["angular", "sheet"]
    );
    assert_eq!(
        named("pub(crate) fn f() -> crate::problem::Problem {"),
        ["problem"]
    );
    assert_eq!(named("crate::sheet"), ["sheet"]);
}

#[test]
fn the_core_holds_nothing_that_panics_or_differs_between_machines() {
    let mut found = Vec::new();
    for file in core_files() {
        // The program on the desk has files and streams; its library has not.
        let is_program = module_of(&file).is_none();
        for (number, line) in code(&file).iter().enumerate() {
            for (word, why) in BANNED {
                if line.contains(word) && !(is_program && word.starts_with("std::")) {
                    found.push(format!("{}:{}: {word}: {why}", file.display(), number + 1));
                }
            }
            if indexes(line) {
                found.push(format!(
                    "{}:{}: an index may be out of bounds: use get",
                    file.display(),
                    number + 1
                ));
            }
        }
    }
    assert!(found.is_empty(), "{}", found.join("\n"));
}

/// `values[i]`, but not `vec![…]`, `#[…]`, `[f64; 3]` or a pattern.
fn indexes(line: &str) -> bool {
    let mut before = ' ';
    for character in line.chars() {
        if character == '[' && (before.is_alphanumeric() || [')', ']', '_', '?'].contains(&before))
        {
            return true;
        }
        before = character;
    }
    false
}

#[test]
fn no_file_outgrows_one_concept() {
    let root = root();
    let mut long = Vec::new();
    for folder in [
        "core/kernel/src",
        "core/src",
        "web/src",
        "web/site/src",
        "www/js",
        "tests",
    ] {
        for file in files(&root.join(folder), &[".rs", ".js", ".mjs"]) {
            let lines = if file.extension().is_some_and(|extension| extension == "rs") {
                code(&file)
            } else {
                let text = std::fs::read_to_string(&file).expect("a readable file");
                text.lines().map(str::to_string).collect()
            };
            let lines = lines
                .iter()
                .map(|line| line.trim())
                .filter(|line| {
                    !line.is_empty() && !["//", "/*", "*"].iter().any(|c| line.starts_with(c))
                })
                .count();
            if lines > MOST_LINES {
                long.push(format!("{} has {lines} lines", file.display()));
            }
        }
    }
    assert!(long.is_empty(), "{}", long.join("\n"));
}
