//! The words in which findings are told: what they say for every kind of finding, and that their figures are true.

mod cases;
mod doubts;
mod every_kind;
mod figures;
mod kinds;
mod remedies;
