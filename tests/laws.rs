//! Laws of mechanics and geometry on random arms of 1 to 9 joints, turning and sliding, by both customs of Denavit-Hartenberg
//! parameters and by given axes. Every law is checked by a second route that shares no code with the library.

mod stand;

use elbowroom::arm::{Arm, Joints, MAX_JOINTS, Task};
use elbowroom::dynamics::{Wrench, gravity_in_base, holding_shares, holding_torque};
use elbowroom::geometry::{Pose, Rotation, V3};
use elbowroom::kinematics::{
    Jacobian, Lu, Posture, condition, drift, invert, null_rows, pose_error, singular_values, smallest_singular_value, speed_left,
    stacked,
};
use elbowroom::motion::{Law, Limits, Side};
use elbowroom::program::Carried;
use nalgebra::DMatrix;
use proptest::prelude::*;
use proptest::test_runner::TestCaseError;
use stand::chance::{self, Sequence};
use stand::{all_near, near, plain_frames, pose_of, poses_near};

/// Step of central differences, rad or m: rounding (1e-16 / step) and curvature (step²) both stay below 1e-9.
const STEP: f64 = 1e-5;

fn shifted(q: &Joints, j: usize, by: f64) -> Joints {
    let mut q = *q;
    q[j] += by;
    q
}

/// What a library's singular values are taken of: the task's rows, translations divided by the length.
fn scaled(arm: &Arm, jacobian: &Jacobian) -> DMatrix<f64> {
    let rows = arm.task().rows();
    DMatrix::from_fn(rows.len(), arm.len(), |i, j| {
        jacobian.columns()[j][rows[i]] / if rows[i] < 3 { arm.characteristic_length().m } else { 1.0 }
    })
}

/// The stacked Jacobian with the arm's own null rows.
fn square(arm: &Arm, jacobian: &Jacobian) -> Lu {
    let null = null_rows(jacobian, arm.task(), arm.joints());
    Lu::of(stacked(jacobian, arm.task(), &null), arm.len())
}

/// Far enough from singular postures that a law's figures keep their digits.
fn well_posed(arm: &Arm, jacobian: &Jacobian) -> bool {
    smallest_singular_value(&jacobian.scaled_rows(arm.task(), arm.characteristic_length().m)) > 0.02
}

fn potential(arm: &Arm, carried: &Carried, gravity: &V3, q: &Joints) -> f64 {
    let frames = plain_frames(arm.joints(), q);
    let flange = pose_of(frames.last().expect("an arm has joints"));
    let links: f64 = frames
        .iter()
        .zip(arm.joints())
        .map(|(frame, joint)| joint.link.map_or(0.0, |link| -link.mass * gravity.dot(&pose_of(frame).point(&link.com))))
        .sum();
    let hung = |mass: f64, com: &V3| -mass * gravity.dot(&flange.point(com));
    links + hung(carried.tool_mass, &carried.tool_com) + hung(carried.load_mass, &carried.load_com)
}

proptest! {
    #![proptest_config(chance::config(200))]

    #[test]
    fn the_flange_stands_where_plain_matrix_products_put_it((arm, q) in chance::any_arm()) {
        let ours = Posture::at(arm.chain(), &q);
        let plain = plain_frames(arm.joints(), &q);
        prop_assert!(poses_near(ours.flange(), &pose_of(&plain[arm.len() - 1]), 1e-13));
    }

    #[test]
    fn the_jacobian_is_the_slope_of_forward_kinematics((arm, q) in chance::any_arm(), tcp in chance::pose()) {
        let end = |q: &Joints| pose_of(plain_frames(arm.joints(), q).last().expect("joints")).then(&tcp);
        let jacobian = stand::jacobian(&arm, &tcp, &q);
        for j in 0..arm.len() {
            let (a, b) = (end(&shifted(&q, j, -STEP)), end(&shifted(&q, j, STEP)));
            let slope = pose_error(&a, &b).map(|e| e / (2.0 * STEP));
            prop_assert!(all_near(&slope, &jacobian.columns()[j], 1e-7), "joint {}: {slope:?} {:?}", j + 1, jacobian.columns()[j]);
        }
    }

    #[test]
    fn drift_is_the_slope_of_the_twist_at_even_rates((arm, q) in chance::any_arm(), tcp in chance::pose(), seed in any::<u64>()) {
        let mut sequence = Sequence(seed);
        let rates = Joints::from_fn(arm.len(), |_| sequence.next());
        let twist = |t: f64| stand::jacobian(&arm, &tcp, &q.zip(&rates, |q, rate| q + t * rate)).twist(&rates);
        let (a, b) = (twist(-STEP), twist(STEP));
        let slope: Vec<f64> = a.iter().zip(b).map(|(a, b)| (b - a) / (2.0 * STEP)).collect();
        let posture = Posture::at(arm.chain(), &q);
        let ours = drift(arm.chain(), &posture, &posture.tcp(&tcp).at, &rates);
        // At up to 9 joints the drift's own third derivative reaches some hundreds: times step² it stays below 1e-7.
        prop_assert!(all_near(&ours, &slope, 1e-7), "{ours:?} {slope:?}");
    }

    #[test]
    fn holding_torque_is_the_slope_of_the_potential_energy(
        (arm, q) in chance::any_arm(), carried in chance::carried(), gravity in chance::vector(10.0),
    ) {
        let ours = holding_torque(arm.chain(), &Posture::at(arm.chain(), &q), &carried, &gravity, None);
        for j in 0..arm.len() {
            let energy = |by: f64| potential(&arm, &carried, &gravity, &shifted(&q, j, by));
            let slope = (energy(STEP) - energy(-STEP)) / (2.0 * STEP);
            // The energy is some thousands of J, of which a difference keeps 1e-16 / step.
            prop_assert!(near(ours[j], slope, 1e-6), "joint {}: {} {slope}", j + 1, ours[j]);
        }
    }

    #[test]
    fn a_push_asks_what_its_power_says(
        (arm, q) in chance::any_arm(), carried in chance::carried(), force in chance::vector(90.0), torque in chance::vector(9.0),
    ) {
        // Virtual work: rates times torques is the power that the tool puts into the work, twist times wrench.
        let push = Wrench { force, torque };
        let ours = holding_torque(arm.chain(), &Posture::at(arm.chain(), &q), &carried, &V3::zeros(), Some(&push));
        let jacobian = stand::jacobian(&arm, &carried.tcp, &q);
        for (ours, [x, y, z, a, b, c]) in ours.iter().zip(jacobian.columns()) {
            let power = force.dot(&V3::new(*x, *y, *z)) + torque.dot(&V3::new(*a, *b, *c));
            prop_assert!(near(*ours, power, 1e-11), "{ours} {power}");
        }
    }

    #[test]
    fn holding_torque_is_linear_in_the_load((arm, q) in chance::any_arm(), carried in chance::carried(), times in 0.0..3.0f64) {
        let posture = Posture::at(arm.chain(), &q);
        let gravity = V3::new(0.0, 0.0, -9.80665);
        let with = |load_mass: f64| holding_torque(arm.chain(), &posture, &Carried { load_mass, ..carried }, &gravity, None);
        let (none, once, more) = (with(0.0), with(carried.load_mass), with(carried.load_mass * times));
        for j in 0..arm.len() {
            prop_assert!(near(more[j] - none[j], times * (once[j] - none[j]), 1e-10));
        }
    }

    #[test]
    fn a_mass_under_or_over_or_on_a_joints_axis_asks_nothing_of_it(
        (arm, q) in chance::any_arm(), along in -1.0..1.0f64, down in prop_oneof![Just(0.0), -1.0..1.0f64], seed in any::<usize>(),
    ) {
        let turning: Vec<usize> = (0..arm.len()).filter(|&j| arm.chain().turns[j]).collect();
        prop_assume!(!turning.is_empty());
        let j = turning[seed % turning.len()];
        let posture = Posture::at(arm.chain(), &q);
        let gravity = V3::new(0.0, 0.0, -9.80665);
        let at = posture.origin(j) + posture.axis(j) * along + V3::z() * down;
        let carried = Carried { load_mass: 5.0, load_com: posture.flange().inverse().point(&at), ..Carried::nothing() };
        let shares = holding_shares(arm.chain(), &posture, &carried, &gravity, None);
        prop_assert!(near(shares.load[j], 0.0, 1e-12), "{}", shares.load[j]);
        // Beside it, it asks its weight times the lever: so the law above can fail.
        let side = posture.axis(j).cross(&gravity).norm() / gravity.norm();
        let beside = at + posture.axis(j).cross(&gravity).try_normalize(0.0).unwrap_or(V3::x()) * 0.3;
        let carried = Carried { load_com: posture.flange().inverse().point(&beside), ..carried };
        let shares = holding_shares(arm.chain(), &posture, &carried, &gravity, None);
        prop_assert!(near(shares.load[j].abs(), 5.0 * 9.80665 * 0.3 * side, 1e-11), "{}", shares.load[j]);
    }

    #[test]
    fn hung_from_the_ceiling_an_arm_asks_the_opposite((arm, q) in chance::any_arm(), carried in chance::carried()) {
        let posture = Posture::at(arm.chain(), &q);
        let torque = |roll: f64| {
            let mount = Pose::new(V3::new(0.4, 0.0, 3.0), Rotation::from_rpy_deg([roll, 0.0, 0.0]));
            holding_torque(arm.chain(), &posture, &carried, &gravity_in_base(&mount), None)
        };
        for (floor, ceiling) in torque(0.0).iter().zip(torque(180.0).iter()) {
            prop_assert!(near(*floor, -ceiling, 1e-12 * (1.0 + floor.abs())));
        }
    }

    #[test]
    fn shares_make_the_whole(
        (arm, q) in chance::any_arm(), carried in chance::carried(), gravity in chance::vector(10.0), force in chance::vector(90.0),
    ) {
        let posture = Posture::at(arm.chain(), &q);
        let push = Wrench { force, torque: force * 0.1 };
        let shares = holding_shares(arm.chain(), &posture, &carried, &gravity, Some(&push));
        let whole = holding_torque(arm.chain(), &posture, &carried, &gravity, Some(&push));
        prop_assert!(all_near(&shares.total(), &whole, 1e-11));
        // A link asks nothing of the joints beyond it.
        for (j, link) in shares.links.iter().enumerate() {
            prop_assert!(link[j + 1..].iter().all(|share| near(*share, 0.0, 0.0)));
        }
    }

    #[test]
    fn singular_values_are_those_of_a_library((arm, q) in chance::any_arm(), tcp in chance::pose()) {
        let jacobian = stand::jacobian(&arm, &tcp, &q);
        let rows = jacobian.scaled_rows(arm.task(), arm.characteristic_length().m);
        let count = rows.rows;
        let mut theirs: Vec<f64> = scaled(&arm, &jacobian).singular_values().iter().copied().collect();
        theirs.sort_by(|a, b| b.total_cmp(a));
        let ours = singular_values(&rows);
        prop_assert!(all_near(&ours[..count], &theirs, 1e-13 * theirs[0]), "{ours:?} {theirs:?}");
        let least = smallest_singular_value(&rows);
        prop_assert!(near(least, theirs[count - 1], 1e-9 * least + 1e-13 * theirs[0]), "{least} {theirs:?}");
        prop_assume!(theirs[count - 1] > 1e-6 * theirs[0]);
        prop_assert!(near(condition(&ours, count) * theirs[count - 1] / theirs[0], 1.0, 1e-6));
    }

    #[test]
    fn of_all_rates_with_one_twist_the_null_rows_pick_the_least_by_shares(
        (arm, q) in chance::with_posture(chance::arm(7..=9usize, 0.25)), seed in any::<u64>(),
    ) {
        let jacobian = stand::jacobian(&arm, &Pose::identity(), &q);
        prop_assume!(well_posed(&arm, &jacobian));
        let (n, mut sequence) = (arm.len(), Sequence(seed));
        let shares = |rates: &[f64]| rates.iter().zip(arm.joints()).map(|(r, joint)| (r / joint.rate).powi(2)).sum::<f64>();
        let mut wanted = [0.0; MAX_JOINTS];
        wanted[..6].iter_mut().for_each(|w| *w = sequence.next());
        let chosen = square(&arm, &jacobian).solve(&wanted);
        prop_assert!(all_near(&jacobian.twist(&chosen[..n]), &wanted[..6], 1e-10));
        // Motions that leave the tool alone, by a library: what a random motion has left when its part in J's rows is taken off.
        let j = DMatrix::from_fn(6, n, |row, column| jacobian.columns()[column][row]);
        let inverse = j.clone().pseudo_inverse(1e-12).expect("finite");
        let mut longest = 0.0f64;
        for _ in 0..100 {
            let random = DMatrix::from_fn(n, 1, |_, _| sequence.next());
            let still = &random - &inverse * (&j * &random);
            longest = longest.max(still.norm());
            let other: Vec<f64> = (0..n).map(|k| chosen[k] + 0.1 * still[k]).collect();
            prop_assert!(shares(&chosen[..n]) < shares(&other), "{} {}", shares(&chosen[..n]), shares(&other));
            // Square to it in the weighed sense, so that the sum's slope is none.
            let slope: f64 = (0..n).map(|k| chosen[k] * still[k] / arm.joints()[k].rate.powi(2)).sum();
            prop_assert!(near(slope, 0.0, 1e-9 * shares(&chosen[..n]).sqrt().max(1.0)), "{slope}");
        }
        prop_assert!(longest > 1e-3);
        for row in &null_rows(&jacobian, arm.task(), arm.joints())[..n - 6] {
            prop_assert!(near(row.iter().map(|r| r * r).sum(), 1.0, 1e-12));
        }
    }

    #[test]
    fn speed_left_is_allowed_in_every_direction_and_no_more_in_its_own(
        (arm, q) in chance::any_arm(), tcp in chance::pose(), seed in any::<u64>(),
    ) {
        let jacobian = stand::jacobian(&arm, &tcp, &q);
        prop_assume!(well_posed(&arm, &jacobian));
        let lu = square(&arm, &jacobian);
        let left = speed_left(&invert(&lu), arm.task(), arm.joints());
        // Greatest speed along (or turning rate about) a direction within all rates; the rows that the task leaves out drop out.
        let speed = |about: bool, direction: &V3| {
            let mut wanted = [0.0; MAX_JOINTS];
            for (slot, &row) in arm.task().rows().iter().enumerate() {
                if (row >= 3) == about {
                    wanted[slot] = direction[row % 3];
                }
            }
            let rates = lu.solve(&wanted);
            arm.joints().iter().zip(rates).map(|(joint, rate)| joint.rate / rate.abs()).fold(f64::INFINITY, f64::min)
        };
        let has = |task: &Task, about: bool| task.rows().iter().any(|&row| (row >= 3) == about);
        let mut sequence = Sequence(seed);
        for (about, least, worst) in [(false, left.moving, left.direction), (true, left.turning, left.axis)] {
            if !has(arm.task(), about) {
                prop_assert!(least.is_infinite());
                continue;
            }
            prop_assert!(near(speed(about, &worst) / least, 1.0, 1e-9), "{about}: {} {least}", speed(about, &worst));
            for _ in 0..200 {
                prop_assert!(speed(about, &sequence.direction()) >= least * (1.0 - 1e-9));
            }
        }
        if has(arm.task(), false) {
            // The joint that it names is the one at its rate there.
            let mut wanted = [0.0; MAX_JOINTS];
            for (slot, &row) in arm.task().rows().iter().enumerate() {
                wanted[slot] = if row < 3 { left.direction[row] * left.moving } else { 0.0 };
            }
            prop_assert!(near(lu.solve(&wanted)[left.joint].abs(), arm.joints()[left.joint].rate, 1e-9));
        }
    }

    #[test]
    fn a_law_keeps_its_limits_and_its_derivatives_belong_together(rate in 1e-3..1e3f64, accel in 1e-3..1e3f64, at in 0.0..1.0f64) {
        let law = Law::trapezoid(rate, accel);
        // Closed form: v/a + 1/v, or 2/sqrt(a) where v is not reached.
        let closed = if rate * rate < accel { rate / accel + 1.0 / rate } else { 2.0 / accel.sqrt() };
        prop_assert!(near(law.duration() / closed, 1.0, 1e-12));
        let t = at * law.duration();
        let [u, du, ddu] = law.at(t, Side::After);
        prop_assert!((0.0..=1.0).contains(&u) && du <= rate * (1.0 + 1e-12) && ddu.abs() <= accel * (1.0 + 1e-12));
        // By symmetry the way back is the way.
        prop_assert!(near(law.at(law.duration() - t, Side::Before)[0], 1.0 - u, 1e-12));
        prop_assert!(near(law.time_of(u), t, 1e-7 * law.duration()));
        let h = 1e-5 * law.duration();
        let whole = law.pieces().iter().any(|piece| piece.start <= t - h && t + h <= piece.start + piece.duration);
        prop_assume!(whole);
        let (a, b) = (law.at(t - h, Side::After), law.at(t + h, Side::Before));
        prop_assert!(near((b[0] - a[0]) / (2.0 * h), du, 1e-9 * law.top_rate()));
        prop_assert!(near((b[1] - a[1]) / (2.0 * h), ddu, 1e-9 * accel));
    }

    #[test]
    fn a_law_of_limited_jerk_keeps_its_limits_and_lasts_as_long_as_its_closed_form(
        rate in 1e-2..1e2f64, accel in 1e-2..1e3f64, jerk in 1e-2..1e5f64, at in 0.0..1.0f64,
    ) {
        let law = Law::between(0.0, 0.0, Limits { rate, accel, jerk });
        // From rest to rest over 1: with or without the whole rate, with or without the whole acceleration.
        let ramp = if rate * jerk >= accel * accel { accel / jerk + rate / accel } else { 2.0 * (rate / jerk).sqrt() };
        let closed = if 1.0 / rate >= ramp {
            ramp + 1.0 / rate
        } else {
            let whole = accel / (2.0 * jerk) + (accel * accel / (4.0 * jerk * jerk) + 1.0 / accel).sqrt();
            2.0 * if whole >= 2.0 * accel / jerk { whole } else { 2.0 * (0.5 / jerk).cbrt() }
        };
        prop_assert!(near(law.duration() / closed, 1.0, 1e-9), "{} {closed}", law.duration());
        keeps(&law, Limits { rate, accel, jerk }, at * law.duration())?;
        let [u, ..] = law.at(at * law.duration(), Side::After);
        prop_assert!(near(law.at((1.0 - at) * law.duration(), Side::Before)[0], 1.0 - u, 1e-9));
    }

    #[test]
    fn a_law_between_rates_keeps_its_limits(
        rate in 1e-2..1e2f64, accel in 1e-2..1e3f64, jerk in 1e-2..1e5f64, from in 0.0..1.0f64, to in 0.0..1.0f64, at in 0.0..1.0f64,
    ) {
        let limits = Limits { rate, accel, jerk };
        // Rates that the way of 1 is long enough to change between, as those of a plan are: reached from rest within half of it.
        let most = Law::between(0.0, 0.0, Limits { rate, accel: 0.5 * accel, jerk: 0.5 * jerk }).top_rate();
        let (from, to) = (0.5 * from * most, 0.5 * to * most);
        let law = Law::between(from, to, limits);
        let ends = [law.at(0.0, Side::After), law.at(law.duration(), Side::Before)];
        prop_assert!(near(ends[0][1], from, 1e-9 * rate) && near(ends[1][1], to, 1e-7 * rate), "{ends:?} {from} {to}");
        prop_assert!(ends[0][0] == 0.0 && near(ends[1][0], 1.0, 1e-9));
        keeps(&law, limits, at * law.duration())?;
    }
}

/// Whether a law keeps its limits at a time, its derivatives belong together, and its pieces join without a jump.
fn keeps(law: &Law, limits: Limits, t: f64) -> Result<(), TestCaseError> {
    let [u, rate, accel] = law.at(t, Side::After);
    prop_assert!((-1e-12..=1.0 + 1e-9).contains(&u) && rate >= -1e-9 * limits.rate && rate <= limits.rate * (1.0 + 1e-9));
    prop_assert!(accel.abs() <= limits.accel * (1.0 + 1e-9));
    prop_assert!(near(law.time_of(u), t, 1e-5 * law.duration()) || rate < 1e-4 * law.top_rate());
    for pair in law.pieces().windows(2) {
        let [u, rate, accel] = pair[0].at(pair[0].duration);
        prop_assert!(near(u, pair[1].u, 1e-9) && near(rate, pair[1].rate, 1e-9 * limits.rate));
        prop_assert!(near(accel, pair[1].accel, 1e-7 * limits.accel));
    }
    prop_assert!(law.pieces().iter().all(|piece| piece.jerk.abs() <= limits.jerk * (1.0 + 1e-12) && piece.duration >= 0.0));
    let h = 1e-5 * law.duration();
    let whole = law.pieces().iter().any(|piece| piece.start <= t - h && t + h <= piece.start + piece.duration);
    if whole {
        let [before, after] = [law.at(t - h, Side::After), law.at(t + h, Side::Before)];
        // A cubic differs from its slope over h by a sixth of its jerk times the square of h.
        let step = limits.jerk * h * h + 1e-9 * law.top_rate();
        prop_assert!(near((after[0] - before[0]) / (2.0 * h), rate, step));
        prop_assert!(near((after[1] - before[1]) / (2.0 * h), accel, 1e-6 * (limits.accel + limits.jerk * h)));
    }
    Ok(())
}
