//! Reports: what stands in them, that nothing typed can change what they are, and that their figures are those of other commands.

mod command;
mod curves;
mod figures;
mod hostile;
mod outline;
mod tags;

use std::path::{Path, PathBuf};
use std::sync::Arc;

use elbowroom::checks::Watch;
use elbowroom::files::{self, Opened};
use elbowroom::report::{Report, Standing, report_html, report_markdown};
use elbowroom::review::{Judged, Sources, first_run, found_by, reduced_speed, remedies_text};

/// A report in both formats.
struct Written {
    html: String,
    markdown: String,
}

impl Written {
    /// Leaves the page where the browser and the validator of `.ci/run` take it from, if they ask for it.
    fn keep(&self, name: &str) {
        if let Some(folder) = std::env::var_os("ELBOWROOM_KEEP_REPORTS") {
            std::fs::write(Path::new(&folder).join(name), &self.html).expect("written");
        }
    }
}

/// A recipe of the tree.
fn recipe(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes").join(name)
}

fn judged(opened: &Opened) -> Judged {
    let (arm, recipe) = (Arc::new(opened.arm.clone()), Arc::new(opened.recipe.clone()));
    Judged::of(&arm, &recipe, None, &Watch::default()).expect("not stopped")
}

/// The reports of what was opened, with nobody's signature.
fn written(opened: &Opened, with_remedies: bool) -> Written {
    let nobody = Standing::Nothing("There is no record x.signoff.toml beside it.".to_owned());
    written_with(opened, &files::sources(opened), nobody, with_remedies)
}

fn written_with(opened: &Opened, sources: &Sources, standing: Standing, with_remedies: bool) -> Written {
    let judged = judged(opened);
    let watch = Watch::default();
    let run = first_run(&judged, &watch).expect("not stopped");
    let reduced = reduced_speed(&judged, &watch).expect("not stopped");
    let remedies = with_remedies.then(|| {
        let findings = judged.survey.findings.iter();
        let settled = findings.map(|finding| {
            let (remedies, tried) = found_by(&judged, finding, &watch);
            remedies_text(&judged, finding, &remedies, &tried)
        });
        settled.collect()
    });
    let report = Report { judged: &judged, sources, run: &run, reduced: &reduced, remedies, standing, date: None };
    let (html, markdown) = (report_html(&report), report_markdown(&report));
    Written { html, markdown }
}
