//! Puts both forms of the page together from `www/`, the core and the examples.

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};
use std::time::Duration;

use serde_json::{Map, Value, json};

use crate::Outcome;
use crate::command::capture;
use crate::digest::{gzip, hex, integrity};
use crate::node::Node;
use crate::paths::{Paths, files_under, read, read_bytes, write};
use crate::policy;
use crate::printable::printable;
use crate::profile::Profile;
use crate::wasm::Core;

/// The lines of `index.html` that the build replaces.
const CHARSET: &str = "<meta charset=\"utf-8\">";
const STYLE: &str = "<link rel=\"stylesheet\" href=\"style/main.css\">";
const SCRIPT: &str = "<script type=\"module\" src=\"js/app.js\"></script>";

/// What was made.
pub struct Built {
    /// `rungline.html`.
    pub one_file: PathBuf,
    /// Its SHA-256.
    pub one_file_digest: String,
    /// Its size in bytes.
    pub one_file_bytes: usize,
    /// How many files the site has, without the one file.
    pub site_files: usize,
    /// SHA-256 of the list of the site's files and their SHA-256.
    pub site_digest: String,
    /// Sum of the gzip sizes of everything the page needs, in bytes.
    pub gzip_bytes: usize,
}

/// Writes `target/site/` with `rungline.html` in it.
pub fn assemble(paths: &Paths, profile: Profile, node: &Node, core: &Core) -> Outcome<Built> {
    let work = paths.wasm.join("page").join(profile.name());
    let page = read(&paths.www.join("index.html"))?;
    let wasm = read_bytes(&core.wasm)?;
    let bundler = Bundler {
        paths,
        profile,
        node,
        core,
        work: &work,
    };
    let worker = bundler.script("worker.js", None)?;
    let style = bundler.style("main.css")?;
    let first_style = bundler.style("first.css")?;
    let rest_style = bundler.style("rest.css")?;
    let examples = examples(paths)?;
    let constants = |door: &str, wasm_name: Option<&str>| {
        BTreeMap::from([
            ("RUNGLINE_VERSION", json!(env!("CARGO_PKG_VERSION"))),
            ("RUNGLINE_PROFILE", json!(profile.name())),
            ("RUNGLINE_DOOR", json!(door)),
            ("RUNGLINE_WASM", json!(wasm_name)),
            // The one file's worker starts before the page's script.
            (
                "RUNGLINE_WORKER_SOURCE",
                wasm_name.map_or(Value::Null, |_| json!(worker)),
            ),
            ("RUNGLINE_EXAMPLES", examples.clone()),
        ])
    };

    let file_script = bundler.script("app.js", Some(&constants("file", None)))?;
    let unpack = bundler.script("unpack.js", None)?;
    let quick = profile == Profile::Quick;
    let packed = [
        ("style", gzip(rest_style.as_bytes(), quick)?),
        ("worker", gzip(worker.as_bytes(), quick)?),
        ("core", gzip(&wasm, quick)?),
        ("app", gzip(file_script.as_bytes(), quick)?),
    ];
    let one_file = OneFile {
        page: &page,
        styles: [&first_style, &rest_style],
        unpack: &unpack,
        script: &file_script,
        packed: &packed,
    };
    let one_file = one_file.text()?;

    let wasm_name = hashed("core", "wasm", &wasm);
    let site_script = bundler.script("app.js", Some(&constants("site", Some(&wasm_name))))?;
    let mut site: BTreeMap<String, Vec<u8>> = BTreeMap::new();
    let style_name = hashed("style", "css", style.as_bytes());
    let script_name = hashed("app", "js", site_script.as_bytes());
    site.insert(
        "index.html".to_string(),
        site_page(&page, &style_name, &script_name)?.into_bytes(),
    );
    site.insert(style_name, style.clone().into_bytes());
    site.insert(script_name, site_script.into_bytes());
    site.insert(wasm_name, wasm);
    for name in [
        "manifest.webmanifest",
        "icon.svg",
        "icon-192.png",
        "icon-512.png",
    ] {
        site.insert(name.to_string(), read_bytes(&paths.www.join(name))?);
    }
    let (list, site_digest) = file_list(&site);
    let keeper = bundler.script(
        "sw.js",
        Some(&BTreeMap::from([
            ("RUNGLINE_FILES", list),
            ("RUNGLINE_CACHE", json!(format!("rungline-{site_digest}"))),
        ])),
    )?;
    site.insert("sw.js".to_string(), keeper.into_bytes());

    let gzip_bytes = gzip(page.as_bytes(), quick)?.len()
        + gzip(first_style.as_bytes(), quick)?.len()
        + gzip(unpack.as_bytes(), quick)?.len()
        + packed.iter().map(|(_, part)| part.len()).sum::<usize>();
    let built = Built {
        one_file: paths.site.join("rungline.html"),
        one_file_digest: hex(one_file.as_bytes()),
        one_file_bytes: one_file.len(),
        site_files: site.len(),
        site_digest,
        gzip_bytes,
    };
    site.insert("rungline.html".to_string(), one_file.into_bytes());
    lay(&paths.site, &site)?;
    Ok(built)
}

/// One classic script and one style from the page's modules.
struct Bundler<'a> {
    paths: &'a Paths,
    profile: Profile,
    node: &'a Node,
    core: &'a Core,
    work: &'a Path,
}

impl Bundler<'_> {
    /// A classic script; each constant stands for its global name wherever a module uses it.
    fn script(&self, name: &str, constants: Option<&BTreeMap<&str, Value>>) -> Outcome<String> {
        let source = match name {
            "sw.js" => self.paths.www.join(name),
            _ => self.paths.www.join("js").join(name),
        };
        let output = self.work.join(name);
        let mut esbuild = self.esbuild(&source, &output);
        esbuild.args(["--format=iife", "--target=es2022"]);
        esbuild.arg(format!(
            "--alias:rungline-web={}",
            self.core.bindings.display()
        ));
        if let Some(constants) = constants {
            let file = self.work.join(format!("constants-of-{name}"));
            let text: String = constants
                .iter()
                .map(|(key, value)| format!("export const {key} = {value};\n"))
                .collect();
            write(&file, text)?;
            esbuild.arg(format!("--inject:{}", file.display()));
        }
        capture(&mut esbuild, Duration::from_secs(60))?;
        if self.profile == Profile::Full {
            // Another twentieth off what esbuild has made, in seconds that only a full build has.
            let mut terser = self.node.tool(self.paths, "terser/bin/terser");
            terser
                .arg(&output)
                .args(["--mangle", "--compress", "passes=2,ecma=2020", "--output"]);
            capture(terser.arg(&output), Duration::from_secs(120))?;
        }
        read(&output)
    }

    fn style(&self, name: &str) -> Outcome<String> {
        let output = self.work.join(name);
        let source = self.paths.www.join("style").join(name);
        capture(&mut self.esbuild(&source, &output), Duration::from_secs(60))?;
        read(&output)
    }

    fn esbuild(&self, source: &Path, output: &Path) -> std::process::Command {
        let mut esbuild = self.node.tool(self.paths, "esbuild/bin/esbuild");
        esbuild
            .arg(source)
            .args([
                "--bundle",
                "--charset=utf8",
                "--log-level=warning",
                "--legal-comments=none",
            ])
            .arg(format!("--outfile={}", output.display()));
        if self.profile == Profile::Full {
            esbuild.arg("--minify");
        }
        esbuild
    }
}

/// Every example, in the order of their files' names.
fn examples(paths: &Paths) -> Outcome<Value> {
    let folder = paths.root.join("tests").join("examples");
    let mut examples = Vec::new();
    if folder.is_dir() {
        for file in files_under(&folder)? {
            if file.extension().is_none_or(|extension| extension != "json") {
                continue;
            }
            let value: Value = serde_json::from_str(&read(&file)?)
                .map_err(|error| format!("{} is not JSON: {error}.", file.display()))?;
            examples.push(value);
        }
    }
    Ok(Value::Array(examples))
}

/// What the one file is made of.
struct OneFile<'a> {
    page: &'a str,
    /// The style that stands in it as it is, and the one that is unpacked.
    styles: [&'a str; 2],
    /// The script that stands in it as it is, and unpacks the others.
    unpack: &'a str,
    /// The page's script, which runs once it is unpacked.
    script: &'a str,
    /// What it unpacks, in the order in which it is needed.
    packed: &'a [(&'a str, Vec<u8>)],
}

impl OneFile<'_> {
    fn text(&self) -> Outcome<String> {
        let [style, _] = self.styles;
        for (what, text, end) in [
            ("script", self.unpack, "</script"),
            ("style", style, "</style"),
        ] {
            if text.to_lowercase().contains(end) || text.contains("<!--") {
                return Err(format!(
                    "The {what} holds {end} or <!-- and cannot be put into a page."
                ));
            }
        }
        let scripts = [self.unpack, self.script].map(|script| integrity(script.as_bytes()));
        let styles = self.styles.map(|style| integrity(style.as_bytes()));
        let policy = policy::one_file(&scripts, &styles);
        let page = once(self.page, CHARSET, &with_policy(&policy))?;
        let page = once(&page, STYLE, &format!("<style>{style}</style>"))?;
        let page = once(&page, SCRIPT, "")?;
        let pieces: String = self
            .packed
            .iter()
            .map(|(part, packed)| pieces(part, packed))
            .collect();
        once(
            &page,
            "</body>",
            &format!("<script>{}</script>\n{pieces}</body>", self.unpack),
        )
    }
}

/// Bytes of a piece: so many that its element's own characters do not count, so few that the first ones
/// are unpacked while the last are read.
const PIECE: usize = 1 << 16;

/// A packed part as text in pieces, which `www/js/unpack.js` takes while the next ones are read.
fn pieces(part: &str, packed: &[u8]) -> String {
    let count = packed.chunks(PIECE).len();
    packed
        .chunks(PIECE)
        .enumerate()
        .map(|(place, piece)| {
            let last = if place + 1 == count { " data-last" } else { "" };
            format!(
                "<script type=\"text/plain\" data-part=\"{part}\"{last}>{}</script>\n",
                printable(piece)
            )
        })
        .collect()
}

fn site_page(page: &str, style: &str, script: &str) -> Outcome<String> {
    let page = once(page, CHARSET, &with_policy(&policy::site()))?;
    let page = once(
        &page,
        STYLE,
        &format!(
            "<link rel=\"manifest\" href=\"manifest.webmanifest\">\n\
             <link rel=\"icon\" href=\"icon.svg\" type=\"image/svg+xml\">\n\
             <link rel=\"apple-touch-icon\" href=\"icon-192.png\">\n\
             <link rel=\"stylesheet\" href=\"{style}\">"
        ),
    )?;
    let page = once(&page, SCRIPT, "")?;
    once(
        &page,
        "</body>",
        &format!("<script src=\"{script}\"></script>\n</body>"),
    )
}

fn with_policy(policy: &str) -> String {
    format!("{CHARSET}\n<meta http-equiv=\"Content-Security-Policy\" content=\"{policy}\">")
}

/// Replaces what stands in the page exactly once.
fn once(page: &str, from: &str, to: &str) -> Outcome<String> {
    match page.matches(from).count() {
        1 => Ok(page.replacen(from, to, 1)),
        count => Err(format!(
            "www/index.html holds {from} {count} times; the build needs it once."
        )),
    }
}

/// A name that changes with the content, so that files of two versions cannot be taken for each other.
fn hashed(stem: &str, extension: &str, bytes: &[u8]) -> String {
    let digest: String = hex(bytes).chars().take(12).collect();
    format!("{stem}.{digest}.{extension}")
}

/// The list of the site's files with their digests, and the digest of that list.
fn file_list(site: &BTreeMap<String, Vec<u8>>) -> (Value, String) {
    let list: Map<String, Value> = site
        .iter()
        .map(|(name, bytes)| (name.clone(), json!(integrity(bytes))))
        .collect();
    let list = Value::Object(list);
    let digest = hex(list.to_string().as_bytes());
    (list, digest)
}

/// Writes what has changed and removes what no longer belongs.
fn lay(folder: &Path, files: &BTreeMap<String, Vec<u8>>) -> Outcome<()> {
    std::fs::create_dir_all(folder)
        .map_err(|error| format!("Cannot make {}: {error}.", folder.display()))?;
    for (name, bytes) in files {
        let path = folder.join(name);
        if std::fs::read(&path).ok().as_ref() != Some(bytes) {
            write(&path, bytes)?;
        }
    }
    for path in files_under(folder)? {
        let kept = path
            .strip_prefix(folder)
            .ok()
            .and_then(Path::to_str)
            .is_some_and(|name| files.contains_key(name));
        if !kept {
            std::fs::remove_file(&path)
                .map_err(|error| format!("Cannot remove {}: {error}.", path.display()))?;
        }
    }
    Ok(())
}
