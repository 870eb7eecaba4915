/// A row of the task: one direction along or about the base axes in which the arm is asked to follow a path.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum TaskRow {
    /// Along base x.
    X,
    /// Along base y.
    Y,
    /// Along base z.
    Z,
    /// About base x.
    TurnX,
    /// About base y.
    TurnY,
    /// About base z.
    TurnZ,
}

impl TaskRow {
    /// All rows in the Jacobian's order.
    pub const ALL: [Self; 6] = [Self::X, Self::Y, Self::Z, Self::TurnX, Self::TurnY, Self::TurnZ];

    /// The word for it in an arm file.
    pub fn word(self) -> &'static str {
        match self {
            Self::X => "x",
            Self::Y => "y",
            Self::Z => "z",
            Self::TurnX => "turn-x",
            Self::TurnY => "turn-y",
            Self::TurnZ => "turn-z",
        }
    }

    /// The row that a word names.
    pub fn from_word(word: &str) -> Option<Self> {
        Self::ALL.into_iter().find(|row| row.word() == word)
    }
}

/// The task of an arm: the rows of the Jacobian that lines and arcs are followed in. Six for an arm of six joints or more.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Task {
    rows: [usize; 6],
    len: usize,
}

impl Task {
    /// All six rows.
    pub const ALL: Self = Self { rows: [0, 1, 2, 3, 4, 5], len: 6 };

    /// The given rows, each once, in the Jacobian's order; `None` if there are none.
    pub fn of(given: &[TaskRow]) -> Option<Self> {
        let mut task = Self { rows: [0; 6], len: 0 };
        for (index, row) in TaskRow::ALL.iter().enumerate() {
            if given.contains(row) {
                task.rows[task.len] = index;
                task.len += 1;
            }
        }
        (task.len > 0).then_some(task)
    }

    /// Row indices into the 6-row Jacobian (0 to 2 along, 3 to 5 about the base axes).
    pub fn rows(&self) -> &[usize] {
        &self.rows[..self.len]
    }

    /// Whether the task includes turning.
    pub fn turns(&self) -> bool {
        self.rows().iter().any(|&row| row >= 3)
    }

    /// Whether all six rows are asked for.
    pub fn is_whole(&self) -> bool {
        self.len == 6
    }

    /// The task in words, as an arm file writes it.
    pub fn words(&self) -> String {
        self.rows().iter().map(|&row| TaskRow::ALL[row].word()).collect::<Vec<_>>().join(" ")
    }
}
