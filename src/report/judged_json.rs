use serde::Serialize;

use crate::checks::{Check, CheckResult, Peak, Place, Proof, Unproved};
use crate::motion::Segment;
use crate::review::Judged;
use crate::units::{Measure, Room};

/// Figures are written to this many digits behind the point, so that rounding noise makes no difference between two runs.
const DIGITS: i32 = 6;
/// A path shorter than this has no length to tell, m.
const NO_LENGTH: f64 = 1e-9;

/// A figure as JSON may hold it: rounded, `None` where it is not finite.
pub(super) fn figure(value: f64) -> Option<f64> {
    let scale = 10f64.powi(DIGITS);
    let rounded = (value * scale).round() / scale;
    // Adding 0 turns -0 into 0.
    rounded.is_finite().then_some(rounded + 0.0)
}

/// A measure in people's unit.
pub(super) fn shown(measure: Measure) -> Option<f64> {
    figure(measure.shown())
}

/// A room in percent.
pub(super) fn percent(room: Room) -> Option<f64> {
    figure(room.as_percent())
}

/// An instant of a segment: fraction of its path, time since its start, and way along it (not on joint moves and blends).
#[derive(Debug, Serialize)]
pub(super) struct At {
    u: Option<f64>,
    time_s: Option<f64>,
    mm: Option<f64>,
}

impl At {
    pub(super) fn of(segment: &Segment, place: Place) -> Self {
        let length = segment.path.length();
        let mm =
            (segment.follows_path() && !segment.blend && length > NO_LENGTH).then(|| figure(1000.0 * length * place.u)).flatten();
        Self { u: figure(place.u), time_s: figure(place.time), mm }
    }
}

/// The worst of one joint.
#[derive(Debug, Serialize)]
pub(super) struct JointPeak {
    joint: String,
    peak: Option<f64>,
    at: Option<At>,
    limit: Option<f64>,
    unit: &'static str,
    room: Option<f64>,
}

/// What one check found on one segment.
#[derive(Debug, Serialize)]
pub(super) struct CheckJson {
    room: Option<f64>,
    reserve: Option<f64>,
    verdict: &'static str,
    judged: bool,
    proved: bool,
    proof: &'static str,
    proved_room: Option<f64>,
    joint: Option<String>,
    at: Option<At>,
    demand: Option<f64>,
    limit: Option<f64>,
    unit: Option<&'static str>,
    joints: Vec<JointPeak>,
}

impl CheckJson {
    /// A result of a segment.
    pub(super) fn of(judged: &Judged, segment: &Segment, result: &CheckResult) -> Self {
        Self::told(judged, Some(segment), result)
    }

    /// A result of the cycle as a whole, which is at no instant.
    pub(super) fn of_cycle(judged: &Judged, result: &CheckResult) -> Self {
        Self::told(judged, None, result)
    }

    fn told(judged: &Judged, segment: Option<&Segment>, result: &CheckResult) -> Self {
        let at = |peak: &Peak| segment.map(|segment| At::of(segment, peak.at));
        let worst = result.worst().or_else(|| result.peaks.first());
        let name = |peak: &Peak| peak.joint.map(|j| judged.arm.joints()[j].name.clone());
        let room = |peak: &Peak| peak.limit.si.is_finite().then(|| percent(peak.room)).flatten();
        let joints = result
            .peaks
            .iter()
            .filter_map(|peak| {
                Some(JointPeak {
                    joint: name(peak)?,
                    peak: shown(peak.demand),
                    at: at(peak),
                    limit: shown(peak.limit),
                    unit: peak.demand.of.ascii(),
                    room: room(peak),
                })
            })
            .collect();
        let (proof, proved_room) = proof(result.proof);
        Self {
            room: worst.and_then(room),
            reserve: worst.and_then(|peak| percent(peak.reserve)),
            verdict: result.verdict.word(),
            judged: result.judged,
            proved: matches!(result.proof, Proof::Proved(_)),
            proof,
            proved_room,
            joint: worst.and_then(name),
            at: worst.and_then(at),
            demand: worst.and_then(|peak| shown(peak.demand)),
            limit: worst.and_then(|peak| shown(peak.limit)),
            unit: worst.map(|peak| peak.demand.of.ascii()),
            joints,
        }
    }
}

fn proof(proof: Proof) -> (&'static str, Option<f64>) {
    match proof {
        Proof::Proved(room) => ("proved", percent(room)),
        Proof::Settled => ("settled", None),
        Proof::Witness => ("witness", None),
        Proof::Open(why) => (unproved(why), None),
    }
}

/// Why something is not proved, as a word in data.
pub(super) fn unproved(why: Unproved) -> &'static str {
    match why {
        Unproved::SamplesOnly => "samples_only",
        Unproved::BudgetSpent => "budget_spent",
        Unproved::TooNarrow => "too_narrow",
        Unproved::NotOneBranch => "not_one_branch",
        Unproved::NotFollowed => "not_followed",
        Unproved::NoRating => "no_rating",
        Unproved::NoMasses => "no_masses",
        Unproved::Guess => "guess",
    }
}

/// The checks of a segment under their names, in the order of [`Check::ALL`].
#[derive(Debug)]
pub(super) struct Checks(pub Vec<(Check, CheckJson)>);

impl Serialize for Checks {
    fn serialize<S: serde::Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_map(self.0.iter().map(|(check, result)| (check.key(), result)))
    }
}
