use crate::geometry::V3;

/// The least displacement is found to this share of its size.
const CLOSE: f64 = 0.01;
/// A direction counts as better only if a displacement shorter by this share is clear in it.
const BETTER: f64 = 0.985;
/// Turns by which the best direction is bent to look for a better one, rad, one after the other.
const BENDS: [f64; 5] = [0.5, 0.25, 0.12, 0.06, 0.03];
/// Ways in which a direction is bent: every sixth of a turn.
const WAYS: usize = 6;

/// How far displacements are tried.
#[derive(Debug, Clone, Copy)]
pub(super) struct Reach {
    /// The first one tried.
    pub first: f64,
    /// None longer than this is tried.
    pub most: f64,
}

/// The shortest displacement that is clear, looked for along the given unit directions in shells of twice the size, then along
/// those beside the best. `None` if none is.
pub(super) fn shortest(directions: &[V3], reach: Reach, mut clear: impl FnMut(&V3) -> bool) -> Option<V3> {
    let mut inner = 0.0;
    while inner < reach.most {
        let shell = if inner == 0.0 { reach.first } else { 2.0 * inner }.min(reach.most);
        let mut best: Option<(V3, f64)> = None;
        for direction in directions {
            let most = best.map_or(shell, |(_, most)| BETTER * most);
            if most > inner && clear(&(direction * most)) {
                best = Some((*direction, along(direction, inner, most, &mut clear)));
            }
        }
        if let Some((direction, size)) = best {
            let bent = if directions.len() > 2 { beside(direction, size, &mut clear) } else { (direction, size) };
            return Some(bent.0 * bent.1);
        }
        inner = shell;
    }
    None
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
            let found = shortest(&axes(), Reach { first: 0.001, most: 0.128 }, |by| by.dot(&normal) >= distance).expect("clear");
            assert!(found.dot(&normal) >= distance);
            assert!(found.norm() <= 1.05 * distance, "{} {distance}", found.norm());
        }
    }

    #[test]
    fn nothing_is_found_where_nothing_is_clear() {
        assert!(shortest(&axes(), Reach { first: 0.001, most: 0.1 }, |_| false).is_none());
    }
}
