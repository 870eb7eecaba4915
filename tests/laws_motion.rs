//! Laws of following a path and of nearing a singular posture, on random arms.

mod stand;

use std::cell::Cell;

use elbowroom::arm::{Arm, Joints, TaskRow};
use elbowroom::geometry::{M3, Pose, V3, turn_about};
use elbowroom::kinematics::{
    Posture, Reached, SingularKind, pose_error, reach, singular_posture, smallest_singular_value, spherical_wrist,
};
use elbowroom::motion::{Follower, Instant, Law, Path, Segment, Track};
use elbowroom::program::Carried;
use proptest::prelude::*;
use proptest::test_runner::TestRunner;
use stand::chance;
use stand::{all_near, arm, degrees, near, research_arm, turning};

fn sigma(arm: &Arm, tcp: &Pose, q: &Joints) -> f64 {
    smallest_singular_value(&stand::jacobian(arm, tcp, q).scaled_rows(arm.task(), arm.characteristic_length().m))
}

/// A segment along `path` from joint values `start`; its law does not matter here.
fn segment(arm: &Arm, path: Path, tcp: Pose, start: Joints) -> Segment {
    let track = Track::along(arm, &path, &tcp, &start);
    let end = track.nodes.last().map_or(start, |node| node.q);
    Segment {
        blend: false,
        part: [0.0, 1.0],
        limits: None,
        to: 1,
        path,
        law: Law::trapezoid(1.0, 1.0),
        track,
        start,
        end,
        carried: Carried { tcp, ..Carried::nothing() },
        carried_after: None,
        points: std::sync::Arc::default(),
        push: None,
        shares: None,
        trouble: None,
        dwell: 0.0,
    }
}

/// What a path is drawn from: where its end is from its start (m), how it turns, and whether it is an arc.
fn course() -> impl Strategy<Value = (V3, V3, bool)> {
    (chance::vector(0.12), chance::vector(0.4), any::<bool>())
}

fn path_from(start: &Pose, (by, turn, arc): (V3, V3, bool)) -> Path {
    let axes = turn.try_normalize(1e-9).map_or(start.axes, |axis| turn_about(&axis, turn.norm()) * start.axes);
    let end = Pose { axes, at: start.at + by };
    if !arc || by.norm() < 1e-3 {
        return Path::line(*start, &end);
    }
    let side = by.cross(&V3::new(0.3, -0.5, 0.8)).normalize() * by.norm();
    Path::arc(start, &(start.at + by * 0.5 + side * 0.3), &end)
}

/// Runs `law` on random arms that could follow a random path all the way; at least half of them must have been able to.
fn on_followed_paths(law: impl Fn(&Arm, &Segment, f64) -> Result<(), TestCaseError>) {
    let (all, followed) = (Cell::new(0), Cell::new(0));
    let case = (chance::with_posture(chance::following_arm(2..=9usize, 0.2)), chance::pose(), course(), 0.0..1.0f64);
    let config = chance::config(150);
    TestRunner::new(config)
        .run(&case, |((arm, q), tcp, course, at)| {
            prop_assume!(sigma(&arm, &tcp, &q) > 0.05);
            let start = Posture::at(arm.chain(), &q).tcp(&tcp);
            let segment = segment(&arm, path_from(&start, course), tcp, q);
            all.set(all.get() + 1);
            if segment.track.lost.is_some() {
                return Ok(());
            }
            followed.set(followed.get() + 1);
            law(&arm, &segment, at)
        })
        .unwrap_or_else(|failure| panic!("{failure}"));
    assert!(2 * followed.get() > all.get(), "only {} of {} paths could be followed", followed.get(), all.get());
}

#[test]
fn the_arm_stands_where_the_path_says_all_along() {
    on_followed_paths(|arm, segment, at| {
        let follower = Follower::of(arm, segment);
        for u in [0.0, at, 0.5 * at, 1.0] {
            let instant = follower.at(u).expect("followed to its end");
            // What the instant tells of the TCP is from before Newton's last step, of at most 1e-8.
            let gap = pose_error(&instant.tcp, &segment.path.target(u).expect("a path").pose);
            // By a second route too: the TCP belongs to the joint values.
            let plain = stand::plain_frames(arm.joints(), &instant.q);
            let tcp = stand::pose_of(plain.last().expect("joints")).then(&segment.carried.tcp);
            let plain_gap = pose_error(&tcp, &segment.path.target(u).expect("a path").pose);
            for &row in arm.task().rows() {
                prop_assert!(near(gap[row], 0.0, 2e-8) && near(plain_gap[row], 0.0, 1e-9), "{u}: {gap:?} {plain_gap:?}");
            }
        }
        Ok(())
    });
}

#[test]
fn slope_and_bend_are_the_derivatives_of_the_joint_values() {
    // Step of the fraction for differences of the joint values, which are exact to 1e-13, of fourth order (Abramowitz & Stegun, 25.3).
    const H: f64 = 4e-3;
    on_followed_paths(|arm, segment, at| {
        // Within one cell, since a redundant arm's path is defined cell by cell.
        let nodes = &segment.track.nodes;
        let cell = ((at * (nodes.len() - 1) as f64) as usize).min(nodes.len() - 2);
        prop_assume!(nodes[cell + 1].u - nodes[cell].u > 4.5 * H);
        let u = 0.5 * (nodes[cell].u + nodes[cell + 1].u);
        let follower = Follower::of(arm, segment);
        let q = |by: f64| follower.at(u + by).expect("followed to its end").q;
        let m = follower.at(u).expect("followed to its end");
        // Near a singular posture the path bends within a few steps, and differences say little.
        prop_assume!(sigma(arm, &segment.carried.tcp, &m.q) > 0.1);
        let [a, b, c, d] = [q(-2.0 * H), q(-H), q(H), q(2.0 * H)];
        let size = 1.0 + m.slope.largest() + m.bend.largest();
        for j in 0..arm.len() {
            let slope = (a[j] - 8.0 * b[j] + 8.0 * c[j] - d[j]) / (12.0 * H);
            let bend = (-a[j] + 16.0 * b[j] - 30.0 * m.q[j] + 16.0 * c[j] - d[j]) / (12.0 * H * H);
            // The instant's derivatives are from before Newton's last step, of at most 1e-8; beyond that H⁴ times higher derivatives.
            prop_assert!(near(slope, m.slope[j], 1e-7 * size * size), "joint {}: {slope} {}", j + 1, m.slope[j]);
            prop_assert!(near(bend, m.bend[j], 2e-6 * size * size * size), "joint {}: {bend} {}", j + 1, m.bend[j]);
        }
        Ok(())
    });
}

/// Where the joint values jump between two instants, if they do: a steep stretch gets flatter when it is halved, a jump stays.
fn jump(follower: &Follower, a: &Instant, b: &Instant) -> Option<f64> {
    let du = b.u - a.u;
    let moved = b.q.zip(&a.q, |b, a| b - a);
    let even = a.slope.zip(&b.slope, |a, b| 0.5 * du * (a + b));
    if moved.zip(&even, |moved, even| moved - even).largest() <= 0.01 {
        return None;
    }
    if du < 1e-7 {
        return (moved.largest() > 2e-3).then_some(a.u);
    }
    let middle = follower.at(0.5 * (a.u + b.u)).expect("followed to its end");
    jump(follower, a, &middle).or_else(|| jump(follower, &middle, b))
}

#[test]
fn the_joint_values_never_jump_along_a_path() {
    const PARTS: usize = 100;
    on_followed_paths(|arm, segment, _| {
        let follower = Follower::of(arm, segment);
        let mut before = follower.at(0.0).expect("followed");
        prop_assert!(all_near(&before.q, &segment.start, 1e-9));
        for part in 1..=PARTS {
            let Some(now) = follower.at(part as f64 / PARTS as f64) else { panic!("lost at part {part} of a followed path") };
            let jump = jump(&follower, &before, &now);
            prop_assert!(jump.is_none(), "at {jump:?}: {:?} {:?}", before.q, now.q);
            before = now;
        }
        prop_assert!(all_near(&before.q, &segment.end, 1e-9));
        Ok(())
    });
}

proptest! {
    #![proptest_config(chance::config(300))]

    #[test]
    fn the_singular_posture_that_is_told_is_singular_and_as_far_as_told((arm, q) in chance::with_posture(chance::arm(2..=6usize, 0.2))) {
        if let Some(close) = singular_posture(&arm, spherical_wrist(arm.chain()), &q) {
            let left = sigma(&arm, &Pose::identity(), &close.posture);
            prop_assert!(near(left, 0.0, 1e-4), "sigma {left} at {close:?}, {} at {q:?}", sigma(&arm, &Pose::identity(), &q));
            let length = arm.characteristic_length().m;
            let square = |j: usize| ((close.posture[j] - q[j]) / if arm.chain().turns[j] { 1.0 } else { length }).powi(2);
            let distance = (0..arm.len()).map(square).sum::<f64>().sqrt();
            prop_assert!(near(close.distance, distance, 1e-12) && distance <= 30f64.to_radians());
        }
    }
}

/// Closed form: two links are singular at q2 = 0, so the nearest singular posture is |q2| away.
#[test]
fn two_links_are_as_far_from_singular_as_their_elbow_is_bent() {
    let two = arm(vec![turning(0.5, 0.0, 0.0), turning(0.4, 0.0, 0.0)], &[TaskRow::X, TaskRow::Y]);
    for elbow in [0.0, 1e-9, 1.0, 10.0, 20.0, 29.0, -15.0, 160.0, 180.0f64] {
        let close = singular_posture(&two, None, &degrees(&[40.0, elbow])).unwrap_or_else(|| panic!("{elbow}"));
        assert!(near(close.distance.to_degrees(), elbow.abs().min(180.0 - elbow.abs()), 1e-6), "{elbow}: {close:?}");
        assert!(near(close.posture[0].to_degrees(), 40.0, 1e-9));
    }
    assert!(singular_posture(&two, None, &degrees(&[40.0, 31.0])).is_none());
}

/// Closed forms of the research arm: the wrist is in line at q5 = 0, the arm stretched where the way from elbow to wrist centre goes on
/// from the upper arm, the wrist centre above the shoulder where its way out in the arm's plane is none; it stays off the first axis by
/// the shoulder's offset of 150 mm.
#[test]
fn each_kind_of_singular_posture_is_called_by_its_name() {
    let six = research_arm();
    let wrist = spherical_wrist(six.chain());
    assert!(wrist.is_some());
    let (a2, a3, d4) = (0.4318f64, 0.0203f64, 0.4318f64);
    // The wrist centre stands at (a3, d4) from the elbow in the plane of the upper arm, turned by q3.
    let stretched = -d4.atan2(a3);
    // That way out is a2 c2 + a3 c23 - d4 s23 = along c2 + across s2.
    let q3 = 60f64.to_radians();
    let (along, across) = (a2 + a3 * q3.cos() - d4 * q3.sin(), -a3 * q3.sin() - d4 * q3.cos());
    let above = along.atan2(-across);
    for (q, kind) in [
        ([0.2, 0.3, 0.4, 0.6, 0.05, -0.3], SingularKind::Wrist),
        ([0.2, 0.3, stretched + 0.1, 0.6, 1.2, -0.3], SingularKind::Elbow),
        ([0.2, 0.3, stretched + std::f64::consts::PI - 0.1, 0.6, 1.2, -0.3], SingularKind::Elbow),
        ([0.2, above + 0.1, q3, 0.6, 1.2, -0.3], SingularKind::Shoulder),
    ] {
        let close = singular_posture(&six, wrist, &Joints::from_slice(&q)).expect("near");
        assert_eq!(close.kind, Some(kind), "{q:?}: {close:?}");
        assert!(close.distance < 0.12, "{close:?}");
        assert!(near(sigma(&six, &Pose::identity(), &close.posture), 0.0, 1e-6), "{close:?}");
    }
}

/// Law: along a branch the sign of q5 stays, however near the wrist comes to its straight posture; only the branch beyond has the other.
#[test]
fn a_line_past_the_straight_wrist_does_not_change_to_the_branch_beyond() {
    let six = stand::six_axes();
    let straight = Posture::at(six.chain(), &degrees(&[0.0, 20.0, -40.0, 0.0, 0.0, 0.0]));
    for off in [4.0, 2.0, 1.0, 0.5, 0.2, 0.1, 0.08, 0.06, -0.07, -0.3, -3.0f64] {
        for way in [1.0, -1.0] {
            // The tool keeps its direction, turned by `off` degrees upwards from the forearm's, while the forearm sweeps past it.
            let axes = turn_about(&V3::y(), off.to_radians()) * straight.flange().axes;
            let at = |y: f64| Pose { axes, at: straight.flange().at + V3::y() * y };
            let near_by = degrees(&[0.0, 20.0, -40.0, 80.0, 15.0, -80.0]);
            let Reached::Yes { q, .. } = reach(&six, &Pose::identity(), &at(-0.3 * way), &near_by) else { panic!("in reach") };
            let segment = segment(&six, Path::line(at(-0.3 * way), &at(0.3 * way)), Pose::identity(), q);
            assert!(segment.track.lost.is_none(), "{off}: {:?}", segment.track.lost);
            let follower = Follower::of(&six, &segment);
            let mut before = follower.at(0.0).expect("followed");
            let mut least = f64::INFINITY;
            for part in 1..=400 {
                let now = follower.at(f64::from(part) / 400.0).expect("followed");
                assert!(now.q[4].signum() == q[4].signum(), "{off} degrees past, part {part}: {:?}", now.q);
                assert!(jump(&follower, &before, &now).is_none(), "{off} degrees past, part {part}");
                least = least.min(now.q[4].abs());
                before = now;
            }
            assert!((0.8..1.3).contains(&(least.to_degrees() / off.abs())), "{off}: {}", least.to_degrees());
        }
    }
}

/// Closed form: an arm that moves in one plane may pass the straight wrist, with q4 and q6 at rest and q5 through 0.
#[test]
fn a_line_in_the_arms_plane_passes_through_the_straight_wrist() {
    let six = stand::six_axes();
    let straight = Posture::at(six.chain(), &degrees(&[0.0, 20.0, -40.0, 0.0, 0.0, 0.0]));
    let at = |z: f64| Pose { axes: straight.flange().axes, at: straight.flange().at + V3::z() * z };
    // Not even halves, so that no node stands exactly on the singular posture.
    let near_by = degrees(&[0.0, 25.0, -45.0, 0.0, 8.0, 0.0]);
    let Reached::Yes { q, .. } = reach(&six, &Pose::identity(), &at(-0.1), &near_by) else { panic!("in reach") };
    let segment = segment(&six, Path::line(at(-0.1), &at(0.137)), Pose::identity(), q);
    assert!(segment.track.lost.is_none(), "{:?}", segment.track.lost);
    let end = segment.end;
    assert!(q[4] * end[4] < 0.0, "{q:?} {end:?}");
    assert!(near(end[3], q[3], 1e-6) && near(end[5], q[5], 1e-6), "{q:?} {end:?}");
    let follower = Follower::of(&six, &segment);
    let passes = |part: u32| follower.at(f64::from(part) / 401.0).is_some();
    assert!((0..=401).all(passes));
}

/// Law: two links of nearly one length that reach past their own base must fold and swing round by almost half a turn; they may not
/// slip through to the posture with the elbow on the other side, which looks like going straight on.
#[test]
fn a_line_past_the_base_does_not_change_to_the_other_elbow() {
    let two = arm(vec![turning(0.5, 0.0, 0.0), turning(0.499, 0.0, 0.0)], &[TaskRow::X, TaskRow::Y]);
    for off in [0.0011, 0.0015, 0.002, 0.003, 0.005, 0.01, 0.03, 0.1] {
        for end in [0.31, 0.4, 0.52, 0.7] {
            let at = |x: f64| Pose { axes: M3::identity(), at: V3::new(x, off, 0.0) };
            let Reached::Yes { q, .. } = reach(&two, &Pose::identity(), &at(-0.4), &degrees(&[90.0, 130.0])) else {
                panic!("in reach")
            };
            let segment = segment(&two, Path::line(at(-0.4), &at(end)), Pose::identity(), q);
            assert!(segment.track.lost.is_none(), "{off}: {:?}", segment.track.lost);
            let sine = |q: &Joints| q[1].sin();
            assert!(sine(&q) * sine(&segment.end) > 0.0, "{off} {end}: {q:?} {:?}", segment.end);
            let follower = Follower::of(&two, &segment);
            for part in 0..=997 {
                let now = follower.at(f64::from(part) / 997.0).expect("followed");
                assert!(sine(&q) * sine(&now.q) > 0.0, "{off} {end}, part {part}: {:?}", now.q);
            }
        }
    }
}
