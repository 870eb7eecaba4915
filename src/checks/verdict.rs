/// A verdict says what became of a check, a segment or a recipe. Worse ones compare greater.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Verdict {
    /// The reserve is left everywhere.
    Clear,
    /// Room is left, but less than the reserve.
    Tight,
    /// Nothing bad was seen, but it is not known.
    Unproven,
    /// More is asked than there is.
    Over,
    /// No motion exists.
    NoPath,
}

impl Verdict {
    /// All verdicts, the worst first.
    pub const ALL: [Self; 5] = [Self::NoPath, Self::Over, Self::Unproven, Self::Tight, Self::Clear];

    /// Its word.
    pub fn word(self) -> &'static str {
        match self {
            Self::Clear => "clear",
            Self::Tight => "tight",
            Self::Unproven => "unproven",
            Self::Over => "over",
            Self::NoPath => "no path",
        }
    }

    /// The verdict that a word names; `None` for any other text.
    pub fn from_word(word: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|verdict| verdict.word() == word)
    }

    /// Its letter, where a word is too long.
    pub fn letter(self) -> char {
        match self {
            Self::Clear => '.',
            Self::Tight => 't',
            Self::Unproven => '?',
            Self::Over => 'O',
            Self::NoPath => '#',
        }
    }
}
