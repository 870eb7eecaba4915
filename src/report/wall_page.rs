use crate::review::{Record, Role, check_words, wrap};
use crate::seal::Digest;

/// Columns and rows that fit on an A4 page in a printer's usual type.
const COLUMNS: usize = 80;
const ROWS: usize = 66;

/// One page for the wall: what was judged, the seal code, room for two names in ink, what was not checked, every joint's tightest
/// segment, the override allowed and the findings accepted. At most 66 lines of 80 columns; what does not fit is counted.
pub fn wall_page(record: &Record, seal: &Digest) -> String {
    let mut lines = Vec::new();
    let rule = "-".repeat(COLUMNS);
    lines.extend(wrap(&format!("{}: {}", record.name, record.verdict.word()), COLUMNS));
    lines.push(format!("seal {}   {} on {}", seal.code(), record.recipe.path, record.arm.path));
    lines.push("It says what was judged and is no leave to run an arm. Local codes and the arm".to_owned());
    lines.push("maker's documents come first.".to_owned());
    lines.push(rule.clone());
    for role in Role::ALL {
        let told: Vec<String> = record
            .people
            .iter()
            .filter(|person| person.role == role)
            .map(|person| format!("{}, {}", person.name, person.date))
            .collect();
        lines.push(format!("{:<12} {}", role.words(), told.join("; ")));
        lines.push(String::new());
        lines.push(format!("{:<12} {}", "in ink", "_".repeat(40)));
    }
    lines.push(rule.clone());
    lines.push(format!("override: clear up to {}", record.first_run.highest));
    let stages: Vec<String> = record.first_run.stages.iter().map(|(at, verdict)| format!("{at} {}", verdict.word())).collect();
    lines.extend(wrap(&format!("stages: {}", stages.join(", ")), COLUMNS));
    lines.push("every joint where it is tightest:".to_owned());
    for tight in &record.tightest {
        lines.extend(wrap(
            &format!("  {:<4} room {:<8} {} to {}", tight.joint, tight.room, check_words(tight.check), tight.segment),
            COLUMNS,
        ));
    }
    lines.push(rule.clone());
    let mut rest = Vec::new();
    rest.push(if record.accepted.is_empty() { "findings accepted: none".to_owned() } else { "findings accepted:".to_owned() });
    for known in &record.accepted {
        rest.extend(wrap(&format!("  to \"{}\": {}. {}: {}", known.matter.to, known.says, known.by, known.reason), COLUMNS));
    }
    for known in &record.settled {
        rest.extend(wrap(&format!("  doubt: {} {}: {}", known.says, known.by, known.reason), COLUMNS));
    }
    let brief = |told: &String| told.split([':', '.']).next().unwrap_or_default().to_owned();
    let not_checked: Vec<String> = record.not_checked.iter().map(brief).collect();
    let mut last = vec![rule];
    last.extend(wrap(&format!("NOT checked: {}.", not_checked.join("; ")), COLUMNS));
    let room = ROWS.saturating_sub(lines.len() + last.len() + 1);
    let left = rest.len().saturating_sub(room);
    rest.truncate(room);
    if left > 0 {
        rest.push(format!("  and {left} more lines in the record"));
    }
    lines.extend(rest);
    lines.extend(last);
    lines.truncate(ROWS);
    lines.join("\n") + "\n"
}
