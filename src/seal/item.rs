use std::fmt::Write;

use super::{Digest, Hashing};

/// An item is one datum of a recipe or an arm file, freed of layout: what it belongs to, its key, and its value in one way of
/// writing. Numbers are the shortest decimals that read back as the same double, in the file's own unit.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Item {
    /// What it belongs to, such as `waypoint "on shelf"` or `arm: joint "J2"`.
    pub of: String,
    /// Its key there, such as `pose.xyz`.
    pub key: String,
    /// Its value.
    pub value: String,
    /// The line it stands in, counted from 1; 0 where it was not read from a file. Not part of the content.
    pub line: usize,
}

impl Item {
    /// Whether two items say the same, wherever they stand.
    pub fn says_as(&self, other: &Self) -> bool {
        (&self.of, &self.key, &self.value) == (&other.of, &other.key, &other.value)
    }
}

/// The hash of a content: of its items in order, each as owner, key and value, all ended by a zero byte, which no text of a file
/// can hold.
pub fn content_digest(items: &[Item]) -> Digest {
    let mut hashing = Hashing::default();
    for item in items {
        for text in [&item.of, &item.key, &item.value] {
            // Hashing takes everything.
            let _ = write!(hashing, "{text}\0");
        }
    }
    hashing.digest()
}

#[cfg(test)]
mod tests {
    use super::*;

    fn item(of: &str, key: &str, value: &str, line: usize) -> Item {
        Item { of: of.into(), key: key.into(), value: value.into(), line }
    }

    #[test]
    fn a_content_hash_minds_every_word_and_no_line() {
        let hash = content_digest(&[item("a", "b", "c", 1)]);
        assert_eq!(hash, Digest::of(b"a\0b\0c\0"));
        assert_eq!(hash, content_digest(&[item("a", "b", "c", 9)]));
        for other in [item("ab", "", "c", 1), item("a", "bc", "", 1), item("a", "b", "d", 1)] {
            assert_ne!(hash, content_digest(&[other]));
        }
        let two = [item("a", "b", "c", 1), item("d", "e", "f", 2)];
        assert_ne!(content_digest(&two), content_digest(&[two[1].clone(), two[0].clone()]));
    }
}
