//! The program that people start.

use std::path::Path;
use std::sync::Arc;

use elbowroom::files::{demo, open};
use elbowroom::tui::{Options, Started, run};

fn main() -> anyhow::Result<()> {
    let opened = match std::env::args().nth(1) {
        Some(path) => open(Path::new(&path))?,
        None => demo(),
    };
    let started = Started {
        arm: Arc::new(opened.arm),
        recipe: Arc::new(opened.recipe),
        recipe_path: opened.recipe_source.path,
        arm_path: opened.arm_source.path,
    };
    run(started, Options::of_environment(|name| std::env::var(name).ok()))
}
