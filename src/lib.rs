//! Elbowroom reviews a taught robot-arm program before its first run: what happens between the taught points, at speed, with the
//! real tool and part, why something fails, and which change makes it right.
//!
//! The modules stand in layers; each may name only those above it in this list:
//! [`units`], [`geometry`], [`arm`], [`kinematics`], [`program`], [`dynamics`], [`motion`], [`seal`], [`checks`], [`review`], [`files`],
//! [`report`], [`tui`], [`cli`].

pub mod arm;
pub mod checks;
pub mod cli;
pub mod dynamics;
pub mod files;
pub mod geometry;
pub mod kinematics;
pub mod motion;
pub mod program;
pub mod report;
pub mod review;
pub mod seal;
pub mod tui;
pub mod units;
