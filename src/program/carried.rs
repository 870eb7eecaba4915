use crate::geometry::{M3, Pose, V3};

use super::{Load, Tool};

/// Everything that hangs on the flange on a segment: the tool, its TCP, and the load, all in flange axes, SI.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Carried {
    /// Where the TCP stands on the flange.
    pub tcp: Pose,
    /// Mass of the tool, kg; 0 if not given.
    pub tool_mass: f64,
    /// Centre of mass of the tool in flange axes, m.
    pub tool_com: V3,
    /// Inertia of the tool about its centre, flange axes, kg·m²; zero where not given.
    pub tool_inertia: M3,
    /// Mass of the load, kg; 0 for none.
    pub load_mass: f64,
    /// Centre of mass of the load in flange axes, m.
    pub load_com: V3,
    /// Inertia of the load about its centre, flange axes, kg·m²; zero where not given.
    pub load_inertia: M3,
}

impl Carried {
    /// A bare flange whose TCP is its own origin.
    pub fn nothing() -> Self {
        Self {
            tcp: Pose::identity(),
            tool_mass: 0.0,
            tool_com: V3::zeros(),
            tool_inertia: M3::zeros(),
            load_mass: 0.0,
            load_com: V3::zeros(),
            load_inertia: M3::zeros(),
        }
    }

    /// What a tool and a load put on the flange. A load's centre is given in the tool's TCP system.
    pub fn of(tool: Option<&Tool>, load: Option<&Load>) -> Self {
        let mut carried = Self::nothing();
        if let Some(tool) = tool {
            carried.tcp = tool.tcp;
            if let Some(body) = &tool.body {
                carried.tool_mass = body.mass;
                carried.tool_com = body.com;
                carried.tool_inertia = body.inertia.unwrap_or_else(M3::zeros);
            }
        }
        if let Some(load) = load {
            carried.load_mass = load.body.mass;
            carried.load_com = carried.tcp.point(&load.body.com);
            let inertia = load.body.inertia.unwrap_or_else(M3::zeros);
            carried.load_inertia = carried.tcp.axes * inertia * carried.tcp.axes.transpose();
        }
        carried
    }

    /// Tool and load together, kg.
    pub fn mass(&self) -> f64 {
        self.tool_mass + self.load_mass
    }

    /// Mass moment of tool and load in flange axes, kg·m.
    pub fn moment(&self) -> V3 {
        self.tool_com * self.tool_mass + self.load_com * self.load_mass
    }
}
