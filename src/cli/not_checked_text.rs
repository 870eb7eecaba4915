use crate::review::{Judged, doubt_text, not_checked, wrap};

/// The doubts about a recipe, a paragraph each; empty for none.
pub(super) fn doubts_text(judged: &Judged, width: usize) -> String {
    let told = judged.survey.doubts.iter().map(|doubt| hanging("doubt: ", &doubt_text(judged, doubt), width));
    told.collect()
}

/// What was not checked, in brief: what stands before the first colon or full stop of each.
pub(super) fn not_checked_text(judged: &Judged, width: usize) -> String {
    let brief: Vec<String> = not_checked(judged)
        .iter()
        .map(|told| told.split([':', '.']).next().unwrap_or_default().to_owned())
        .map(|told| {
            let mut letters = told.chars();
            let first = letters.next().map(|letter| letter.to_ascii_lowercase());
            let second = letters.clone().next();
            // A word in capitals, such as TCP, keeps them.
            if second.is_some_and(char::is_uppercase) { told } else { first.into_iter().chain(letters).collect() }
        })
        .collect();
    hanging("not checked: ", &format!("{}.", brief.join("; ")), width)
}

/// A paragraph behind a label, its further lines set in.
pub(super) fn hanging(label: &str, text: &str, width: usize) -> String {
    let mut lines = wrap(&format!("{label}{text}"), width - 2).into_iter();
    let first = lines.next().unwrap_or_default();
    std::iter::once(first).chain(lines.map(|line| format!("  {line}"))).map(|line| line + "\n").collect()
}
