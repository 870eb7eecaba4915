//! What the proof costs: tables over random segments from a fixed sequence. Run it with `cargo bench --bench effort`, with more
//! segments a row with `cargo bench --bench effort -- 10000`.

#[path = "../random/mod.rs"]
mod random;

use std::collections::BTreeMap;
use std::time::Instant;

use elbowroom::checks::{Check, Proof, Tally, Verdict};
use elbowroom::kinematics::{singular_posture, spherical_wrist};
use elbowroom::motion::Follower;
use elbowroom::review::Judged;
use random::{Draw, Family};

/// Lines that come this near to a singular posture, rad of joint motion, stand in a table of their own.
const NEAR: f64 = 0.05;
/// Places at which the nearness is looked at.
const LOOKS: usize = 64;

#[derive(Default)]
struct Row {
    name: &'static str,
    postures: Vec<usize>,
    trials: usize,
    judged: usize,
    unproven: BTreeMap<String, usize>,
    gap: Option<(f64, Check)>,
    seconds: f64,
}

fn main() {
    let count = std::env::args().filter_map(|a| a.parse().ok()).next().unwrap_or(2_000usize);
    let mut near = Vec::new();
    heading(&format!("clear segments, postures evaluated for all checks together; {count} segments drawn a row"));
    for (name, family, line, seed) in [
        ("lines, spherical wrist", Family::SphericalWrist, true, 11),
        ("lines, offset wrist", Family::OffsetWrist, true, 12),
        ("joint moves, six joints", Family::OffsetWrist, false, 13),
        ("lines, seven joints", Family::Seven, true, 14),
        ("lines, four joints", Family::FourSlide, true, 15),
        ("lines, three joints", Family::ThreeSlide, true, 16),
    ] {
        let [far, close] = measure(name, family, line, seed, count);
        far.print();
        near.push(close);
    }
    heading(&format!("the same for lines that come within {NEAR} rad of a singular posture (seven joints are not told apart)"));
    for row in near.into_iter().filter(|row| row.judged > 0) {
        row.print();
    }
}

fn heading(title: &str) {
    println!("\n{title}");
    println!(
        "{:<24} {:>6} {:>6} {:>6} {:>5} {:>5} {:>14} {:>10} {:>8}  {:<26} unproven, why",
        "", "judged", "clear", "median", "p99", "most", "trials/posture", "us/posture", "us/segm.", "largest gap, seen to proved"
    );
}

/// Two rows: what stays away from singular postures, and what does not.
fn measure(name: &'static str, family: Family, line: bool, seed: u64, count: usize) -> [Row; 2] {
    let mut draw = Draw(seed);
    let mut rows = [Row { name, ..Row::default() }, Row { name, ..Row::default() }];
    for _ in 0..count {
        let arm = random::arm(family, &mut draw);
        let recipe = random::segment(&arm, line, &mut draw);
        let start = Instant::now();
        let judged = random::judged(arm, recipe);
        let seconds = start.elapsed().as_secs_f64();
        if judged.plan.segments[0].trouble.is_none() {
            rows[usize::from(line && is_near(&judged))].add(&judged, seconds);
        }
    }
    rows
}

fn is_near(judged: &Judged) -> bool {
    let (arm, segment) = (&judged.arm, &judged.plan.segments[0]);
    let wrist = spherical_wrist(arm.chain());
    let follower = Follower::of(arm, segment);
    let distance = |k: usize| singular_posture(arm, wrist, &follower.at(k as f64 / LOOKS as f64)?.q).map(|near| near.distance);
    (0..=LOOKS).filter_map(distance).any(|distance| distance < NEAR)
}

impl Row {
    fn add(&mut self, judged: &Judged, seconds: f64) {
        let survey = &judged.survey.segments[0];
        self.judged += 1;
        self.seconds += seconds;
        let open = survey.checks.iter().find_map(|result| match result.proof {
            Proof::Open(why) if result.judged && why.is_of_proof_alone() => Some(format!("{:?} {why:?}", result.check)),
            _ => None,
        });
        if let Some(reason) = open {
            *self.unproven.entry(reason).or_default() += 1;
        }
        if survey.verdict == Verdict::Clear {
            let Tally { postures, trials } = survey.tally;
            self.postures.push(postures);
            self.trials += trials;
            if let Some((check, gap)) = survey.largest_gap()
                && self.gap.is_none_or(|(most, _)| gap > most)
            {
                self.gap = Some((gap, check));
            }
        }
    }

    fn print(mut self) {
        self.postures.sort_unstable();
        let at = |share: f64| self.postures.get(((self.postures.len().max(1) - 1) as f64 * share) as usize).copied().unwrap_or(0);
        let sum: usize = self.postures.iter().sum::<usize>().max(1);
        let open: usize = self.unproven.values().sum();
        let reasons: Vec<String> = self.unproven.iter().map(|(why, count)| format!("{why} {count}")).collect();
        let gap = self.gap.map_or(String::new(), |(gap, check)| format!("{:.1} % ({check:?})", 100.0 * gap));
        println!(
            "{:<24} {:>6} {:>6} {:>6} {:>5} {:>5} {:>14.1} {:>10.1} {:>8.0}  {gap:<26} {:.1} % {}",
            self.name,
            self.judged,
            self.postures.len(),
            at(0.5),
            at(0.99),
            at(1.0),
            self.trials as f64 / sum as f64,
            self.seconds * 1e6 / sum as f64,
            self.seconds * 1e6 / self.judged as f64,
            100.0 * open as f64 / self.judged as f64,
            reasons.join(", "),
        );
    }
}
