//! The content policy of each form of the page, for its meta element.
//!
//! Both start the worker from a Blob, because a worker from an address does not inherit a policy
//! set by a meta element; `frame-ancestors` is not allowed there.

/// Policy of the one file: only the inline scripts and styles with these hashes.
pub fn one_file(scripts: &[String], styles: &[String]) -> String {
    let quoted = |hashes: &[String]| -> Vec<String> {
        hashes.iter().map(|hash| format!("'{hash}'")).collect()
    };
    let scripts = quoted(scripts).join(" ");
    let styles = quoted(styles).join(" ");
    format!(
        "default-src 'none'; script-src {scripts} 'wasm-unsafe-eval'; style-src {styles}; \
         worker-src blob:; img-src data: blob:; base-uri 'none'; form-action 'none'; \
         require-trusted-types-for 'script'; trusted-types rungline"
    )
}

/// Policy of the static site: only its own files.
pub fn site() -> String {
    "default-src 'none'; script-src 'self' 'wasm-unsafe-eval'; style-src 'self'; \
     connect-src 'self'; manifest-src 'self'; worker-src 'self' blob:; \
     img-src 'self' data: blob:; base-uri 'none'; form-action 'none'; \
     require-trusted-types-for 'script'; trusted-types rungline"
        .to_string()
}
