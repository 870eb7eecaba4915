use crate::units::Seconds;

/// A time as people type it: `10ms`, `0.01s`, `4 ms`. It must be above 0.
pub(super) fn step(text: &str) -> Result<Seconds, String> {
    let wanted = "it must be a number with ms or s, such as 10ms or 0.01s";
    let (number, per_s) = if let Some(number) = text.strip_suffix("ms") {
        (number, 1e3)
    } else if let Some(number) = text.strip_suffix('s') {
        (number, 1.0)
    } else {
        return Err(format!("the time is \"{text}\"; {wanted}"));
    };
    let value: f64 = number.trim().parse().map_err(|_| format!("the time is \"{text}\"; {wanted}"))?;
    let seconds = value / per_s;
    if !(seconds.is_finite() && seconds > 0.0) {
        return Err(format!("the time is \"{text}\"; it must be above 0"));
    }
    Ok(Seconds::s(seconds))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_carry_their_unit() {
        for (text, s) in [("10ms", 0.01), ("0.01s", 0.01), ("4 ms", 0.004), ("2s", 2.0)] {
            assert_eq!(step(text).map(Seconds::as_s), Ok(s), "{text}");
        }
        for text in ["10", "", "s", "ms", "tens", "0ms", "-1s", "nans", "infs", "1,5s"] {
            assert!(step(text).is_err(), "{text}");
        }
    }
}
