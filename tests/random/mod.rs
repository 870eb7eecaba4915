//! Arms and segments drawn from a fixed sequence, so that every run tests the same ones.

use std::sync::Arc;

use elbowroom::arm::{
    Arm, ArmData, Body, Convention, Curve, Drive, Flange, Friction, Grounds, Joint, JointKind, Joints, Placement, Range, Rotor,
    Task, TaskRow, TorqueRating, WristLimit,
};
use elbowroom::geometry::{Pose, Rotation, V3};
use elbowroom::kinematics::Posture;
use elbowroom::program::{
    Acceptance, Arrive, Given, PathSpeed, Push, PushAxes, Recipe, Repeat, Taught, Tool, ToolPoint, Usual, Waypoint,
};
use elbowroom::units::{Acceleration, Seconds, Share, Speed, TurnAcceleration, TurnRate};

/// SplitMix64: small, well mixed, and the same everywhere.
pub struct Draw(pub u64);

impl Draw {
    pub fn bits(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        z ^ (z >> 31)
    }

    pub fn unit(&mut self) -> f64 {
        (self.bits() >> 11) as f64 / (1u64 << 53) as f64
    }

    pub fn between(&mut self, low: f64, high: f64) -> f64 {
        low + (high - low) * self.unit()
    }

    pub fn direction(&mut self) -> V3 {
        loop {
            let v = V3::new(self.between(-1.0, 1.0), self.between(-1.0, 1.0), self.between(-1.0, 1.0));
            if v.norm() > 0.1 && v.norm() < 1.0 {
                return v.normalize();
            }
        }
    }
}

/// What kind of arm.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Family {
    /// Six turning joints, the last three axes meeting in a point.
    SphericalWrist,
    /// Six turning joints, the wrist axes apart.
    OffsetWrist,
    /// Seven turning joints.
    Seven,
    /// Three turning joints in a plane and a slide square to it, task x y z turn-z.
    FourSlide,
    /// Turn, turn, slide, task x y z.
    ThreeSlide,
}

fn turning(name: usize, a: f64, alpha: f64, d: f64, theta: f64) -> Joint {
    Joint {
        name: format!("J{}", name + 1),
        kind: JointKind::Revolute,
        placement: Placement::Dh { convention: Convention::Classical, a, alpha_deg: alpha, d, theta_deg: theta },
        range: Range { low: -3.3, high: 3.3 },
        rate: 3.0 + name as f64 * 0.5,
        accel: 12.0 + name as f64 * 6.0,
        jerk: None,
        torque: None,
        brake: None,
        drive: Drive::default(),
        stop: None,
        link: None,
    }
}

/// An arm of a family with drawn measures, masses and ratings.
pub fn arm(family: Family, draw: &mut Draw) -> Arm {
    let mut m = |low: f64, high: f64| draw.between(low, high);
    let (mut joints, task) = match family {
        Family::SphericalWrist | Family::OffsetWrist => {
            let off = if family == Family::OffsetWrist { 1.0 } else { 0.0 };
            let joints = vec![
                turning(0, m(0.0, 0.2), -90.0, m(0.3, 0.5), 0.0),
                turning(1, m(0.4, 0.7), 0.0, off * m(0.0, 0.1), -90.0),
                turning(2, m(0.0, 0.15), -90.0, 0.0, 0.0),
                turning(3, 0.0, 90.0, m(0.4, 0.7), 0.0),
                turning(4, 0.0, -90.0, off * m(0.05, 0.15), 0.0),
                turning(5, 0.0, 0.0, m(0.05, 0.15), 0.0),
            ];
            (joints, None)
        }
        Family::Seven => {
            let twist = [-90.0, 90.0, 90.0, -90.0, -90.0, 90.0, 0.0];
            let length = [m(0.3, 0.4), 0.0, m(0.3, 0.5), 0.0, m(0.3, 0.5), 0.0, m(0.1, 0.2)];
            ((0..7).map(|j| turning(j, 0.0, twist[j], length[j], 0.0)).collect(), None)
        }
        Family::FourSlide => {
            let mut slide = turning(3, 0.0, 0.0, 0.0, 0.0);
            slide.kind = JointKind::Prismatic;
            slide.range = Range { low: -0.4, high: 0.4 };
            (slide.rate, slide.accel) = (1.2, 9.0);
            let joints = vec![
                turning(0, m(0.3, 0.5), 0.0, m(0.2, 0.4), 0.0),
                turning(1, m(0.2, 0.4), 0.0, 0.0, 0.0),
                turning(2, 0.0, 0.0, 0.0, 0.0),
                slide,
            ];
            (joints, Task::of(&[TaskRow::X, TaskRow::Y, TaskRow::Z, TaskRow::TurnZ]))
        }
        Family::ThreeSlide => {
            let mut slide = turning(2, 0.0, 0.0, 0.0, 0.0);
            slide.kind = JointKind::Prismatic;
            slide.range = Range { low: 0.2, high: 1.2 };
            (slide.rate, slide.accel) = (1.2, 9.0);
            let joints = vec![turning(0, 0.0, -90.0, m(0.3, 0.5), 0.0), turning(1, 0.0, 90.0, m(0.1, 0.2), 0.0), slide];
            (joints, Task::of(&[TaskRow::X, TaskRow::Y, TaskRow::Z]))
        }
    };
    let mut mass = 30.0;
    for joint in &mut joints {
        mass *= draw.between(0.4, 0.8);
        let com = V3::new(draw.between(-0.2, 0.0), draw.between(-0.1, 0.1), draw.between(-0.1, 0.1));
        joint.link = Some(Body { mass, com, inertia: Some(tensor(mass * 0.03, draw)), grounds: Grounds::Sheet });
        let holding = mass * 15.0 + 60.0;
        // A slide moves all its mass, not the square of a lever.
        let most = if joint.kind == JointKind::Prismatic { 5.0 * holding } else { 3.0 * holding };
        let falling = [[0.0, most], [0.4 * joint.rate, most], [joint.rate, 0.7 * most], [2.0 * joint.rate, 0.6 * most]];
        let peak = if draw.unit() < 0.5 { Curve::level(most) } else { Curve::through(&falling).expect("in order") };
        joint.torque = Some(TorqueRating { holding, peak: Some(peak), grounds: Grounds::Sheet });
        joint.brake = Some(1.2 * holding);
        let rotor = Rotor { inertia: 0.1 * mass * draw.unit(), grounds: Grounds::Sheet };
        let friction =
            Friction { steady: 0.05 * holding * draw.unit(), viscous: 0.02 * holding * draw.unit(), grounds: Grounds::Sheet };
        joint.drive = Drive { rotor: Some(rotor), friction: Some(friction), balancer: None };
        if draw.unit() < 0.3 {
            let pull = 0.2 * holding * draw.between(-1.0, 1.0);
            let points = [[-4.0, -pull], [-0.5, 0.3 * pull], [0.3, 0.4 * pull], [4.0, pull]];
            joint.drive.balancer = Curve::through(&points);
        }
    }
    let last = joints.len() - 1;
    // Of an arm with slides the last axes are far from the flange.
    let far = if matches!(family, Family::FourSlide | Family::ThreeSlide) { 4.0 } else { 1.0 };
    let limit = |joint: usize| WristLimit { joint, moment: 32.0 * far, inertia: Some(0.9 * far * far) };
    let flange = Flange { rated_load: Some(12.0), wrist: vec![limit(last), limit(last - 1), limit(last - 2)] };
    let name = format!("{family:?}");
    Arm::build(ArmData { name, joints, flange, characteristic_length: Some(0.5), task }).expect("a sound arm")
}

/// An inertia tensor of a body about as large as `size`, kg·m², its principal axes turned anyhow.
fn tensor(size: f64, draw: &mut Draw) -> elbowroom::geometry::M3 {
    let [a, b] = [draw.between(0.3, 1.0), draw.between(0.3, 1.0)];
    let axes = elbowroom::geometry::turn_about(&draw.direction(), draw.between(0.0, 3.0));
    let moments = [a, b, draw.between((a - b).abs(), a + b)].map(|moment| size * moment);
    axes * elbowroom::geometry::M3::from_diagonal(&V3::from(moments)) * axes.transpose()
}

/// The same arm with a limit of jerk: so many times each joint's acceleration a second.
#[allow(dead_code, reason = "not every test that draws arms limits jerk")]
pub fn with_jerk(arm: &Arm, times: f64) -> Arm {
    let joints = arm.joints().iter().map(|joint| Joint { jerk: Some(joint.accel * times), ..joint.clone() }).collect();
    let task = (!arm.task().is_whole()).then(|| *arm.task());
    let data = ArmData { name: arm.name().to_owned(), joints, flange: Flange::default(), characteristic_length: Some(0.5), task };
    Arm::build(data).expect("a sound arm")
}

/// A posture well inside the ranges.
pub fn posture(arm: &Arm, draw: &mut Draw) -> Joints {
    Joints::from_fn(arm.len(), |j| {
        let range = arm.joints()[j].range;
        range.middle() + range.half().min(2.0) * draw.between(-0.8, 0.8)
    })
}

/// A waypoint and how to arrive there.
pub fn waypoint(name: &str, taught: Taught, arrive: Option<Arrive>) -> Waypoint {
    Waypoint {
        name: name.to_owned(),
        taught,
        shown: None,
        arrive,
        tool: None,
        fly_by: None,
        dwell: Seconds::s(0.0),
        then: None,
        push: None,
    }
}

/// A line from a drawn posture to a drawn pose nearby, or a joint move to a drawn posture.
#[allow(dead_code, reason = "not every test that draws arms draws single segments")]
pub fn segment(arm: &Arm, line: bool, draw: &mut Draw) -> Recipe {
    let start = posture(arm, draw);
    let last = if line {
        let from = Posture::at(arm.chain(), &start).tcp(&Pose::identity());
        let angle = if arm.task().is_whole() { draw.between(0.0, 0.8) } else { 0.0 };
        let turn = elbowroom::geometry::turn_about(&draw.direction(), angle);
        let at = from.at + draw.direction() * draw.between(0.05, 0.5);
        let rotation = arm.task().turns().then(|| Rotation::from_matrix(&(turn * from.axes)));
        let pose = Given { at, rotation, frame: None };
        let speed = PathSpeed { speed: Some(Speed::m_per_s(draw.between(0.05, 0.6))), ..PathSpeed::default() };
        waypoint("end", Taught::Pose { pose, near: None }, Some(Arrive::Line(speed)))
    } else {
        let share = Share::fraction(draw.between(0.2, 1.0));
        waypoint("end", Taught::Joints(posture(arm, draw)), Some(Arrive::Joint { share: Some(share), accel_share: None }))
    };
    let mut recipe = recipe(vec![waypoint("start", Taught::Joints(start), None), last]);
    if draw.unit() < 0.4 {
        let axes = if draw.unit() < 0.5 { PushAxes::Tool } else { PushAxes::Frame("base".to_owned()) };
        let force = draw.direction() * draw.between(5.0, 40.0);
        recipe.waypoints[1].push = Some(Push { force, torque: draw.direction() * draw.between(0.0, 4.0), axes });
    }
    let com = V3::new(draw.between(-0.1, 0.1), draw.between(-0.1, 0.1), draw.between(0.0, 0.15));
    let body = Body { mass: draw.between(0.5, 6.0), com, inertia: Some(tensor(0.05, draw)), grounds: Grounds::Sheet };
    let far_end = ToolPoint { name: "far end".to_owned(), at: V3::new(0.12, -0.07, 0.21) };
    recipe.tools =
        vec![Tool { name: "tool".to_owned(), tcp: Pose::identity(), body: Some(body), points: vec![far_end], turns_freely: false }];
    recipe
}

/// A recipe of these waypoints with criteria that leave most of them clear.
pub fn recipe(waypoints: Vec<Waypoint>) -> Recipe {
    Recipe {
        name: "drawn".to_owned(),
        arm: String::new(),
        mount: Pose::new(V3::zeros(), Rotation::from_rpy(0.1, 0.2, 0.0)),
        acceptance: Acceptance {
            tcp_speed: Some(Speed::m_per_s(6.0)),
            point_speed: Some(Speed::m_per_s(7.0)),
            ..Acceptance::default()
        },
        usual: Usual {
            speed: None,
            accel: Acceleration::m_per_s2(2.0),
            turn_speed: TurnRate::deg_per_s(90.0),
            turn_accel: TurnAcceleration::deg_per_s2(360.0),
            jerk: None,
            turn_jerk: None,
            share: None,
            accel_share: Share::fraction(0.8),
        },
        tools: vec![],
        loads: vec![],
        frames: vec![],
        repeat: Repeat::Start,
        carrying: None,
        waypoints,
    }
}

/// The recipe judged.
pub fn judged(arm: Arm, recipe: Recipe) -> elbowroom::review::Judged {
    elbowroom::review::Judged::of(&Arc::new(arm), &Arc::new(recipe), None, &elbowroom::checks::Watch::default())
        .expect("not stopped")
}
