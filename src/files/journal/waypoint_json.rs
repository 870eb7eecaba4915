use serde::{Deserialize, Serialize};

use crate::arm::{Joints, MAX_JOINTS};
use crate::geometry::{Rotation, V3};
use crate::program::{Arrive, Given, PathSpeed, Push, PushAxes, Taught, Then, Waypoint};
use crate::units::{Acceleration, Jerk, Length, Seconds, Share, Speed, TurnAcceleration, TurnJerk, TurnRate};

/// A pose as a waypoint gives it: m, and the elements w, x, y, z as they are kept, so that nothing is rounded.
#[derive(Serialize, Deserialize)]
pub(super) struct GivenJson {
    at: [f64; 3],
    turn: Option<[f64; 4]>,
    frame: Option<String>,
}

impl From<&Given> for GivenJson {
    fn from(given: &Given) -> Self {
        Self { at: given.at.into(), turn: given.rotation.map(Rotation::kept), frame: given.frame.clone() }
    }
}

/// What no journal of ours holds.
pub(super) struct NotOurs;

impl TryFrom<GivenJson> for Given {
    type Error = NotOurs;
    fn try_from(given: GivenJson) -> Result<Self, NotOurs> {
        let rotation = given.turn.map(|turn| Rotation::from_kept(turn).ok_or(NotOurs)).transpose()?;
        Ok(Self { at: V3::from(given.at), rotation, frame: given.frame })
    }
}

#[derive(Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
enum TaughtJson {
    Joints(Vec<f64>),
    Pose { pose: GivenJson, near: Option<String> },
}

/// Speeds along a path in SI: speed, accel, turn-speed, turn-accel, jerk, turn-jerk.
type PathJson = [Option<f64>; 6];

#[derive(Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
enum ArriveJson {
    Joint { share: Option<f64>, accel_share: Option<f64> },
    Line(PathJson),
    Arc { via: GivenJson, speed: PathJson },
}

fn path_json(speed: &PathSpeed) -> PathJson {
    [
        speed.speed.map(Speed::as_m_per_s),
        speed.accel.map(Acceleration::as_m_per_s2),
        speed.turn_speed.map(TurnRate::as_rad_per_s),
        speed.turn_accel.map(TurnAcceleration::as_rad_per_s2),
        speed.jerk.map(Jerk::as_m_per_s3),
        speed.turn_jerk.map(TurnJerk::as_rad_per_s3),
    ]
}

fn path([speed, accel, turn_speed, turn_accel, jerk, turn_jerk]: PathJson) -> PathSpeed {
    PathSpeed {
        speed: speed.map(Speed::m_per_s),
        accel: accel.map(Acceleration::m_per_s2),
        turn_speed: turn_speed.map(TurnRate::rad_per_s),
        turn_accel: turn_accel.map(TurnAcceleration::rad_per_s2),
        jerk: jerk.map(Jerk::m_per_s3),
        turn_jerk: turn_jerk.map(TurnJerk::rad_per_s3),
    }
}

#[derive(Serialize, Deserialize)]
struct PushJson {
    force: [f64; 3],
    torque: [f64; 3],
    /// `None` for the tool's own axes.
    frame: Option<String>,
}

#[derive(Serialize, Deserialize)]
pub(super) struct WaypointJson {
    name: String,
    taught: TaughtJson,
    shown: Option<GivenJson>,
    arrive: Option<ArriveJson>,
    tool: Option<String>,
    fly_by: Option<f64>,
    dwell: f64,
    /// The load that is taken.
    takes: Option<String>,
    releases: bool,
    push: Option<PushJson>,
}

impl From<&Waypoint> for WaypointJson {
    fn from(w: &Waypoint) -> Self {
        Self {
            name: w.name.clone(),
            taught: match &w.taught {
                Taught::Joints(values) => TaughtJson::Joints(values.to_vec()),
                Taught::Pose { pose, near } => TaughtJson::Pose { pose: pose.into(), near: near.clone() },
            },
            shown: w.shown.as_ref().map(GivenJson::from),
            arrive: w.arrive.as_ref().map(|arrive| match arrive {
                Arrive::Joint { share, accel_share } => {
                    ArriveJson::Joint { share: share.map(Share::as_fraction), accel_share: accel_share.map(Share::as_fraction) }
                }
                Arrive::Line(speed) => ArriveJson::Line(path_json(speed)),
                Arrive::Arc { via, speed } => ArriveJson::Arc { via: via.into(), speed: path_json(speed) },
            }),
            tool: w.tool.clone(),
            fly_by: w.fly_by.map(Length::as_m),
            dwell: w.dwell.as_s(),
            takes: match &w.then {
                Some(Then::Take(load)) => Some(load.clone()),
                _ => None,
            },
            push: w.push.as_ref().map(|push| PushJson {
                force: push.force.into(),
                torque: push.torque.into(),
                frame: match &push.axes {
                    PushAxes::Tool => None,
                    PushAxes::Frame(name) => Some(name.clone()),
                },
            }),
            releases: w.then == Some(Then::Release),
        }
    }
}

impl TryFrom<WaypointJson> for Waypoint {
    type Error = NotOurs;
    fn try_from(w: WaypointJson) -> Result<Self, NotOurs> {
        Ok(Self {
            name: w.name,
            taught: match w.taught {
                TaughtJson::Joints(values) if values.len() > MAX_JOINTS => return Err(NotOurs),
                TaughtJson::Joints(values) => Taught::Joints(Joints::from_slice(&values)),
                TaughtJson::Pose { pose, near } => Taught::Pose { pose: pose.try_into()?, near },
            },
            shown: w.shown.map(Given::try_from).transpose()?,
            arrive: match w.arrive {
                None => None,
                Some(ArriveJson::Joint { share, accel_share }) => {
                    Some(Arrive::Joint { share: share.map(Share::fraction), accel_share: accel_share.map(Share::fraction) })
                }
                Some(ArriveJson::Line(speed)) => Some(Arrive::Line(path(speed))),
                Some(ArriveJson::Arc { via, speed }) => Some(Arrive::Arc { via: via.try_into()?, speed: path(speed) }),
            },
            tool: w.tool,
            fly_by: w.fly_by.map(Length::m),
            dwell: Seconds::s(w.dwell),
            then: match (w.takes, w.releases) {
                (Some(load), _) => Some(Then::Take(load)),
                (None, true) => Some(Then::Release),
                (None, false) => None,
            },
            push: w.push.map(|push| Push {
                force: V3::from(push.force),
                torque: V3::from(push.torque),
                axes: push.frame.map_or(PushAxes::Tool, PushAxes::Frame),
            }),
        })
    }
}
