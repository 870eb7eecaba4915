use std::fmt;

/// A day of the Gregorian calendar. Which day it is, is always passed in.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Date {
    year: u16,
    month: u8,
    day: u8,
}

/// Seconds of a day.
const DAY: u64 = 86_400;

impl Date {
    /// The day that `YYYY-MM-DD` names; `None` where there is no such day.
    pub fn read(text: &str) -> Option<Self> {
        let bytes = text.as_bytes();
        if bytes.len() != 10 || bytes[4] != b'-' || bytes[7] != b'-' {
            return None;
        }
        let part = |range: std::ops::Range<usize>| -> Option<u16> {
            let part = &bytes[range];
            part.iter().all(u8::is_ascii_digit).then(|| part.iter().fold(0, |sum, c| 10 * sum + u16::from(c - b'0')))
        };
        let (year, month, day) = (part(0..4)?, part(5..7)?, part(8..10)?);
        let there = year >= 1 && (1..=12).contains(&month) && day >= 1 && day <= days_of(year, month);
        there.then_some(Self { year, month: month as u8, day: day as u8 })
    }

    /// The day in UTC, some seconds after the beginning of 1970.
    pub fn after_1970(seconds: u64) -> Self {
        let (mut days, mut year, mut month) = (seconds / DAY, 1970u16, 1u16);
        loop {
            let length = u64::from(days_of(year, month));
            if days < length || year == u16::MAX {
                return Self { year, month: month as u8, day: days as u8 + 1 };
            }
            days -= length;
            month += 1;
            if month > 12 {
                (year, month) = (year + 1, 1);
            }
        }
    }
}

fn days_of(year: u16, month: u16) -> u16 {
    let leap = (year.is_multiple_of(4) && !year.is_multiple_of(100)) || year.is_multiple_of(400);
    match month {
        2 => 28 + u16::from(leap),
        4 | 6 | 9 | 11 => 30,
        _ => 31,
    }
}

impl fmt::Display for Date {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:04}-{:02}-{:02}", self.year, self.month, self.day)
    }
}

/// What a person stands for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Role {
    /// Who prepared the sign-off.
    Prepared,
    /// Who checked it.
    Checked,
}

impl Role {
    /// Both.
    pub const ALL: [Self; 2] = [Self::Prepared, Self::Checked];

    /// Its words.
    pub fn words(self) -> &'static str {
        match self {
            Self::Prepared => "prepared by",
            Self::Checked => "checked by",
        }
    }
}

/// A person who stands for a record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Person {
    /// Their name.
    pub name: String,
    /// What they stand for.
    pub role: Role,
    /// When.
    pub date: Date,
    /// What they want to say; may be empty.
    pub note: String,
    /// The fingerprint of the key that they sign with; `None` for a name without a signature.
    pub key: Option<String>,
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn days_are_those_of_the_calendar() {
        // From `date -u -d @N +%F` (GNU coreutils).
        for (seconds, day) in [
            (0, "1970-01-01"),
            (86_399, "1970-01-01"),
            (951_782_400, "2000-02-29"),
            (951_868_800, "2000-03-01"),
            (1_796_083_200, "2026-12-01"),
            (4_107_542_400, "2100-03-01"),
        ] {
            assert_eq!(Date::after_1970(seconds).to_string(), day);
            assert_eq!(Date::read(day), Some(Date::after_1970(seconds)));
        }
        for bad in [
            "2026-02-29",
            "2026-13-01",
            "2026-00-10",
            "2026-1-10",
            "2026-01-00",
            "0000-01-01",
            "20260101",
            "2026-01-1x",
            "+026-01-01",
        ] {
            assert_eq!(Date::read(bad), None, "{bad}");
        }
    }
}
