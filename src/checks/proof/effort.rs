/// How hard a proof may try.
#[derive(Debug, Clone, Copy)]
pub struct Effort {
    /// Postures evaluated on one segment, at most.
    pub postures: usize,
    /// Bound trials at one posture, at most.
    pub trials: usize,
}

impl Default for Effort {
    fn default() -> Self {
        Self { postures: 600, trials: 8 }
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
