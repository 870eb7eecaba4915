/// What a paragraph of an explanation answers.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Label {
    /// What is asked of which joint, against which limit.
    What,
    /// Where on the segment and on the cycle.
    Where,
    /// The mechanics behind it.
    Why,
    /// What happens if nothing is changed.
    LeftAlone,
    /// What the verdict rests on.
    RestsOn,
    /// What would settle it, tried.
    Remedies,
}

impl Label {
    /// Its words.
    pub fn words(self) -> &'static str {
        match self {
            Self::What => "What",
            Self::Where => "Where",
            Self::Why => "Why",
            Self::LeftAlone => "Left alone",
            Self::RestsOn => "Rests on",
            Self::Remedies => "Remedies",
        }
    }
}

/// A bar is one share of a sum, to be drawn beside its figure.
#[derive(Debug, Clone, PartialEq)]
pub struct Bar {
    /// Whose share.
    pub name: String,
    /// The share with its unit, such as `212 N·m`.
    pub figure: String,
    /// The share over the limit, signed; a full bar is 1.
    pub share: f64,
}

/// A paragraph of an explanation: what it answers, a few sentences, and bars below them if there are any.
#[derive(Debug, Clone, PartialEq)]
pub struct Paragraph {
    /// What it answers.
    pub label: Label,
    /// Its sentences, not wrapped.
    pub text: String,
    /// Shares of a sum.
    pub bars: Vec<Bar>,
}

impl Paragraph {
    /// A paragraph of sentences alone.
    pub(super) fn says(label: Label, text: impl Into<String>) -> Self {
        Self { label, text: text.into(), bars: Vec::new() }
    }
}

/// An explanation tells a finding in words.
#[derive(Debug, Clone, PartialEq)]
pub struct Explanation {
    /// One line: verdict, joint, check, figure.
    pub title: String,
    /// What, where, why, left alone, rests on; those that apply, in this order.
    pub paragraphs: Vec<Paragraph>,
}
