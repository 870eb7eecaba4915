use std::ffi::OsString;
use std::io::{self, ErrorKind};
use std::path::{Path, PathBuf};

use super::save::{Content, beside};

/// The folder of ours in a person's state folder.
const OURS: &str = "elbowroom";

/// Where files about a recipe go that are not the recipe: beside it, or into the person's state folder where that can't be written.
#[derive(Debug, Clone)]
pub struct Aside {
    state: Option<PathBuf>,
}

impl Aside {
    /// With a state folder of one's own choice; `None` for none.
    pub fn with(state: Option<PathBuf>) -> Self {
        Self { state }
    }

    /// With the state folder of the person who runs this process: `$XDG_STATE_HOME/elbowroom`, else `~/.local/state/elbowroom`.
    pub fn of_process() -> Self {
        let set = |name: &str| std::env::var_os(name).filter(|value: &OsString| !value.is_empty()).map(PathBuf::from);
        let state = set("XDG_STATE_HOME")
            .filter(|path| path.is_absolute())
            .or_else(|| set("HOME").map(|home| home.join(".local").join("state")));
        Self { state: state.map(|state| state.join(OURS)) }
    }

    /// The places where such a file of a recipe may be, the preferred one first. A recipe goes by where it really is, so that a link
    /// to it means the same.
    pub(super) fn places(&self, recipe: &Path, behind: &str) -> Vec<PathBuf> {
        let real =
            std::fs::canonicalize(recipe).unwrap_or_else(|_| std::path::absolute(recipe).unwrap_or_else(|_| recipe.to_owned()));
        let mut hidden = OsString::from(".");
        hidden.push(real.file_name().unwrap_or_default());
        let own = beside(&real.with_file_name(hidden), behind);
        let away = self.state.as_ref().map(|state| {
            // Recipes of one name in different folders are told apart by the hash of the whole path.
            let whole = Content::of(real.as_os_str().as_encoded_bytes());
            beside(&state.join(real.file_name().unwrap_or_default()), &format!(".{whole}{behind}"))
        });
        [Some(own), away].into_iter().flatten().collect()
    }
}

/// Whether the reason why a file can't be made is its folder, so that another place should be tried.
pub(super) fn is_of_place(error: &io::Error) -> bool {
    matches!(
        error.kind(),
        ErrorKind::PermissionDenied
            | ErrorKind::ReadOnlyFilesystem
            | ErrorKind::StorageFull
            | ErrorKind::QuotaExceeded
            | ErrorKind::NotFound
    )
}

/// Makes sure of the folder of a place in the state folder; the recipe's own folder is never made.
pub(super) fn ready(place: &Path, index: usize) -> io::Result<()> {
    match place.parent() {
        Some(folder) if index > 0 => std::fs::create_dir_all(folder),
        _ => Ok(()),
    }
}
