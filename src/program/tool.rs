use crate::arm::Body;
use crate::geometry::{Pose, V3};

/// A tool is what is bolted to the flange.
#[derive(Debug, Clone, PartialEq)]
pub struct Tool {
    /// Its name.
    pub name: String,
    /// Where its TCP stands on the flange.
    pub tcp: Pose,
    /// Its mass, centre and inertia in flange axes; `None` where the recipe gives no mass.
    pub body: Option<Body>,
    /// Points of it whose speed is told besides that of the TCP.
    pub points: Vec<ToolPoint>,
    /// Whether the work does not care how the tool is turned about its own axis (z of the TCP system), as with a suction cup in
    /// its middle or a round nozzle. A remedy may then turn it.
    pub turns_freely: bool,
}

/// A named point of a tool, such as the far end of a grip.
#[derive(Debug, Clone, PartialEq)]
pub struct ToolPoint {
    /// Its name.
    pub name: String,
    /// Where it is, flange axes, m.
    pub at: V3,
}

/// A load is what the tool carries (ISO: payload), such as the part.
#[derive(Debug, Clone, PartialEq)]
pub struct Load {
    /// Its name.
    pub name: String,
    /// Its mass, centre and inertia in the TCP system of the tool that carries it.
    pub body: Body,
}
