//! The review: a recipe with its plan and survey, and the words in which findings are told. What the screen, the command line and
//! the reports share.

mod explain;
mod judged;
mod not_checked;
mod recheck;
mod session;

pub use explain::{Bar, Explanation, Label, Paragraph, check_words, doubt_text, explain, headline, no_finding, proof_text, wrap};
pub use judged::Judged;
pub use not_checked::not_checked;
pub use recheck::{Progress, Recheck, Reply, Ticket};
pub use session::Session;
