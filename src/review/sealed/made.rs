use std::collections::BTreeMap;

use crate::checks::{Doubt, Finding};
use crate::review::{FIRST_RUN_CAUTIONS, FirstRun, Judged, not_checked};
use crate::seal::{Digest, Item, cycle_digest, segment_digest};

use super::tightest::{sealed_check, tightest};
use super::{Accepted, Date, Datum, Matter, Record, SealedCycle, SealedFile, SealedRun, SealedSegment, Settled};

/// What was read for a record.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Sources {
    /// The recipe.
    pub recipe: SealedFile,
    /// Its arm file.
    pub arm: SealedFile,
    /// What both say, freed of layout.
    pub content: Vec<Item>,
}

/// What an earlier record of the same recipe lets a new one take over: since when each segment is as it is.
#[derive(Debug, Clone, Default)]
pub struct Earlier(BTreeMap<Digest, Date>);

impl Earlier {
    /// What a record lets a later one take over.
    pub fn of(record: &Record) -> Self {
        Self(record.segments.iter().map(|segment| (segment.digest, segment.since)).collect())
    }
}

impl Record {
    /// The record of a judged recipe before anybody stands for it. Segments that an earlier record had alike keep its date; the
    /// others get `date`.
    pub fn of(judged: &Judged, sources: &Sources, run: &FirstRun, earlier: &Earlier, date: Date) -> Self {
        let Judged { arm, recipe, plan, survey } = judged;
        let segments: Vec<SealedSegment> = (0..plan.segments.len())
            .map(|index| {
                let digest = segment_digest(arm, recipe, plan, index);
                let found = &survey.segments[index];
                let clear_to = run.segments[index].highest.map_or("never".to_owned(), |share| share.to_string());
                SealedSegment {
                    to: recipe.waypoints[plan.segments[index].to].name.clone(),
                    blend: plan.segments[index].blend,
                    verdict: found.verdict,
                    since: earlier.0.get(&digest).copied().unwrap_or(date),
                    digest,
                    clear_to,
                    checks: found.checks.iter().filter_map(|result| sealed_check(judged, result)).collect(),
                }
            })
            .collect();
        let digests: Vec<Digest> = segments.iter().map(|segment| segment.digest).collect();
        let checks = survey.cycle.checks().into_iter().filter_map(|result| sealed_check(judged, result)).collect();
        let cycle = SealedCycle { digest: cycle_digest(recipe, plan, &digests), checks };
        let stages = run.stages.iter().map(|stage| (stage.run_at.to_string(), stage.verdict())).collect();
        Self {
            program: env!("CARGO_PKG_VERSION").to_owned(),
            name: recipe.name.clone(),
            verdict: survey.verdict(),
            recipe: sources.recipe.clone(),
            arm: sources.arm.clone(),
            content: sources.content.iter().map(|item| Item { line: 0, ..item.clone() }).collect(),
            segments,
            cycle,
            tightest: tightest(judged),
            accepted: Vec::new(),
            settled: Vec::new(),
            data: Vec::new(),
            first_run: SealedRun { highest: run.highest.map_or("never".to_owned(), |share| share.to_string()), stages },
            not_checked: not_checked(judged),
            cautions: FIRST_RUN_CAUTIONS.map(str::to_owned).to_vec(),
            people: Vec::new(),
        }
    }

    /// The record with what people decided about it.
    #[must_use]
    pub fn with(self, accepted: Vec<Accepted>, settled: Vec<Settled>, data: Vec<Datum>) -> Self {
        Self { accepted, settled, data, ..self }
    }
}

/// How people tell a segment from others, as [`SealedSegment::label`] does.
pub(super) fn label(judged: &Judged, index: usize) -> String {
    let segment = &judged.plan.segments[index];
    let name = &judged.recipe.waypoints[segment.to].name;
    if segment.blend { format!("\"{name}\", fly-by") } else { format!("\"{name}\"") }
}

impl Matter {
    /// Which matter a finding is.
    pub fn of(judged: &Judged, finding: &Finding) -> Self {
        let segment = &judged.plan.segments[finding.segment];
        Self {
            to: judged.recipe.waypoints[segment.to].name.clone(),
            blend: segment.blend,
            check: finding.check,
            joint: finding.joint.map_or(String::new(), |j| judged.arm.joints()[j].name.clone()),
        }
    }
}

/// A short name for every doubt, in their order, no two alike: its kind and whom it is about.
pub(in crate::review) fn doubt_keys(judged: &Judged) -> Vec<String> {
    let mut known: BTreeMap<String, usize> = BTreeMap::new();
    let name = |doubt: &Doubt| {
        let debug = format!("{doubt:?}");
        let variant: String = debug.chars().take_while(|c| c.is_alphanumeric()).collect();
        let mut kind = String::new();
        for c in variant.chars() {
            if c.is_uppercase() && !kind.is_empty() {
                kind.push('-');
            }
            kind.extend(c.to_lowercase());
        }
        match doubt.waypoint() {
            Some(waypoint) => format!("{kind}: {}", judged.recipe.waypoints[waypoint].name),
            None => kind,
        }
    };
    let names = judged.survey.doubts.iter().map(|doubt| {
        let name = name(doubt);
        let count = known.entry(name.clone()).or_default();
        *count += 1;
        if *count == 1 { name } else { format!("{name} ({count})") }
    });
    names.collect()
}
