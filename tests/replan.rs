//! After an edit only what it touches is planned and judged again, and the result is that of planning and judging everything.

#[expect(dead_code, reason = "draws a part of what there is to draw")]
mod random;

use std::sync::Arc;

use elbowroom::arm::{Arm, Joints};
use elbowroom::checks::Watch;
use elbowroom::files;
use elbowroom::geometry::{Pose, Rotation, V3};
use elbowroom::kinematics::Posture;
use elbowroom::program::{Arrive, Edit, Frame, Given, PathSpeed, Recipe, Taught, Then, Waypoint};
use elbowroom::review::Judged;
use elbowroom::units::{Length, Seconds, Share, Speed};
use random::Draw;

/// The demonstration with its names shortened, some fly-by points, and a frame that nothing uses.
fn taught() -> (Arc<Arm>, Recipe) {
    let demo = files::demo();
    let mut recipe = demo.recipe;
    for waypoint in recipe.waypoints.iter_mut().skip(1).filter(|w| w.then.is_none()).step_by(2) {
        waypoint.dwell = Seconds::s(0.0);
        waypoint.fly_by = Some(Length::mm(25.0));
    }
    (Arc::new(demo.arm), recipe)
}

fn shaken(q: &Joints, draw: &mut Draw) -> Joints {
    Joints::from_fn(q.len(), |j| q[j] + draw.between(-0.02, 0.02))
}

/// A waypoint beside where the plan has waypoint `index`, by line or joint move, as joint values or as a pose.
fn beside(before: &Judged, index: usize, name: &str, draw: &mut Draw) -> Waypoint {
    let plan = &before.plan;
    let q = plan.arriving(index).map_or(plan.segments[0].start, |segment| segment.end);
    let q = shaken(&q, draw);
    let tool = before.recipe.hanging_at(index).arriving();
    let tcp = Posture::at(before.arm.chain(), &q).tcp(&tool.tcp);
    let taught = if draw.unit() < 0.5 {
        Taught::Joints(q)
    } else {
        let near = (index > 0 && draw.unit() < 0.5).then(|| before.recipe.waypoints[index - 1].name.clone());
        Taught::Pose { pose: Given { at: tcp.at, rotation: Some(Rotation::from_matrix(&tcp.axes)), frame: None }, near }
    };
    let arrive = if draw.unit() < 0.5 {
        Arrive::Joint { share: Some(Share::fraction(draw.between(0.1, 0.6))), accel_share: None }
    } else {
        Arrive::Line(PathSpeed { speed: Some(Speed::m_per_s(draw.between(0.05, 0.2))), ..PathSpeed::default() })
    };
    let mut waypoint = random::waypoint(name, taught, Some(arrive));
    waypoint.fly_by = (draw.unit() < 0.3).then(|| Length::mm(draw.between(1.0, 40.0)));
    waypoint
}

/// One edit of whatever kind; which one is drawn.
fn edit(before: &Judged, round: usize, draw: &mut Draw) -> Edit {
    let recipe = &before.recipe;
    let count = recipe.waypoints.len();
    let index = 1 + (draw.unit() * (count - 1) as f64) as usize;
    match (draw.unit() * 13.0) as usize {
        0 => Edit::Change { index, waypoint: Box::new(beside(before, index, &recipe.waypoints[index].name, draw)) },
        1 | 2 => Edit::Insert { index, waypoint: Box::new(beside(before, index, &format!("new {round}"), draw)) },
        3 if count > 6 => Edit::Remove { index },
        4 => Edit::Reorder { from: index, to: (index % (count - 1)) + 1 },
        5 => Edit::change(recipe, index, |w| w.name = format!("renamed {round}")),
        6 => Edit::change(recipe, index, |w| w.dwell = Seconds::s(if w.fly_by.is_some() { 0.0 } else { 0.7 })),
        7 => Edit::change(recipe, index, |w| w.fly_by = w.then.is_none().then(|| Length::mm(draw.between(5.0, 60.0)))),
        8 => Edit::change(recipe, index, |w| {
            w.then = match &w.then {
                None if w.fly_by.is_none() => Some(Then::Release),
                _ => None,
            };
        }),
        9 => Edit::Acceptance(Box::new(elbowroom::program::Acceptance {
            singular_least: draw.between(0.01, 0.08),
            ..recipe.acceptance
        })),
        10 => {
            let mut loads = recipe.loads.clone();
            loads[0].body.mass *= draw.between(0.9, 1.1);
            Edit::Loads(loads)
        }
        11 => {
            let pose = Pose::new(V3::new(draw.unit(), 0.0, 0.0), Rotation::from_rpy(0.0, 0.0, 0.0));
            let frame = Frame { name: format!("frame {round}"), pose, parent: "base".to_owned() };
            Edit::Frames(recipe.frames.iter().cloned().chain([frame]).collect())
        }
        _ => Edit::change(recipe, 0, |w| {
            if let Taught::Joints(q) = &mut w.taught {
                q[0] += 0.01;
            }
        }),
    }
}

/// Compared as text: a profile has NaN where a check does not apply, which equals nothing.
fn assert_alike(again: &Judged, fresh: &Judged, edit: &Edit) {
    let (a, b) = (&again.plan, &fresh.plan);
    assert_eq!(a.segments.len(), b.segments.len(), "{edit:?}");
    for index in 0..a.segments.len() {
        assert!(a.segments[index] == b.segments[index] && a.stops[index] == b.stops[index], "segment {index} after {edit:?}");
        let [again, fresh] = [again, fresh].map(|judged| format!("{:?}", judged.survey.segments[index]));
        assert!(again == fresh, "survey of segment {index} after {edit:?}");
    }
    assert_eq!((&a.fly_bys, &a.starts), (&b.fly_bys, &b.starts), "{edit:?}");
    let [again, fresh] = [again, fresh].map(|j| format!("{:?} {:?} {:?}", j.survey.cycle, j.survey.findings, j.survey.doubts));
    assert!(again == fresh, "after {edit:?}");
}

#[test]
fn a_plan_that_takes_over_is_the_plan_made_anew() {
    let mut draw = Draw(2201);
    let (arm, recipe) = taught();
    let judge =
        |recipe: &Arc<Recipe>, before: Option<&Judged>| Judged::of(&arm, recipe, before, &Watch::default()).expect("not stopped");
    let mut known = judge(&Arc::new(recipe), None);
    let (mut tried, mut taken_over) = (0, 0);
    for round in 0..60 {
        let edit = edit(&known, round, &mut draw);
        let mut recipe = (*known.recipe).clone();
        edit.apply(&mut recipe).expect("the waypoint is there");
        if !recipe.faults(&arm).is_empty() {
            continue;
        }
        let recipe = Arc::new(recipe);
        let again = judge(&recipe, Some(&known));
        assert_alike(&again, &judge(&recipe, None), &edit);
        let was_there = |segment| known.plan.segments.iter().any(|old| Arc::ptr_eq(old, segment));
        taken_over += again.plan.segments.iter().filter(|segment| was_there(segment)).count();
        tried += again.plan.segments.len();
        known = again;
    }
    assert!(tried > 300, "{tried}");
    assert!(taken_over * 3 > tried, "{taken_over} of {tried}");
}

#[test]
fn changing_one_waypoint_judges_its_two_segments_and_no_other() {
    let (arm, recipe) = (Arc::new(files::demo().arm), files::demo().recipe);
    let known = Judged::of(&arm, &Arc::new(recipe.clone()), None, &Watch::default()).expect("not stopped");
    let mut poses = 0;
    for index in 1..recipe.waypoints.len() {
        let edit = Edit::change(&recipe, index, |w| match &mut w.taught {
            Taught::Joints(q) => q[0] += 0.002,
            Taught::Pose { pose, .. } => pose.at.z += 0.001,
        });
        let mut after = recipe.clone();
        edit.apply(&mut after).expect("there");
        let again = Judged::of(&arm, &Arc::new(after), Some(&known), &Watch::default()).expect("not stopped");
        let new: Vec<usize> = (0..again.survey.segments.len())
            .filter(|&k| !Arc::ptr_eq(&again.survey.segments[k], &known.survey.segments[k]))
            .collect();
        // A waypoint that names this one as near is resolved anew.
        let next = recipe.waypoints.get(index + 1).map(|_| index);
        let named = recipe
            .waypoints
            .iter()
            .any(|w| matches!(&w.taught, Taught::Pose { near: Some(near), .. } if *near == recipe.waypoints[index].name));
        if !named {
            assert_eq!(new, [Some(index - 1), next].into_iter().flatten().collect::<Vec<_>>(), "{index}");
        }
        poses += usize::from(matches!(recipe.waypoints[index].taught, Taught::Pose { .. }) && !named);
    }
    assert!(poses > 3, "{poses}");
}

#[test]
fn a_plan_can_be_stopped() {
    let (arm, recipe) = (Arc::new(files::demo().arm), files::demo().recipe);
    let watch = Watch::default();
    watch.stop();
    assert!(Judged::of(&arm, &Arc::new(recipe), None, &watch).is_none());
}
