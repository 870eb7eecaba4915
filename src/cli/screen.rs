use std::path::Path;

use crate::files::Opened;

use super::args::ScreenArgs;
use super::chosen::opened;
use super::code::Code;

/// Opens the review of a recipe on the screen; of the built-in demonstration cell for none.
pub(super) fn run(recipe: Option<&Path>, options: ScreenArgs) -> anyhow::Result<Code> {
    open_screen(&opened(recipe)?, options)
}

/// The one place where the command line meets the screen: `crate::tui::run::run(Started { .. }, Options { .. })` belongs here.
fn open_screen(opened: &Opened, options: ScreenArgs) -> anyhow::Result<Code> {
    let ScreenArgs { ascii: _, mono: _, light: _, mouse: _ } = options;
    anyhow::bail!("the screen is not part of this build; `elbowroom check` prints the result for {}", opened.recipe_source.path)
}
