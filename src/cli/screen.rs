use std::path::Path;
use std::sync::Arc;

use crate::tui::{Options, Started};

use super::args::ScreenArgs;
use super::chosen::opened;
use super::code::Code;

/// Opens the review of a recipe on the screen; of the built-in demonstration cell for none. The one place where the command line
/// meets the screen.
pub(super) fn run(recipe: Option<&Path>, asked: ScreenArgs) -> anyhow::Result<Code> {
    let opened = opened(recipe)?;
    let mut options = Options::of_environment(|name| std::env::var(name).ok());
    options.ascii |= asked.ascii;
    options.mono |= asked.mono;
    options.light = asked.light;
    options.mouse = asked.mouse;
    let started = Started {
        arm: Arc::new(opened.arm),
        recipe: Arc::new(opened.recipe),
        path: recipe.map(Path::to_owned),
        recipe_path: opened.recipe_source.path,
        recipe_text: opened.recipe_source.text,
        arm_text: opened.arm_source.text,
    };
    crate::tui::run(&started, options)?;
    Ok(Code::Clear)
}
