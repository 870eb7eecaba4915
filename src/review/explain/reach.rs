use crate::arm::Joints;
use crate::checks::Finding;
use crate::geometry::V3;
use crate::kinematics::{Posture, SingularKind, pose_error, singular_posture, spherical_wrist};
use crate::motion::NoPath;
use crate::units::{Angle, Dimension, Length, Measure};

use super::listing::all_of;
use super::{Judged, Label, Paragraph, place};

/// Two joint values count as the same within this, rad or m.
const SAME: f64 = 1e-4;

/// A trouble in three or four words, for a title.
pub(super) fn in_brief(trouble: &NoPath) -> &'static str {
    match trouble {
        NoPath::OutOfReach { .. } => "out of reach",
        NoPath::Lost { .. } => "the search failed",
        NoPath::OtherPosture { .. } => "arrives in another posture",
        NoPath::Orientation { .. } => "orientation out of reach",
        NoPath::StartUnknown => "its start is not known",
        NoPath::StraightArc => "three points in one line",
    }
}

/// What, where, why, left alone and rests on where no motion exists or none was found.
pub(super) fn paragraphs(judged: &Judged, finding: &Finding, trouble: &NoPath) -> Vec<Paragraph> {
    let [what, why] = match trouble {
        NoPath::OutOfReach { u, q, sigma, gap } => out_of_reach(judged, finding, *u, q, *sigma, *gap),
        NoPath::Lost { u, sigma, .. } => lost(judged, finding, *u, *sigma),
        NoPath::OtherPosture { arrives, taught } => other_posture(judged, finding, arrives, taught),
        NoPath::Orientation { gap, .. } => orientation(judged, gap),
        NoPath::StartUnknown => [
            "The waypoint that this segment starts from could not be reached, so there is nothing to judge here yet.".to_owned(),
            "Only the segment before it can be mended; this one is judged as soon as that one arrives.".to_owned(),
        ],
        NoPath::StraightArc => [
            "The start, the via point and the end of this arc stand in one line, and no circle goes through them.".to_owned(),
            "A circle needs three points that are not in line. A via point typed twice, or meant for a line, looks like this."
                .to_owned(),
        ],
    };
    let alone = match trouble {
        NoPath::OutOfReach { .. } | NoPath::StraightArc => {
            "The controller refuses the move, or stops on the way there with a fault."
        }
        NoPath::OtherPosture { .. } => {
            "The controller refuses the move, or the arm arrives in the other posture. If it then goes on, the next joint move \
             sweeps a way that nobody taught."
        }
        NoPath::Orientation { .. } => "The controller refuses the move, or the tool arrives turned by as much as it misses.",
        NoPath::Lost { .. } => "Nothing is known about what follows, neither good nor bad, and none of it is judged.",
        NoPath::StartUnknown => "Nothing is known about this segment, neither good nor bad, and none of it is judged.",
    };
    vec![
        Paragraph::says(Label::What, what),
        place::paragraph(judged, finding),
        Paragraph::says(Label::Why, why),
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(
            Label::RestsOn,
            "The arm's geometry in its file, the TCP of the tool, and the waypoints and frames as typed.",
        ),
    ]
}

fn out_of_reach(judged: &Judged, finding: &Finding, u: f64, q: &Joints, sigma: f64, gap: f64) -> [String; 2] {
    let segment = judged.plan.version(finding.segment, finding.stop);
    let what = if gap > 0.0 {
        format!(
            "The arm can't get there: the TCP comes within {} of the waypoint and no nearer.",
            Length::m(gap).measure().text_up(0)
        )
    } else {
        format!("The arm can follow the path for {} of {} and no farther.", place::along(segment, u), place::whole(segment))
    };
    let posture = Posture::at(judged.arm.chain(), q);
    let tcp = posture.tcp(&segment.carried.tcp).at;
    let length = |v: V3| Length::m(v.norm()).measure().text(0);
    let wrist = spherical_wrist(judged.arm.chain());
    let kind = match singular_posture(&judged.arm, wrist, q).and_then(|close| close.kind) {
        Some(SingularKind::Wrist) => ", the wrist straight",
        Some(SingularKind::Elbow) => ", stretched out or folded",
        Some(SingularKind::Shoulder) => ", the wrist centre on the first axis",
        None => "",
    };
    let why = format!(
        "There the arm stands in a limiting posture{kind}, in which one direction is lost: the smallest singular value is {}. \
         The TCP is then {} from the origin of the base; the joints stand at {}.",
        Measure::si(sigma, Dimension::Ratio).text(4),
        length(tcp),
        values(judged, q)
    );
    [what, why]
}

fn lost(judged: &Judged, finding: &Finding, u: f64, sigma: f64) -> [String; 2] {
    let segment = judged.plan.version(finding.segment, finding.stop);
    let what = if segment.follows_path() && u > 0.0 {
        format!(
            "The path could be followed for {} of {}; then the search for joint values failed.",
            place::along(segment, u),
            place::whole(segment)
        )
    } else {
        "The search found no joint values for the waypoint.".to_owned()
    };
    let why = format!(
        "No limiting posture was met there (the smallest singular value is {}), so this does not say that the place is out of \
         reach; it says that nothing is known.",
        Measure::si(sigma, Dimension::Ratio).text(4)
    );
    [what, why]
}

fn other_posture(judged: &Judged, finding: &Finding, arrives: &Joints, taught: &Joints) -> [String; 2] {
    let segment = judged.plan.version(finding.segment, finding.stop);
    let told: Vec<String> = judged
        .arm
        .joints()
        .iter()
        .enumerate()
        .filter(|&(j, _)| (taught[j] - arrives[j]).abs() > SAME)
        .map(|(j, joint)| {
            let by = joint.value(taught[j] - arrives[j]);
            format!(
                "{} arrives at {} and is taught at {}, {} apart",
                joint.name,
                joint.value(arrives[j]).signed(),
                joint.value(taught[j]).signed(),
                Measure::si(by.si.abs(), by.of)
            )
        })
        .collect();
    let tcp = |q: &Joints| Posture::at(judged.arm.chain(), q).tcp(&segment.carried.tcp);
    let error = pose_error(&tcp(arrives), &tcp(taught));
    let size = |part: &[f64]| part.iter().map(|v| v * v).sum::<f64>().sqrt();
    let same = size(&error[..3]) < SAME && size(&error[3..]) < SAME;
    let why = if same {
        "Both postures put the tool at the same pose. On a path the arm can't change from one to the other without passing a \
         singular posture or leaving the path; a joint move can."
    } else {
        "The path ends where the waypoint's pose is, but the joint values taught there put the tool elsewhere."
    };
    [format!("The path arrives in another posture than the one taught: {}.", all_of(&told)), why.to_owned()]
}

fn orientation(judged: &Judged, gap: &[f64; 6]) -> [String; 2] {
    let size = |part: &[f64]| part.iter().map(|v| v * v).sum::<f64>().sqrt();
    let what = format!(
        "The arm reaches the waypoint as far as its joints allow, but misses by {} and {} in directions that it can't serve.",
        Length::m(size(&gap[..3])).measure().text(1),
        Angle::rad(size(&gap[3..])).measure().text(1)
    );
    let why = format!(
        "This arm of {} joints follows \"{}\" and nothing else; the pose asks for more.",
        judged.arm.len(),
        judged.arm.task().words()
    );
    [what, why]
}

fn values(judged: &Judged, q: &Joints) -> String {
    let told: Vec<String> = judged
        .arm
        .joints()
        .iter()
        .zip(q.iter())
        .map(|(joint, value)| format!("{} {}", joint.name, joint.value(*value).signed()))
        .collect();
    all_of(&told)
}
