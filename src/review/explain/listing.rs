use crate::units::Measure;

use super::Bar;

/// Words in a row, read aloud: `J1`, `J1 and J2`, `J1, J2 and J3`.
pub(in crate::review) fn all_of(words: &[String]) -> String {
    match words {
        [] => String::new(),
        [one] => one.clone(),
        [most @ .., last] => format!("{} and {last}", most.join(", ")),
    }
}

/// The most words of a row that are told one by one.
const MOST_TOLD: usize = 12;

/// A long row of words cut short: the first twelve, then how many more there are.
pub(super) fn first_of(words: &[String]) -> Vec<String> {
    let mut told: Vec<String> = words.iter().take(MOST_TOLD).cloned().collect();
    if words.len() > MOST_TOLD {
        told.push(format!("{} more", words.len() - MOST_TOLD));
    }
    told
}

/// Shares of one sum as figures that add up to the sum as it is shown: each is rounded down, and what is then missing goes to
/// those that lost most.
pub(super) fn adding_up(shares: &[Measure], digits: usize) -> Vec<f64> {
    let scale = 10f64.powi(digits as i32);
    let exact: Vec<f64> = shares.iter().map(|share| share.shown() * scale).collect();
    let mut steps: Vec<f64> = exact.iter().map(|value| value.floor()).collect();
    let missing = exact.iter().sum::<f64>().round() - steps.iter().sum::<f64>();
    let mut order: Vec<usize> = (0..shares.len()).collect();
    order.sort_by(|&a, &b| (exact[b] - steps[b]).total_cmp(&(exact[a] - steps[a])).then(a.cmp(&b)));
    for &index in order.iter().take(missing.max(0.0) as usize) {
        steps[index] += 1.0;
    }
    steps.into_iter().map(|step| step / scale).collect()
}

/// Shares below this part of the limit are left out of the bars.
const TELLING: f64 = 1e-6;

/// Bars of what adds up to a demand, the sum below them; a full bar is the limit. What adds nothing is left out.
pub(super) fn sum_of(mut rows: Vec<(String, f64)>, limit: Measure) -> Vec<Bar> {
    rows.retain(|(_, share)| share.abs() > TELLING * limit.si);
    let of = |si: f64| Measure::si(si, limit.of);
    let total = of(rows.iter().map(|(_, share)| share).sum());
    let digits = match total.of {
        crate::units::Dimension::Inertia => 3,
        _ => usize::from(total.si.abs() < 99.95),
    };
    let figures = adding_up(&rows.iter().map(|(_, share)| of(*share)).collect::<Vec<_>>(), digits);
    rows.push(("together".to_owned(), total.si));
    let told = figures.into_iter().map(|figure| of(figure).text(digits)).chain([total.text(digits)]);
    rows.iter().zip(told).map(|((name, share), figure)| Bar { name: name.clone(), figure, share: share / limit.si }).collect()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Dimension;

    #[test]
    fn figures_add_up_to_the_sum_that_is_shown() {
        let shares = [-100.4, -200.4, -50.4, 12.6].map(|nm| Measure::si(nm, Dimension::Torque));
        let figures = adding_up(&shares, 0);
        assert_eq!(figures.iter().sum::<f64>(), -339.0);
        for (figure, share) in figures.iter().zip(&shares) {
            assert!((figure - share.shown()).abs() < 1.0);
        }
    }

    #[test]
    fn long_rows_are_cut_short() {
        let words = |n: usize| (1..=n).map(|j| format!("{j}")).collect::<Vec<_>>();
        assert_eq!(first_of(&words(12)), words(12));
        assert_eq!(first_of(&words(100)).last().expect("some"), "88 more");
    }

    #[test]
    fn rows_of_words_read_aloud() {
        let words = |n: usize| (1..=n).map(|j| format!("J{j}")).collect::<Vec<_>>();
        assert_eq!(all_of(&words(1)), "J1");
        assert_eq!(all_of(&words(3)), "J1, J2 and J3");
    }
}
