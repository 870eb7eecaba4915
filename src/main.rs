//! The program that people start.

use std::sync::Arc;
use elbowroom::checks::Watch;
use elbowroom::review::Judged;

fn main() {
    let o = elbowroom::files::demo();
    let t = std::time::Instant::now();
    let j = Judged::of(&Arc::new(o.arm), &Arc::new(o.recipe), None, &Watch::default()).unwrap();
    println!("{:?}", t.elapsed());
    println!("{}", elbowroom::review::headline(&j));
    for f in &j.survey.findings { println!("{f:?}"); }
    for d in &j.survey.doubts { println!("{d:?}"); }
    for s in &j.survey.segments { let n = s.nearest(); println!("{} {:?} looks {} nearest {:?}", s.segment, s.verdict, s.looked_at, n.map(|(c,p)|(c.check,p.joint,p.room.as_percent(), p.demand.to_string(), p.limit.to_string()))); }
    println!("{:?} {}", j.plan.starts, j.plan.duration());
}
