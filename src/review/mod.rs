//! The review: a recipe with its plan and survey, and the words in which findings are told. What the screen, the command line and
//! the reports share.

pub mod drawn;
mod explain;
mod first_run;
mod history;
pub mod jog;
mod judged;
mod many;
mod not_checked;
mod recheck;
pub mod record;
mod reduced_speed;
mod remedies;
mod sealed;
mod session;
mod shift;
mod sign_off;
mod verify;

pub use explain::{
    Bar, CAUTION, Explanation, FIRST_RUN_CAUTIONS, Label, Paragraph, SEGMENT_HEADS, bounds_text, check_brief, check_words,
    difference_words, doubt_text, edit_words, explain, fastest_text, first_run_text, glued, headline, held_back_words,
    joint_stop_words, kind_words, line_words, no_finding, proof_summary, proof_text, reduced_speed_text, remedies_text,
    remedy_text, remedy_title, run_rows, segment_row, stage_rows, stage_words, stop_rows, stopped_text, stopping_text, wrap,
};
pub use first_run::{FirstRun, HeldBack, SegmentRun, Stage, first_run};
pub use history::{History, Step};
pub use judged::Judged;
pub use many::many;
pub use not_checked::not_checked;
pub use recheck::{Done, Progress, Recheck, Reply, Ticket};
pub use reduced_speed::{REDUCED_SPEED, Reduced, reduced_speed};
pub use remedies::{Change, Desk, Effect, Ends, Errand, News, Remedy, RemedyKind, Short, Told, Tried, found_by, kinds_for, search};
pub use sealed::{
    Accepted, Date, Datum, Earlier, Matter, Person, Record, Role, SealedCheck, SealedCycle, SealedFile, SealedRun, SealedSegment,
    Settled, Sources, Tightest,
};
pub use session::Session;
pub use shift::shift;
pub use sign_off::{Answer, Around, Hindrance, NotTaken, OpenDoubt, Question, Reason, SignOff};
pub use verify::{
    CellPoint, CellTable, CellTool, Compared, MASS_SLACK, Outcome, Reported, SegmentChange, Slack, compare_override,
    compare_points, compare_record, compare_typed, segment_changes,
};
