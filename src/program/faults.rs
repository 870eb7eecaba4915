use std::collections::HashSet;

use crate::arm::{Arm, Joints};
use crate::units::{
    Acceleration, Dimension, Fault, Field, Jerk, Length, Measure, Speed, TurnAcceleration, TurnJerk, TurnRate, nearest_word, tidy,
};

use super::{Arrive, BASE, Given, PushAxes, Recipe, Taught, Then, WORLD, Waypoint, frame_in_base};

/// How near the three points of an arc may be to one line: the height of their triangle over its longest side.
const STRAIGHT_ARC: f64 = 1e-4;

impl Recipe {
    /// What in this recipe can't be, judged with the arm it names. Fields are named as a recipe file names them. A recipe with
    /// no faults can be planned; whether it can be run is another matter.
    pub fn faults(&self, arm: &Arm) -> Vec<Fault> {
        let top = Field::top();
        let mut faults = Vec::new();
        faults.extend(self.name_faults());
        faults.extend(self.acceptance_faults());
        faults.extend(self.usual_faults());
        for (index, tool) in self.tools.iter().enumerate() {
            if let Some(body) = &tool.body {
                faults.extend(body.faults(&top.key("tool").item(index), &format!("tool \"{}\"", tool.name)));
            }
        }
        faults.extend(self.tool_point_faults());
        for (index, load) in self.loads.iter().enumerate() {
            faults.extend(load.body.faults(&top.key("load").item(index), &format!("load \"{}\"", load.name)));
        }
        for (index, frame) in self.frames.iter().enumerate() {
            let field = top.key("frame").item(index).key("in");
            let known = self.frames[..index].iter().map(|f| f.name.as_str()).chain([BASE, WORLD]);
            faults.extend(unknown(field, &format!("frame \"{}\"", frame.name), "frame above it", &frame.parent, known));
        }
        if let Some(name) = &self.carrying {
            faults.extend(unknown(top.key("carrying"), "recipe", "load", name, self.loads.iter().map(|l| l.name.as_str())));
        }
        if self.waypoints.len() < 2 {
            faults.push(Fault::new(
                top.key("waypoint"),
                format!("the recipe has {} waypoints; there must be at least 2 to move between", self.waypoints.len()),
            ));
        }
        // Looked up once: in a recipe of a hundred thousand waypoints each may name another.
        let mut before: HashSet<&str> = HashSet::new();
        for (index, waypoint) in self.waypoints.iter().enumerate() {
            faults.extend(self.waypoint_faults(arm, index, waypoint, &before));
            before.insert(&waypoint.name);
        }
        faults
    }

    fn name_faults(&self) -> Vec<Fault> {
        let top = Field::top();
        let mut faults = Vec::new();
        let mut all = |key: &str, names: Vec<&str>| {
            let mut seen = HashSet::new();
            for (index, name) in names.into_iter().enumerate() {
                let field = top.key(key).item(index).key("name");
                if name.trim().is_empty() {
                    faults.push(Fault::new(field, format!("{key} {}: name is empty", index + 1)));
                } else if !seen.insert(name) {
                    faults.push(Fault::new(field, format!("{key} {}: name \"{name}\" is taken already", index + 1)));
                } else if key == "frame" && (name == BASE || name == WORLD) {
                    faults.push(Fault::new(field, format!("frame {}: \"{name}\" always names the {name} itself", index + 1)));
                }
            }
        };
        all("tool", self.tools.iter().map(|t| t.name.as_str()).collect());
        all("load", self.loads.iter().map(|l| l.name.as_str()).collect());
        all("frame", self.frames.iter().map(|f| f.name.as_str()).collect());
        all("waypoint", self.waypoints.iter().map(|w| w.name.as_str()).collect());
        faults
    }

    fn tool_point_faults(&self) -> Vec<Fault> {
        let mut faults = Vec::new();
        for (index, tool) in self.tools.iter().enumerate() {
            let mut seen = HashSet::new();
            for (k, point) in tool.points.iter().enumerate() {
                let field = Field::top().key("tool").item(index).key("points").item(k);
                let thing = format!("tool \"{}\": point {}", tool.name, k + 1);
                if point.name.trim().is_empty() {
                    faults.push(Fault::new(field.key("name"), format!("{thing}: name is empty")));
                } else if !seen.insert(&point.name) {
                    faults.push(Fault::new(field.key("name"), format!("{thing}: name \"{}\" is taken already", point.name)));
                }
                if !point.at.iter().all(|v| v.is_finite()) {
                    faults.push(Fault::new(field.key("xyz"), format!("{thing}: xyz holds something that is not a number")));
                }
            }
        }
        faults
    }

    fn acceptance_faults(&self) -> Vec<Fault> {
        let a = &self.acceptance;
        let field = Field::top().key("acceptance");
        let mut faults = Vec::new();
        for (key, reserve) in [
            ("rate-reserve", a.rate_reserve),
            ("accel-reserve", a.accel_reserve),
            ("holding-reserve", a.holding_reserve),
            ("moving-reserve", a.moving_reserve),
            ("brake-reserve", a.brake_reserve),
            ("rms-reserve", a.rms_reserve),
        ] {
            let percent = tidy(reserve.as_percent());
            if !(0.0..100.0).contains(&percent) {
                faults.push(Fault::new(
                    field.key(key),
                    format!("acceptance: {key} is {percent} %; it must be 0 or more and below 100"),
                ));
            }
        }
        let mut not_negative = |key: &str, value: Measure| {
            if !(value.si.is_finite() && value.si >= 0.0) {
                faults.push(Fault::new(
                    field.key(key),
                    format!("acceptance: {key} is {}; it must be 0 or more", tidy(value.shown())),
                ));
            }
        };
        not_negative("range-least", a.range_least.measure());
        not_negative("slide-least", a.slide_least.measure());
        not_negative("singular-least", Measure::si(a.singular_least, Dimension::Ratio));
        not_negative("tool-speed-left", a.tool_speed_left.measure());
        for (key, limit) in [("tcp-speed", a.tcp_speed), ("point-speed", a.point_speed)] {
            faults.extend(limit.and_then(|speed| not_above_zero(field.key(key), "acceptance", key, speed.measure())));
        }
        if let Some(angle) = a.wind_up {
            faults.extend(not_above_zero(field.key("wind-up"), "acceptance", "wind-up", angle.measure()));
        }
        faults
    }

    fn usual_faults(&self) -> Vec<Fault> {
        let u = &self.usual;
        let field = Field::top().key("usual");
        let mut faults = Vec::new();
        for (key, value) in [
            ("speed", u.speed.map(Speed::measure)),
            ("accel", Some(u.accel.measure())),
            ("turn-speed", Some(u.turn_speed.measure())),
            ("turn-accel", Some(u.turn_accel.measure())),
            ("jerk", u.jerk.map(Jerk::measure)),
            ("turn-jerk", u.turn_jerk.map(TurnJerk::measure)),
        ] {
            faults.extend(value.and_then(|value| not_above_zero(field.key(key), "usual", key, value)));
        }
        faults.extend(bad_share(field.key("share"), "usual", "share", u.share));
        faults.extend(bad_share(field.key("accel-share"), "usual", "accel-share", Some(u.accel_share)));
        faults
    }

    fn waypoint_faults(&self, arm: &Arm, index: usize, waypoint: &Waypoint, before: &HashSet<&str>) -> Vec<Fault> {
        let field = Field::top().key("waypoint").item(index);
        let thing = format!("waypoint {} \"{}\"", index + 1, waypoint.name);
        let mut faults = Vec::new();
        match &waypoint.taught {
            Taught::Joints(values) => faults.extend(joint_value_faults(arm, values, &field.key("joints"), &thing)),
            Taught::Pose { pose, near } => {
                faults.extend(self.given_faults(pose, &field.key("pose"), &thing));
                if pose.rotation.is_none() && arm.task().turns() {
                    faults.push(Fault::new(
                        field.key("pose"),
                        format!("{thing}: pose gives no orientation (rpy or quaternion), which this arm's task needs"),
                    ));
                }
                if let Some(name) = near
                    && !before.contains(name.as_str())
                {
                    let known = self.waypoints[..index].iter().map(|w| w.name.as_str());
                    faults.extend(unknown(field.key("near"), &thing, "waypoint before it", name, known));
                }
            }
        }
        if let Some(shown) = &waypoint.shown {
            faults.extend(self.given_faults(shown, &field.key("shown"), &thing));
        }
        if let Some(name) = &waypoint.tool {
            faults.extend(unknown(field.key("tool"), &thing, "tool", name, self.tools.iter().map(|t| t.name.as_str())));
        }
        if let Some(Then::Take(name)) = &waypoint.then {
            let known = self.loads.iter().map(|l| l.name.as_str());
            faults.extend(unknown(field.key("then").key("take"), &thing, "load", name, known));
        }
        if !(waypoint.dwell.as_s().is_finite() && waypoint.dwell.as_s() >= 0.0) {
            faults.push(Fault::new(
                field.key("dwell"),
                format!("{thing}: dwell is {} s; it must be 0 or more", waypoint.dwell.as_s()),
            ));
        }
        if let Some(radius) = waypoint.fly_by {
            faults.extend(fly_by_faults(radius, waypoint, &field, &thing, index + 1 == self.waypoints.len() || index == 0));
        }
        if let Some(push) = &waypoint.push {
            if !push.force.iter().chain(push.torque.iter()).all(|v| v.is_finite()) {
                faults.push(Fault::new(field.key("push"), format!("{thing}: push holds something that is not a number")));
            }
            if let PushAxes::Frame(name) = &push.axes {
                faults.extend(self.unknown_frame(field.key("push").key("frame"), &thing, name));
            }
        }
        faults.extend(self.arrival_faults(index, waypoint, &field, &thing));
        faults
    }

    fn arrival_faults(&self, index: usize, waypoint: &Waypoint, field: &Field, thing: &str) -> Vec<Fault> {
        let mut faults = Vec::new();
        let arrive = match &waypoint.arrive {
            None if index > 0 => {
                faults.push(Fault::new(
                    field.clone(),
                    format!("{thing}: does not say how to arrive; arrive must be \"joint\", \"line\" or \"arc\""),
                ));
                return faults;
            }
            None => return faults,
            Some(arrive) => arrive,
        };
        if index == 0 && arrive.follows_path() {
            faults.push(Fault::new(
                field.key("arrive"),
                format!("{thing}: the first waypoint can't be reached by {}, for nothing stands before it", article(arrive.word())),
            ));
            return faults;
        }
        match arrive {
            Arrive::Joint { share, accel_share } => {
                if index > 0 && share.or(self.usual.share).is_none() {
                    faults.push(Fault::new(
                        field.key("share"),
                        format!("{thing}: a joint move needs a share (of the joints' rates, %), here or under [usual]"),
                    ));
                }
                faults.extend(bad_share(field.key("share"), thing, "share", *share));
                faults.extend(bad_share(field.key("accel-share"), thing, "accel-share", *accel_share));
            }
            Arrive::Line(speed) | Arrive::Arc { speed, .. } => {
                if speed.speed.or(self.usual.speed).is_none() {
                    faults.push(Fault::new(
                        field.key("speed"),
                        format!("{thing}: {} needs a speed (mm/s), here or under [usual]", article(arrive.word())),
                    ));
                }
                for (key, value) in [
                    ("speed", speed.speed.map(Speed::measure)),
                    ("accel", speed.accel.map(Acceleration::measure)),
                    ("turn-speed", speed.turn_speed.map(TurnRate::measure)),
                    ("turn-accel", speed.turn_accel.map(TurnAcceleration::measure)),
                    ("jerk", speed.jerk.map(Jerk::measure)),
                    ("turn-jerk", speed.turn_jerk.map(TurnJerk::measure)),
                ] {
                    faults.extend(value.and_then(|value| not_above_zero(field.key(key), thing, key, value)));
                }
                if let Arrive::Arc { via, .. } = arrive {
                    faults.extend(self.given_faults(via, &field.key("via"), thing));
                }
            }
        }
        faults
    }

    fn given_faults(&self, given: &Given, field: &Field, thing: &str) -> Vec<Fault> {
        let mut faults = Vec::new();
        if !given.at.iter().all(|v| v.is_finite()) {
            faults.push(Fault::new(field.key("xyz"), format!("{thing}: xyz holds something that is not a number")));
        }
        if let Some(name) = &given.frame {
            faults.extend(self.unknown_frame(field.key("frame"), thing, name));
        }
        faults
    }

    fn unknown_frame(&self, field: Field, thing: &str, name: &str) -> Option<Fault> {
        if frame_in_base(self, name).is_some() {
            return None;
        }
        unknown(field, thing, "frame", name, self.frames.iter().map(|f| f.name.as_str()).chain([BASE, WORLD]))
    }
}

/// What is wrong with the three points of an arc, told of `thing`: `None` if they span a circle. All three in one system, m.
pub(crate) fn arc_fault(start: &crate::geometry::V3, via: &crate::geometry::V3, end: &crate::geometry::V3) -> Option<String> {
    let sides = [(via - start).norm(), (end - via).norm(), (end - start).norm()];
    let longest = sides.iter().fold(0.0f64, |a, b| a.max(*b));
    let height = (via - start).cross(&(end - start)).norm() / longest;
    if longest > 0.0 && sides.iter().all(|side| *side > STRAIGHT_ARC * longest) && height > STRAIGHT_ARC * longest {
        return None;
    }
    Some(format!(
        "start, via and end of the arc stand in one line (the middle one is {} off it); an arc needs three points of a circle",
        Length::m(if height.is_finite() { height } else { 0.0 }).measure().text(3)
    ))
}

fn fly_by_faults(radius: Length, waypoint: &Waypoint, field: &Field, thing: &str, at_an_end: bool) -> Vec<Fault> {
    let field = field.key("fly-by");
    let mut faults = Vec::new();
    faults.extend(not_above_zero(field.clone(), thing, "fly-by", radius.measure()));
    if at_an_end {
        faults.push(Fault::new(field.clone(), format!("{thing}: the first and the last waypoint can't be fly-by points")));
    }
    if waypoint.then.is_some() {
        faults.push(Fault::new(
            field.clone(),
            format!("{thing}: a load can't be taken or released on a fly-by; make it a stop point"),
        ));
    }
    if waypoint.dwell.as_s() > 0.0 {
        faults.push(Fault::new(field, format!("{thing}: a fly-by point has no dwell; make it a stop point")));
    }
    faults
}

fn joint_value_faults(arm: &Arm, values: &Joints, field: &Field, thing: &str) -> Vec<Fault> {
    if values.len() != arm.len() {
        return vec![Fault::new(
            field.clone(),
            format!("{thing}: joints has {} values; the arm \"{}\" has {} joints", values.len(), arm.name(), arm.len()),
        )];
    }
    values
        .iter()
        .zip(arm.joints())
        .enumerate()
        .filter(|(_, (value, _))| !value.is_finite())
        .map(|(j, (value, joint))| {
            Fault::new(field.item(j), format!("{thing}: joint {} is {value}; it must be a finite number", joint.name))
        })
        .collect()
}

fn not_above_zero(field: Field, thing: &str, key: &str, value: Measure) -> Option<Fault> {
    if value.si.is_finite() && value.si > 0.0 {
        return None;
    }
    Some(Fault::new(field, format!("{thing}: {key} is {}; it must be above 0", tidy(value.shown()))))
}

fn bad_share(field: Field, thing: &str, key: &str, share: Option<crate::units::Share>) -> Option<Fault> {
    let percent = tidy(share?.as_percent());
    if percent > 0.0 && percent <= 100.0 {
        return None;
    }
    Some(Fault::new(field, format!("{thing}: {key} is {percent} %; it must be above 0 and at most 100")))
}

fn unknown<'a>(field: Field, thing: &str, kind: &str, name: &str, known: impl Iterator<Item = &'a str> + Clone) -> Option<Fault> {
    if known.clone().any(|candidate| candidate == name) {
        return None;
    }
    let hint = match nearest_word(name, known.clone()) {
        Some(near) => format!("; did you mean \"{near}\"?"),
        None => {
            let all: Vec<_> = known.map(|name| format!("\"{name}\"")).collect();
            if all.is_empty() { String::new() } else { format!("; there are {}", all.join(", ")) }
        }
    };
    Some(Fault::new(field, format!("{thing}: there is no {kind} \"{name}\"{hint}")))
}

fn article(word: &str) -> String {
    if word.starts_with('a') { format!("an {word}") } else { format!("a {word}") }
}
