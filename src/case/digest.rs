//! Digests, by which a result says which files it came from.

use sha2::{Digest, Sha256};

/// `sha256:` and the hexadecimal digest of parts; where there are several, their lengths count too, so that no two splits agree.
pub(super) fn of(parts: &[&[u8]]) -> String {
    let mut hasher = Sha256::new();
    match parts {
        [only] => hasher.update(only),
        _ => {
            for part in parts {
                hasher.update((part.len() as u64).to_le_bytes());
                hasher.update(part);
            }
        }
    }
    format!("sha256:{:x}", hasher.finalize())
}
