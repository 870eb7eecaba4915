use crate::geometry::V3;

/// The least displacement is found to this share of its size.
const CLOSE: f64 = 0.005;
/// A direction counts as better only if a displacement shorter by this share is clear in it.
const BETTER: f64 = 0.992;
/// Turns by which the best direction is bent to look for a better one, rad, one after the other.
const BENDS: [f64; 6] = [0.5, 0.25, 0.12, 0.06, 0.03, 0.015];
/// Ways in which a direction is bent: every eighth of a turn.
const WAYS: usize = 8;

/// How far displacements are tried.
#[derive(Debug, Clone, Copy)]
pub(super) struct Reach {
    /// The first one tried.
    pub first: f64,
    /// None longer than this is tried.
    pub most: f64,
    /// From one shell to the next it is at most this far: what is clear may be an island, with nothing clear farther out.
    pub widest: f64,
}

/// The shortest displacement that is clear, looked for along the given unit directions in shells of twice the size or `widest` farther, then along
/// those beside the best. `None` if none is.
pub(super) fn shortest(directions: &[V3], reach: Reach, mut clear: impl FnMut(&V3) -> bool) -> Option<V3> {
    let mut inner = 0.0;
    while inner < reach.most {
        let shell = if inner == 0.0 { reach.first } else { 2.0 * inner }.min(inner + reach.widest).min(reach.most);
        let mut best: Option<(V3, f64)> = None;
        for direction in directions {
            let most = best.map_or(shell, |(_, most)| BETTER * most);
            if most > inner && clear(&(direction * most)) {
                best = Some((*direction, along(direction, inner, most, &mut clear)));
            }
        }
        if let Some((direction, size)) = best {
            let bent = if directions.len() > 2 { all_round(direction, size, &mut clear) } else { (direction, size) };
            return Some(bent.0 * bent.1);
        }
        inner = shell;
    }
    None
}

/// Once the best of those beside is found, so many directions all round are tried with displacements of this share of its size: what
/// is clear may be a narrow cone, or an island with nothing clear behind it.
const ROUND: [(usize, f64); 3] = [(150, 0.965), (72, 0.7), (72, 0.42)];
/// How often a shorter one may start the search beside it anew.
const ROUNDS: usize = 4;

/// The shortest beside a direction, and beside every other one that turns out to be shorter.
fn all_round(direction: V3, size: f64, clear: &mut impl FnMut(&V3) -> bool) -> (V3, f64) {
    let mut best = beside(direction, size, clear);
    for _ in 0..ROUNDS {
        let shorter = ROUND.iter().flat_map(|&(count, share)| evenly(count).map(move |other| (other, share * best.1)));
        let Some((other, most)) = { shorter }.find(|(other, most)| clear(&(other * *most))) else { break };
        let size = along(&other, 0.5 * most, most, clear);
        best = beside(other, size, clear);
    }
    best
}

/// Unit vectors spread evenly over the sphere by the golden angle (a published way; from memory), turned so that no axis is one.
fn evenly(count: usize) -> impl Iterator<Item = V3> {
    let golden = std::f64::consts::PI * (3.0 - 5f64.sqrt());
    (0..count).map(move |k| {
        let height = 1.0 - (2.0 * k as f64 + 1.0) / count as f64;
        let (s, c) = (golden * k as f64 + 0.4).sin_cos();
        let level = (1.0 - height * height).sqrt();
        V3::new(height, level * c, level * s)
    })
}

/// Halves between a size that is not clear and one that is.
fn along(direction: &V3, mut low: f64, mut high: f64, clear: &mut impl FnMut(&V3) -> bool) -> f64 {
    while high - low > CLOSE * high {
        let middle = 0.5 * (low + high);
        if clear(&(direction * middle)) {
            high = middle;
        } else {
            low = middle;
        }
    }
    high
}

/// Bends a direction to find a shorter displacement, by less and less.
fn beside(mut direction: V3, mut size: f64, clear: &mut impl FnMut(&V3) -> bool) -> (V3, f64) {
    for bend in BENDS {
        let mut bent = true;
        while bent {
            bent = false;
            let across = direction.cross(&if direction.x.abs() < 0.7 { V3::x() } else { V3::y() }).normalize();
            let other = direction.cross(&across);
            for way in 0..WAYS {
                let (s, c) = (way as f64 / WAYS as f64 * std::f64::consts::TAU).sin_cos();
                let tried = (direction + (across * c + other * s) * bend.tan()).normalize();
                if clear(&(tried * (BETTER * size))) {
                    size = along(&tried, 0.5 * size, BETTER * size, clear);
                    (direction, bent) = (tried, true);
                    break;
                }
            }
        }
    }
    (direction, size)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn axes() -> Vec<V3> {
        [V3::x(), V3::y(), V3::z()].into_iter().flat_map(|axis| [axis, -axis]).collect()
    }

    #[test]
    fn the_shortest_way_out_of_a_half_space_is_its_normal() {
        // Clear beyond a plane: the least displacement is its distance, along its normal (elementary geometry).
        for (k, distance) in [0.004, 0.013, 0.0371, 0.09].into_iter().enumerate() {
            let normal = V3::new(0.3, 0.5 - 0.3 * k as f64, 0.8).normalize();
            let found = shortest(&axes(), Reach { first: 0.001, most: 0.128, widest: 0.128 }, |by| by.dot(&normal) >= distance)
                .expect("clear");
            assert!(found.dot(&normal) >= distance);
            assert!(found.norm() <= 1.05 * distance, "{} {distance}", found.norm());
        }
    }

    #[test]
    fn an_island_is_found_that_doubling_would_jump_over() {
        let island = |by: &V3| by.x > 0.07 && by.x < 0.1;
        let line = [V3::x(), -V3::x()];
        assert!(shortest(&line, Reach { first: 0.001, most: 0.256, widest: 1.0 }, island).is_none());
        let found = shortest(&line, Reach { first: 0.001, most: 0.256, widest: 0.02 }, island).expect("clear");
        assert!(found.x > 0.07 && found.x < 0.071, "{found:?}");
    }

    #[test]
    fn a_shorter_way_that_lies_across_is_found_all_round() {
        // Two half-spaces: the axes meet the farther one first, being square to its plane.
        let slanted = V3::new(1.0, 1.0, 1.0).normalize();
        let clear = |by: &V3| by.x >= 0.05 || by.dot(&slanted) <= -0.04;
        let found = shortest(&axes(), Reach { first: 0.001, most: 0.128, widest: 0.128 }, clear).expect("clear");
        assert!(found.norm() <= 1.05 * 0.04 && found.dot(&slanted) <= -0.04, "{found:?}");
    }

    #[test]
    fn nothing_is_found_where_nothing_is_clear() {
        assert!(shortest(&axes(), Reach { first: 0.001, most: 0.1, widest: 0.1 }, |_| false).is_none());
    }
}
