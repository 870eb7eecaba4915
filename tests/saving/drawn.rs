//! Edits drawn from a fixed sequence, or from choices that a failing case is made smaller by.

use elbowroom::arm::{Body, Grounds, Joints};
use elbowroom::geometry::{Pose, Rotation, V3};
use elbowroom::program::{
    Arrive, Edit, Frame, Given, PathSpeed, Push, PushAxes, Recipe, Repeat, Taught, Then, ToolPoint, Waypoint, rename,
};
use elbowroom::units::{Acceleration, Angle, Jerk, Length, Seconds, Share, Speed};
use proptest::collection::vec;
use proptest::prelude::*;
use proptest::test_runner::{RngSeed, TestRunner};

/// So many cases of what `strategy` draws. A failing one is made smaller and printed with its seed. `ELBOWROOM_TEST_SEED` and
/// `ELBOWROOM_TEST_CASES` set another sequence and another count.
pub fn every<S: Strategy>(cases: u32, strategy: &S, holds: impl Fn(S::Value)) {
    let set = |name: &str| std::env::var(name).ok().map(|text| text.parse::<u64>().expect("a number"));
    let seed = set("ELBOWROOM_TEST_SEED").unwrap_or(1901);
    let cases = set("ELBOWROOM_TEST_CASES").map_or(cases, |cases| cases as u32);
    let config = ProptestConfig {
        cases,
        rng_seed: RngSeed::Fixed(seed),
        failure_persistence: None,
        max_shrink_iters: 4000,
        ..ProptestConfig::default()
    };
    let outcome = TestRunner::new(config).run(strategy, |case| {
        holds(case);
        Ok(())
    });
    if let Err(failed) = outcome {
        panic!("ELBOWROOM_TEST_SEED={seed} ELBOWROOM_TEST_CASES={cases}\n{failed}");
    }
}

/// A list of choices for one thing that is drawn.
pub fn choices(most: usize) -> impl Strategy<Value = Vec<u32>> {
    vec(any::<u32>(), 0..most)
}

/// Edits of a recipe, each by its own choices, so that a failing sequence loses all that it does not need.
pub fn edits(most: usize) -> impl Strategy<Value = Vec<Vec<u32>>> {
    vec(choices(24), 1..=most)
}

/// Where drawn things come from.
pub enum Draw {
    /// SplitMix64: small, well mixed, and the same everywhere.
    Seeded(u64),
    /// A list of choices that can be made shorter and smaller; zeros where it ends. Zero is the plainest choice.
    Chosen(std::vec::IntoIter<u32>),
}

impl Draw {
    pub fn seeded(seed: u64) -> Self {
        Self::Seeded(seed)
    }

    pub fn chosen(choices: Vec<u32>) -> Self {
        Self::Chosen(choices.into_iter())
    }

    pub fn bits(&mut self) -> u64 {
        match self {
            Self::Seeded(state) => {
                *state = state.wrapping_add(0x9e37_79b9_7f4a_7c15);
                let mut z = *state;
                z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
                z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
                z ^ (z >> 31)
            }
            Self::Chosen(choices) => choices.next().unwrap_or(0).into(),
        }
    }

    pub fn below(&mut self, count: usize) -> usize {
        (self.bits() % count.max(1) as u64) as usize
    }

    pub fn chance(&mut self, percent: usize) -> bool {
        self.below(100) >= 100 - percent
    }

    /// A number as a person types one: a few digits, at most three behind the point.
    pub fn typed(&mut self, most: usize) -> f64 {
        let decimals = [1.0, 1.0, 10.0, 1000.0][self.below(4)];
        (self.below(most * 1000) as f64 / 1000.0 * decimals).round() / decimals + 1.0
    }

    /// The same with either sign.
    pub fn signed(&mut self, most: usize) -> f64 {
        let number = self.typed(most);
        if self.chance(50) { -number } else { number }
    }
}

fn point(draw: &mut Draw) -> V3 {
    V3::from([draw.signed(900), draw.signed(900), draw.signed(900)]) / 1000.0
}

fn turn(draw: &mut Draw) -> Rotation {
    Rotation::from_rpy_deg([draw.signed(170), draw.signed(80), draw.signed(170)])
}

fn given(draw: &mut Draw) -> Given {
    Given { at: point(draw), rotation: Some(turn(draw)), frame: draw.chance(30).then(|| "world".to_owned()) }
}

/// A waypoint changed in one or two ways.
pub fn altered(waypoint: &Waypoint, draw: &mut Draw) -> Waypoint {
    let mut w = waypoint.clone();
    for _ in 0..=draw.below(2) {
        match draw.below(12) {
            0 => w.dwell = Seconds::s(if draw.chance(40) { 0.0 } else { draw.typed(5) }),
            1 => w.fly_by = draw.chance(60).then(|| Length::mm(draw.typed(30))),
            2 => w.then = [None, Some(Then::Release), Some(Then::Take("part".to_owned()))][draw.below(3)].clone(),
            3 => w.shown = draw.chance(60).then(|| given(draw)),
            4 => w.tool = draw.chance(60).then(|| "second".to_owned()),
            5 => {
                let axes = if draw.chance(50) { PushAxes::Tool } else { PushAxes::Frame("base".to_owned()) };
                let torque = if draw.chance(50) { V3::zeros() } else { V3::new(0.0, draw.typed(3), 0.0) };
                w.push = draw.chance(60).then(|| Push { force: V3::new(draw.typed(50), 0.0, 5.5), torque, axes });
            }
            6 | 7 => match &mut w.taught {
                Taught::Joints(values) if draw.chance(70) => {
                    let j = draw.below(values.len());
                    values[j] = Angle::deg(draw.signed(80)).as_rad();
                }
                Taught::Pose { pose, .. } if draw.chance(40) => pose.at[draw.below(3)] = draw.signed(900) / 1000.0,
                Taught::Pose { pose, .. } if draw.chance(50) => pose.rotation = Some(turn(draw)),
                Taught::Pose { pose, .. } if draw.chance(50) => pose.frame = draw.chance(50).then(|| "world".to_owned()),
                taught if draw.chance(50) => *taught = Taught::Pose { pose: given(draw), near: None },
                taught => *taught = Taught::Joints(Joints::from_fn(6, |_| Angle::deg(draw.signed(90)).as_rad())),
            },
            8 => w.arrive = Some(Arrive::Joint { share: Some(Share::percent(draw.typed(90))), accel_share: None }),
            9 => {
                let via = Given { at: point(draw), rotation: None, frame: None };
                w.arrive =
                    Some(Arrive::Arc { via, speed: PathSpeed { speed: Some(Speed::mm_per_s(draw.typed(800))), ..path(draw) } });
            }
            _ => match &mut w.arrive {
                Some(Arrive::Line(speed) | Arrive::Arc { speed, .. }) => speed.speed = Some(Speed::mm_per_s(draw.typed(800))),
                Some(Arrive::Joint { share, .. }) if draw.chance(50) => *share = Some(Share::percent(draw.typed(90))),
                arrive => *arrive = Some(Arrive::Line(path(draw))),
            },
        }
    }
    w
}

fn path(draw: &mut Draw) -> PathSpeed {
    PathSpeed {
        speed: Some(Speed::mm_per_s(draw.typed(800))),
        accel: draw.chance(40).then(|| Acceleration::mm_per_s2(draw.typed(3000))),
        jerk: draw.chance(30).then(|| Jerk::mm_per_s3(draw.typed(9000))),
        ..PathSpeed::default()
    }
}

/// Any edit of a recipe. `fresh` numbers the names it brings in.
pub fn edit(recipe: &Recipe, draw: &mut Draw, fresh: &mut usize) -> Edit {
    let count = recipe.waypoints.len();
    *fresh += 1;
    let index = draw.below(count);
    match draw.below(20) {
        0 | 1 if count > 3 => Edit::Remove { index },
        2 | 3 => {
            let mut waypoint = altered(&recipe.waypoints[index], draw);
            waypoint.name = format!("new {fresh}");
            Edit::Insert { index: draw.below(count + 1), waypoint: Box::new(waypoint) }
        }
        4 | 5 => Edit::Reorder { from: index, to: draw.below(count) },
        6 => rename::waypoint(recipe, index, &format!("renamed {fresh}")),
        7 => Edit::Name(format!("Recipe \"{fresh}\" \\ it's")),
        8 => Edit::Mount(Pose::new(point(draw), turn(draw))),
        9 => {
            let mut acceptance = recipe.acceptance;
            acceptance.rate_reserve = Share::percent(draw.typed(50));
            acceptance.tcp_speed = draw.chance(50).then(|| Speed::mm_per_s(draw.typed(4000)));
            Edit::Acceptance(Box::new(acceptance))
        }
        10 => {
            let mut usual = recipe.usual;
            usual.jerk = draw.chance(50).then(|| Jerk::mm_per_s3(draw.typed(9000)));
            usual.accel = Acceleration::mm_per_s2(draw.typed(4000));
            Edit::Usual(Box::new(usual))
        }
        11 if !recipe.tools.is_empty() => {
            let mut tools = recipe.tools.clone();
            let at = draw.below(tools.len());
            match draw.below(5) {
                4 => tools[at].turns_freely = !tools[at].turns_freely,
                0 => tools[at].tcp = Pose::new(point(draw), turn(draw)),
                1 => tools[at].body = Some(Body { mass: draw.typed(9), com: point(draw), inertia: None, grounds: Grounds::Guess }),
                2 => tools[at].points.push(ToolPoint { name: format!("p{fresh}"), at: point(draw) }),
                _ => tools.push(elbowroom::program::Tool { name: format!("tool {fresh}"), ..tools[at].clone() }),
            }
            Edit::Tools(tools)
        }
        12 => {
            let mut frames = recipe.frames.clone();
            if frames.is_empty() || draw.chance(50) {
                frames.push(Frame {
                    name: format!("f{fresh}"),
                    pose: Pose::new(point(draw), turn(draw)),
                    parent: "base".to_owned(),
                });
            } else if draw.chance(50) {
                frames.pop();
            } else {
                frames[0].pose.at = point(draw);
            }
            Edit::Frames(frames)
        }
        13 => Edit::Repeat(if recipe.repeat == Repeat::Start { Repeat::Never } else { Repeat::Start }),
        14 => Edit::Carrying(draw.chance(50).then(|| "part".to_owned())),
        15 => {
            let mut loads = recipe.loads.clone();
            if let Some(load) = loads.first_mut() {
                load.body.mass = draw.typed(9);
                load.body.inertia = draw.chance(50).then(|| Body::tensor([0.25, 0.25, 0.3, 0.0, draw.typed(2) / 1000.0, 0.0]));
            }
            Edit::Loads(loads)
        }
        16 => {
            let first = edit(recipe, draw, fresh);
            let mut after = recipe.clone();
            first.apply(&mut after).expect("it fits");
            Edit::Together(vec![first, edit(&after, draw, fresh)])
        }
        _ => Edit::Change { index, waypoint: Box::new(altered(&recipe.waypoints[index], draw)) },
    }
}
