//! Remedies: hand-worked cases, what is offered judged afresh, and the least change against a dense search.

#[path = "../random/mod.rs"]
#[expect(dead_code, reason = "these tests draw from a part of it")]
mod random;

mod cases;
mod dense;
mod desk;
mod in_vain;
mod least;
mod offered;
mod outward;
mod two_links;
mod worked;
