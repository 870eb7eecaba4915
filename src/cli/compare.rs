use std::path::Path;

use crate::files::{read_record, read_text};
use crate::review::{Date, Earlier, Record, difference_words, segment_changes};

use super::args::CompareArgs;
use super::code::Code;
use super::out;
use super::sign::opened;

/// Tells what is different between two recipes, or between a record and a recipe: changed data and changed segments, nothing else.
pub(super) fn run(args: &CompareArgs) -> anyhow::Result<Code> {
    let after = opened(&args.after)?;
    let sealed = |opened: &super::sign::Opened| {
        Record::of(&opened.judged, &opened.sources, &opened.run, &Earlier::default(), Date::after_1970(0))
    };
    let now = sealed(&after);
    let (mut lines, before) = if is_record(&args.before) {
        let record = read_record(&read_text(&args.before)?)?;
        let told = crate::seal::changes(&record.content, &now.content).into_iter().map(|change| {
            let value = |value: Option<String>| value.unwrap_or_else(|| "nothing".to_owned());
            format!("{}, {}: {} -> {}", change.of, change.key, value(change.before), value(change.after))
        });
        (told.collect::<Vec<_>>(), record)
    } else {
        let before = opened(&args.before)?;
        let mut told = difference_words(&before.judged.recipe, &after.judged.recipe, &after.judged.arm);
        if before.judged.arm.name() != after.judged.arm.name() {
            told.push(format!("arm: {} -> {}", before.judged.arm.name(), after.judged.arm.name()));
        }
        (told, sealed(&before))
    };
    let (segments, standing) = segment_changes(&before.segments, &now.segments);
    lines.extend(segments.iter().map(crate::review::SegmentChange::words));
    if lines.is_empty() {
        out::print("nothing differs\n")?;
        return Ok(Code::Clear);
    }
    lines.push(format!("{} segments are as they were", standing.len()));
    out::print(&(lines.join("\n") + "\n"))?;
    Ok(Code::NotClear)
}

fn is_record(path: &Path) -> bool {
    path.file_name().is_some_and(|name| name.to_string_lossy().ends_with(".signoff.toml"))
}
