use crate::checks::Verdict;
use crate::geometry::{Pose, V3};
use crate::review::Bar;
use crate::review::drawn::{Bands, Curve, Sketch};

/// A paper is what a report says, block by block, before it is written in one format or another. All text in it is plain: whoever
/// writes it down escapes it.
#[derive(Debug)]
pub(super) struct Paper {
    /// The recipe's name.
    pub title: String,
    /// Blocks in order.
    pub blocks: Vec<Block>,
    /// The path of the TCP that all drawings of the arm share.
    pub sketch: Sketch,
}

/// A block is one piece of a report.
#[derive(Debug)]
pub(super) enum Block {
    /// A section begins: its name in links, and its heading.
    Section(&'static str, &'static str),
    /// A part of a section begins: its name in links, and its heading.
    Part(String, String),
    /// The sentence that everything else explains.
    Lead(Verdict, String),
    /// A paragraph.
    Says(String),
    /// Sentences, one below the other.
    List(Vec<String>),
    /// Sentences in an order that matters.
    Steps(Vec<String>),
    /// Paragraphs behind their labels; the same label stands once.
    Labelled(Vec<Labelled>),
    /// A table.
    Table(Table),
    /// The verdicts along the cycle.
    Ribbon(Ribbon),
    /// Drawings beside each other, with a heading if they have one of their own; they show what stands in words and tables too.
    Drawings(Option<String>, Vec<Drawing>),
}

/// A paragraph behind a label, with shares of a sum where there are any.
#[derive(Debug)]
pub(super) struct Labelled {
    pub label: &'static str,
    pub text: String,
    pub bars: Vec<Bar>,
}

/// A table: what it is of, its columns, and its rows, whose first cell names the row.
#[derive(Debug)]
pub(super) struct Table {
    pub caption: String,
    pub columns: Vec<Column>,
    pub rows: Vec<Vec<Cell>>,
}

/// A column: its heading, and whether figures stand in it.
#[derive(Debug, Clone, Copy)]
pub(super) struct Column {
    pub words: &'static str,
    pub figures: bool,
}

/// A cell of a table.
#[derive(Debug)]
pub(super) enum Cell {
    /// Words or figures.
    Text(String),
    /// A verdict, with words to tell it.
    Verdict(Verdict, String),
    /// What a machine would read: a place in a file, a hash.
    Code(String),
    /// Words that lead to a part of this report, by its name in links.
    Link(String, String),
}

impl Cell {
    /// A verdict in its own word.
    pub fn verdict(verdict: Verdict) -> Self {
        Self::Verdict(verdict, verdict.word().to_owned())
    }

    /// What it says.
    pub fn words(&self) -> &str {
        match self {
            Self::Text(words) | Self::Verdict(_, words) | Self::Code(words) | Self::Link(_, words) => words,
        }
    }
}

/// The verdicts along the cycle.
#[derive(Debug)]
pub(super) struct Ribbon {
    /// In cells of a drawing.
    pub fine: Bands,
    /// In columns of type.
    pub coarse: Bands,
    /// Number, whole verdict and span of time on the cycle (s) of every segment.
    pub segments: Vec<(String, Verdict, [f64; 2])>,
    /// Duration of the cycle, s.
    pub lasts: f64,
}

/// A drawing and what it shows, in words.
#[derive(Debug)]
pub(super) struct Drawing {
    pub caption: String,
    pub shows: Shows,
}

/// What a drawing shows.
#[derive(Debug)]
pub(super) enum Shows {
    /// One quantity over time, with its worst instant.
    Chart(Box<Curve>),
    /// The arm at an instant.
    Arm(Box<Stance>),
}

/// The arm at an instant, in the world, m.
#[derive(Debug)]
pub(super) struct Stance {
    /// The base.
    pub mount: Pose,
    /// From the base to the flange.
    pub stick: Vec<V3>,
    /// The TCP.
    pub tcp: V3,
    /// Whether something hangs on the tool.
    pub loaded: bool,
    /// How bad it is there.
    pub verdict: Verdict,
}

/// A table from rows of text: `figures` says in which columns figures stand, `verdict` which one holds a verdict's word.
pub(super) fn table<const N: usize>(
    caption: &str,
    heads: [&'static str; N],
    figures: [bool; N],
    verdict: Option<usize>,
    rows: impl IntoIterator<Item = [String; N]>,
) -> Table {
    let columns = heads.into_iter().zip(figures).map(|(words, figures)| Column { words, figures }).collect();
    let cell = |(column, text): (usize, String)| match Verdict::from_word(&text).filter(|_| verdict == Some(column)) {
        Some(verdict) => Cell::verdict(verdict),
        None => Cell::Text(text),
    };
    let rows = rows.into_iter().map(|row| row.into_iter().enumerate().map(cell).collect()).collect();
    Table { caption: caption.to_owned(), columns, rows }
}
