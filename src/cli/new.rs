use std::path::{Component, Path, PathBuf};
use std::sync::Arc;

use anyhow::Context;

use crate::arm::Arm;
use crate::checks::{Verdict, Watch};
use crate::files::{open_arm, read_recipe, starting_arm, starting_postures, starting_recipe, write};
use crate::review::Judged;

use super::args::{NewArgs, NewKind};
use super::code::Code;
use super::out;

/// Writes a starting file, to standard output where no file is named. A file that is there is left alone.
pub(super) fn run(args: &NewArgs) -> anyhow::Result<Code> {
    let (text, file) = match &args.kind {
        NewKind::Arm { file } => (starting_arm().to_owned(), file),
        NewKind::Recipe { arm, file } => (recipe(arm, file.as_deref())?, file),
    };
    match file {
        Some(file) => {
            write(file, &text, None)?;
            out::print(&format!("written: {}\n", file.display()))?;
        }
        None => {
            out::print(&text)?;
        }
    }
    Ok(Code::Clear)
}

/// A recipe for an arm, at a posture where it is clear if there is one among those that are tried.
fn recipe(arm_path: &Path, file: Option<&Path>) -> anyhow::Result<String> {
    let arm = Arc::new(open_arm(arm_path)?);
    let named = seen_from(arm_path, file)?;
    let texts: Vec<String> = starting_postures(&arm).iter().map(|at| starting_recipe(&arm, &named, at)).collect();
    let clear = texts.iter().position(|text| is_clear(text, &arm)).unwrap_or(0);
    texts.into_iter().nth(clear).context("there is no posture to start at")
}

fn is_clear(text: &str, arm: &Arc<Arm>) -> bool {
    let judged = read_recipe(text, "", arm).ok().and_then(|recipe| Judged::of(arm, &Arc::new(recipe), None, &Watch::default()));
    judged.is_some_and(|judged| judged.survey.verdict() == Verdict::Clear)
}

/// The arm file's path as seen from the folder of the recipe.
fn seen_from(arm: &Path, recipe: Option<&Path>) -> anyhow::Result<String> {
    let arm = std::path::absolute(arm)?;
    let folder = match recipe.and_then(Path::parent).filter(|folder| !folder.as_os_str().is_empty()) {
        Some(folder) => std::path::absolute(folder)?,
        None => std::env::current_dir()?,
    };
    let (own, other): (Vec<Component<'_>>, Vec<Component<'_>>) = (folder.components().collect(), arm.components().collect());
    let shared = own.iter().zip(&other).take_while(|(a, b)| a == b).count();
    // A way up through a folder named ".." can't be told; nor can one to another drive.
    let upward = own[shared..].iter().all(|part| matches!(part, Component::Normal(_)));
    let path: PathBuf = if shared > 0 && upward {
        own[shared..].iter().map(|_| Component::ParentDir).chain(other[shared..].iter().copied()).collect()
    } else {
        arm.clone()
    };
    path.to_str()
        .map(str::to_owned)
        .with_context(|| format!("the path {} is not UTF-8 text, which a recipe can't hold", path.display()))
}
