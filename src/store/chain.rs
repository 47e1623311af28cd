//! The chain: each event's hash covers its text, its number and the hash before, so that none can be changed unseen.

use sha2::{Digest, Sha256};
use std::fmt;

/// What the first event is chained to: hash of these words.
const BEGINNING: &str = "snugdown record 1";

/// How many digits of a hash people are shown: enough to tell heads apart, short enough to read out.
const SHOWN: usize = 12;

/// How far a record goes: its last event and the hash that covers all of them.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Head {
    /// The number of the last event; 0 before the first.
    pub number: usize,
    /// 64 hexadecimal digits.
    pub hash: String,
}

impl Head {
    /// The head of a record without events.
    #[must_use]
    pub fn beginning() -> Head {
        Head { number: 0, hash: digest(BEGINNING.as_bytes()) }
    }

    /// The head after one more event, given as the text that the store keeps:
    /// hash = SHA-256(hash before, newline, number, newline, text), each hash as its hexadecimal digits.
    #[must_use]
    pub fn then(&self, text: &str) -> Head {
        let number = self.number + 1;
        Head { number, hash: digest(format!("{}\n{number}\n{text}", self.hash).as_bytes()) }
    }

    /// The first digits of the hash, for people.
    #[must_use]
    pub fn short(&self) -> &str {
        self.hash.get(..SHOWN).unwrap_or(&self.hash)
    }
}

impl fmt::Display for Head {
    /// "event 63, chain 0f1e2d3c4b5a".
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "event {}, chain {}", self.number, self.short())
    }
}

/// The SHA-256 of bytes in hexadecimal digits.
///
/// ```
/// use snugdown::store::chain::digest;
/// // FIPS 180-4, example "abc".
/// assert_eq!(digest(b"abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
/// ```
#[must_use]
pub fn digest(bytes: &[u8]) -> String {
    let digit = |half: u8| char::from_digit(u32::from(half), 16).unwrap_or('0');
    Sha256::digest(bytes).iter().flat_map(|byte| [digit(byte >> 4), digit(byte & 15)]).collect()
}
