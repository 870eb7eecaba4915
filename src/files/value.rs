use toml::de::DeValue;

/// Greatest magnitude of any number in a file. Nothing about an arm comes near it in mm, degrees, kg or N, and squares and cubes
/// of it are still finite.
const GREATEST: f64 = 1e9;

/// Longest text that is quoted in full in a complaint, in characters.
const LONGEST_QUOTE: usize = 60;

/// The number that a value holds, or why it holds none. Text that looks like a number is still text.
pub(super) fn number(value: &DeValue<'_>) -> Result<f64, String> {
    let (read, written) = match value {
        DeValue::Integer(whole) => (i128::from_str_radix(whole.as_str(), whole.radix()).ok().map(|v| v as f64), whole.to_string()),
        DeValue::Float(float) => (float.as_str().parse().ok(), float.to_string()),
        _ => return Err(format!("is {}; it must be a number", describe(value))),
    };
    match read {
        Some(number) if number.abs() <= GREATEST => Ok(number),
        Some(number) if number.is_nan() || written.contains("inf") => {
            Err(format!("is {}; it must be a finite number", shortened(&written)))
        }
        _ => Err(format!("is {}; it must be a number between -{GREATEST} and {GREATEST}", shortened(&written))),
    }
}

/// What a value is, for a complaint that wanted something else.
pub(super) fn describe(value: &DeValue<'_>) -> String {
    match value {
        DeValue::String(text) => format!("text {}", quoted(text)),
        DeValue::Integer(whole) => format!("the number {}", shortened(&whole.to_string())),
        DeValue::Float(float) => format!("the number {}", shortened(float.as_str())),
        DeValue::Boolean(yes) => yes.to_string(),
        DeValue::Datetime(_) => "a date or time".to_owned(),
        DeValue::Array(items) if items.is_empty() => "an empty array".to_owned(),
        DeValue::Array(_) => "an array".to_owned(),
        DeValue::Table(_) => "a table".to_owned(),
    }
}

/// Text in quotes, shortened, with everything that could upset a terminal written as an escape.
pub(super) fn quoted(text: &str) -> String {
    format!("\"{}\"", shortened(text))
}

fn shortened(text: &str) -> String {
    let mut shown: String = text
        .chars()
        .take(LONGEST_QUOTE)
        .map(|c| if is_unseen(c) { c.escape_unicode().to_string() } else { c.to_string() })
        .collect();
    if text.chars().nth(LONGEST_QUOTE).is_some() {
        shown.push_str("...");
    }
    shown
}

/// Whether a character steers a terminal, or reorders or hides what stands beside it.
pub(super) fn is_unseen(c: char) -> bool {
    c.is_control() || matches!(c, '\u{200b}'..='\u{200f}' | '\u{2028}'..='\u{202e}' | '\u{2060}'..='\u{206f}' | '\u{feff}')
}
