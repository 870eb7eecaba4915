use std::fmt;

/// One step on the way to a datum in a file: a key, or the n-th table of an array (from 0).
#[derive(Debug, Clone, PartialEq, Eq, Hash)]
pub enum Step {
    /// A key.
    Key(String),
    /// An index into an array, from 0.
    Item(usize),
}

/// A field names one datum of an arm or a recipe by its way from the file's top, such as `joint[2].rate`.
#[derive(Debug, Clone, PartialEq, Eq, Hash, Default)]
pub struct Field(pub Vec<Step>);

impl Field {
    /// The whole file.
    pub fn top() -> Self {
        Self::default()
    }

    /// The field under `key` of this one.
    #[must_use]
    pub fn key(&self, key: &str) -> Self {
        let mut steps = self.0.clone();
        steps.push(Step::Key(key.to_owned()));
        Self(steps)
    }

    /// The item `index` (from 0) of this one.
    #[must_use]
    pub fn item(&self, index: usize) -> Self {
        let mut steps = self.0.clone();
        steps.push(Step::Item(index));
        Self(steps)
    }
}

impl fmt::Display for Field {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (i, step) in self.0.iter().enumerate() {
            match step {
                Step::Key(key) if i == 0 => write!(f, "{key}")?,
                Step::Key(key) => write!(f, ".{key}")?,
                Step::Item(index) => write!(f, "[{}]", index + 1)?,
            }
        }
        Ok(())
    }
}

/// A fault is something in the given data that cannot be: where it stands, and a sentence with thing, value and bound.
#[derive(Debug, Clone, PartialEq, Eq, thiserror::Error)]
#[error("{says}")]
pub struct Fault {
    /// Which datum is meant.
    pub field: Field,
    /// What is wrong, in words: the thing, its value, its bound.
    pub says: String,
}

impl Fault {
    /// A fault of one datum.
    pub fn new(field: Field, says: impl Into<String>) -> Self {
        Self { field, says: says.into() }
    }
}
