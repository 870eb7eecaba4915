use crate::arm::Arm;
use crate::program::{BASE, Edit, Given, Recipe, Taught, Then, WORLD, Waypoint, rename};
use crate::units::{Dimension, Length, Measure, Seconds};

use super::Datum;
use super::cell::not_empty;
use super::sheet::{AXES, Sheet, or_nothing};

/// The word for letting a load go.
const RELEASE: &str = "release";

/// Before the name of a load that is taken.
const TAKE: &str = "take ";

pub(super) fn waypoint(recipe: &Recipe, arm: &Arm, index: usize) -> Vec<Datum> {
    let Some(waypoint) = recipe.waypoints.get(index) else { return Vec::new() };
    let mut name = {
        let whole = recipe.clone();
        let mut sheet = Sheet::of(&waypoint.name, move |name: String| rename::waypoint(&whole, index, &name));
        sheet.datum("name", ("", waypoint.name.clone()), |name, text| not_empty(text).map(|text| *name = text));
        sheet.listed()
    };
    let mut sheet = Sheet::of(waypoint, move |waypoint: Waypoint| Edit::Change { index, waypoint: Box::new(waypoint) });
    taught(&mut sheet, recipe, arm, waypoint, index);
    if let Some(shown) = &waypoint.shown {
        list_given(&mut sheet, "shown ", shown, recipe, |waypoint: &mut Waypoint| waypoint.shown.as_mut());
    }
    sheet.maybe("fly-by", (Dimension::Length, waypoint.fly_by.map(Length::as_m)), |waypoint, si| {
        waypoint.fly_by = si.map(Length::m);
    });
    sheet.measure("dwell", waypoint.dwell.measure(), |waypoint, si| waypoint.dwell = Seconds::s(si));
    let then = match &waypoint.then {
        None => String::new(),
        Some(Then::Release) => RELEASE.to_owned(),
        Some(Then::Take(load)) => format!("{TAKE}{load}"),
    };
    let choices = recipe.loads.iter().map(|load| format!("{TAKE}{}", load.name)).chain([RELEASE.to_owned()]).collect();
    sheet.choice("then", then, choices, |waypoint, text| {
        waypoint.then = match text {
            "" => None,
            RELEASE => Some(Then::Release),
            other => match other.strip_prefix(TAKE) {
                Some(load) => Some(Then::Take(load.trim().to_owned())),
                None => return Err(format!("it must be \"{RELEASE}\", \"{TAKE}\" and the name of a load, or nothing")),
            },
        };
        Ok(())
    });
    name.extend(sheet.listed());
    name
}

fn taught(sheet: &mut Sheet<Waypoint>, recipe: &Recipe, arm: &Arm, waypoint: &Waypoint, index: usize) {
    match &waypoint.taught {
        Taught::Joints(values) => {
            for (j, (value, joint)) in values.iter().zip(arm.joints()).enumerate() {
                sheet.measure(joint.name.clone(), Measure::si(*value, joint.kind.value()), move |waypoint, si| {
                    if let Taught::Joints(values) = &mut waypoint.taught {
                        values[j] = si;
                    }
                });
            }
        }
        Taught::Pose { pose, near } => {
            list_given(sheet, "", pose, recipe, |waypoint: &mut Waypoint| match &mut waypoint.taught {
                Taught::Pose { pose, .. } => Some(pose),
                Taught::Joints(_) => None,
            });
            let before = recipe.waypoints[..index].iter().map(|waypoint| waypoint.name.clone()).collect();
            sheet.choice("near", near.clone().unwrap_or_default(), before, |waypoint, text| {
                if let Taught::Pose { near, .. } = &mut waypoint.taught {
                    *near = or_nothing(text);
                }
                Ok(())
            });
        }
    }
}

/// Lists position, orientation and frame of a pose that `slot` finds in the thing.
pub(super) fn list_given<T: Clone + Send + Sync + 'static>(
    sheet: &mut Sheet<T>,
    before: &str,
    given: &Given,
    recipe: &Recipe,
    slot: impl Fn(&mut T) -> Option<&mut Given> + Send + Sync + Copy + 'static,
) {
    for (axis, name) in AXES.into_iter().enumerate() {
        let now = Measure::si(given.at[axis], Dimension::Length);
        sheet.measure(format!("{before}{name}"), now, move |thing, si| {
            if let Some(given) = slot(thing) {
                given.at[axis] = si;
            }
        });
    }
    if let Some(rotation) = given.rotation {
        sheet.turn(before, rotation, move |thing, rotation| {
            if let Some(given) = slot(thing) {
                given.rotation = Some(rotation);
            }
        });
    }
    let frames =
        [BASE, WORLD].into_iter().chain(recipe.frames.iter().map(|frame| frame.name.as_str())).map(str::to_owned).collect();
    let now = given.frame.clone().unwrap_or_else(|| BASE.to_owned());
    sheet.choice(&format!("{before}frame"), now, frames, move |thing, text| {
        if let Some(given) = slot(thing) {
            given.frame = or_nothing(text).filter(|name| name != BASE);
        }
        Ok(())
    });
}
