/// The word of `known` nearest to `given` by edits, if it is near enough to be a slip of the keys.
pub fn nearest_word<'a>(given: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let farthest = 1 + given.chars().count() / 4;
    known
        .into_iter()
        .map(|word| (edits_between(&given.to_lowercase(), &word.to_lowercase()), word))
        .filter(|(edits, _)| *edits <= farthest)
        .min_by_key(|(edits, _)| *edits)
        .map(|(_, word)| word)
}

/// The least number of inserted, dropped, changed or swapped neighbouring letters (restricted Damerau-Levenshtein distance).
fn edits_between(a: &str, b: &str) -> usize {
    let (a, b): (Vec<char>, Vec<char>) = (a.chars().collect(), b.chars().collect());
    let mut rows = vec![vec![0; b.len() + 1]; a.len() + 1];
    for (i, row) in rows.iter_mut().enumerate() {
        row[0] = i;
    }
    for (j, cell) in rows[0].iter_mut().enumerate() {
        *cell = j;
    }
    for i in 1..=a.len() {
        for j in 1..=b.len() {
            let changed = usize::from(a[i - 1] != b[j - 1]);
            let mut least = (rows[i - 1][j] + 1).min(rows[i][j - 1] + 1).min(rows[i - 1][j - 1] + changed);
            if i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1] {
                least = least.min(rows[i - 2][j - 2] + 1);
            }
            rows[i][j] = least;
        }
    }
    rows[a.len()][b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_slip_finds_its_word_and_a_stranger_does_not() {
        let known = ["rate", "range", "accel", "torque"];
        assert_eq!(nearest_word("rtae", known), Some("rate"));
        assert_eq!(nearest_word("ragne", known), Some("range"));
        assert_eq!(nearest_word("colour", known), None);
    }
}
