use std::ops::{Deref, DerefMut};

/// The most joints an arm may have.
pub const MAX_JOINTS: usize = 9;

/// One number a joint, in joint order, SI (rad or m, or their rates, or N·m and N). Lives on the stack.
#[derive(Clone, Copy, PartialEq)]
pub struct Joints {
    len: usize,
    values: [f64; MAX_JOINTS],
}

impl Joints {
    /// All zero, for `len` joints (at most [`MAX_JOINTS`]).
    pub fn zeros(len: usize) -> Self {
        assert!(len <= MAX_JOINTS, "an arm has at most {MAX_JOINTS} joints");
        Self { len, values: [0.0; MAX_JOINTS] }
    }

    /// A copy of a slice of at most [`MAX_JOINTS`] numbers.
    pub fn from_slice(values: &[f64]) -> Self {
        let mut joints = Self::zeros(values.len());
        joints.copy_from_slice(values);
        joints
    }

    /// One number for each index below `len`.
    pub fn from_fn(len: usize, value: impl FnMut(usize) -> f64) -> Self {
        let mut joints = Self::zeros(len);
        joints.iter_mut().zip((0..len).map(value)).for_each(|(slot, v)| *slot = v);
        joints
    }

    /// Each number combined with its partner of `other`.
    #[must_use]
    pub fn zip(&self, other: &Self, mut with: impl FnMut(f64, f64) -> f64) -> Self {
        Self::from_fn(self.len, |i| with(self.values[i], other.values[i]))
    }

    /// The largest magnitude, 0 for none; NaN if one is NaN.
    pub fn largest(&self) -> f64 {
        self.iter().fold(0.0, |most: f64, v| if v.abs() <= most { most } else { v.abs() })
    }

    /// Whether all are finite.
    pub fn is_finite(&self) -> bool {
        self.iter().all(|v| v.is_finite())
    }
}

impl Deref for Joints {
    type Target = [f64];
    fn deref(&self) -> &[f64] {
        &self.values[..self.len]
    }
}

impl DerefMut for Joints {
    fn deref_mut(&mut self) -> &mut [f64] {
        &mut self.values[..self.len]
    }
}

impl std::fmt::Debug for Joints {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.debug_list().entries(self.iter()).finish()
    }
}
