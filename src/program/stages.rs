use crate::units::Share;

/// The stages of a first run: overrides in rising order, each tried before the next. Lives on the stack.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stages {
    shares: [Share; Self::MOST],
    len: usize,
}

impl Stages {
    /// The most stages that there may be.
    pub const MOST: usize = 12;

    /// The given overrides; `None` unless there are 1 to [`Self::MOST`], rising, above 0 and at most 1.
    pub fn of(given: &[Share]) -> Option<Self> {
        let mut stages = Self { shares: [Share::WHOLE; Self::MOST], len: given.len() };
        stages.shares.get_mut(..given.len())?.copy_from_slice(given);
        let mut before = 0.0;
        let rises = given.iter().all(|share| {
            let higher = share.as_fraction() > before && share.as_fraction() <= 1.0;
            before = share.as_fraction();
            higher
        });
        (rises && !given.is_empty()).then_some(stages)
    }

    /// The overrides in rising order.
    pub fn shares(&self) -> &[Share] {
        &self.shares[..self.len]
    }
}

impl Default for Stages {
    /// 10, 25, 50, 75, 100 %: common practice, no source.
    fn default() -> Self {
        Self::of(&[0.10, 0.25, 0.50, 0.75, 1.0].map(Share::fraction)).expect("they rise")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stages_rise_up_to_the_whole() {
        let of = |percents: &[f64]| Stages::of(&percents.iter().map(|p| Share::percent(*p)).collect::<Vec<_>>());
        assert_eq!(of(&[5.0, 30.0]).expect("fine").shares().len(), 2);
        for bad in [&[][..], &[0.0], &[50.0, 50.0], &[60.0, 50.0], &[101.0], &[f64::NAN], &[1.0; 13]] {
            assert!(of(bad).is_none(), "{bad:?}");
        }
    }
}
