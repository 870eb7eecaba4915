/// How hard a proof may try.
#[derive(Debug, Clone, Copy)]
pub struct Effort {
    /// Postures evaluated on one segment, at most.
    pub postures: usize,
    /// Bound trials at one posture, at most.
    pub trials: usize,
    /// How near a proved bound must come to the most that was seen, as a share of the limit; as near as clear needs where not given.
    pub within: Option<f64>,
}

impl Default for Effort {
    fn default() -> Self {
        Self { postures: 600, trials: 8, within: None }
    }
}

impl Effort {
    /// For one segment that somebody looks at: bounds within a two-hundredth of the limit of what was seen.
    pub fn tight() -> Self {
        Self { postures: 20_000, trials: 8, within: Some(0.005) }
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
