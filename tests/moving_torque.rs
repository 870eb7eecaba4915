//! Torque in motion against published figures and by second routes.

mod random;

use elbowroom::arm::{Arm, ArmData, Body, Drive, Flange, Grounds, Joint, JointKind, Joints, Placement, Range, Task, TaskRow};
use elbowroom::dynamics::{Going, Wrench, at_axis, holding_torque, moving_torque};
use elbowroom::geometry::{M3, Pose, V3};
use elbowroom::kinematics::Posture;
use elbowroom::program::Carried;
use random::{Draw, Family};

/// The three-link example of the docstrings of `InverseDynamics`, `MassMatrix` and `VelQuadraticForces` in the PyPI package
/// `modern-robotics` 1.1.1. Its screw axes are (1,0,1; 0,1,0), (0,1,0; -.089,0,0) and (0,1,0; -.089,0,.425); its links stand at
/// (0,0,.089159), (.28,.13585,.089159) and (.675,.01615,.089159), its end-effector at (.81725,.01615,.089159).
///
/// The first axis is not a unit vector: a unit of that joint turns by the square root of 2 about (1,0,1)/√2 through (0,0,1), so
/// values scale by √2 going in and torques by √2 coming out.
struct Example {
    arm: Arm,
    carried: Carried,
}

const ROOT: f64 = std::f64::consts::SQRT_2;
const GRAVITY: V3 = V3::new(0.0, 0.0, -9.8);

impl Example {
    fn new() -> Self {
        let joint = |name: &str, place: [f64; 3], axis: V3, mass: f64, com: [f64; 3], tensor: M3| Joint {
            name: name.to_owned(),
            kind: JointKind::Revolute,
            placement: Placement::Axis { place: Pose { axes: M3::identity(), at: V3::from(place) }, axis },
            range: Range { low: -3.0, high: 3.0 },
            rate: 1.0,
            accel: 1.0,
            torque: None,
            brake: None,
            drive: Drive::default(),
            stop: None,
            jerk: None,
            link: Some(Body { mass, com: V3::from(com), inertia: Some(tensor), grounds: Grounds::Sheet }),
        };
        // Links 2 and 3 have their x axis along base -z and their z axis along base x.
        let upright = |[x, y, z]: [f64; 3]| M3::from_diagonal(&V3::new(x, y, z));
        let lying = |[x, y, z]: [f64; 3]| upright([z, y, x]);
        let joints = vec![
            joint(
                "1",
                [0.0, 0.0, 1.0],
                V3::new(1.0, 0.0, 1.0) / ROOT,
                3.7,
                [0.0, 0.0, 0.089159 - 1.0],
                upright([0.010267, 0.010267, 0.00666]),
            ),
            joint("2", [0.0, 0.0, 0.089 - 1.0], V3::y(), 8.393, [0.28, 0.13585, 0.000159], lying([0.22689, 0.22689, 0.0151074])),
            joint("3", [0.425, 0.0, 0.0], V3::y(), 2.275, [0.25, 0.01615, 0.000159], lying([0.0494433, 0.0494433, 0.004095])),
        ];
        let task = Task::of(&[TaskRow::X, TaskRow::Y, TaskRow::Z]);
        let data = ArmData { name: "three links".to_owned(), joints, flange: Flange::default(), characteristic_length: None, task };
        let arm = Arm::build(data).expect("it holds together");
        let tcp = Pose { axes: M3::new(0.0, 0.0, 1.0, 0.0, 1.0, 0.0, -1.0, 0.0, 0.0), at: V3::new(0.39225, 0.01615, 0.000159) };
        Self { arm, carried: Carried { tcp, ..Carried::nothing() } }
    }

    /// Torques in the example's units.
    fn torque(&self, gravity: V3, tip: bool, rates: [f64; 3], accelerations: [f64; 3]) -> [f64; 3] {
        let scaled = |[a, b, c]: [f64; 3]| Joints::from_slice(&[ROOT * a, b, c]);
        let posture = Posture::at(self.arm.chain(), &scaled([0.1, 0.1, 0.1]));
        let axes = posture.tcp(&self.carried.tcp).axes;
        let ones = axes * V3::new(1.0, 1.0, 1.0);
        let push = tip.then_some(Wrench { force: ones, torque: ones });
        let going = Going { rates: scaled(rates), accelerations: scaled(accelerations) };
        let t = moving_torque(self.arm.chain(), &posture, &self.carried, &gravity, push.as_ref(), &going);
        [ROOT * t[0], t[1], t[2]]
    }
}

fn near(found: [f64; 3], printed: [f64; 3], within: f64) {
    assert!(found.iter().zip(printed).all(|(a, b)| (a - b).abs() <= within), "{found:?} {printed:?}");
}

#[test]
fn the_published_three_link_example_comes_out() {
    let example = Example::new();
    // modern-robotics 1.1.1, InverseDynamics: rates (.1,.2,.3), accelerations (2,1.5,1), tip wrench of ones, g = (0,0,-9.8).
    near(example.torque(GRAVITY, true, [0.1, 0.2, 0.3], [2.0, 1.5, 1.0]), [74.69616155, -33.06766016, -3.23057314], 5e-9);
    // GravityForces and EndEffectorForces of the same example.
    near(example.torque(GRAVITY, false, [0.0; 3], [0.0; 3]), [28.40331262, -37.64094817, -5.4415892], 5e-9);
    near(example.torque(V3::zeros(), true, [0.0; 3], [0.0; 3]), [1.40954608, 1.85771497, 1.392409], 5e-9);
    // VelQuadraticForces.
    near(example.torque(V3::zeros(), false, [0.1, 0.2, 0.3], [0.0; 3]), [0.26453118, -0.05505157, -0.00689132], 5e-9);
    // MassMatrix, column by column; printed to nine digits.
    for (k, column) in [
        [2.25433380e1, -3.07146754e-1, -7.18426391e-3],
        [-3.07146754e-1, 1.96850717, 4.32157368e-1],
        [-7.18426391e-3, 4.32157368e-1, 1.91630858e-1],
    ]
    .into_iter()
    .enumerate()
    {
        let mut unit = [0.0; 3];
        unit[k] = 1.0;
        near(example.torque(V3::zeros(), false, [0.0; 3], unit), column, 5e-8);
    }
}

const FAMILIES: [Family; 5] = [Family::SphericalWrist, Family::OffsetWrist, Family::Seven, Family::FourSlide, Family::ThreeSlide];

fn carried(draw: &mut Draw) -> Carried {
    Carried {
        tcp: Pose { axes: M3::identity(), at: draw.direction() * 0.2 },
        tool_mass: 3.0,
        tool_com: draw.direction() * 0.1,
        tool_inertia: M3::from_diagonal(&V3::new(0.03, 0.02, 0.04)),
        load_mass: 5.0,
        load_com: draw.direction() * 0.2,
        load_inertia: M3::from_diagonal(&V3::new(0.05, 0.02, 0.04)),
    }
}

#[test]
fn at_rest_newton_euler_is_virtual_work() {
    let mut draw = Draw(41);
    for k in 0..200 {
        let arm = random::arm(FAMILIES[k % 5], &mut draw);
        let posture = Posture::at(arm.chain(), &random::posture(&arm, &mut draw));
        let (carried, gravity) = (carried(&mut draw), draw.direction() * 9.80665);
        let push = Wrench { force: draw.direction() * 50.0, torque: draw.direction() * 5.0 };
        let still = holding_torque(arm.chain(), &posture, &carried, &gravity, Some(&push));
        let going = Going::still(arm.len());
        let moving = moving_torque(arm.chain(), &posture, &carried, &gravity, Some(&push), &going);
        assert!(moving.zip(&still, |a, b| a - b).largest() < 1e-10 * (1.0 + still.largest()), "{moving:?} {still:?}");
    }
}

/// Kinetic and potential energy of arm, tool and load, J: from velocities of the masses' centres, which are differences of
/// positions, and turning rates from differences of axes. Newton-Euler has no part in it.
fn energy(arm: &Arm, carried: &Carried, gravity: &V3, q: &Joints, rates: &Joints) -> f64 {
    let step = 1e-5;
    let moved = |by: f64| Posture::at(arm.chain(), &q.zip(rates, |q, r| q + by * r));
    let (before, now, after) = (moved(-step), moved(0.0), moved(step));
    let body = |mass: f64, com: &V3, tensor: &M3, frame: fn(&Posture, usize) -> Pose, j: usize| {
        let [a, b, c] = [&before, &now, &after].map(|posture| frame(posture, j));
        let velocity = (c.point(com) - a.point(com)) / (2.0 * step);
        let spin = (c.axes - a.axes) / (2.0 * step) * b.axes.transpose();
        let turning = b.axes.transpose() * V3::new(spin[(2, 1)], spin[(0, 2)], spin[(1, 0)]);
        0.5 * mass * velocity.norm_squared() + 0.5 * turning.dot(&(tensor * turning)) - mass * gravity.dot(&b.point(com))
    };
    let chain = arm.chain();
    let links: f64 =
        (0..chain.len).map(|j| body(chain.mass[j], &chain.com[j], &chain.inertia[j], |posture, j| *posture.frame(j), j)).sum();
    let flange: fn(&Posture, usize) -> Pose = |posture, _| *posture.flange();
    links
        + body(carried.tool_mass, &carried.tool_com, &carried.tool_inertia, flange, 0)
        + body(carried.load_mass, &carried.load_com, &carried.load_inertia, flange, 0)
}

#[test]
fn power_in_is_energy_gained() {
    let mut draw = Draw(42);
    for k in 0..100 {
        let arm = random::arm(FAMILIES[k % 5], &mut draw);
        let q = random::posture(&arm, &mut draw);
        let (carried, gravity) = (carried(&mut draw), draw.direction() * 9.80665);
        let rates = Joints::from_fn(arm.len(), |_| draw.between(-2.0, 2.0));
        let accelerations = Joints::from_fn(arm.len(), |_| draw.between(-10.0, 10.0));
        let going = Going { rates, accelerations };
        let torque = moving_torque(arm.chain(), &Posture::at(arm.chain(), &q), &carried, &gravity, None, &going);
        let power: f64 = torque.iter().zip(rates.iter()).map(|(t, r)| t * r).sum();
        let at = |t: f64| {
            let q = Joints::from_fn(arm.len(), |j| q[j] + t * rates[j] + 0.5 * t * t * accelerations[j]);
            energy(&arm, &carried, &gravity, &q, &rates.zip(&accelerations, |r, a| r + t * a))
        };
        let gained = (at(1e-4) - at(-1e-4)) / 2e-4;
        assert!((power - gained).abs() < 1e-4 * (1.0 + power.abs()), "{k}: {power} {gained}");
    }
}

#[test]
fn a_load_square_to_a_wrist_axis_is_weighed_by_hand() {
    // The six-axis arm of the demonstration cell, wrist straight: J4 and J6 in line, J5 square to them, 95 mm before the flange.
    let arm = elbowroom::files::read_arm(include_str!("../recipes/arms/six-axis-12kg.toml"), "arm").expect("it reads");
    let posture = Posture::at(arm.chain(), &[0.0; 6]);
    let carried = Carried {
        tool_mass: 3.4,
        tool_com: V3::new(0.0, 0.0, 0.06),
        tool_inertia: M3::from_diagonal(&V3::new(0.012, 0.009, 0.008)),
        load_mass: 6.5,
        load_com: V3::new(0.02, 0.0, 0.15),
        load_inertia: M3::from_diagonal(&V3::new(0.035, 0.04, 0.03)),
        ..Carried::nothing()
    };
    // Common centre: x = 6.5 * 20 / 9.9 = 13.1313 mm, z = (3.4 * 60 + 6.5 * 150) / 9.9 = 119.0909 mm, 214.0909 mm from J5.
    let five = at_axis(&posture, &carried, 4);
    assert!((five.lever - 0.013_131_313f64.hypot(0.214_090_909)).abs() < 1e-8, "{five:?}");
    assert!((five.moment - 9.9 * 9.80665 * five.lever).abs() < 1e-12);
    // J5's axis is the flange's y: 0.009 + 3.4 * 0.155² + 0.04 + 6.5 * (0.245² + 0.02²).
    assert!((five.inertia - (0.009 + 3.4 * 0.024_025 + 0.04 + 6.5 * (0.060_025 + 0.0004))).abs() < 1e-9, "{five:?}");
    // J6's axis is the flange's z: only the load's 20 mm count, and the tensors' zz.
    let six = at_axis(&posture, &carried, 5);
    assert!((six.moment - 6.5 * 9.80665 * 0.02).abs() < 1e-9, "{six:?}");
    assert!((six.inertia - (0.008 + 0.03 + 6.5 * 0.0004)).abs() < 1e-12, "{six:?}");
}

/// A mass of 10 kg on an upright slide: up by 500 mm at 0.5 m/s and 2 m/s², half a second's rest, and down again.
fn hoist(friction: &str) -> elbowroom::review::Judged {
    hoist_with(friction, "")
}

fn hoist_with(friction: &str, more: &str) -> elbowroom::review::Judged {
    let arm = format!(
        r#"
elbowroom-arm = 1
name = "Hoist"
task = "z"
[[joint]]
name = "slide"
kind = "prismatic"
place = {{ xyz = [0, 0, 0] }}
axis = [0, 0, 1]
range = [-100, 600]
rate = 500
accel = 2000
torque = {{ holding = 200, peak = 200 }}
rotor = {{ inertia = 0 }}
friction = {friction}
{more}
link = {{ mass = 10, com = [0, 0, 0], inertia = [0, 0, 0, 0, 0, 0] }}
"#
    );
    let recipe = r#"
elbowroom-recipe = 1
name = "Hoist"
arm = "hoist.toml"
[[waypoint]]
name = "low"
joints = [0]
[[waypoint]]
name = "high"
joints = [500]
arrive = "joint"
share = 100
dwell = 0.5
[[waypoint]]
name = "low again"
joints = [0]
arrive = "joint"
share = 100
"#;
    let arm = elbowroom::files::read_arm(&arm, "hoist.toml").expect("it reads");
    let recipe = elbowroom::files::read_recipe(recipe, "recipe.toml", &arm).expect("it reads");
    random::judged(arm, recipe)
}

#[test]
fn the_root_mean_square_of_three_levels_is_summed_by_hand() {
    // Ramps of 0.25 s at m (g + a) and m (g - a), twice each; 0.75 s even running twice and 0.5 s rest at m g: 3 s in all, and
    // the squares sum up to m² (3 g² + a²).
    let judged = hoist("{ steady = 0, viscous = 0 }");
    let (g, a, m) = (9.80665f64, 2.0f64, 10.0);
    let cycle = &judged.survey.cycle;
    assert!((cycle.duration - 3.0).abs() < 1e-12);
    assert!((cycle.rms_of(0) - m * (g * g + a * a / 3.0).sqrt()).abs() < 1e-9, "{}", cycle.rms_of(0));
    assert!((cycle.shares[0].dwells - 0.5 * (m * g).powi(2)).abs() < 1e-9);
    // The most in motion is m (g + a), exactly, and proved.
    let moving = judged.survey.segments[0].check(elbowroom::checks::Check::Moving);
    assert!((moving.peaks[0].demand.si - m * (g + a)).abs() < 1e-9, "{moving:?}");
    let elbowroom::checks::Proof::Proved(room) = moving.proof else { panic!("{moving:?}") };
    assert!((room.as_fraction() - (1.0 - m * (g + a) / 200.0)).abs() < 1e-6, "{room:?}");
}

#[test]
fn friction_counts_on_the_way_up_and_not_on_the_way_down() {
    // 5 N steady and 8 N per m/s, so 9 N at 0.5 m/s: it comes on top going up, and would help going down.
    let judged = hoist("{ steady = 5, viscous = 0.008 }");
    let most = |k: usize| judged.survey.segments[k].check(elbowroom::checks::Check::Moving).peaks[0].demand.si;
    assert!((most(0) - (10.0 * 11.80665 + 9.0)).abs() < 1e-9, "{}", most(0));
    assert!((most(1) - 10.0 * 11.80665).abs() < 1e-9, "{}", most(1));
}

#[test]
fn a_balancer_takes_its_part_off_holding_motion_and_brake() {
    use elbowroom::checks::Check;
    // It lifts with 120 N at the low end of the range and 50 N at the high one: 110 N at 0 mm and 60 N at 500 mm.
    let judged = hoist_with("{ steady = 0, viscous = 0 }", "balancer = [[-100, 120], [600, 50]]\nbrake = 100");
    let weight: f64 = 98.0665;
    let up = &judged.survey.segments[0];
    for check in [Check::Holding, Check::Brake] {
        let demand = up.check(check).peaks[0].demand.si;
        assert!((demand - (weight - 60.0)).abs() < 1e-9, "{check:?} {demand}");
        let elbowroom::checks::Proof::Proved(_) = up.check(check).proof else { panic!("{check:?}: {:?}", up.check(check)) };
    }
    // Going down the most is asked where the ramp has ended, at 437.5 mm: m g less 66.25 N.
    let moving = judged.survey.segments[1].check(Check::Moving).peaks[0].demand.si;
    assert!((moving - (weight - 66.25)).abs() < 1e-9, "{moving}");
}
