//! A reader who knows nothing but the sentences: does what a remedy says, by hand, and judges the recipe afresh.

use std::collections::BTreeSet;
use std::sync::Arc;

use elbowroom::arm::JointKind;
use elbowroom::checks::{Check, Finding, Kind, Watch};
use elbowroom::geometry::{Pose, Rotation, V3, turn_about};
use elbowroom::kinematics::Posture;
use elbowroom::program::{Arrive, Given, Recipe, Taught, frame_in_base};
use elbowroom::review::{Judged, RemedyKind, found_by, remedy_text};
use elbowroom::units::{Acceleration, Length, Seconds, Share, Speed};

use crate::cases::{FULL, READY, SIX, STRETCH, figure, found, judged, judged_freely, past_a_straight_wrist};

/// What two digits of an axis and one of an angle may leave of a room, as a fraction.
const ROUNDING: f64 = 0.02;

/// The figures of a bracket of parts: `(base x +8.3 mm and base z +32.4 mm)`.
fn parts(text: &str, axes: &str) -> V3 {
    V3::from_iterator(["x", "y", "z"].map(|name| {
        let told = text.split_once(&format!("{axes} {name} ")).map(|(_, rest)| rest.split(' ').next().expect("a figure"));
        told.map_or(0.0, |figure| figure.parse::<f64>().expect("a number") / 1000.0)
    }))
}

/// A unit axis from words: `base +z 0.86, -y 0.41`.
fn axis(text: &str) -> V3 {
    let (_, rest) = text.split_once("about base ").expect("an axis");
    let words = rest.split(" on segment").next().expect("it ends");
    let mut axis = V3::zeros();
    for part in words.split(", ") {
        let (name, share) = part.split_once(' ').unwrap_or((part, "1"));
        let k = ["x", "y", "z"].iter().position(|axis| name.ends_with(axis)).expect("an axis");
        axis[k] = share.parse::<f64>().expect("a share") * if name.starts_with('-') { -1.0 } else { 1.0 };
    }
    axis.normalize()
}

fn ends(text: &str, to: usize) -> Vec<usize> {
    if text.contains("at both ends") {
        vec![to - 1, to]
    } else if text.contains("at its start") {
        vec![to - 1]
    } else {
        assert!(text.contains("at its end"), "{text}");
        vec![to]
    }
}

/// The TCP of a waypoint in base axes: as taught, which the arm need not reach, or by its joint values.
fn tcp(judged: &Judged, waypoint: usize) -> Pose {
    if let Taught::Pose { pose: Given { at, rotation: Some(rotation), frame }, .. } = &judged.recipe.waypoints[waypoint].taught {
        let frame = frame.as_deref().map_or_else(Pose::identity, |name| frame_in_base(&judged.recipe, name).expect("a frame"));
        return frame.then(&Pose { axes: rotation.matrix(), at: *at });
    }
    let (segment, q) = match judged.plan.arriving(waypoint) {
        Some(segment) => (segment, segment.end),
        None => judged.plan.arriving(waypoint + 1).map(|segment| (segment, segment.start)).expect("it leaves"),
    };
    Posture::at(judged.arm.chain(), &q).tcp(&segment.carried.tcp)
}

/// The waypoint taught as a pose in base axes, in the posture it had.
fn teach(judged: &Judged, recipe: &mut Recipe, waypoint: usize, pose: &Pose) {
    let given = Given { at: pose.at, rotation: Some(pose.rotation()), frame: None };
    match recipe.waypoints[waypoint].taught {
        Taught::Pose { .. } => recipe.waypoints[waypoint].taught = Taught::Pose { pose: given, near: None },
        // Joint values are found by a few Newton steps on the Jacobian, from where they are.
        Taught::Joints(mut q) => {
            let carried = recipe.hanging_at(waypoint).arriving().tcp;
            for _ in 0..30 {
                let posture = Posture::at(judged.arm.chain(), &q);
                let now = posture.tcp(&carried);
                let turn = Rotation::from_matrix(&(pose.axes * now.axes.transpose())).matrix();
                let spin = 0.5 * V3::new(turn[(2, 1)] - turn[(1, 2)], turn[(0, 2)] - turn[(2, 0)], turn[(1, 0)] - turn[(0, 1)]);
                let way = pose.at - now.at;
                let mut jacobian = nalgebra::Matrix6::zeros();
                for j in 0..6 {
                    let z = posture.axis(j);
                    let lever = z.cross(&(now.at - posture.origin(j)));
                    for k in 0..3 {
                        (jacobian[(k, j)], jacobian[(k + 3, j)]) = (lever[k], z[k]);
                    }
                }
                let step =
                    jacobian.lu().solve(&nalgebra::Vector6::new(way.x, way.y, way.z, spin.x, spin.y, spin.z)).expect("regular");
                (0..6).for_each(|j| q[j] += step[j]);
            }
            recipe.waypoints[waypoint].taught = Taught::Joints(q);
        }
    }
}

/// The recipe that a reader makes of a sentence; none where the sentence is no instruction for one.
fn read(judged: &Judged, finding: &Finding, text: &str) -> Option<Recipe> {
    let mut recipe = (*judged.recipe).clone();
    let to = judged.plan.segments[finding.segment].to;
    let named = |name: &str| {
        recipe.waypoints.iter().position(|waypoint| text.contains(&format!("\"{}\"", waypoint.name)) && waypoint.name == name)
    };
    let quoted = || text.split('"').nth(1).expect("a name");
    let on_line = |recipe: &mut Recipe, how: &dyn Fn(&mut elbowroom::program::PathSpeed)| {
        let Some(Arrive::Line(speed)) = &mut recipe.waypoints[to].arrive else { panic!("a line") };
        how(speed);
    };
    let degrees = |after: &str| figure(text, after, "°").to_radians();
    if text.starts_with("Run segment") && text.contains("mm/s") {
        on_line(&mut recipe, &|speed| speed.speed = Some(Speed::mm_per_s(figure(text, " at ", "mm/s"))));
    } else if text.starts_with("Speed up and slow down") {
        on_line(&mut recipe, &|speed| speed.accel = Some(Acceleration::mm_per_s2(figure(text, " with ", "mm/s²"))));
    } else if text.starts_with("Pass ") {
        let at = named(quoted())?;
        recipe.waypoints[at].fly_by = Some(Length::mm(figure(text, " within ", "mm")));
    } else if text.starts_with("Stop at ") {
        let at = named(quoted())?;
        recipe.waypoints[at].fly_by = None;
    } else if text.starts_with("Stand ") {
        let at = named(quoted())?;
        recipe.waypoints[at].dwell = Seconds::s(figure(text, "Stand ", "s"));
    } else if text.starts_with("Turn the tool by") {
        let turn = turn_about(&V3::z(), degrees("by "));
        for end in ends(text, to) {
            let now = tcp(judged, end);
            teach(judged, &mut recipe, end, &Pose { axes: now.axes * turn, ..now });
        }
    } else if text.starts_with("Tilt ") {
        let turn = turn_about(&axis(text), degrees("by "));
        for end in ends(text, to) {
            let now = tcp(judged, end);
            teach(judged, &mut recipe, end, &Pose { axes: turn * now.axes, ..now });
        }
    } else if text.starts_with("Shift ") {
        for end in ends(text, to) {
            let now = tcp(judged, end);
            teach(judged, &mut recipe, end, &Pose { at: now.at + parts(text, "base"), ..now });
        }
    } else if text.starts_with("Let segment") {
        let (start, end) = (tcp(judged, to - 1), tcp(judged, to));
        let share = figure(text, "on the way, ", "mm") / 1000.0 / (end.at - start.at).norm();
        let pose = Pose { at: start.at + (end.at - start.at) * share + parts(text, "base"), ..start };
        let mut point = recipe.waypoints[to].clone();
        (point.name, point.shown, point.then) = ("between".to_owned(), None, None);
        point.taught = Taught::Pose { pose: Given { at: pose.at, rotation: Some(pose.rotation()), frame: None }, near: None };
        recipe.waypoints.insert(to, point);
    } else if text.starts_with("Let the arm go by a joint move") {
        let share = Some(Share::percent(figure(text, "with a share of ", "%")));
        recipe.waypoints[to].arrive = Some(Arrive::Joint { share, accel_share: None });
        if text.contains("taught by the joint values that it has now") {
            recipe.waypoints[to].taught = Taught::Joints(judged.plan.segments[finding.segment].end);
        }
    } else if text.contains("the heaviest load that leaves the reserve is ") {
        let name = recipe.carrying.clone()?;
        let load = recipe.loads.iter_mut().find(|load| load.name == name)?;
        assert!(text.contains(&format!("of {:.1} kg", load.body.mass)), "{text}");
        load.body.mass = figure(text, "leaves the reserve is ", "kg");
    } else if text.starts_with("With the centre of mass of the load") {
        let name = recipe.carrying.clone()?;
        let load = recipe.loads.iter_mut().find(|load| load.name == name)?;
        load.body.com += parts(text, "tool");
    } else if text.starts_with("With the load turned") {
        let about = ["x", "y", "z"].iter().position(|axis| text.contains(&format!("about tool {axis}")))?;
        let turn = turn_about(&V3::from_fn(|k, _| f64::from(u8::from(k == about))), degrees("turned "));
        let name = recipe.carrying.clone()?;
        let load = recipe.loads.iter_mut().find(|load| load.name == name)?;
        load.body.com = turn * load.body.com;
    } else if text.starts_with("With the base leaning") {
        let about = if text.contains("its x axis") { V3::x() } else { V3::y() };
        recipe.mount.axes *= turn_about(&about, degrees("leaning "));
    } else if text.starts_with("With the base") {
        let sense = if text.contains(" lower") { -0.001 } else { 0.001 };
        recipe.mount.at.z += sense * figure(text, "With the base ", "mm");
    } else {
        return None;
    }
    Some(recipe)
}

/// The least room of a finding's check and joint on its segment, and on the part of it that a point on the way makes of it.
fn room(after: &Judged, before: &Judged, finding: &Finding) -> f64 {
    if let Some(of_cycle) = after.survey.cycle.check(finding.check) {
        return of_cycle
            .peaks
            .iter()
            .filter(|p| p.joint == finding.joint)
            .map(|p| p.room.as_fraction())
            .fold(f64::INFINITY, f64::min);
    }
    let old = &before.plan.segments[finding.segment];
    let added = after.plan.segments.last().map_or(0, |s| s.to) - before.plan.segments.last().map_or(0, |s| s.to);
    let own = after.survey.segments.iter().filter(|survey| {
        let segment = &after.plan.segments[survey.segment];
        segment.blend == old.blend && (old.to..=old.to + added).contains(&segment.to)
    });
    own.flat_map(|survey| survey.check(finding.check).peaks.clone())
        .filter(|peak| peak.joint == finding.joint)
        .map(|peak| peak.room.as_fraction())
        .fold(f64::INFINITY, f64::min)
}

/// Does what each remedy says and holds what it claims against what then is.
fn read_all(before: &Judged, finding: &Finding, met: &mut BTreeSet<RemedyKind>) {
    let (remedies, _) = found_by(before, finding, &Watch::default());
    for remedy in &remedies {
        let text = remedy_text(before, finding, remedy);
        let Some(recipe) = read(before, finding, &text) else { continue };
        met.insert(remedy.kind());
        let after = Judged::of(&before.arm, &Arc::new(recipe), None, &Watch::default()).expect("nobody stops it");
        let costs = after.plan.duration() - before.plan.duration();
        let told = if text.contains("It costs ") {
            figure(&text, "It costs ", "s on the cycle")
        } else if text.contains("It saves ") {
            -figure(&text, "It saves ", "s on the cycle")
        } else {
            0.0
        };
        // Rounded to the side that promises less, of figures that were rounded themselves.
        assert!(costs <= told + 0.006 && costs >= told - 0.016, "{costs} s: {text}");
        let rounds = matches!(remedy.kind(), RemedyKind::Tilt | RemedyKind::Turn | RemedyKind::Shift | RemedyKind::Via);
        if text.contains("then leaves room of ") {
            let told = figure(&text, "then leaves room of ", "%") / 100.0;
            let there = room(&after, before, finding);
            let slack = if rounds { ROUNDING } else { 1e-3 };
            assert!(there >= told - slack && there < told + 0.01 + slack, "{there}: {text}");
        } else if text.contains(" from its end at the least") {
            let joint = &before.arm.joints()[finding.joint.expect("a joint's")];
            assert_eq!(joint.kind, JointKind::Revolute);
            let told = figure(&text, "then stands ", "°");
            let there = (room(&after, before, finding) * joint.range.half()).to_degrees();
            assert!((there - told).abs() < 0.11, "{there}°: {text}");
        } else {
            let gone = after.survey.findings.iter().all(|left| {
                let segment = &after.plan.segments[left.segment];
                let old = &before.plan.segments[finding.segment];
                (segment.to, segment.blend, left.check, left.joint) != (old.to, old.blend, finding.check, finding.joint)
            });
            assert!(gone, "{text}");
        }
    }
}

#[test]
fn a_reader_who_does_what_is_said_finds_what_was_claimed() {
    let touch = r#"
    [[waypoint]]
    name = "down"
    pose = { xyz = [760, -60, 520], rpy = [180, 0, 0] }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "touch"
    pose = { xyz = [760, -60, 320], rpy = [180, 0, 0] }
    arrive = "line"
    speed = 300
    accel = 15000
    "#;
    let corner = |speed: u32, radius: u32| {
        format!(
            r#"{READY}
            [[waypoint]]
            name = "from"
            pose = {{ xyz = [800, -200, 500], rpy = [180, 0, 0] }}
            arrive = "joint"
            share = 40
            [[waypoint]]
            name = "corner"
            pose = {{ xyz = [800, 200, 500], rpy = [180, 0, 0] }}
            arrive = "line"
            speed = {speed}
            accel = 5000
            fly-by = {radius}
            [[waypoint]]
            name = "to"
            pose = {{ xyz = [1000, 200, 500], rpy = [180, 0, 0] }}
            arrive = "line"
            speed = {speed}
            accel = 5000
            "#
        )
    };
    let world = "[mount]\nxyz = [0, 0, 600]\n[[frame]]\nname = \"floor\"\nin = \"world\"\nxyz = [0, 0, 0]";
    let far = r#"
    [[waypoint]]
    name = "near"
    pose = { xyz = [900, 0, 900], rpy = [180, 0, 0], frame = "floor" }
    arrive = "joint"
    share = 40
    [[waypoint]]
    name = "low and far"
    pose = { xyz = [1380, 0, 480], rpy = [180, 0, 0], frame = "floor" }
    arrive = "line"
    speed = 250
    "#;
    let bar = "[[load]]\nname = \"bar\"\nmass = 6.5\ncom = [180, 0, 60]";
    let on = "[[waypoint]]\nname = \"on\"\njoints = [10, -20, -20, 0, 60, 0]\narrive = \"joint\"\nshare = 40\n";
    let end = "[[waypoint]]\nname = \"end\"\njoints = [0, -20, -20, 0, 60, 349]\narrive = \"joint\"\nshare = 40\n";
    let back = "[[waypoint]]\nname = \"back\"\njoints = [-22, 28, -33, 0, 55, 0]\narrive = \"joint\"\nshare = 90\n";
    let cases = [
        (past_a_straight_wrist(400.0), Check::Rate),
        (judged(SIX, "", &format!("{READY}{touch}")), Check::Accel),
        (judged(SIX, "", &corner(800, 30)), Check::Accel),
        (judged(SIX, "", &corner(900, 20)), Check::Accel),
        (judged(SIX, "", STRETCH), Check::Holding),
        (judged(SIX, world, &format!("{READY}{far}")), Check::Reach),
        (judged(FULL, bar, &format!("carrying = \"bar\"{READY}{on}")), Check::Holding),
        (judged_freely(SIX, &format!("{READY}{end}")), Check::Range),
        (judged(FULL, "[acceptance]\nholding-reserve = 5\nrms-reserve = 12", &format!("{STRETCH}dwell = 2\n{back}")), Check::Rms),
    ];
    let mut met = BTreeSet::new();
    for (judged, check) in &cases {
        read_all(judged, &found(judged, *check), &mut met);
    }
    // These two are no single instruction; they are read below.
    let apart = [RemedyKind::Override, RemedyKind::Posture];
    let missing: Vec<RemedyKind> =
        RemedyKind::ALL.into_iter().filter(|kind| !met.contains(kind) && !apart.contains(kind)).collect();
    assert!(missing.is_empty(), "nobody read {missing:?}");
}

/// Rates are in step with an override: at the one told the rate leaves the reserve, at one percent more it does not.
#[test]
fn the_override_told_is_that_of_the_scaling_law() {
    let judged = past_a_straight_wrist(400.0);
    let finding = found(&judged, Check::Rate);
    let (remedies, _) = found_by(&judged, &finding, &Watch::default());
    let remedy = remedies.iter().find(|remedy| remedy.kind() == RemedyKind::Override).expect("an override");
    let text = remedy_text(&judged, &finding, remedy);
    let Kind::Excess(excess) = finding.kind else { panic!("an excess") };
    let asks = 1.0 - excess.room.as_fraction();
    let told = figure(&text, "At an override of ", "%") / 100.0;
    let allowed = 1.0 - excess.reserve.as_fraction();
    assert!(asks * told <= allowed + 1e-9 && asks * (told + 0.01) > allowed, "{asks} {text}");
    let left = figure(&text, "then leaves room of ", "%") / 100.0;
    assert!((1.0 - asks * told - left).abs() < 0.01, "{text}");
}

/// The joint values of another posture put the TCP where it is, as near as their digits allow.
#[test]
fn the_other_posture_told_stands_at_the_same_place() {
    let flipped = "[[waypoint]]\nname = \"flipped\"\njoints = [0, -20, -20, 180, -60, 180]\narrive = \"line\"\nspeed = 100\n";
    let judged = judged(SIX, "", &format!("{READY}{flipped}"));
    let finding = found(&judged, Check::Reach);
    let (remedies, _) = found_by(&judged, &finding, &Watch::default());
    let told: Vec<String> = remedies.iter().map(|remedy| remedy_text(&judged, &finding, remedy)).collect();
    let text = told.iter().find(|text| text.starts_with("Take another posture")).unwrap_or_else(|| panic!("{told:?}"));
    let mut q = judged.plan.segments[0].start;
    for (j, joint) in judged.arm.joints().iter().enumerate() {
        if let Some((_, rest)) = text.split_once(&format!("{} ", joint.name)) {
            let degrees: f64 = rest.split('°').next().and_then(|figure| figure.parse().ok()).unwrap_or_else(|| panic!("{text}"));
            q[j] = degrees.to_radians();
        }
    }
    let carried = &judged.plan.segments[0].carried.tcp;
    let [now, then] = [judged.plan.segments[0].start, q].map(|q| Posture::at(judged.arm.chain(), &q).tcp(carried));
    assert!((now.at - then.at).norm() < 0.015 && (now.axes - then.axes).norm() < 0.05, "{text}");
}
