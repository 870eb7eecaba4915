use std::sync::Arc;

use crate::geometry::{Pose, Rotation, V3};
use crate::program::Edit;
use crate::units::{Dimension, Measure, Share, tidy, typed, typed_share};

use super::Datum;

/// The names of the three coordinates.
pub(super) const AXES: [&str; 3] = ["x", "y", "z"];

/// The names of the three angles.
pub(super) const ANGLES: [&str; 3] = ["roll", "pitch", "yaw"];

/// The finest step of an angle of an orientation, degrees: what remains of an exact angle after it went through a rotation is far
/// smaller, and nobody types as much.
const FINEST: f64 = 1e-9;

/// A sheet gathers the data of one thing while they are listed. Each datum knows how to change a copy of the thing, and the sheet
/// how to make an edit of the changed copy.
pub(super) struct Sheet<T> {
    thing: Arc<T>,
    edit: Arc<dyn Fn(T) -> Edit + Send + Sync>,
    data: Vec<Datum>,
}

impl<T: Clone + Send + Sync + 'static> Sheet<T> {
    pub(super) fn of(thing: &T, edit: impl Fn(T) -> Edit + Send + Sync + 'static) -> Self {
        Self { thing: Arc::new(thing.clone()), edit: Arc::new(edit), data: Vec::new() }
    }

    /// The data in the order in which they were listed.
    pub(super) fn listed(self) -> Vec<Datum> {
        self.data
    }

    /// Lists a datum of any kind.
    pub(super) fn datum(
        &mut self,
        name: impl Into<String>,
        (unit, text): (&'static str, String),
        set: impl Fn(&mut T, &str) -> Result<(), String> + Send + Sync + 'static,
    ) {
        let (thing, edit) = (Arc::clone(&self.thing), Arc::clone(&self.edit));
        let make = move |typed: &str| {
            let mut changed = (*thing).clone();
            set(&mut changed, typed)?;
            Ok(edit(changed))
        };
        self.data.push(Datum { name: name.into(), unit, text, choices: Vec::new(), make: Arc::new(make) });
    }

    /// Lists a number that is always there.
    pub(super) fn measure(&mut self, name: impl Into<String>, now: Measure, set: impl Fn(&mut T, f64) + Send + Sync + 'static) {
        let of = now.of;
        self.datum(name, (of.sign(), figure(now)), move |thing, text| {
            set(thing, typed(text, of)?);
            Ok(())
        });
    }

    /// Lists a number that may be left out, by an empty text.
    pub(super) fn maybe(
        &mut self,
        name: impl Into<String>,
        (of, now): (Dimension, Option<f64>),
        set: impl Fn(&mut T, Option<f64>) + Send + Sync + 'static,
    ) {
        let text = now.map_or(String::new(), |si| figure(Measure::si(si, of)));
        self.datum(name, (of.sign(), text), move |thing, text| {
            let value = if text.is_empty() { None } else { Some(typed(text, of)?) };
            set(thing, value);
            Ok(())
        });
    }

    /// Lists a share that is always there.
    pub(super) fn share(&mut self, name: &str, now: Share, set: impl Fn(&mut T, Share) + Send + Sync + 'static) {
        self.datum(name, ("%", tidy(now.as_percent()).to_string()), move |thing, text| {
            set(thing, Share::fraction(typed_share(text)?));
            Ok(())
        });
    }

    /// Lists a share that may be left out.
    pub(super) fn maybe_share(
        &mut self,
        name: &str,
        now: Option<Share>,
        set: impl Fn(&mut T, Option<Share>) + Send + Sync + 'static,
    ) {
        let text = now.map_or(String::new(), |share| tidy(share.as_percent()).to_string());
        self.datum(name, ("%", text), move |thing, text| {
            let value = if text.is_empty() { None } else { Some(Share::fraction(typed_share(text)?)) };
            set(thing, value);
            Ok(())
        });
    }

    /// Lists a word out of a few, and text where `choices` only says what is known already.
    pub(super) fn choice(
        &mut self,
        name: &str,
        now: String,
        choices: Vec<String>,
        set: impl Fn(&mut T, &str) -> Result<(), String> + Send + Sync + 'static,
    ) {
        self.datum(name, ("", now), set);
        if let Some(datum) = self.data.last_mut() {
            datum.choices = choices;
        }
    }

    /// Lists the three coordinates of a point or a vector.
    pub(super) fn vector(
        &mut self,
        before: &str,
        (of, now): (Dimension, V3),
        slot: impl Fn(&mut T) -> &mut V3 + Send + Sync + Copy + 'static,
    ) {
        for (axis, name) in AXES.into_iter().enumerate() {
            self.measure(format!("{before}{name}"), Measure::si(now[axis], of), move |thing, si| slot(thing)[axis] = si);
        }
    }

    /// Lists the three angles of an orientation.
    pub(super) fn turn(&mut self, before: &str, now: Rotation, set: impl Fn(&mut T, Rotation) + Send + Sync + Copy + 'static) {
        let rpy = now.rpy().map(|angle| (angle.to_degrees() / FINEST).round() * FINEST).map(|angle| tidy(angle) + 0.0);
        for (axis, name) in ANGLES.into_iter().enumerate() {
            let now = Measure::si(rpy[axis] / Dimension::Angle.per_si(), Dimension::Angle);
            self.measure(format!("{before}{name}"), now, move |thing, si| {
                let mut changed = rpy;
                changed[axis] = tidy(si.to_degrees());
                set(thing, Rotation::from_rpy_deg(changed));
            });
        }
    }

    /// Lists position and orientation of a pose.
    pub(super) fn pose(&mut self, before: &str, now: Pose, slot: impl Fn(&mut T) -> &mut Pose + Send + Sync + Copy + 'static) {
        for (axis, name) in AXES.into_iter().enumerate() {
            let now = Measure::si(now.at[axis], Dimension::Length);
            self.measure(format!("{before}{name}"), now, move |thing, si| slot(thing).at[axis] = si);
        }
        self.turn(before, now.rotation(), move |thing, rotation| slot(thing).axes = rotation.matrix());
    }
}

/// A measure in the unit that people read, with the digits that were typed and no dust.
pub(super) fn figure(measure: Measure) -> String {
    tidy(measure.shown()).to_string()
}

/// Text or nothing.
pub(super) fn or_nothing(text: &str) -> Option<String> {
    (!text.is_empty()).then(|| text.to_owned())
}

/// Which of the words was typed.
pub(super) fn one_of<V: Copy>(text: &str, words: &[(&str, V)]) -> Result<V, String> {
    let found = words.iter().find(|(word, _)| *word == text);
    found.map(|(_, meaning)| *meaning).ok_or_else(|| {
        let known: Vec<String> = words.iter().map(|(word, _)| format!("\"{word}\"")).collect();
        format!("it must be {}", known.join(" or "))
    })
}

/// Words as a list of choices.
pub(super) fn words<V>(words: &[(&str, V)]) -> Vec<String> {
    words.iter().map(|(word, _)| (*word).to_owned()).collect()
}
