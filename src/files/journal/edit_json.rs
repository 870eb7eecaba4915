use serde::{Deserialize, Serialize};

use crate::geometry::Pose;
use crate::program::{Acceptance, Edit, Frame, Load, Repeat, Tool, Usual};

use super::cell_json::{AcceptanceJson, FrameJson, LoadJson, PoseJson, ToolJson, UsualJson, starts_again};
use super::waypoint_json::{NotOurs, WaypointJson};

/// An edit as a journal has it. Numbers are in SI and come back as the very same doubles.
#[derive(Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub(super) enum EditJson {
    Change { index: usize, waypoint: Box<WaypointJson> },
    Insert { index: usize, waypoint: Box<WaypointJson> },
    Remove { index: usize },
    Reorder { from: usize, to: usize },
    Name(String),
    Mount(PoseJson),
    Acceptance(AcceptanceJson),
    Usual(UsualJson),
    Tools(Vec<ToolJson>),
    Loads(Vec<LoadJson>),
    Frames(Vec<FrameJson>),
    StartsAgain(bool),
    Carrying { load: Option<String> },
    Together(Vec<Self>),
}

impl From<&Edit> for EditJson {
    fn from(edit: &Edit) -> Self {
        match edit {
            Edit::Change { index, waypoint } => Self::Change { index: *index, waypoint: Box::new((&**waypoint).into()) },
            Edit::Insert { index, waypoint } => Self::Insert { index: *index, waypoint: Box::new((&**waypoint).into()) },
            Edit::Remove { index } => Self::Remove { index: *index },
            Edit::Reorder { from, to } => Self::Reorder { from: *from, to: *to },
            Edit::Name(name) => Self::Name(name.clone()),
            Edit::Mount(pose) => Self::Mount(pose.into()),
            Edit::Acceptance(acceptance) => Self::Acceptance((&**acceptance).into()),
            Edit::Usual(usual) => Self::Usual((&**usual).into()),
            Edit::Tools(tools) => Self::Tools(tools.iter().map(ToolJson::from).collect()),
            Edit::Loads(loads) => Self::Loads(loads.iter().map(LoadJson::from).collect()),
            Edit::Frames(frames) => Self::Frames(frames.iter().map(FrameJson::from).collect()),
            Edit::Repeat(repeat) => Self::StartsAgain(starts_again(*repeat)),
            Edit::Carrying(load) => Self::Carrying { load: load.clone() },
            Edit::Together(edits) => Self::Together(edits.iter().map(Self::from).collect()),
        }
    }
}

impl TryFrom<EditJson> for Edit {
    type Error = NotOurs;
    fn try_from(edit: EditJson) -> Result<Self, NotOurs> {
        Ok(match edit {
            EditJson::Change { index, waypoint } => Self::Change { index, waypoint: Box::new((*waypoint).try_into()?) },
            EditJson::Insert { index, waypoint } => Self::Insert { index, waypoint: Box::new((*waypoint).try_into()?) },
            EditJson::Remove { index } => Self::Remove { index },
            EditJson::Reorder { from, to } => Self::Reorder { from, to },
            EditJson::Name(name) => Self::Name(name),
            EditJson::Mount(pose) => Self::Mount(Pose::from(pose)),
            EditJson::Acceptance(acceptance) => Self::Acceptance(Box::new(Acceptance::from(acceptance))),
            EditJson::Usual(usual) => Self::Usual(Box::new(Usual::from(usual))),
            EditJson::Tools(tools) => Self::Tools(tools.into_iter().map(Tool::from).collect()),
            EditJson::Loads(loads) => Self::Loads(loads.into_iter().map(Load::from).collect()),
            EditJson::Frames(frames) => Self::Frames(frames.into_iter().map(Frame::from).collect()),
            EditJson::StartsAgain(true) => Self::Repeat(Repeat::Start),
            EditJson::StartsAgain(false) => Self::Repeat(Repeat::Never),
            EditJson::Carrying { load } => Self::Carrying(load),
            EditJson::Together(edits) => Self::Together(edits.into_iter().map(Self::try_from).collect::<Result<_, _>>()?),
        })
    }
}
