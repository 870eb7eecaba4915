/// In how many even steps a demand that need not fall with speed is looked for from above.
const STEPS: u32 = 20;
/// No step is longer than this share of the number it starts from, so that small numbers are looked at as closely.
const SHORTER: f64 = 0.04;

/// The greatest whole number below `above` that is found clear, where what is clear at one number is clear at every lower one.
/// `guess` is where the search starts.
pub(super) fn greatest(above: u32, guess: u32, mut clear: impl FnMut(u32) -> bool) -> Option<u32> {
    let (mut low, mut high) = (0, above);
    let mut step = 1;
    let mut at = guess.clamp(1, above.saturating_sub(1).max(1));
    while at > low && at < high {
        if clear(at) {
            low = at;
            at = at.saturating_add(step);
        } else {
            high = at;
            at = at.saturating_sub(step);
        }
        step *= 2;
    }
    between(low, high, &mut clear)
}

/// The same where nothing is known of how clear numbers lie: from above in steps to the first that is clear, and from there
/// up again. What is yielded is clear and the next number is not, unless that is `above`.
pub(super) fn greatest_from_above(above: u32, guess: u32, mut clear: impl FnMut(u32) -> bool) -> Option<u32> {
    let mut tried: Vec<u32> = (1..STEPS).map(|k| (u64::from(above) * u64::from(k) / u64::from(STEPS)) as u32).collect();
    let mut at = f64::from(above);
    while at > 1.0 {
        at *= 1.0 - SHORTER;
        tried.push(at as u32);
    }
    tried.extend([guess, 1]);
    tried.retain(|at| *at > 0 && *at < above);
    tried.sort_unstable();
    tried.dedup();
    let mut high = above;
    for at in tried.into_iter().rev() {
        if clear(at) {
            return between(at, high, &mut clear);
        }
        high = at;
    }
    None
}

/// By halving between a number that is clear (0 for none) and one that is not.
fn between(mut low: u32, mut high: u32, clear: &mut impl FnMut(u32) -> bool) -> Option<u32> {
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        if clear(middle) {
            low = middle;
        } else {
            high = middle;
        }
    }
    (low > 0).then_some(low)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_greatest_is_found_from_any_guess() {
        for most in [0, 1, 2, 37, 98, 99] {
            for guess in [0, 1, 40, 99, 200] {
                let mut tries = 0;
                let found = greatest(100, guess, |at| {
                    tries += 1;
                    at <= most
                });
                assert_eq!(found.unwrap_or(0), most, "from {guess}");
                assert!(tries <= 16, "{tries} tries for {most} from {guess}");
            }
            assert_eq!(greatest_from_above(100, 50, |at| at <= most).unwrap_or(0), most);
        }
        assert_eq!(greatest(1, 1, |_| true), None);
    }

    #[test]
    fn a_gap_below_the_greatest_is_no_hindrance() {
        // Clear from 1 to 20 and from 50 to 63, as a torque may be that holding and braking relieve in turn.
        let clear = |at: u32| at <= 20 || (50..=63).contains(&at);
        assert_eq!(greatest_from_above(100, 10, clear), Some(63));
    }
}
