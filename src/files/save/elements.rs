use std::collections::HashMap;

use super::outline::{Outline, Value};

/// Which of the old tables each new one was: by name, then (for those renamed) by all else being the same, then by standing between
/// the same neighbours. `None` for one that is new.
pub(super) fn matched(old: &[Outline], new: &[Outline]) -> Vec<Option<usize>> {
    let mut of: Vec<Option<usize>> = vec![None; new.len()];
    let mut free: Vec<bool> = vec![true; old.len()];
    let mut named: HashMap<&str, Vec<usize>> = HashMap::new();
    for (index, outline) in old.iter().enumerate().rev() {
        named.entry(name(outline)).or_default().push(index);
    }
    for (of, outline) in of.iter_mut().zip(new) {
        if let Some(index) = named.get_mut(name(outline)).and_then(Vec::pop) {
            *of = Some(index);
            free[index] = false;
        }
    }
    let left: Vec<usize> = (0..new.len()).filter(|k| of[*k].is_none()).collect();
    for k in left {
        let same = (0..old.len()).find(|i| free[*i] && old[*i].iter().zip(&new[k]).all(|(a, b)| a.0 == "name" || a == b));
        if let Some(index) = same {
            of[k] = Some(index);
            free[index] = false;
        }
    }
    between_neighbours(&mut of, &mut free);
    of
}

fn name(outline: &Outline) -> &str {
    match outline.iter().find(|(key, _)| *key == "name") {
        Some((_, Some(Value::Text(name)))) => name,
        _ => "",
    }
}

/// Pairs off what is left where as many new ones as old ones stand between two pairs that follow each other.
fn between_neighbours(of: &mut [Option<usize>], free: &mut [bool]) {
    let mut k = 0;
    while k < of.len() {
        if of[k].is_some() {
            k += 1;
            continue;
        }
        let run = of[k..].iter().take_while(|of| of.is_none()).count();
        let start = if k == 0 { 0 } else { of[k - 1].map_or(0, |before| before + 1) };
        let end = of.get(k + run).copied().flatten().unwrap_or(free.len());
        if end >= start && end - start == run && free[start..end].iter().all(|free| *free) {
            for (offset, slot) in of[k..k + run].iter_mut().enumerate() {
                *slot = Some(start + offset);
                free[start + offset] = false;
            }
        }
        k += run;
    }
}

/// Which of the matched ones stay where they are, so that as few as possible move: a longest rising row of old places.
pub(super) fn staying(of: &[Option<usize>]) -> Vec<bool> {
    // Patience: `tails[n]` is the place (in `of`) of the least old index that ends a rising row of length n + 1.
    let mut tails: Vec<usize> = Vec::new();
    let mut before: Vec<Option<usize>> = vec![None; of.len()];
    for (k, old) in of.iter().enumerate() {
        let Some(old) = old else { continue };
        let at = tails.partition_point(|tail| of[*tail].is_some_and(|other| other < *old));
        before[k] = at.checked_sub(1).map(|at| tails[at]);
        if at == tails.len() {
            tails.push(k);
        } else {
            tails[at] = k;
        }
    }
    let mut stays = vec![false; of.len()];
    let mut at = tails.last().copied();
    while let Some(k) = at {
        stays[k] = true;
        at = before[k];
    }
    stays
}

#[cfg(test)]
mod tests {
    use super::*;

    fn outlines(names: &str) -> Vec<Outline> {
        names.split(' ').map(|name| vec![("name", Some(Value::Text(name.to_owned())))]).collect()
    }

    #[test]
    fn renamed_and_new_ones_are_told_apart() {
        let old = outlines("a b c d");
        assert_eq!(matched(&old, &outlines("a b c d")), [Some(0), Some(1), Some(2), Some(3)]);
        assert_eq!(matched(&old, &outlines("d a c")), [Some(3), Some(0), Some(2)]);
        let other = |name: &str, arm: &str| vec![("name", Some(Value::Text(name.into()))), ("arm", Some(Value::Text(arm.into())))];
        let (old, new) = ([other("a", "1"), other("b", "2"), other("c", "3")], [other("a", "1"), other("x", "9"), other("c", "3")]);
        assert_eq!(matched(&old, &new), [Some(0), Some(1), Some(2)], "renamed and changed");
        let new = [other("a", "1"), other("b", "2"), other("x", "9"), other("c", "3")];
        assert_eq!(matched(&old, &new), [Some(0), Some(1), None, Some(2)]);
        let new = [other("z", "3"), other("a", "1"), other("b", "2")];
        assert_eq!(matched(&old, &new), [Some(2), Some(0), Some(1)], "renamed and moved");
    }

    #[test]
    fn as_few_as_possible_move() {
        assert_eq!(staying(&[Some(0), Some(3), Some(1), Some(2)]), [true, false, true, true]);
        assert_eq!(staying(&[None, Some(1), None]), [false, true, false]);
        assert_eq!(staying(&[Some(2), Some(1), Some(0)]).iter().filter(|stays| **stays).count(), 1);
    }
}
