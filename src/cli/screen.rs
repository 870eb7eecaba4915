use std::path::Path;
use std::sync::Arc;

use crate::files::{keys_file, open_keys};
use crate::tui::{Keymap, Options, Started, action_name, changeable, kept};

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
        keymap: keymap()?,
    };
    crate::tui::run(&started, options)?;
    Ok(Code::Clear)
}

/// The keys as the person chose them in their keys file, if there is one.
fn keymap() -> anyhow::Result<Keymap> {
    let Some(path) = keys_file() else { return Ok(Keymap::default()) };
    // Named once for the whole run; the reader of the file wants names that live as long as the program.
    let names: Vec<&'static str> = changeable().map(|binding| &*action_name(binding).leak()).collect();
    Ok(Keymap::with(&open_keys(&path, &names, &kept())?))
}
