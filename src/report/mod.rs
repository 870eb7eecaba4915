//! What goes out: the result of a check as JSON, the motion over the cycle as CSV, a report on paper as HTML or Markdown. One format
//! a file.

mod check_json;
mod explain_json;
mod finding_json;
mod grid;
mod judged_json;
mod not_judged_json;
mod paper;
mod plan_json;
mod remedy_json;
mod save;
mod stopping_json;
mod trace_csv;
mod wall_page;

pub use check_json::{FORMAT, check_json};
pub use explain_json::{EXPLAIN_FORMAT, Explained, explain_json};
pub use grid::{MOST_ROWS, TooManyRows};
pub use not_judged_json::{NOT_JUDGED_FORMAT, not_judged_json};
pub use paper::{NotKept, REPORT_FORMAT, Report, Standing, Written, may_keep, report_html, report_markdown, save_report};
pub use plan_json::{PLAN_FORMAT, plan_json};
pub use save::save;
pub use trace_csv::{TraceError, trace_csv};
pub use wall_page::wall_page;
