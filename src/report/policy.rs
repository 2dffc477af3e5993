//! What the page may do: show its own styles, run its own script, nothing
//! else.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use sha2::{Digest, Sha256};

/// A Content-Security-Policy that names the styles and the script by their
/// hashes and forbids every request (W3C Content Security Policy Level 3).
pub fn policy(styles: &str, script: &str) -> String {
    let hash = |text: &str| STANDARD.encode(Sha256::digest(text));
    format!(
        "default-src 'none'; style-src 'sha256-{}'; script-src 'sha256-{}'; img-src data:; \
         base-uri 'none'; form-action 'none'",
        hash(styles),
        hash(script)
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    /// SHA-256 of "abc": FIPS 180-4's example, in base64.
    #[test]
    fn styles_and_script_are_named_by_their_hashes() {
        let abc = "'sha256-ungWv48Bz+pBQUDeXa4iI7ADYaOWF3qctBD/YfIAFa0='";
        assert_eq!(policy("abc", "abc").matches(abc).count(), 2);
    }
}
