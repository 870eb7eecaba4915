//! What the proof costs: a table over random segments from a fixed sequence. Run it with `cargo bench --bench effort`.

#[path = "../random/mod.rs"]
mod random;

use std::time::Instant;

use elbowroom::checks::{Check, Proof, Tally, Unproved, Verdict};
use random::{Draw, Family};

struct Row {
    name: &'static str,
    postures: Vec<usize>,
    trials: usize,
    judged: usize,
    unproven: usize,
    seconds: f64,
}

fn main() {
    let count = std::env::args().filter_map(|a| a.parse().ok()).next().unwrap_or(2_000usize);
    println!("clear segments: postures evaluated for all checks together; {count} segments a row");
    println!(
        "{:<28} {:>6} {:>8} {:>6} {:>6} {:>6} {:>14} {:>9} {:>8}",
        "", "clear", "unproven", "median", "p99", "most", "trials/posture", "us/posture", "us/segm."
    );
    for (name, family, line, seed) in [
        ("lines, spherical wrist", Family::SphericalWrist, true, 11),
        ("lines, offset wrist", Family::OffsetWrist, true, 12),
        ("joint moves, six joints", Family::OffsetWrist, false, 13),
        ("lines, seven joints", Family::Seven, true, 14),
        ("lines, four joints", Family::FourSlide, true, 15),
        ("lines, three joints", Family::ThreeSlide, true, 16),
    ] {
        let row = measure(name, family, line, seed, count);
        print_row(row);
    }
}

fn measure(name: &'static str, family: Family, line: bool, seed: u64, count: usize) -> Row {
    let mut draw = Draw(seed);
    let mut row = Row { name, postures: Vec::new(), trials: 0, judged: 0, unproven: 0, seconds: 0.0 };
    let cases: Vec<_> = (0..count)
        .map(|_| {
            let arm = random::arm(family, &mut draw);
            let recipe = random::segment(&arm, line, &mut draw);
            (arm, recipe)
        })
        .collect();
    let start = Instant::now();
    for (arm, recipe) in cases {
        let judged = random::judged(arm, recipe);
        if judged.plan.segments[0].trouble.is_some() {
            continue;
        }
        let survey = &judged.survey.segments[0];
        row.judged += 1;
        row.unproven += usize::from(Check::ALL.iter().any(|c| survey.check(*c).proof == Proof::Open(Unproved::BudgetSpent)));
        if survey.verdict == Verdict::Clear {
            let Tally { postures, trials } = survey.tally;
            row.postures.push(postures);
            row.trials += trials;
        }
    }
    row.seconds = start.elapsed().as_secs_f64();
    row
}

fn print_row(mut row: Row) {
    row.postures.sort_unstable();
    let at = |share: f64| row.postures[((row.postures.len() - 1) as f64 * share) as usize];
    let sum: usize = row.postures.iter().sum();
    println!(
        "{:<28} {:>6} {:>7.1}% {:>6} {:>6} {:>6} {:>14.1} {:>9.1} {:>8.0}",
        row.name,
        row.postures.len(),
        100.0 * row.unproven as f64 / row.judged as f64,
        at(0.5),
        at(0.99),
        at(1.0),
        row.trials as f64 / sum as f64,
        row.seconds * 1e6 / sum as f64,
        row.seconds * 1e6 / row.judged as f64,
    );
}
