//! The file as it came: its bytes are compressed once, and kept as read whenever a session is saved
//! again.

use std::io::{Read, Write};
use std::sync::Arc;

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use flate2::Compression;
use flate2::read::DeflateDecoder;
use flate2::write::DeflateEncoder;
use sha2::{Digest, Sha256};

use crate::problem::Problem;
use crate::session::problems;

/// Largest file a session embeds, bytes before compression.
pub const MAX_BYTES: usize = 32 << 20;

/// The original file.
#[derive(Clone, PartialEq)]
pub struct Source {
    /// File name as opened, without its folder.
    pub name: String,
    /// Size, bytes.
    pub size: usize,
    /// SHA-256 of the bytes, lower-case hex.
    pub sha256: String,
    /// Raw deflate of the bytes, base64.
    pub(crate) packed: Arc<str>,
}

impl Source {
    /// Packs `bytes`.
    ///
    /// # Errors
    /// The file is larger than [`MAX_BYTES`].
    pub fn pack(bytes: &[u8], name: &str) -> Result<Self, Problem> {
        if bytes.len() > MAX_BYTES {
            return Err(problems::too_large(bytes.len(), MAX_BYTES));
        }
        let mut encoder = DeflateEncoder::new(Vec::new(), Compression::default());
        let packed = encoder
            .write_all(bytes)
            .and_then(|()| encoder.finish())
            .map_err(|e| problems::source(e.to_string()))?;
        let plain_name = name.rsplit(['/', '\\']).next().unwrap_or(name);
        Ok(Self {
            name: plain_name.to_owned(),
            size: bytes.len(),
            sha256: sha256(bytes),
            packed: STANDARD.encode(packed).into(),
        })
    }

    /// The original bytes, checked against size and digest.
    ///
    /// # Errors
    /// The packed text is damaged, or does not unpack to what size and digest say.
    pub fn unpack(&self) -> Result<Vec<u8>, Problem> {
        if self.size > MAX_BYTES {
            return Err(problems::too_large(self.size, MAX_BYTES));
        }
        let packed = STANDARD
            .decode(self.packed.as_bytes())
            .map_err(|e| problems::source(format!("The embedded file is damaged: {e}.")))?;
        let mut bytes = Vec::with_capacity(self.size);
        let limit = self.size as u64 + 1;
        DeflateDecoder::new(packed.as_slice())
            .take(limit)
            .read_to_end(&mut bytes)
            .map_err(|e| problems::source(format!("The embedded file is damaged: {e}.")))?;
        if bytes.len() != self.size || sha256(&bytes) != self.sha256 {
            return Err(problems::source("The embedded file does not fit its size and SHA-256."));
        }
        Ok(bytes)
    }
}

/// SHA-256, lower-case hex.
#[must_use]
pub fn sha256(bytes: &[u8]) -> String {
    Sha256::digest(bytes).iter().map(|b| format!("{b:02x}")).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn digest_is_the_published_one() {
        // FIPS 180-2, appendix B.1: SHA-256 of "abc".
        assert_eq!(
            sha256(b"abc"),
            "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
        );
    }

    #[test]
    fn bytes_come_back_and_damage_is_seen() {
        let bytes: Vec<u8> = (0..5000_u32).map(|i| (i * i % 251) as u8).collect();
        let source = Source::pack(&bytes, "/folder/a name.csv").expect("packs");
        assert_eq!(source.name, "a name.csv");
        assert_eq!(source.unpack().expect("unpacks"), bytes);
        let mut other = source.clone();
        other.sha256 = sha256(b"abc");
        assert_eq!(other.unpack().expect_err("digest differs").code, "session-source");
        let mut cut = source.clone();
        cut.packed = source.packed[..source.packed.len() / 2 / 4 * 4].into();
        assert!(cut.unpack().is_err());
        let mut bomb = source;
        bomb.size -= 1;
        assert!(bomb.unpack().is_err());
    }

    #[test]
    fn a_larger_file_is_refused() {
        let bytes = vec![b'1'; MAX_BYTES + 1];
        assert_eq!(Source::pack(&bytes, "x").err().map(|p| p.code), Some("session-too-large"));
    }
}
