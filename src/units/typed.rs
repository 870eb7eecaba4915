use super::{Dimension, tidy};

/// Greatest magnitude that a file takes, in the unit that people read.
const GREATEST: f64 = 1e9;

/// The units that may follow a number: as typed (without blanks, `^` and middle dots, with plain digits), and how many of the unit
/// that people read by default make one of it.
fn units_of(of: Dimension) -> &'static [(&'static str, f64)] {
    const DEG_PER_RAD: f64 = 180.0 / std::f64::consts::PI;
    match of {
        Dimension::Angle => &[("deg", 1.0), ("°", 1.0), ("rad", DEG_PER_RAD)],
        Dimension::Length => &[("mm", 1.0), ("cm", 10.0), ("m", 1000.0)],
        Dimension::TurnRate => &[("deg/s", 1.0), ("°/s", 1.0), ("rad/s", DEG_PER_RAD)],
        Dimension::Speed => &[("mm/s", 1.0), ("cm/s", 10.0), ("m/s", 1000.0)],
        Dimension::TurnAcceleration => &[("deg/s2", 1.0), ("°/s2", 1.0), ("rad/s2", DEG_PER_RAD)],
        Dimension::Acceleration => &[("mm/s2", 1.0), ("cm/s2", 10.0), ("m/s2", 1000.0)],
        Dimension::TurnJerk => &[("deg/s3", 1.0), ("°/s3", 1.0), ("rad/s3", DEG_PER_RAD)],
        Dimension::Jerk => &[("mm/s3", 1.0), ("cm/s3", 10.0), ("m/s3", 1000.0)],
        Dimension::Torque => &[("Nm", 1.0)],
        Dimension::Force => &[("N", 1.0)],
        Dimension::Inertia => &[("kgm2", 1.0)],
        Dimension::Mass => &[("kg", 1.0), ("g", 0.001)],
        Dimension::Time => &[("s", 1.0), ("ms", 0.001)],
        Dimension::Ratio => &[],
    }
}

/// What a person typed, as a number in SI: `180`, `180 mm/s`, `0,25 m/s`, `-3.5 rad`. Without a unit, the one that people read by
/// default is meant (mm, degrees, kg ...). A comma is a decimal mark as a point is.
///
/// # Errors
/// Why it can't be taken, as a clause: `"fast" is no number; give mm/s, cm/s or m/s`.
pub fn typed(text: &str, of: Dimension) -> Result<f64, String> {
    let (number, unit) = number_and_unit(text)?;
    let factor = if unit.is_empty() {
        1.0
    } else {
        let known = units_of(of);
        let found = known.iter().find(|(name, _)| *name == unit);
        found.ok_or_else(|| format!("\"{}\" is no unit here; {}", shortened(&unit), choice(of)))?.1
    };
    let shown = if factor == 1.0 { number } else { tidy(number * factor) };
    in_bounds(shown)?;
    Ok(shown / of.per_si())
}

/// A share that a person typed, in percent, as a fraction: `20`, `20 %`, `12,5%`.
///
/// # Errors
/// Why it can't be taken, as a clause.
pub fn typed_share(text: &str) -> Result<f64, String> {
    let (number, unit) = number_and_unit(text)?;
    if !(unit.is_empty() || unit == "%") {
        return Err(format!("\"{}\" is no unit here; give %", shortened(&unit)));
    }
    in_bounds(number)?;
    Ok(number / 100.0)
}

fn in_bounds(shown: f64) -> Result<(), String> {
    if shown.abs() <= GREATEST { Ok(()) } else { Err(format!("it must be between -{GREATEST} and {GREATEST}")) }
}

fn choice(of: Dimension) -> String {
    let names: Vec<&str> = units_of(of).iter().map(|(name, _)| *name).collect();
    match names.split_last() {
        None => "it has none".to_owned(),
        Some((only, [])) => format!("give {only}"),
        Some((last, rest)) => format!("give {} or {last}", rest.join(", ")),
    }
}

/// A number with point or comma, and what follows it, reduced to plain signs.
fn number_and_unit(text: &str) -> Result<(f64, String), String> {
    let text = text.trim().replace('\u{2212}', "-");
    let is_of_number = |c: char| c.is_ascii_digit() || matches!(c, '.' | ',' | '+' | '-');
    let mut end = text.find(|c: char| !is_of_number(c)).unwrap_or(text.len());
    // An exponent, as in 1e-3.
    if let Some(rest) = text[end..].strip_prefix(['e', 'E']) {
        let digits = rest.trim_start_matches(['+', '-']);
        if digits.starts_with(|c: char| c.is_ascii_digit()) && end > 0 {
            let after = digits.find(|c: char| !c.is_ascii_digit()).unwrap_or(digits.len());
            end = text.len() - digits.len() + after;
        }
    }
    let (number, unit) = text.split_at(end);
    if number.is_empty() {
        return Err(if text.is_empty() { "it is empty".to_owned() } else { format!("\"{}\" is no number", shortened(&text)) });
    }
    if number.matches([',', '.']).count() > 1 {
        return Err(format!("\"{}\" has more than one decimal mark; write thousands without one", shortened(number)));
    }
    let value: f64 = number.replace(',', ".").parse().map_err(|_| format!("\"{}\" is no number", shortened(number)))?;
    let unit: String = unit
        .chars()
        .filter(|c| !c.is_whitespace() && !matches!(c, '·' | '*' | '^' | '⋅'))
        .map(|c| match c {
            '²' => '2',
            '³' => '3',
            'º' => '°',
            other => other,
        })
        .collect();
    Ok((value, unit))
}

/// Text that is quoted in a complaint, cut where it is long.
fn shortened(text: &str) -> String {
    const LONGEST: usize = 24;
    let mut short: String = text.chars().take(LONGEST).map(|c| if c.is_control() { '?' } else { c }).collect();
    if text.chars().nth(LONGEST).is_some() {
        short.push_str("...");
    }
    short
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn units_and_both_decimal_marks_are_understood() {
        for (text, of, si) in [
            ("180", Dimension::Speed, 0.18),
            ("180 mm/s", Dimension::Speed, 0.18),
            ("0,25 m/s", Dimension::Speed, 0.25),
            ("0.25m/s", Dimension::Speed, 0.25),
            ("  -12.5 ", Dimension::Length, -0.0125),
            ("−12,5 cm", Dimension::Length, -0.125),
            ("90 °", Dimension::Angle, std::f64::consts::FRAC_PI_2),
            ("1500 mm/s²", Dimension::Acceleration, 1.5),
            ("1.5 m/s^2", Dimension::Acceleration, 1.5),
            ("400 ms", Dimension::Time, 0.4),
            ("250 g", Dimension::Mass, 0.25),
            ("3 N·m", Dimension::Torque, 3.0),
            ("0.01 kg·m²", Dimension::Inertia, 0.01),
            ("1e-3", Dimension::Ratio, 0.001),
        ] {
            assert_eq!(typed(text, of), Ok(si), "{text}");
        }
        assert!((typed("1 rad", Dimension::Angle).expect("a number") - 1.0).abs() < 1e-12);
        assert_eq!(typed_share("12,5 %"), Ok(0.125));
    }

    #[test]
    fn what_is_no_number_of_that_kind_is_refused_with_a_reason() {
        let refused = |text: &str, of| typed(text, of).expect_err("refused");
        assert_eq!(refused("", Dimension::Speed), "it is empty");
        assert_eq!(refused("fast", Dimension::Speed), "\"fast\" is no number");
        assert_eq!(refused("180 m", Dimension::Speed), "\"m\" is no unit here; give mm/s, cm/s or m/s");
        assert_eq!(refused("3 in", Dimension::Length), "\"in\" is no unit here; give mm, cm or m");
        assert!(refused("1.000,5", Dimension::Length).contains("more than one decimal mark"));
        assert!(refused("--3", Dimension::Length).contains("is no number"));
        for text in ["1e10", "1e400", "nan", "inf", "NaN mm"] {
            assert!(typed(text, Dimension::Length).is_err(), "{text}");
        }
        assert_eq!(typed_share("20 mm"), Err("\"mm\" is no unit here; give %".to_owned()));
    }
}
