//! What may be edited in place: every datum of every part of a recipe, with its text as it stands and what a typed text makes of it.

mod cell;
mod criteria;
mod segment;
mod sheet;
mod waypoint;

use std::fmt;
use std::sync::Arc;

use crate::arm::Arm;

use super::{Edit, Recipe};

/// A part of a recipe whose data are edited together. Indices count from 0.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Part {
    /// The recipe itself: its name, how it repeats, what it carries at the start.
    Recipe,
    /// Where the base stands in the world.
    Mount,
    /// The acceptance criteria.
    Acceptance,
    /// What segments use where they say nothing.
    Usual,
    /// A tool.
    Tool(usize),
    /// A load.
    Load(usize),
    /// A frame.
    Frame(usize),
    /// A waypoint: its name, what was taught, what happens there.
    Waypoint(usize),
    /// How a waypoint is arrived at.
    Segment(usize),
}

/// What makes an edit of typed text.
type Make = Arc<dyn Fn(&str) -> Result<Edit, String> + Send + Sync>;

/// A datum is one thing about a part of a recipe that a person may edit in place.
#[derive(Clone)]
pub struct Datum {
    /// Its name, as a recipe file has it where it has one: `speed`, `fly-by`, `J3`, `pose x`.
    pub name: String,
    /// The unit's sign, such as `mm/s`; empty where it has none.
    pub unit: &'static str,
    /// Its text now, without the unit; empty where the recipe says nothing.
    pub text: String,
    /// The words that it may be; empty where any text or number may be typed.
    pub choices: Vec<String>,
    make: Make,
}

impl fmt::Debug for Datum {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}: {} {}", self.name, self.text, self.unit)
    }
}

impl Datum {
    /// The text with its unit, as it is told: `250 mm/s`; `-` where the recipe says nothing.
    pub fn told(&self) -> String {
        match (self.text.is_empty(), self.unit) {
            (true, _) => "-".to_owned(),
            (false, "") => self.text.clone(),
            (false, unit @ ("°" | "%")) if unit == "°" => format!("{}{unit}", self.text),
            (false, unit) => format!("{} {unit}", self.text),
        }
    }

    /// The edit that a typed text makes, judged together with the rest of the recipe: an edit that brings in a fault which was not
    /// there before is refused. `recipe` is the one that the datum was read from.
    ///
    /// # Errors
    /// Why it is refused: the thing, the value, the bound.
    pub fn apply(&self, recipe: &Recipe, arm: &Arm, typed: &str) -> Result<Edit, String> {
        let edit = (self.make)(typed.trim()).map_err(|why| format!("{}: {why}", self.name))?;
        refuse_new_faults(recipe, arm, &edit)?;
        Ok(edit)
    }
}

/// Refuses an edit that brings in a fault which the recipe did not have.
///
/// # Errors
/// The first new fault in words.
pub fn refuse_new_faults(recipe: &Recipe, arm: &Arm, edit: &Edit) -> Result<(), String> {
    let mut trial = recipe.clone();
    edit.apply(&mut trial).map_err(|fault| fault.to_string())?;
    let new = trial.faults(arm);
    if new.is_empty() {
        return Ok(());
    }
    let before = recipe.faults(arm);
    new.into_iter().find(|fault| !before.contains(fault)).map_or(Ok(()), |fault| Err(fault.says))
}

/// The data of one part, in the order in which a person reads them; none if there is no such part.
pub fn data_of(recipe: &Recipe, arm: &Arm, part: Part) -> Vec<Datum> {
    match part {
        Part::Recipe => cell::recipe(recipe),
        Part::Mount => cell::mount(recipe),
        Part::Acceptance => criteria::acceptance(recipe),
        Part::Usual => criteria::usual(recipe),
        Part::Tool(index) => cell::tool(recipe, index),
        Part::Load(index) => cell::load(recipe, index),
        Part::Frame(index) => cell::frame(recipe, index),
        Part::Waypoint(index) => waypoint::waypoint(recipe, arm, index),
        Part::Segment(index) => segment::segment(recipe, index),
    }
}
