//! Serves the static site on this machine only.

use std::path::{Path, PathBuf};

use tiny_http::{Header, Method, Request, Response, Server};

use crate::Outcome;

/// The first port that is tried.
const PORT: u16 = 7117;
/// How many ports are tried before any free one is taken.
const TRIES: u16 = 20;

/// Serves until it is ended.
pub fn serve(folder: &Path) -> Outcome<()> {
    let server = (PORT..PORT + TRIES)
        .chain([0])
        .find_map(|port| Server::http(("127.0.0.1", port)).ok())
        .ok_or("No port of 127.0.0.1 could be opened.")?;
    let address = server
        .server_addr()
        .to_ip()
        .ok_or("The server has no address.")?;
    println!("\nServing on   http://{address}/   (end with Ctrl+C)");
    for request in server.incoming_requests() {
        answer(request, folder);
    }
    Ok(())
}

fn answer(request: Request, folder: &Path) {
    let head_or_get = matches!(request.method(), Method::Get | Method::Head);
    let found = head_or_get
        .then(|| file_of(request.url(), folder))
        .flatten()
        .and_then(|file| Some((media_type(&file), std::fs::read(&file).ok()?)));
    let (status, kind, bytes) = match found {
        Some((kind, bytes)) => (200, kind, bytes),
        None => (
            404,
            "text/plain; charset=utf-8",
            b"There is no such file.\n".to_vec(),
        ),
    };
    let mut response = Response::from_data(bytes).with_status_code(status);
    for (name, value) in [
        ("Content-Type", kind),
        ("Cache-Control", "no-store"),
        ("X-Content-Type-Options", "nosniff"),
    ] {
        if let Ok(header) = Header::from_bytes(name, value) {
            response.add_header(header);
        }
    }
    // A browser that went away needs no answer.
    let _ = request.respond(response);
}

/// The file that an address stands for; never one outside the folder.
fn file_of(url: &str, folder: &Path) -> Option<PathBuf> {
    let path = url.split(['?', '#']).next()?.trim_start_matches('/');
    let name = if path.is_empty() { "index.html" } else { path };
    let plain = name
        .chars()
        .all(|c| c.is_ascii_alphanumeric() || ['.', '-', '_'].contains(&c));
    let file = folder.join(name);
    (plain && !name.contains("..") && file.is_file()).then_some(file)
}

fn media_type(file: &Path) -> &'static str {
    match file.extension().and_then(|extension| extension.to_str()) {
        Some("html") => "text/html; charset=utf-8",
        Some("js") => "text/javascript; charset=utf-8",
        Some("css") => "text/css; charset=utf-8",
        Some("wasm") => "application/wasm",
        Some("webmanifest") => "application/manifest+json",
        Some("svg") => "image/svg+xml",
        Some("png") => "image/png",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn no_address_leads_out_of_the_folder() {
        let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
        assert!(file_of("/serve.rs?x=1", &folder).is_some());
        for url in [
            "/../Cargo.toml",
            "/..%2fCargo.toml",
            "//etc/passwd",
            "/..",
            "/./../Cargo.toml",
        ] {
            assert_eq!(file_of(url, &folder), None, "{url}");
        }
    }
}
