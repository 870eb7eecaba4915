//! What one sample and one recipe cost. Run it with `cargo bench --bench sample`; compare `one_sample` with `yardstick`, nalgebra's
//! singular values of the same Jacobians in the same run.

#[path = "../random/mod.rs"]
#[expect(dead_code, reason = "the benchmark draws from a part of it")]
mod random;

use std::sync::Arc;

use divan::{Bencher, black_box, counter::ItemsCount};
use elbowroom::arm::{Arm, Joints, MAX_JOINTS};
use elbowroom::checks::Watch;
use elbowroom::dynamics::{gravity_in_base, holding_torque};
use elbowroom::files;
use elbowroom::kinematics::{Jacobian, Lu, Posture, smallest_singular_value, stacked};
use elbowroom::motion::Plan;
use elbowroom::program::{Arrive, Carried, PathSpeed, Recipe, Taught};
use elbowroom::review::Judged;
use elbowroom::units::Speed;
use random::Draw;

fn main() {
    divan::main();
}

const POSTURES: usize = 1000;

fn postures(arm: &Arm) -> Vec<Joints> {
    let mut draw = Draw(7);
    (0..POSTURES).map(|_| random::posture(arm, &mut draw)).collect()
}

/// Forward kinematics, Jacobian at the TCP, smallest singular value, holding torque with load, joint rates for a TCP velocity.
#[divan::bench]
fn one_sample(bencher: Bencher) {
    let demo = files::demo();
    let carried = Carried::of(demo.recipe.tools.first(), demo.recipe.loads.first());
    let gravity = gravity_in_base(&demo.recipe.mount);
    let (arm, postures) = (&demo.arm, postures(&demo.arm));
    let length = arm.characteristic_length().m;
    bencher.counter(ItemsCount::new(POSTURES)).bench(|| {
        let mut sum = 0.0;
        for q in &postures {
            let posture = Posture::at(arm.chain(), q);
            let tcp = posture.tcp(&carried.tcp);
            let jacobian = Jacobian::at(arm.chain(), &posture, &tcp.at);
            sum += smallest_singular_value(&jacobian.scaled_rows(arm.task(), length));
            sum += holding_torque(arm.chain(), &posture, &carried, &gravity, None)[1];
            let mut wanted = [0.0; MAX_JOINTS];
            wanted[1] = 0.25;
            sum += Lu::of(stacked(&jacobian, arm.task(), &[]), arm.len()).solve(&wanted)[3];
        }
        sum
    });
}

/// The parts of a sample, one at a time.
#[divan::bench(args = ["forward and jacobian", "holding torque", "solve", "smallest singular value"])]
fn part(bencher: Bencher, part: &str) {
    let demo = files::demo();
    let carried = Carried::of(demo.recipe.tools.first(), demo.recipe.loads.first());
    let gravity = gravity_in_base(&demo.recipe.mount);
    let (arm, postures) = (&demo.arm, postures(&demo.arm));
    let length = arm.characteristic_length().m;
    let made: Vec<(Posture, Jacobian)> = postures
        .iter()
        .map(|q| {
            let posture = Posture::at(arm.chain(), q);
            (posture, Jacobian::at(arm.chain(), &posture, &posture.tcp(&carried.tcp).at))
        })
        .collect();
    let bencher = bencher.counter(ItemsCount::new(POSTURES));
    match part {
        "forward and jacobian" => bencher.bench(|| {
            postures.iter().fold(0.0, |sum, q| {
                let posture = Posture::at(arm.chain(), q);
                sum + Jacobian::at(arm.chain(), &posture, &posture.tcp(&carried.tcp).at).columns()[5][0]
            })
        }),
        "holding torque" => bencher.bench(|| {
            made.iter().fold(0.0, |sum, (posture, _)| sum + holding_torque(arm.chain(), posture, &carried, &gravity, None)[1])
        }),
        "solve" => bencher.bench(|| {
            made.iter().fold(0.0, |sum, (_, jacobian)| {
                sum + Lu::of(stacked(jacobian, arm.task(), &[]), arm.len()).solve(&[0.25; MAX_JOINTS])[3]
            })
        }),
        _ => bencher.bench(|| {
            made.iter().fold(0.0, |sum, (_, jacobian)| sum + smallest_singular_value(&jacobian.scaled_rows(arm.task(), length)))
        }),
    }
}

#[divan::bench]
fn yardstick(bencher: Bencher) {
    let demo = files::demo();
    let matrices: Vec<nalgebra::Matrix6<f64>> = postures(&demo.arm)
        .iter()
        .map(|q| {
            let posture = Posture::at(demo.arm.chain(), q);
            let jacobian = Jacobian::at(demo.arm.chain(), &posture, &posture.flange().at);
            nalgebra::Matrix6::from_fn(|i, j| jacobian.columns()[j][i])
        })
        .collect();
    bencher
        .counter(ItemsCount::new(POSTURES))
        .bench(|| matrices.iter().fold(0.0, |sum, m| sum + black_box(m).singular_values()[5]));
}

/// The demo planned and surveyed with proof.
#[divan::bench(sample_count = 50)]
fn demo_recipe(bencher: Bencher) {
    let demo = files::demo();
    let (arm, recipe) = (Arc::new(demo.arm), Arc::new(demo.recipe));
    bencher.bench(|| Judged::of(&arm, &recipe, None, &Watch::default()).expect("not stopped"));
}

/// A thousand segments: lines and joint moves by turns between drawn postures, half of them given as poses.
fn long_recipe(arm: &Arm) -> Recipe {
    let mut draw = Draw(99);
    let mut recipe = files::demo().recipe;
    recipe.waypoints = vec![random::waypoint("w0", Taught::Joints(random::posture(arm, &mut draw)), None)];
    let mut number = 0;
    while recipe.waypoints.len() <= 1000 {
        let single = random::segment(arm, number % 2 == 1, &mut draw);
        let mut next = single.waypoints[1].clone();
        number += 1;
        next.name = format!("w{number}");
        let line = matches!(next.arrive, Some(Arrive::Line(_)));
        if line {
            // A line needs its own start: a joint move to it, as a pose.
            let start = random::waypoint(
                &format!("s{number}"),
                single.waypoints[0].taught.clone(),
                Some(Arrive::Joint { share: Some(elbowroom::units::Share::percent(50.0)), accel_share: None }),
            );
            recipe.waypoints.push(start);
            next.arrive = Some(Arrive::Line(PathSpeed { speed: Some(Speed::mm_per_s(250.0)), ..PathSpeed::default() }));
        }
        recipe.waypoints.push(next);
    }
    recipe
}

#[divan::bench(sample_count = 10)]
fn thousand_segments(bencher: Bencher) {
    let arm = Arc::new(files::demo().arm);
    let recipe = Arc::new(long_recipe(&arm));
    bencher.bench(|| Judged::of(&arm, &recipe, None, &Watch::default()).expect("not stopped"));
}

/// The same after one waypoint was edited: only its two segments are judged anew.
#[divan::bench(sample_count = 20)]
fn thousand_segments_one_edited(bencher: Bencher) {
    let arm = Arc::new(files::demo().arm);
    let before = long_recipe(&arm);
    let mut after = before.clone();
    let middle = after.waypoints.iter().skip(500).position(|w| matches!(w.taught, Taught::Joints(_))).expect("some") + 500;
    if let Taught::Joints(q) = &mut after.waypoints[middle].taught {
        q[0] += 0.01;
    }
    let known = Judged::of(&arm, &Arc::new(before), None, &Watch::default()).expect("not stopped");
    let after = Arc::new(after);
    bencher.bench(|| Judged::of(&arm, &after, Some(&known), &Watch::default()).expect("not stopped"));
}

#[divan::bench]
fn plan_alone(bencher: Bencher) {
    let arm = files::demo().arm;
    let recipe = long_recipe(&arm);
    bencher.bench(|| Plan::of(&arm, &recipe));
}
