//! Recording where the model stands as waypoints of the recipe.

use crate::arm::{Arm, JointKind, Joints};
use crate::geometry::{Pose, Rotation, V3};
use crate::kinematics::{Posture, Reached, reach};
use crate::program::{Arrive, Edit, Given, Recipe, Taught, Waypoint, edit_stretch::free_name};
use crate::units::{Angle, Length, Seconds, Share};

use super::jog::Axes;

/// Recorded values are rounded to this, degrees and millimetres: what the file shows is what is judged.
const ROUNDED_TO: f64 = 0.01;
/// A joint move that is recorded where the recipe has no usual share gets this one: slow, as a first run is. Common practice, no
/// source.
const SLOW: f64 = 0.25;
/// A recorded pose must lead back to joint values no farther from the jogged ones than this, rad (5 degrees): farther is another
/// branch. What rounding moves is far less, but close to a singular posture.
const SAME_BRANCH: f64 = 0.087;
/// The same for a sliding joint, m.
const SAME_BRANCH_SLIDING: f64 = 0.02;

/// How a posture is recorded.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Form {
    /// As joint values.
    Joints,
    /// As the pose of the TCP in these axes; in the tool's, in which no pose can be given, as one in the base.
    Pose(Axes),
}

/// What is recorded: where the arm stands, and what is known of the recipe.
#[derive(Debug, Clone, Copy)]
pub struct Stood<'a> {
    /// The arm.
    pub arm: &'a Arm,
    /// The recipe that it is recorded in.
    pub recipe: &'a Recipe,
    /// Joint values of the arm.
    pub q: &'a Joints,
    /// Joint values at each waypoint, as far as they are known.
    pub known: &'a [Option<Joints>],
}

/// A record is an edit that keeps a posture in the recipe.
#[derive(Debug, Clone, PartialEq)]
pub struct Record {
    /// The edit.
    pub edit: Edit,
    /// What it was, in words.
    pub words: String,
    /// Joint values that the recipe has there from now on.
    pub q: Joints,
}

/// A free name for a waypoint after waypoint `index`, made from that one's.
pub fn suggested_name(recipe: &Recipe, index: usize) -> String {
    let taken: Vec<String> = recipe.waypoints.iter().map(|waypoint| waypoint.name.clone()).collect();
    let before = &recipe.waypoints[index].name;
    let name = if before.starts_with("after ") { before.clone() } else { format!("after {before}") };
    if taken.contains(&name) { free_name(&name, &taken) } else { name }
}

/// A new waypoint after waypoint `index`, arrived at by a joint move with the recipe's usual values.
///
/// # Errors
/// Why it can't be recorded, as a sentence.
pub fn insert_after(stood: &Stood, index: usize, name: &str, form: &Form) -> Result<Record, String> {
    let name = name.trim();
    if name.is_empty() {
        return Err("a waypoint needs a name".to_owned());
    }
    if stood.recipe.waypoint_named(name).is_some() {
        return Err(format!("there is a waypoint \"{name}\" already"));
    }
    let (taught, q) = taught(stood, index, index + 1, form)?;
    let share = if stood.recipe.usual.share.is_some() { None } else { Some(Share::fraction(SLOW)) };
    let waypoint = Waypoint {
        name: name.to_owned(),
        taught,
        shown: None,
        arrive: Some(Arrive::Joint { share, accel_share: None }),
        tool: None,
        fly_by: None,
        dwell: Seconds::s(0.0),
        then: None,
        push: None,
    };
    let words = format!("waypoint {} \"{name}\" recorded {}", index + 2, as_what(form));
    Ok(Record { edit: Edit::Insert { index: index + 1, waypoint: Box::new(waypoint) }, words, q })
}

/// Waypoint `index` moved to where the arm stands; how it is arrived at stays. A pose noted from the cell's display goes, since it
/// was that of the former place.
///
/// # Errors
/// Why it can't be recorded, as a sentence.
pub fn teach_again(stood: &Stood, index: usize, form: &Form) -> Result<Record, String> {
    let (taught, q) = taught(stood, index, index, form)?;
    let edit = Edit::change(stood.recipe, index, |waypoint| {
        waypoint.taught = taught;
        waypoint.shown = None;
    });
    let words = format!("waypoint {} \"{}\" taught again {}", index + 1, stood.recipe.waypoints[index].name, as_what(form));
    Ok(Record { edit, words, q })
}

fn as_what(form: &Form) -> String {
    match form {
        Form::Joints => "as joint values".to_owned(),
        Form::Pose(axes) => format!("as a pose in {}", axes.for_pose().as_deref().unwrap_or("base")),
    }
}

/// What is written down with the tool of waypoint `tool_of`, with waypoints below `below` standing before it.
fn taught(stood: &Stood, tool_of: usize, below: usize, form: &Form) -> Result<(Taught, Joints), String> {
    if let Some(joint) = stood.arm.joints().iter().zip(stood.q.iter()).find(|(joint, q)| !(joint.range.to_end(**q) >= 0.0)) {
        return Err(format!("joint {} stands beyond its range; jog it back first", joint.0.name));
    }
    match form {
        Form::Joints => {
            let q = rounded(stood.arm, stood.q);
            Ok((Taught::Joints(q), q))
        }
        Form::Pose(axes) => posed(stood, tool_of, below, axes),
    }
}

/// Joint values rounded to what a file shows, at the ends of ranges inwards.
pub fn rounded(arm: &Arm, q: &Joints) -> Joints {
    Joints::from_fn(arm.len(), |j| {
        let joint = &arm.joints()[j];
        let turns = joint.kind == JointKind::Revolute;
        let shown = joint.value(q[j]).shown();
        let si = |shown: f64| if turns { Angle::deg(shown).as_rad() } else { Length::mm(shown).as_m() };
        let steps = (shown / ROUNDED_TO).round();
        [steps, steps - 1.0, steps + 1.0]
            .map(|steps| si(steps / (1.0 / ROUNDED_TO)))
            .into_iter()
            .find(|value| *value >= joint.range.low && *value <= joint.range.high)
            .unwrap_or(q[j])
    })
}

fn round(shown: f64) -> f64 {
    (shown / ROUNDED_TO).round() / (1.0 / ROUNDED_TO)
}

fn posed(stood: &Stood, tool_of: usize, below: usize, axes: &Axes) -> Result<(Taught, Joints), String> {
    let Stood { arm, recipe, q, known } = *stood;
    let carried = recipe.hanging_at(tool_of).arriving();
    let tcp = Posture::at(arm.chain(), q).tcp(&carried.tcp);
    let frame = axes.for_pose();
    let system = match axes {
        Axes::Tool => Pose::identity(),
        axes => axes.in_base(recipe, &tcp).ok_or_else(|| format!("there is no frame \"{}\" any more", axes.name()))?,
    };
    let there = system.inverse().then(&tcp);
    let at = there.at.map(|part| Length::mm(round(Length::m(part).as_mm())).as_m());
    let rpy = there.rotation().rpy().map(|angle| round(angle.to_degrees()));
    let rotation = Rotation::from_rpy_deg(rpy);
    let target = system.then(&Pose::new(V3::from(at), rotation));
    let pose = Given { at: V3::from(at), rotation: arm.task().turns().then_some(rotation), frame };
    // The waypoint before it needs no naming; farther ones do.
    for (index, waypoint) in recipe.waypoints.iter().enumerate().take(below).rev() {
        let Some(from) = known.get(index).copied().flatten() else { continue };
        if let Reached::Yes { q: found, .. } = reach(arm, &carried.tcp, &target, &from)
            && same_branch(arm, &found, q)
        {
            let near = (index + 1 != below).then(|| waypoint.name.clone());
            return Ok((Taught::Pose { pose, near }, found));
        }
    }
    Err("as a pose it would be reached in another posture from every waypoint before; record it as joint values".to_owned())
}

fn same_branch(arm: &Arm, a: &Joints, b: &Joints) -> bool {
    arm.joints().iter().enumerate().all(|(j, joint)| {
        let most = if joint.kind == JointKind::Revolute { SAME_BRANCH } else { SAME_BRANCH_SLIDING };
        (a[j] - b[j]).abs() <= most
    })
}
