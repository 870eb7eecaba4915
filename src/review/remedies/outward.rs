/// Each shell is this much farther out than the one before, and at least a step: the least change is told to a twentieth.
const FARTHER: f64 = 1.05;

/// The least number of whole steps at which a change is clear, with the way in which it is made: ways are looked along side by side,
/// in shells that grow outwards from no change, and where one is clear the steps down to the shell before are halved.
///
/// What is yielded was clear, the step before it in the same way was not, and at every shell nearer no way was clear. Nothing is known of
/// how clear steps lie, so a clear stretch that lies between two shells is passed over; such a stretch is narrower than a
/// twentieth of its distance.
pub(super) fn least_steps<W: Copy>(ways: &[Way<W>], mut clear: impl FnMut(W, u32) -> bool) -> Option<(W, u32)> {
    let most = ways.iter().map(|way| way.most).max().unwrap_or(0);
    let mut inner = 0;
    while inner < most {
        let shell = next(inner).min(most);
        let mut found: Option<(W, u32)> = None;
        for way in ways {
            // A way that ends within the shell is tried at its end.
            let outer = found.map_or(shell, |(_, least)| least - 1).min(way.most);
            if outer > inner && clear(way.which, outer) {
                found = Some((way.which, between(inner, outer, |steps| clear(way.which, steps))));
            }
        }
        if found.is_some() {
            return found;
        }
        inner = shell;
    }
    None
}

/// A way in which something can be changed.
#[derive(Debug, Clone, Copy)]
pub(super) struct Way<W> {
    /// Which one.
    pub which: W,
    /// How many steps it can be changed by.
    pub most: u32,
}

/// The shell after one.
fn next(inner: u32) -> u32 {
    ((f64::from(inner) * FARTHER) as u32).max(inner + 1)
}

/// By halving between a number of steps that is not clear and one that is.
fn between(mut low: u32, mut high: u32, mut clear: impl FnMut(u32) -> bool) -> u32 {
    while high - low > 1 {
        let middle = low + (high - low) / 2;
        if clear(middle) {
            high = middle;
        } else {
            low = middle;
        }
    }
    high
}

#[cfg(test)]
mod tests {
    use super::*;

    const BOTH: [Way<i64>; 2] = [Way { which: -1, most: 40 }, Way { which: 1, most: 1000 }];

    #[test]
    fn the_least_of_all_ways_is_found_where_clear_lies_in_one_piece() {
        for down in [1, 2, 7, 39, 40, 41] {
            for up in [1, 3, 8, 40, 41, 777, 1000, 1001] {
                let found = least_steps(&BOTH, |way, steps| i64::from(steps) >= if way < 0 { down } else { up });
                let down = (down <= 40).then_some(down);
                let up = (up <= 1000).then_some(up);
                assert_eq!(found.map(|(_, steps)| i64::from(steps)), down.into_iter().chain(up).min());
            }
        }
    }

    #[test]
    fn a_clear_stretch_that_ends_again_is_found_if_it_is_no_narrower_than_a_twentieth() {
        for first in [5u32, 20, 63, 200, 700] {
            let width = (f64::from(first) * 0.06).ceil() as u32;
            let found = least_steps(&BOTH, |way, steps| way > 0 && (first..=first + width).contains(&steps));
            let (_, steps) = found.unwrap_or_else(|| panic!("from {first}"));
            assert!(steps >= first && steps <= first + width);
        }
    }

    #[test]
    fn a_way_is_tried_at_its_very_end_and_not_beyond() {
        assert_eq!(least_steps(&BOTH, |way, steps| way < 0 && steps == 40), Some((-1, 40)));
        let mut farthest = 0;
        assert!(
            least_steps(&BOTH, |_, steps| {
                farthest = farthest.max(steps);
                false
            })
            .is_none()
        );
        assert_eq!(farthest, 1000);
        assert!(least_steps::<i64>(&[], |_, _| true).is_none());
    }
}
