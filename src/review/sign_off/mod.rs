//! Signing off: what a person has to look at before a record is made, one by one, and what stands in the way.

mod data;
mod hindrance;

use crate::checks::{Survey, Verdict};
use crate::seal::segment_digest;

use super::sealed::{Accepted, Date, Datum, Matter, Record, Settled, Sources, doubt_keys};
use super::{Judged, doubt_text, explain};

pub use hindrance::{Around, Hindrance};

/// What a person decided about a finding.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub enum Answer {
    /// Nothing yet.
    #[default]
    Open,
    /// It is accepted, for this reason.
    Accepted(Reason),
    /// It is not: the program must be changed before it is signed.
    Refused(Reason),
}

/// A written reason, and who wrote it when.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Reason {
    /// The words.
    pub words: String,
    /// Who.
    pub by: String,
    /// When.
    pub on: Date,
}

/// A finding that is to be answered: all flagged stretches of one segment by one check of one joint.
#[derive(Debug, Clone, PartialEq)]
pub struct Question {
    /// Which matter.
    pub matter: Matter,
    /// The worst verdict among its stretches.
    pub verdict: Verdict,
    /// What the worst of them says, in one line.
    pub says: String,
    /// Its place among the survey's findings, for the whole explanation.
    pub finding: usize,
    /// What was decided.
    pub answer: Answer,
}

impl Question {
    /// Whether a reason can be enough. What is unproven is not known, and what has no path can't be run: neither can be accepted.
    pub fn may_be_accepted(&self) -> bool {
        matches!(self.verdict, Verdict::Tight | Verdict::Over)
    }
}

/// A doubt that is to be looked into.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct OpenDoubt {
    /// Its short name.
    pub key: String,
    /// What it says.
    pub says: String,
    /// What the person found, once they have.
    pub settled: Option<Reason>,
}

/// Why an answer was not taken.
#[derive(Debug, Clone, Copy, PartialEq, Eq, thiserror::Error)]
pub enum NotTaken {
    /// There is no such entry.
    #[error("there is no such entry")]
    NoSuch,
    /// A reason without words.
    #[error("a reason needs words")]
    NoWords,
    /// It can't be accepted at all.
    #[error("what is unproven or has no path can't be accepted; it must be changed or proved")]
    NotAcceptable,
}

/// A sign-off in the making.
#[derive(Debug, Clone)]
pub struct SignOff {
    judged: Judged,
    /// Doubts, which come first.
    doubts: Vec<OpenDoubt>,
    questions: Vec<Question>,
    data: Vec<Datum>,
}

impl SignOff {
    /// Opens the sign-off of a judged recipe, with nothing answered.
    pub fn of(judged: &Judged, sources: &Sources) -> Self {
        let mut questions: Vec<Question> = Vec::new();
        for (index, finding) in judged.survey.findings.iter().enumerate() {
            let matter = Matter::of(judged, finding);
            match questions.iter_mut().find(|question| question.matter == matter) {
                Some(known) => known.verdict = known.verdict.max(finding.verdict),
                None => questions.push(Question {
                    matter,
                    verdict: finding.verdict,
                    says: explain(judged, finding).title,
                    finding: index,
                    answer: Answer::Open,
                }),
            }
        }
        let doubts = judged.survey.doubts.iter().zip(doubt_keys(judged));
        let doubts = doubts.map(|(doubt, key)| OpenDoubt { key, says: doubt_text(judged, doubt), settled: None }).collect();
        Self { judged: judged.clone(), doubts, questions, data: data::data(judged, sources) }
    }

    /// The doubts.
    pub fn doubts(&self) -> &[OpenDoubt] {
        &self.doubts
    }

    /// The findings to be answered, the worst first.
    pub fn questions(&self) -> &[Question] {
        &self.questions
    }

    /// The data to be confirmed.
    pub fn data(&self) -> &[Datum] {
        &self.data
    }

    /// Accepts finding `index` for a reason.
    ///
    /// # Errors
    /// [`NotTaken`]; nothing is changed then.
    pub fn accept(&mut self, index: usize, reason: Reason) -> Result<(), NotTaken> {
        let question = self.questions.get_mut(index).ok_or(NotTaken::NoSuch)?;
        if !question.may_be_accepted() {
            return Err(NotTaken::NotAcceptable);
        }
        question.answer = Answer::Accepted(worded(reason)?);
        Ok(())
    }

    /// Refuses finding `index`: it can't be signed then.
    ///
    /// # Errors
    /// [`NotTaken`]; nothing is changed then.
    pub fn refuse(&mut self, index: usize, reason: Reason) -> Result<(), NotTaken> {
        let question = self.questions.get_mut(index).ok_or(NotTaken::NoSuch)?;
        question.answer = Answer::Refused(worded(reason)?);
        Ok(())
    }

    /// Settles doubt `index` with what was found.
    ///
    /// # Errors
    /// [`NotTaken`]; nothing is changed then.
    pub fn settle(&mut self, index: usize, reason: Reason) -> Result<(), NotTaken> {
        let doubt = self.doubts.get_mut(index).ok_or(NotTaken::NoSuch)?;
        doubt.settled = Some(worded(reason)?);
        Ok(())
    }

    /// Confirms datum `index`, or takes that back. One at a time: there is no way to confirm several.
    ///
    /// # Errors
    /// [`NotTaken::NoSuch`].
    pub fn confirm(&mut self, index: usize, confirmed: bool) -> Result<(), NotTaken> {
        self.data.get_mut(index).ok_or(NotTaken::NoSuch)?.confirmed = confirmed;
        Ok(())
    }

    /// Takes over from an earlier record what still holds: reasons of findings that say the same on segments whose every ground is
    /// the same (for the cycle's torque, the whole cycle), and confirmations and settled doubts that say the same. Yields how many
    /// answers were taken over.
    pub fn take_over(&mut self, earlier: &Record) -> usize {
        let mut taken = 0;
        let cycle = record_cycle(&self.judged) == earlier.cycle.digest;
        let same: Vec<_> = (0..self.judged.plan.segments.len()).map(|index| digest(&self.judged, index)).collect();
        let findings = &self.judged.survey.findings;
        for question in &mut self.questions {
            let stands = if question.matter.check.is_of_cycle() {
                cycle
            } else {
                let digest = same[findings[question.finding].segment];
                earlier.segments.iter().any(|segment| segment.digest == digest)
            };
            let known = earlier.accepted.iter().find(|known| known.matter == question.matter && known.says == question.says);
            if let Some(known) = known.filter(|_| stands && question.may_be_accepted()) {
                let reason = Reason { words: known.reason.clone(), by: known.by.clone(), on: known.on };
                question.answer = Answer::Accepted(reason);
                taken += 1;
            }
        }
        for doubt in &mut self.doubts {
            if let Some(known) = earlier.settled.iter().find(|known| known.key == doubt.key && known.says == doubt.says) {
                doubt.settled = Some(Reason { words: known.reason.clone(), by: known.by.clone(), on: known.on });
                taken += 1;
            }
        }
        for datum in &mut self.data {
            let same = |known: &&Datum| (&known.of, &known.value) == (&datum.of, &datum.value) && known.confirmed;
            if earlier.data.iter().find(same).is_some() {
                datum.confirmed = true;
                taken += 1;
            }
        }
        taken
    }

    /// The record with all that was decided.
    pub fn decided(&self, bare: Record) -> Record {
        let accepted = self.questions.iter().filter_map(|question| {
            let Answer::Accepted(reason) = &question.answer else { return None };
            let Reason { words, by, on } = reason.clone();
            Some(Accepted { matter: question.matter.clone(), says: question.says.clone(), reason: words, by, on })
        });
        let settled = self.doubts.iter().filter_map(|doubt| {
            let Reason { words, by, on } = doubt.settled.clone()?;
            Some(Settled { key: doubt.key.clone(), says: doubt.says.clone(), reason: words, by, on })
        });
        bare.with(accepted.collect(), settled.collect(), self.data.clone())
    }

    /// The survey that it is about.
    pub fn survey(&self) -> &Survey {
        &self.judged.survey
    }
}

fn worded(reason: Reason) -> Result<Reason, NotTaken> {
    let words = reason.words.trim().to_owned();
    if words.chars().any(char::is_alphanumeric) { Ok(Reason { words, ..reason }) } else { Err(NotTaken::NoWords) }
}

fn digest(judged: &Judged, index: usize) -> crate::seal::Digest {
    segment_digest(&judged.arm, &judged.recipe, &judged.plan, index)
}

fn record_cycle(judged: &Judged) -> crate::seal::Digest {
    let digests: Vec<_> = (0..judged.plan.segments.len()).map(|index| digest(judged, index)).collect();
    crate::seal::cycle_digest(&judged.recipe, &judged.plan, &digests)
}
