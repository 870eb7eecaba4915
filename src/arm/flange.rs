/// One limit of the arm's load diagram: what tool and load may do to one wrist axis.
#[derive(Debug, Clone, PartialEq)]
pub struct WristLimit {
    /// Which joint's axis, counted from 0.
    pub joint: usize,
    /// Greatest moment of weight about that axis, N·m.
    pub moment: f64,
    /// Greatest moment of inertia about that axis, kg·m².
    pub inertia: Option<f64>,
}

/// The flange is the mechanical interface of the arm (ISO 9787): what it may carry.
#[derive(Debug, Clone, PartialEq, Default)]
pub struct Flange {
    /// Rated load, kg: tool and part together.
    pub rated_load: Option<f64>,
    /// Limits at the wrist axes.
    pub wrist: Vec<WristLimit>,
}
