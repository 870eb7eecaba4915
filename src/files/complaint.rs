use std::fmt;

/// A complaint is one thing that is wrong with a file: what, and where it stands.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Complaint {
    /// The file, as shown to a person.
    pub source: String,
    /// Line, counted from 1; 0 where no place in the file is meant, as when it can't be read.
    pub line: usize,
    /// Column, counted in characters from 1; 0 where no place is meant.
    pub column: usize,
    /// What is wrong: the thing, its value, its bound.
    pub says: String,
}

impl Complaint {
    /// A complaint about a file as a whole.
    pub(super) fn whole(source: &str, says: impl Into<String>) -> Self {
        Self { source: source.to_owned(), line: 0, column: 0, says: says.into() }
    }
}

impl fmt::Display for Complaint {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let Self { source, line, column, says } = self;
        if *line == 0 { write!(f, "{says} ({source})") } else { write!(f, "{says} ({source}:{line}:{column})") }
    }
}

/// A rejection is why a file was not taken: every complaint about it, in the order in which they stand in the file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Rejected {
    /// The complaints, at least one.
    pub complaints: Vec<Complaint>,
}

impl Rejected {
    /// A rejection for one reason.
    pub(super) fn one(complaint: Complaint) -> Self {
        Self { complaints: vec![complaint] }
    }
}

impl fmt::Display for Rejected {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        for (index, complaint) in self.complaints.iter().enumerate() {
            if index > 0 {
                f.write_str("\n")?;
            }
            complaint.fmt(f)?;
        }
        Ok(())
    }
}

impl std::error::Error for Rejected {}
