use std::fmt;

use sha2::{Digest as _, Sha256};

/// A digest is the SHA-256 hash of some bytes (FIPS 180-4).
#[derive(Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Digest([u8; 32]);

/// Letters and figures of a seal code's group, and how many groups there are: 64 bits of the hash, short enough to be read aloud.
const GROUP: usize = 4;
const GROUPS: usize = 4;

impl Digest {
    /// The hash of some bytes.
    pub fn of(bytes: &[u8]) -> Self {
        Self(Sha256::digest(bytes).into())
    }

    /// The digest that 64 hexadecimal figures in lower case name; `None` for any other text.
    pub fn from_hex(text: &str) -> Option<Self> {
        let figures = text.as_bytes();
        if figures.len() != 64 || !figures.iter().all(|c| matches!(c, b'0'..=b'9' | b'a'..=b'f')) {
            return None;
        }
        let mut bytes = [0; 32];
        for (byte, pair) in bytes.iter_mut().zip(text.as_bytes().chunks(2)) {
            *byte = u8::from_str_radix(std::str::from_utf8(pair).ok()?, 16).ok()?;
        }
        Some(Self(bytes))
    }

    /// The seal code: the hash's first 64 bits in four groups of hexadecimal figures, for paper.
    pub fn code(&self) -> String {
        let hex = self.to_string().to_uppercase();
        (0..GROUPS).map(|k| &hex[k * GROUP..(k + 1) * GROUP]).collect::<Vec<_>>().join("-")
    }
}

impl fmt::Display for Digest {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        self.0.iter().try_for_each(|byte| write!(f, "{byte:02x}"))
    }
}

impl fmt::Debug for Digest {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        fmt::Display::fmt(self, f)
    }
}

/// Hashing takes text piece by piece and never holds all of it.
#[derive(Clone, Default)]
pub struct Hashing(Sha256);

impl Hashing {
    /// The hash of all that was written.
    pub fn digest(self) -> Digest {
        Digest(self.0.finalize().into())
    }
}

impl fmt::Write for Hashing {
    fn write_str(&mut self, text: &str) -> fmt::Result {
        self.0.update(text.as_bytes());
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use std::fmt::Write;

    use super::*;

    #[test]
    fn hashes_are_those_of_the_standard() {
        // FIPS 180-2, appendix B, and the NIST example for the empty message.
        for (text, hex) in [
            ("", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"),
            ("abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"),
            (
                "abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
                "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1",
            ),
        ] {
            assert_eq!(Digest::of(text.as_bytes()).to_string(), hex);
            let mut hashing = Hashing::default();
            text.chars().for_each(|c| hashing.write_char(c).expect("it takes all"));
            assert_eq!(hashing.digest().to_string(), hex);
            assert_eq!(Digest::from_hex(hex), Some(Digest::of(text.as_bytes())));
        }
        assert_eq!(Digest::of(b"abc").code(), "BA78-16BF-8F01-CFEA");
    }

    #[test]
    fn only_a_whole_hash_in_lower_case_is_one() {
        let hex = Digest::of(b"x").to_string();
        for bad in [&hex[1..], &format!("{hex}0"), &hex.to_uppercase(), &hex.replace(&hex[..1], "g"), &format!("+{}", &hex[1..])] {
            assert_eq!(Digest::from_hex(bad), None, "{bad}");
        }
    }
}
