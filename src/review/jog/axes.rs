use crate::geometry::{Pose, V3};
use crate::program::{BASE, Recipe, WORLD, frame_in_base};

/// The axes along and about which the TCP is jogged.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Axes {
    /// Those of the arm's base.
    Base,
    /// Those of the TCP, as they stand now.
    Tool,
    /// Those of the world.
    World,
    /// Those of a frame of the recipe.
    Frame(String),
}

impl Axes {
    /// All axes that a recipe has: base, tool, world, then its frames.
    pub fn of(recipe: &Recipe) -> Vec<Self> {
        let frames = recipe.frames.iter().map(|frame| Self::Frame(frame.name.clone()));
        [Self::Base, Self::Tool, Self::World].into_iter().chain(frames).collect()
    }

    /// Their name as people read it.
    pub fn name(&self) -> &str {
        match self {
            Self::Base => BASE,
            Self::Tool => "tool",
            Self::World => WORLD,
            Self::Frame(name) => name,
        }
    }

    /// The coordinate system in the base, with the TCP at `tcp` (base); `None` for a frame that the recipe has no more.
    pub fn in_base(&self, recipe: &Recipe, tcp: &Pose) -> Option<Pose> {
        match self {
            Self::Tool => Some(*tcp),
            other => frame_in_base(recipe, other.name()),
        }
    }

    /// The system's name as a waypoint's pose gives it; `None` for the base, and for the tool, in which no pose can be given.
    pub fn for_pose(&self) -> Option<String> {
        match self {
            Self::Base | Self::Tool => None,
            other => Some(other.name().to_owned()),
        }
    }
}

/// A direction of a Cartesian step: along an axis or about it, 0 to 2 being x, y and z.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Direction {
    /// Along the axis.
    Along(usize),
    /// About the axis, the right hand's way round.
    About(usize),
}

impl Direction {
    /// All six: x, y, z, then the turns.
    pub const ALL: [Self; 6] = [Self::Along(0), Self::Along(1), Self::Along(2), Self::About(0), Self::About(1), Self::About(2)];

    /// Its name: `x` or `turn x`.
    pub fn name(self) -> &'static str {
        match self {
            Self::Along(axis) => ["x", "y", "z"][axis],
            Self::About(axis) => ["turn x", "turn y", "turn z"][axis],
        }
    }

    /// Its place among the six coordinates of a pose.
    pub fn slot(self) -> usize {
        match self {
            Self::Along(axis) => axis,
            Self::About(axis) => 3 + axis,
        }
    }

    /// Whether it turns.
    pub fn turns(self) -> bool {
        matches!(self, Self::About(_))
    }

    /// The twist of one unit of it, base axes, where `system` stands so in the base.
    pub fn twist(self, system: &Pose) -> [f64; 6] {
        let (Self::Along(axis) | Self::About(axis)) = self;
        let along: V3 = system.axes.column(axis).into_owned();
        if self.turns() { [0.0, 0.0, 0.0, along.x, along.y, along.z] } else { [along.x, along.y, along.z, 0.0, 0.0, 0.0] }
    }
}
