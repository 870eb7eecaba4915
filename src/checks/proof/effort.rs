/// How hard a proof may try.
#[derive(Debug, Clone, Copy)]
pub struct Effort {
    /// Postures evaluated on one segment, at most.
    pub postures: usize,
    /// Bound trials at one posture, at most.
    pub trials: usize,
    /// How near a proved bound must come to the most that was seen, as a share of the limit; as near as clear needs where not given.
    pub within: Option<f64>,
    /// No stretch of a path is taken wider, half of it as a fraction of the path.
    pub widest: f64,
}

impl Default for Effort {
    fn default() -> Self {
        Self { postures: 600, trials: 8, within: None, widest: 1.0 }
    }
}

impl Effort {
    /// For one segment that somebody looks at: bounds within a two-hundredth of the limit of what was seen.
    pub fn tight() -> Self {
        Self { postures: 20_000, trials: 8, within: Some(0.005), widest: 1.0 }
    }

    /// For bounds of the joint values themselves: what they are too wide by falls with the square of a stretch's width.
    pub fn narrow() -> Self {
        Self { postures: 20_000, trials: 8, within: None, widest: 1.0 / 256.0 }
    }
}

/// How a proof went.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Default)]
pub struct Tally {
    /// Postures evaluated.
    pub postures: usize,
    /// Bound trials made.
    pub trials: usize,
}
