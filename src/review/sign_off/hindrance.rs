use std::fmt;

use crate::checks::Verdict;

use super::{Answer, SignOff};

/// What is going on around a sign-off.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Around {
    /// Whether the recipe was changed and not saved.
    pub unsaved: bool,
    /// Whether a check is still running, so that what is shown may be stale.
    pub checking: bool,
    /// Whether every datum must have been confirmed by itself, as on the screen.
    pub data_one_by_one: bool,
}

/// A hindrance is one thing that keeps a recipe from being signed.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Hindrance {
    /// Edits are not saved: what would be signed stands in no file.
    Unsaved,
    /// The check of the newest edit is not done.
    Checking,
    /// Nothing was judged.
    NothingJudged,
    /// A finding can't be accepted at all.
    NotAcceptable {
        /// What it says.
        says: String,
        /// On which segment.
        on: String,
    },
    /// A segment is unproven without a finding of its own, or the cycle is.
    Unproven {
        /// Which one.
        on: String,
    },
    /// A finding has no answer.
    Unanswered {
        /// What it says.
        says: String,
        /// On which segment.
        on: String,
    },
    /// A finding was refused.
    Refused {
        /// What it says.
        says: String,
        /// On which segment.
        on: String,
        /// Why.
        why: String,
    },
    /// A doubt was not looked into.
    Doubt {
        /// What it says.
        says: String,
    },
    /// A datum was not confirmed.
    Datum {
        /// What it is.
        of: String,
    },
}

impl fmt::Display for Hindrance {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::Unsaved => f.write_str("the recipe was changed and not saved; save it first"),
            Self::Checking => f.write_str("the check is still running"),
            Self::NothingJudged => f.write_str("there is no segment to judge"),
            Self::NotAcceptable { says, on } => write!(f, "to {on}: {says}; a reason is not enough for that"),
            Self::Unproven { on } => write!(f, "{on} is unproven"),
            Self::Unanswered { says, on } => write!(f, "to {on}: {says}; it is neither cleared nor accepted"),
            Self::Refused { says, on, why } => write!(f, "to {on}: {says}; it was refused: {why}"),
            Self::Doubt { says } => write!(f, "a doubt was not looked into: {says}"),
            Self::Datum { of } => write!(f, "{of} was not confirmed"),
        }
    }
}

impl SignOff {
    /// Whether it can be signed.
    ///
    /// # Errors
    /// Everything that stands in the way.
    pub fn can_sign(&self, around: Around) -> Result<(), Vec<Hindrance>> {
        let mut found = Vec::new();
        if around.unsaved {
            found.push(Hindrance::Unsaved);
        }
        if around.checking {
            found.push(Hindrance::Checking);
        }
        if self.survey().segments.is_empty() {
            found.push(Hindrance::NothingJudged);
        }
        for doubt in self.doubts.iter().filter(|doubt| doubt.settled.is_none()) {
            found.push(Hindrance::Doubt { says: doubt.says.clone() });
        }
        for question in &self.questions {
            let says = question.says.clone();
            let on = if question.matter.blend {
                format!("\"{}\", fly-by", question.matter.to)
            } else {
                format!("\"{}\"", question.matter.to)
            };
            match &question.answer {
                Answer::Refused(why) => found.push(Hindrance::Refused { says, on, why: why.words.clone() }),
                _ if !question.may_be_accepted() => found.push(Hindrance::NotAcceptable { says, on }),
                Answer::Open => found.push(Hindrance::Unanswered { says, on }),
                Answer::Accepted(_) => {}
            }
        }
        found.extend(self.silent());
        if around.data_one_by_one {
            let open = self.data.iter().filter(|datum| !datum.confirmed);
            found.extend(open.map(|datum| Hindrance::Datum { of: datum.of.clone() }));
        }
        if found.is_empty() { Ok(()) } else { Err(found) }
    }

    /// What is not clear although no finding speaks of it.
    fn silent(&self) -> Vec<Hindrance> {
        let segments = &self.judged.plan.segments;
        let told = |index: usize| self.survey().findings.iter().any(|finding| finding.segment == index);
        let mut found: Vec<Hindrance> = self
            .survey()
            .segments
            .iter()
            .filter(|survey| survey.verdict != Verdict::Clear && !told(survey.segment))
            .map(|survey| Hindrance::Unproven { on: format!("segment {}", segments[survey.segment].label()) })
            .collect();
        for of_cycle in self.survey().cycle.checks() {
            let asked = self.questions.iter().any(|question| question.matter.check == of_cycle.check);
            if of_cycle.verdict != Verdict::Clear && !asked {
                found.push(Hindrance::Unproven { on: format!("the {}", crate::review::check_words(of_cycle.check)) });
            }
        }
        found
    }
}
