use std::fmt;

/// A dimension says what a [`Measure`] measures, and so in which unit people read it.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Dimension {
    /// Angle: rad inside, degrees for people.
    Angle,
    /// Length: m inside, mm for people.
    Length,
    /// Turning rate: rad/s inside, deg/s for people.
    TurnRate,
    /// Speed: m/s inside, mm/s for people.
    Speed,
    /// Turning acceleration: rad/s² inside, deg/s² for people.
    TurnAcceleration,
    /// Acceleration: m/s² inside, mm/s² for people.
    Acceleration,
    /// Turning jerk: rad/s³ inside, deg/s³ for people.
    TurnJerk,
    /// Jerk: m/s³ inside, mm/s³ for people.
    Jerk,
    /// Torque, N·m for both.
    Torque,
    /// Force, N for both.
    Force,
    /// Moment of inertia, kg·m² for both.
    Inertia,
    /// Mass, kg for both.
    Mass,
    /// Time, s for both.
    Time,
    /// A plain number such as a singular value.
    Ratio,
}

impl Dimension {
    /// How many of people's units make one SI unit.
    pub fn per_si(self) -> f64 {
        match self {
            Self::Angle | Self::TurnRate | Self::TurnAcceleration | Self::TurnJerk => 180.0 / std::f64::consts::PI,
            Self::Length | Self::Speed | Self::Acceleration | Self::Jerk => 1000.0,
            Self::Torque | Self::Force | Self::Inertia | Self::Mass | Self::Time | Self::Ratio => 1.0,
        }
    }

    /// The unit's sign on screens and in reports, such as `°/s`.
    pub fn sign(self) -> &'static str {
        match self {
            Self::Angle => "°",
            Self::Length => "mm",
            Self::TurnRate => "°/s",
            Self::Speed => "mm/s",
            Self::TurnAcceleration => "°/s²",
            Self::Acceleration => "mm/s²",
            Self::TurnJerk => "°/s³",
            Self::Jerk => "mm/s³",
            Self::Torque => "N·m",
            Self::Force => "N",
            Self::Inertia => "kg·m²",
            Self::Mass => "kg",
            Self::Time => "s",
            Self::Ratio => "",
        }
    }

    /// The unit's name in plain ASCII, as field and column names use it, such as `deg_s`.
    pub fn ascii(self) -> &'static str {
        match self {
            Self::Angle => "deg",
            Self::Length => "mm",
            Self::TurnRate => "deg_s",
            Self::Speed => "mm_s",
            Self::TurnAcceleration => "deg_s2",
            Self::Acceleration => "mm_s2",
            Self::TurnJerk => "deg_s3",
            Self::Jerk => "mm_s3",
            Self::Torque => "nm",
            Self::Force => "n",
            Self::Inertia => "kg_m2",
            Self::Mass => "kg",
            Self::Time => "s",
            Self::Ratio => "1",
        }
    }
}

/// A measure is a number in SI together with what it measures.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Measure {
    /// The number in SI units (radians for angles).
    pub si: f64,
    /// What it measures.
    pub of: Dimension,
}

impl Measure {
    /// A measure from a number in SI units.
    pub fn si(si: f64, of: Dimension) -> Self {
        Self { si, of }
    }

    /// The number in the unit that people read (degrees, mm, ...).
    pub fn shown(self) -> f64 {
        self.si * self.of.per_si()
    }

    /// Text with a set number of digits behind the point and the unit's sign.
    pub fn text(self, digits: usize) -> String {
        join(plain(self.shown(), digits), self.of.sign())
    }

    /// The bare number in people's unit, for columns whose heading names the unit; empty where it is not finite.
    pub fn number(self, digits: usize) -> String {
        if self.si.is_finite() { plain(self.shown(), digits) } else { String::new() }
    }

    /// Text that always carries a sign, such as `+509 °/s`; nothing is plain `0`.
    pub fn signed(self) -> String {
        let text = self.to_string();
        let nothing = !text.chars().any(|c| c.is_ascii_digit() && c != '0');
        if self.si > 0.0 && !nothing { format!("+{text}") } else { text }
    }

    /// Text whose last digit is rounded up (away from what is safe when it names a demand).
    pub fn text_up(self, digits: usize) -> String {
        let scale = 10f64.powi(digits as i32);
        join(plain((self.shown() * scale - ROUNDING_SLACK).ceil() / scale, digits), self.of.sign())
    }

    /// Text whose last digit is rounded down (to the safe side when it names what may be asked).
    pub fn text_down(self, digits: usize) -> String {
        let scale = 10f64.powi(digits as i32);
        join(plain((self.shown() * scale + ROUNDING_SLACK).floor() / scale, digits), self.of.sign())
    }
}

/// A number without the dust that converting units leaves (110.00000000000001), for text that quotes what a person wrote.
pub fn tidy(value: f64) -> f64 {
    format!("{value:.TIDY_DIGITS$e}").parse().unwrap_or(value)
}

/// Digits behind the first one that [`tidy`] keeps: far more than anyone writes, and three fewer than a double holds.
const TIDY_DIGITS: usize = 12;

/// Slack in the last shown digit, so that 66.0 computed as 65.999999999 still reads 66.
const ROUNDING_SLACK: f64 = 1e-6;

impl fmt::Display for Measure {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let shown = self.shown();
        let digits = f.precision().unwrap_or(match self.of {
            Dimension::Ratio | Dimension::Inertia => 3,
            Dimension::Time => 2,
            Dimension::Speed | Dimension::Acceleration => 0,
            _ if shown.abs() >= 99.95 => 0,
            _ => 1,
        });
        f.write_str(&self.text(digits))
    }
}

/// A number without exponent, and never `-0`.
fn plain(value: f64, digits: usize) -> String {
    let text = format!("{value:.digits$}");
    if text.starts_with('-') && text[1..].chars().all(|c| c == '0' || c == '.') { text[1..].to_owned() } else { text }
}

/// Number and sign as the trade writes them: degrees close up, other units after a space.
fn join(number: String, sign: &str) -> String {
    match sign {
        "" => number,
        "°" => number + sign,
        _ => number + " " + sign,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_rate_reads_in_degrees_per_second() {
        assert_eq!(Measure::si(1.2, Dimension::TurnRate).text(1), "68.8 °/s");
        assert_eq!(Measure::si(0.25, Dimension::Speed).to_string(), "250 mm/s");
    }

    #[test]
    fn advice_rounds_to_the_safe_side() {
        let speed = Measure::si(0.232_9, Dimension::Speed);
        assert_eq!(speed.text_down(0), "232 mm/s");
        assert_eq!(speed.text_up(0), "233 mm/s");
        assert_eq!(Measure::si(0.066, Dimension::Length).text_down(0), "66 mm");
        assert_eq!(Measure::si(0.066, Dimension::Length).text_up(0), "66 mm");
    }

    #[test]
    fn what_a_person_wrote_comes_back_without_dust() {
        for written in [15.0, 0.1, -115.0, 1001.0, 1e-7, 123_456.789] {
            let there_and_back = Measure::si(written / Dimension::Angle.per_si(), Dimension::Angle).shown();
            assert_eq!(tidy(there_and_back), written);
        }
        assert!(tidy(f64::NAN).is_nan() && tidy(f64::INFINITY).is_infinite());
    }

    #[test]
    fn nothing_reads_minus_zero() {
        assert_eq!(Measure::si(-1e-9, Dimension::Angle).text(1), "0.0°");
    }
}
