use crate::checks::Watch;
use crate::report::plan_json;
use crate::review::{
    CAUTION, FIRST_RUN_CAUTIONS, FirstRun, Judged, Reduced, fastest_text, first_run, first_run_text, headline, reduced_speed,
    reduced_speed_text, run_rows, stage_rows, stage_words, stop_rows, stopping_text, wrap,
};

use super::args::PlanArgs;
use super::chosen::{Chosen, chosen};
use super::code::Code;
use super::columns::{Stands, columns};
use super::not_checked_text::hanging;
use super::out;

/// Plans the first run of a recipe.
pub(super) fn run(args: &PlanArgs) -> anyhow::Result<Code> {
    let chosen = chosen(args.recipe.as_deref())?;
    let watch = Watch::default();
    let plan = first_run(&chosen.judged, &watch).expect("nobody stops this watch");
    let reduced = reduced_speed(&chosen.judged, &watch).expect("nobody stops this watch");
    let told = if args.json {
        plan_json(&chosen.judged, &plan, &reduced, &chosen.recipe_file, &chosen.arm_file) + "\n"
    } else {
        text(&chosen, &plan, &reduced, usize::from(args.width))
    };
    out::print(&told)?;
    Ok(Code::Clear)
}

fn text(chosen: &Chosen, plan: &FirstRun, reduced: &[Reduced], width: usize) -> String {
    let judged = &chosen.judged;
    let table_width = width.min(80);
    let cautions: String =
        FIRST_RUN_CAUTIONS.iter().enumerate().map(|(k, caution)| hanging(&format!("{}. ", k + 1), caution, width)).collect();
    let parts = [
        wrap(&headline(judged), width).join("\n")
            + "\n"
            + &hanging("", &format!("no arm connected; {} on {}", chosen.recipe_file, judged.arm.name()), width),
        "First-run plan\n".to_owned() + &cautions,
        stages(judged, plan, table_width),
        wrap(&first_run_text(judged, plan).join(" "), width).join("\n") + "\n",
        segments(judged, plan, reduced, table_width),
        hanging("reduced speed: ", &reduced_speed_text(judged, reduced).join(" "), width),
        stops(judged, table_width),
        hanging("stopping: ", &stopping_text(judged), width),
        wrap(CAUTION, width).join("\n") + "\n",
    ];
    let parts: Vec<String> = parts.into_iter().filter(|part| !part.is_empty()).collect();
    parts.join("\n")
}

/// Below this many columns a table keeps only its figures, and words stand in lines of their own.
const NARROW: usize = 72;

/// The stages in a table: override, verdict, what is not clear there.
fn stages(judged: &Judged, plan: &FirstRun, width: usize) -> String {
    if width < NARROW {
        let line = |stage: &crate::review::Stage| {
            let words = stage_words(judged, stage);
            let words = if words.is_empty() { stage.verdict().word().to_owned() } else { words };
            hanging(&format!("{}: ", stage.run_at), &words, width)
        };
        return plan.stages.iter().map(line).collect();
    }
    columns(&stage_rows(judged, plan), [Stands::Last, Stands::First, Stands::First], 2, width)
}

/// The segments in a table: how fast each is clear, the peaks of speed at full override, and the override at reduced speed.
fn segments(judged: &Judged, plan: &FirstRun, reduced: &[Reduced], width: usize) -> String {
    let rows = run_rows(judged, plan, reduced);
    let [first, last] = [Stands::First, Stands::Last];
    let table = if width < NARROW {
        let few: Vec<[String; 4]> =
            rows.into_iter().map(|[number, to, clear, _, _, _, reduced]| [number, to, clear, reduced]).collect();
        columns(&few, [last, first, last, last], 1, width)
    } else {
        columns(&rows, [last, first, last, first, last, last, last], 1, width)
    };
    table + &wrap(&fastest_text(judged, reduced), width).join("\n") + "\n"
}

/// What a stop asks for, in a table: the TCP's way along its path, the joint that runs on farthest, and the time until all rest.
/// Empty where no segment has stopping data.
fn stops(judged: &Judged, width: usize) -> String {
    let rows = stop_rows(judged);
    if rows.len() == 1 {
        return String::new();
    }
    let [first, last] = [Stands::First, Stands::Last];
    if width < NARROW {
        let few: Vec<[String; 4]> = rows.into_iter().map(|[number, to, way, _, _, rests]| [number, to, way, rests]).collect();
        return columns(&few, [last, first, last, last], 1, width);
    }
    columns(&rows, [last, first, last, last, first, last], 1, width)
}
