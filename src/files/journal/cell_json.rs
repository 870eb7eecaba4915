use serde::{Deserialize, Serialize};

use crate::arm::{Body, Grounds};
use crate::geometry::{M3, Pose, V3};
use crate::program::{Acceptance, Frame, Load, Repeat, Stages, Tool, ToolPoint, Usual};
use crate::units::{Acceleration, Angle, Jerk, Length, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

/// A pose: axes column by column, origin in m. Kept as it is, so that nothing is rounded.
#[derive(Serialize, Deserialize)]
pub(super) struct PoseJson {
    axes: [[f64; 3]; 3],
    at: [f64; 3],
}

impl From<&Pose> for PoseJson {
    fn from(pose: &Pose) -> Self {
        Self { axes: pose.axes.data.0, at: pose.at.into() }
    }
}

impl From<PoseJson> for Pose {
    fn from(pose: PoseJson) -> Self {
        Self { axes: M3::from_array_storage(nalgebra::ArrayStorage(pose.axes)), at: V3::from(pose.at) }
    }
}

#[derive(Serialize, Deserialize)]
pub(super) struct BodyJson {
    mass: f64,
    com: [f64; 3],
    inertia: Option<[[f64; 3]; 3]>,
    grounds: String,
}

impl From<&Body> for BodyJson {
    fn from(body: &Body) -> Self {
        let grounds = match body.grounds {
            Grounds::Sheet => "sheet",
            Grounds::Weighed => "weighed",
            Grounds::Guess => "guess",
        };
        Self { mass: body.mass, com: body.com.into(), inertia: body.inertia.map(|m| m.data.0), grounds: grounds.to_owned() }
    }
}

impl From<BodyJson> for Body {
    fn from(body: BodyJson) -> Self {
        Self {
            mass: body.mass,
            com: V3::from(body.com),
            inertia: body.inertia.map(|m| M3::from_array_storage(nalgebra::ArrayStorage(m))),
            grounds: match body.grounds.as_str() {
                "sheet" => Grounds::Sheet,
                "weighed" => Grounds::Weighed,
                // An unknown word never makes figures surer than they are.
                _ => Grounds::Guess,
            },
        }
    }
}

#[derive(Serialize, Deserialize)]
pub(super) struct ToolJson {
    name: String,
    tcp: PoseJson,
    body: Option<BodyJson>,
    points: Vec<(String, [f64; 3])>,
    turns_freely: bool,
}

impl From<&Tool> for ToolJson {
    fn from(tool: &Tool) -> Self {
        let points = tool.points.iter().map(|point| (point.name.clone(), point.at.into())).collect();
        Self {
            name: tool.name.clone(),
            tcp: (&tool.tcp).into(),
            body: tool.body.as_ref().map(BodyJson::from),
            points,
            turns_freely: tool.turns_freely,
        }
    }
}

impl From<ToolJson> for Tool {
    fn from(tool: ToolJson) -> Self {
        let points = tool.points.into_iter().map(|(name, at)| ToolPoint { name, at: V3::from(at) }).collect();
        Self { name: tool.name, tcp: tool.tcp.into(), body: tool.body.map(Body::from), points, turns_freely: tool.turns_freely }
    }
}

#[derive(Serialize, Deserialize)]
pub(super) struct LoadJson {
    name: String,
    body: BodyJson,
}

impl From<&Load> for LoadJson {
    fn from(load: &Load) -> Self {
        Self { name: load.name.clone(), body: (&load.body).into() }
    }
}

impl From<LoadJson> for Load {
    fn from(load: LoadJson) -> Self {
        Self { name: load.name, body: load.body.into() }
    }
}

#[derive(Serialize, Deserialize)]
pub(super) struct FrameJson {
    name: String,
    pose: PoseJson,
    parent: String,
}

impl From<&Frame> for FrameJson {
    fn from(frame: &Frame) -> Self {
        Self { name: frame.name.clone(), pose: (&frame.pose).into(), parent: frame.parent.clone() }
    }
}

impl From<FrameJson> for Frame {
    fn from(frame: FrameJson) -> Self {
        Self { name: frame.name, pose: frame.pose.into(), parent: frame.parent }
    }
}

/// Acceptance criteria in SI and fractions.
#[derive(Serialize, Deserialize)]
pub(super) struct AcceptanceJson {
    reserves: [f64; 6],
    range_least: f64,
    slide_least: f64,
    singular_least: f64,
    tool_speed_left: f64,
    tcp_speed: Option<f64>,
    #[serde(default)]
    point_speed: Option<f64>,
    wind_up: Option<f64>,
    stages: Vec<f64>,
}

impl From<&Acceptance> for AcceptanceJson {
    fn from(a: &Acceptance) -> Self {
        let reserves = [a.rate_reserve, a.accel_reserve, a.holding_reserve, a.moving_reserve, a.brake_reserve, a.rms_reserve];
        Self {
            reserves: reserves.map(Share::as_fraction),
            range_least: a.range_least.as_rad(),
            slide_least: a.slide_least.as_m(),
            singular_least: a.singular_least,
            tool_speed_left: a.tool_speed_left.as_m_per_s(),
            tcp_speed: a.tcp_speed.map(Speed::as_m_per_s),
            point_speed: a.point_speed.map(Speed::as_m_per_s),
            wind_up: a.wind_up.map(Angle::as_rad),
            stages: a.stages.shares().iter().map(|share| share.as_fraction()).collect(),
        }
    }
}

impl From<AcceptanceJson> for Acceptance {
    fn from(a: AcceptanceJson) -> Self {
        let [rate_reserve, accel_reserve, holding_reserve, moving_reserve, brake_reserve, rms_reserve] =
            a.reserves.map(Share::fraction);
        let stages: Vec<Share> = a.stages.into_iter().map(Share::fraction).collect();
        Self {
            rate_reserve,
            accel_reserve,
            holding_reserve,
            moving_reserve,
            brake_reserve,
            rms_reserve,
            range_least: Angle::rad(a.range_least),
            slide_least: Length::m(a.slide_least),
            singular_least: a.singular_least,
            tool_speed_left: Speed::m_per_s(a.tool_speed_left),
            tcp_speed: a.tcp_speed.map(Speed::m_per_s),
            point_speed: a.point_speed.map(Speed::m_per_s),
            wind_up: a.wind_up.map(Angle::rad),
            stages: Stages::of(&stages).unwrap_or_default(),
        }
    }
}

/// What segments use where they say nothing, in SI and fractions.
#[derive(Serialize, Deserialize)]
pub(super) struct UsualJson {
    speed: Option<f64>,
    accel: f64,
    turn_speed: f64,
    turn_accel: f64,
    jerk: Option<f64>,
    turn_jerk: Option<f64>,
    share: Option<f64>,
    accel_share: f64,
}

impl From<&Usual> for UsualJson {
    fn from(u: &Usual) -> Self {
        Self {
            speed: u.speed.map(Speed::as_m_per_s),
            accel: u.accel.as_m_per_s2(),
            turn_speed: u.turn_speed.as_rad_per_s(),
            turn_accel: u.turn_accel.as_rad_per_s2(),
            jerk: u.jerk.map(Jerk::as_m_per_s3),
            turn_jerk: u.turn_jerk.map(TurnJerk::as_rad_per_s3),
            share: u.share.map(Share::as_fraction),
            accel_share: u.accel_share.as_fraction(),
        }
    }
}

impl From<UsualJson> for Usual {
    fn from(u: UsualJson) -> Self {
        Self {
            speed: u.speed.map(Speed::m_per_s),
            accel: Acceleration::m_per_s2(u.accel),
            turn_speed: TurnRate::rad_per_s(u.turn_speed),
            turn_accel: TurnAcceleration::rad_per_s2(u.turn_accel),
            jerk: u.jerk.map(Jerk::m_per_s3),
            turn_jerk: u.turn_jerk.map(TurnJerk::rad_per_s3),
            share: u.share.map(Share::fraction),
            accel_share: Share::fraction(u.accel_share),
        }
    }
}

/// Whether a recipe starts again.
pub(super) fn starts_again(repeat: Repeat) -> bool {
    repeat == Repeat::Start
}
