use std::collections::HashSet;

use crate::geometry::V3;
use crate::units::{Dimension, Fault, Field, Measure, tidy};

use super::{Braking, Chain, Flange, Joint, JointKind, MAX_JOINTS, Placement, Task};

/// The data of an arm as somebody wrote them, SI, not yet checked.
#[derive(Debug, Clone, PartialEq)]
pub struct ArmData {
    /// Its name.
    pub name: String,
    /// Its joints from the base outwards.
    pub joints: Vec<Joint>,
    /// Its mechanical interface.
    pub flange: Flange,
    /// Characteristic length, m, if stated.
    pub characteristic_length: Option<f64>,
    /// The rows that lines and arcs are followed in, if stated.
    pub task: Option<Task>,
}

/// The length that translations are divided by before singular values are taken, since metres and radians do not mix.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct CharacteristicLength {
    /// The length, m.
    pub m: f64,
    /// Whether the arm file states it; otherwise it is the root mean square lever of the flange about the revolute axes at
    /// mid-range.
    pub stated: bool,
}

/// An arm whose data hold together. It never changes.
#[derive(Debug, Clone)]
pub struct Arm {
    data: ArmData,
    chain: Chain,
    length: CharacteristicLength,
    task: Task,
}

impl Arm {
    /// Builds the arm, or tells every fault of its data. Fields are named as an arm file names them.
    pub fn build(data: ArmData) -> Result<Self, Vec<Fault>> {
        let faults = faults_of(&data);
        if !faults.is_empty() {
            return Err(faults);
        }
        let chain = Chain::of(&data.joints);
        let length = match data.characteristic_length {
            Some(m) => CharacteristicLength { m, stated: true },
            None => CharacteristicLength { m: mean_lever(&chain, &data.joints), stated: false },
        };
        let task = data.task.unwrap_or(Task::ALL);
        Ok(Self { data, chain, length, task })
    }

    /// Its name.
    pub fn name(&self) -> &str {
        &self.data.name
    }

    /// The data it was built from.
    pub fn data(&self) -> &ArmData {
        &self.data
    }

    /// Its joints from the base outwards.
    pub fn joints(&self) -> &[Joint] {
        &self.data.joints
    }

    /// How many joints it has.
    pub fn len(&self) -> usize {
        self.data.joints.len()
    }

    /// Never: an arm has at least one joint.
    pub fn is_empty(&self) -> bool {
        self.data.joints.is_empty()
    }

    /// Its geometry in computing form.
    pub fn chain(&self) -> &Chain {
        &self.chain
    }

    /// Its mechanical interface.
    pub fn flange(&self) -> &Flange {
        &self.data.flange
    }

    /// Its characteristic length.
    pub fn characteristic_length(&self) -> CharacteristicLength {
        self.length
    }

    /// The rows that its lines and arcs are followed in.
    pub fn task(&self) -> &Task {
        &self.task
    }

    /// Whether it has more joints than its task has rows.
    pub fn is_redundant(&self) -> bool {
        self.len() > self.task.rows().len()
    }

    /// Whether every link's mass and inertia from joint `from` on outwards are given: what its torque in motion depends on.
    pub fn has_inertias(&self, from: usize) -> bool {
        self.joints()[from..].iter().all(|joint| joint.link.is_some_and(|link| link.inertia.is_some()))
    }

    /// Whether every link's mass is given.
    pub fn has_masses(&self) -> bool {
        self.joints().iter().all(|joint| joint.link.is_some())
    }
}

/// Half a millimetre: a characteristic length below it is a mistake of units.
const LEAST_LENGTH: f64 = 5e-4;

/// How far a joint axis may be from unit length, as people type 0.707.
const AXIS_SLACK: f64 = 1e-2;

fn faults_of(data: &ArmData) -> Vec<Fault> {
    let mut faults = Vec::new();
    let top = Field::top();
    let n = data.joints.len();
    if n == 0 || n > MAX_JOINTS {
        faults.push(Fault::new(top.key("joint"), format!("the arm has {n} joints; it must have 1 to {MAX_JOINTS}")));
    }
    if let Some(m) = data.characteristic_length
        && !(m.is_finite() && m >= LEAST_LENGTH)
    {
        faults.push(Fault::new(
            top.key("characteristic-length"),
            format!("characteristic-length is {} mm; it must be at least {} mm", tidy(m * 1000.0), LEAST_LENGTH * 1000.0),
        ));
    }
    match &data.task {
        None if (1..6).contains(&n) => faults.push(Fault::new(
            top.key("task"),
            format!(
                "an arm of {n} joints can't follow a path in all six directions; say which it follows, such as task = \"x y z\""
            ),
        )),
        Some(task) if task.rows().len() > n => faults.push(Fault::new(
            top.key("task"),
            format!("task names {} directions; {n} joints can follow at most {n}", task.rows().len()),
        )),
        _ => {}
    }
    let mut names = HashSet::new();
    for (index, joint) in data.joints.iter().enumerate() {
        let field = top.key("joint").item(index);
        if joint.name.trim().is_empty() {
            faults.push(Fault::new(field.key("name"), format!("joint {}: name is empty", index + 1)));
        } else if !names.insert(joint.name.as_str()) {
            faults.push(Fault::new(field.key("name"), format!("joint {}: name \"{}\" is taken already", index + 1, joint.name)));
        }
        faults.extend(joint_faults(joint, &field));
    }
    faults.extend(flange_faults(data));
    faults
}

fn joint_faults(joint: &Joint, field: &Field) -> Vec<Fault> {
    let thing = format!("joint {}", joint.name);
    let kind = joint.kind;
    let mut faults = Vec::new();
    let mut above_zero = |field: Field, what: &str, value: f64, of: Dimension| {
        if !(value.is_finite() && value > 0.0) {
            let shown = tidy(Measure::si(value, of).shown());
            let unit = match of {
                Dimension::TurnRate => "deg/s",
                Dimension::TurnAcceleration => "deg/s²",
                Dimension::TurnJerk => "deg/s³",
                other => other.sign(),
            };
            faults.push(Fault::new(field, format!("{thing}: {what} is {shown} {unit}; it must be above 0")));
        }
    };
    above_zero(field.key("rate"), "rate", joint.rate, kind.rate());
    above_zero(field.key("accel"), "accel", joint.accel, kind.acceleration());
    if let Some(jerk) = joint.jerk {
        above_zero(field.key("jerk"), "jerk", jerk, kind.jerk());
    }
    if let Some(torque) = &joint.torque {
        above_zero(field.key("torque").key("holding"), "holding", torque.holding, kind.effort());
    }
    if let Some(brake) = joint.brake {
        above_zero(field.key("brake"), "brake", brake, kind.effort());
    }
    if let Some(stop) = joint.stop {
        let field = field.key("stop");
        match stop.braking {
            Braking::Decel(decel) => above_zero(field.key("decel"), "decel", decel, kind.acceleration()),
            Braking::FromFullRate(time) => above_zero(field.key("time"), "time", time, Dimension::Time),
        }
        if !(stop.reaction.is_finite() && stop.reaction >= 0.0) {
            let says = format!("{thing}: reaction is {} s; it must be 0 or more", stop.reaction);
            faults.push(Fault::new(field.key("reaction"), says));
        }
    }
    faults.extend(super::drive_faults::faults(joint, field, &thing));
    let range = joint.range;
    if !(range.low.is_finite() && range.high.is_finite() && range.low < range.high) {
        let (low, high) = (tidy(joint.value(range.low).shown()), tidy(joint.value(range.high).shown()));
        faults
            .push(Fault::new(field.key("range"), format!("{thing}: range is [{low}, {high}]; the first must be below the second")));
    }
    if let Some(body) = &joint.link {
        faults.extend(body.faults(&field.key("link"), &format!("{thing}: link")));
    }
    faults.extend(placement_faults(&joint.placement, field, &thing));
    faults
}

fn placement_faults(placement: &Placement, field: &Field, thing: &str) -> Vec<Fault> {
    match placement {
        Placement::Dh { a, alpha_deg, d, theta_deg, .. } => [("a", a), ("alpha", alpha_deg), ("d", d), ("theta", theta_deg)]
            .into_iter()
            .filter(|(_, value)| !value.is_finite())
            .map(|(key, value)| {
                Fault::new(field.key("dh").key(key), format!("{thing}: {key} is {value}; it must be a finite number"))
            })
            .collect(),
        Placement::Axis { place, axis } => {
            let mut faults = Vec::new();
            let length = axis.norm();
            if !(length.is_finite() && (length - 1.0).abs() <= AXIS_SLACK) {
                faults
                    .push(Fault::new(field.key("axis"), format!("{thing}: axis has length {length:.4}; it must be a unit vector")));
            }
            if !place.at.iter().chain(place.axes.iter()).all(|v| v.is_finite()) {
                faults.push(Fault::new(field.key("place"), format!("{thing}: place holds something that is not a number")));
            }
            faults
        }
    }
}

fn flange_faults(data: &ArmData) -> Vec<Fault> {
    let field = Field::top().key("flange");
    let mut faults = Vec::new();
    if let Some(kg) = data.flange.rated_load
        && !(kg.is_finite() && kg > 0.0)
    {
        faults.push(Fault::new(field.key("rated-load"), format!("flange: rated-load is {kg} kg; it must be above 0")));
    }
    for (index, limit) in data.flange.wrist.iter().enumerate() {
        let field = field.key("wrist").item(index);
        if data.flange.wrist[..index].iter().any(|other| other.joint == limit.joint) {
            let name = data.joints.get(limit.joint).map_or("", |joint| joint.name.as_str());
            faults.push(Fault::new(field.key("joint"), format!("flange: wrist {}: {name} is listed already", index + 1)));
        }
        if !(limit.moment.is_finite() && limit.moment > 0.0) {
            faults.push(Fault::new(field.key("moment"), format!("flange: moment is {} N·m; it must be above 0", limit.moment)));
        }
        if let Some(inertia) = limit.inertia
            && !(inertia.is_finite() && inertia > 0.0)
        {
            faults.push(Fault::new(field.key("inertia"), format!("flange: inertia is {inertia} kg·m²; it must be above 0")));
        }
    }
    faults
}

/// Root mean square distance of the flange from the revolute axes, all joints in the middle of their ranges, m. An arm without
/// revolute joints, or with none that moves the flange, gets 1 m.
fn mean_lever(chain: &Chain, joints: &[Joint]) -> f64 {
    let mut pose = crate::geometry::Pose::identity();
    let mut axes: Vec<(V3, V3)> = Vec::new();
    for (j, joint) in joints.iter().enumerate() {
        pose = pose.then(&chain.fixed[j]);
        let z: V3 = pose.axes.column(2).into_owned();
        if joint.kind == JointKind::Revolute {
            axes.push((z, pose.at));
            pose.axes *= crate::geometry::turn_about(&V3::z(), joint.range.middle());
        } else {
            pose.at += z * joint.range.middle();
        }
    }
    let flange = pose.then(&chain.flange).at;
    let mean = axes.iter().map(|(z, o)| z.cross(&(flange - o)).norm_squared()).sum::<f64>() / axes.len().max(1) as f64;
    if mean.sqrt() > LEAST_LENGTH { mean.sqrt() } else { 1.0 }
}
