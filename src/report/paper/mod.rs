//! A report on paper: one judged recipe told from its verdict down to the files that were read, for a person who signs or a ticket. What
//! it says is put together once, block by block; two ways of writing it down share that, and each lets text in only through its own
//! escaping.

mod arm_svg;
mod block;
mod chart_svg;
mod data;
mod drawings;
mod findings;
mod first_run;
mod html;
mod keep;
mod markdown;
mod markdown_text;
mod markup;
mod rest;
mod ribbon_svg;
mod segments;
mod sign_off;
mod summary;
mod visible;

pub use html::report_html;
pub use keep::{NotKept, Written, may_keep, save_report};
pub use markdown::report_markdown;
pub use sign_off::Standing;

use crate::review::drawn::Sketch;
use crate::review::{Date, FirstRun, Judged, Paragraph, Reduced, Sources};

use block::Paper;

/// The name and version of the format, at the head of every report.
pub const REPORT_FORMAT: &str = "elbowroom-report/1";

/// What a report is made of. The same of all of it makes the same bytes.
#[derive(Debug, Clone)]
pub struct Report<'a> {
    /// The recipe with all that was found.
    pub judged: &'a Judged,
    /// The files that were read.
    pub sources: &'a Sources,
    /// The plan of the first run.
    pub run: &'a FirstRun,
    /// Every segment at reduced speed.
    pub reduced: &'a [Reduced],
    /// What would settle each finding, in the findings' order; `None` where it was not tried.
    pub remedies: Option<Vec<Vec<Paragraph>>>,
    /// Whether somebody signed.
    pub standing: Standing,
    /// The day that is to stand on it, if any: no clock is read.
    pub date: Option<Date>,
}

/// All that a report says, in order.
fn paper(report: &Report) -> Paper {
    let mut blocks = summary::blocks(report);
    blocks.extend(data::blocks(report));
    blocks.extend(findings::blocks(report));
    blocks.extend(rest::doubts(report));
    blocks.extend(segments::blocks(report));
    blocks.extend(first_run::blocks(report));
    blocks.extend(rest::not_checked(report));
    blocks.extend(sign_off::blocks(report));
    blocks.extend(rest::cautions());
    blocks.extend(rest::files(report));
    Paper { title: report.judged.recipe.name.clone(), blocks, sketch: Sketch::of(report.judged) }
}
