//! The proof between samples: `clear` means clear at every instant of a segment, not at every instant that was looked at.
//!
//! A segment is covered by stretches `[m - h, m + h]` of the path's fraction s. In the middle m everything is computed as always;
//! over the stretch every vector is a [ball](ball), and the joint path is enclosed by this theorem.
//!
//! Let Y be any matrix near the inverse of the Jacobian J at m, `u = Y x'` and `a = Y (x'' - J' u)` there. Suppose that for some
//! d > 0, assuming `|q'' - a| <= d` and what follows from it for q', q and J', the bounds E of `|Y J - I|` and `Phi(d)` of
//! `|Y (g - g(m))| + E (|a| + d)` with `g = x'' - J' q'` satisfy `Phi(d) < d` in every component. Then the joint path through
//! q(m) exists on the whole stretch, is the only one near, J is regular there, and `|q'' - a| <= d`.
//!
//! For take the longest stretch around m on which `|q'' - a| <= d`. On it `Y J = I + F` with `|F| <= E`, and `E d <= Phi(d) < d`
//! makes E's spectral radius less than 1, so J is regular and the path goes on. From `Y J q'' = Y g` follows
//! `q'' - a = Y (g - g(m)) - F q''`, so `|q'' - a| <= Phi(d) < d`: strictly less, so the stretch can't end inside.
//!
//! Leaves are joined by a test of one branch at every shared border ([border]). Rounding: radii are taken larger by 1e-10, the
//! misfit of Y and the residual of the inverse kinematics enter the bounds themselves ([leaf]), and every bound is told with an
//! outward margin ([bounds]).
//!
//! On a joint move q' is exact, so no theorem is needed and the balls do all the work. A blend past a fly-by point is a path like
//! any other, its third derivatives bounded in closed form; a blend by joints is a joint move whose slopes change by a known
//! polynomial.

mod ball;
#[cfg(test)]
mod blocks;
mod border;
mod bounds;
mod branch;
mod closeness;
mod cover;
mod effort;
mod flange;
mod leaf;
mod newton_euler;
mod pace;
mod points;
mod torque;
mod view;

pub(super) use cover::{Covered, Stuck, cover};
pub(super) use effort::Effort;
pub use effort::Tally;
