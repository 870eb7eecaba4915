//! How long remedies take on the demonstration, finding by finding: until the first is told, and until all kinds were tried. Run it
//! with `cargo bench --bench remedies`; `-- 5` repeats it.

use std::sync::Arc;
use std::time::Instant;

use elbowroom::checks::Watch;
use elbowroom::files;
use elbowroom::review::{Judged, Told, explain, search};

fn main() {
    let rounds = std::env::args().filter_map(|a| a.parse().ok()).next().unwrap_or(3usize);
    let demo = files::demo();
    let (arm, recipe) = (Arc::new(demo.arm), Arc::new(demo.recipe));
    let judged = Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops it");
    for finding in &judged.survey.findings {
        println!("{}", explain(&judged, finding).title);
        for _ in 0..rounds {
            let start = Instant::now();
            let mut first = None;
            let mut kinds = Vec::new();
            search(&judged, finding, &Watch::default(), |told| {
                let now = start.elapsed().as_secs_f64();
                if matches!(told, Told::Found(_)) {
                    first.get_or_insert(now);
                }
                kinds.push(format!("{:?} {:.0} ms", told.kind(), now * 1e3));
            });
            let first = first.map_or("none".to_owned(), |at| format!("{:.0} ms", at * 1e3));
            println!("  first {first}, all {:.0} ms: {}", start.elapsed().as_secs_f64() * 1e3, kinds.join(", "));
        }
    }
}
