use crate::geometry::Pose;

use super::Recipe;

/// Name of the arm's base coordinate system (ISO 9787). It is meant wherever a recipe names no frame.
pub const BASE: &str = "base";

/// Name of the world coordinate system (ISO 9787), in which the mount stands.
pub const WORLD: &str = "world";

/// A frame is a named coordinate system that waypoints may be given in, such as a fixture's.
#[derive(Debug, Clone, PartialEq)]
pub struct Frame {
    /// Its name.
    pub name: String,
    /// Where it stands in its parent.
    pub pose: Pose,
    /// The system it is given in: `base`, `world` or a frame that stands above it in the recipe.
    pub parent: String,
}

/// Where the system `name` stands in the base system: `base`, `world` or a frame of the recipe; `None` if there is no such frame.
pub fn frame_in_base(recipe: &Recipe, name: &str) -> Option<Pose> {
    in_base(recipe, name, recipe.frames.len())
}

/// Only frames before `below` may be named, so that no ring of frames can be walked.
fn in_base(recipe: &Recipe, name: &str, below: usize) -> Option<Pose> {
    match name {
        BASE => Some(Pose::identity()),
        WORLD => Some(recipe.mount.inverse()),
        _ => {
            let index = recipe.frames[..below].iter().position(|frame| frame.name == name)?;
            let frame = &recipe.frames[index];
            Some(in_base(recipe, &frame.parent, index)?.then(&frame.pose))
        }
    }
}
