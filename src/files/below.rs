use std::collections::{BTreeMap, HashSet, VecDeque};
use std::fs::{self, File};
use std::io::{self, Read};
use std::path::{Path, PathBuf};

use super::heading::{ARM, REASONS, RECIPE, RECORD};
use super::{Complaint, Rejected};

/// What was found below a folder.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Below {
    /// The recipes, by path.
    pub recipes: Vec<PathBuf>,
    /// What could not be looked at, so that nobody knows whether it holds recipes: the path and why.
    pub unread: Vec<(PathBuf, Rejected)>,
}

/// A recipe says that it is one before its first table, so that this much of a file is enough to tell, bytes.
const LOOKED_AT: u64 = 64 * 1024;

/// Whether a path leads to a folder.
pub fn is_folder(path: &Path) -> bool {
    path.is_dir()
}

/// All recipes below a folder. A recipe is a file whose name ends in `.toml` and that has the line `elbowroom-recipe`, or waypoints
/// and no line that says that it is something else. Hidden files and folders are left out. Links are followed, every folder and every
/// file is taken once, where it really is if that is below the folder too.
pub fn recipes_below(folder: &Path) -> Below {
    let mut below = Below::default();
    let mut seen = HashSet::new();
    // Real folders before links, so that what can be reached both ways is told by its own path.
    let (mut real, mut links) = (VecDeque::from([folder.to_owned()]), VecDeque::new());
    let mut linked_files = Vec::new();
    let mut files: BTreeMap<PathBuf, PathBuf> = BTreeMap::new();
    while let Some(folder) = real.pop_front().or_else(|| links.pop_front()) {
        let entries = fs::canonicalize(&folder).and_then(|place| {
            if seen.insert(place) { fs::read_dir(&folder)?.collect::<io::Result<Vec<_>>>() } else { Ok(Vec::new()) }
        });
        let entries = match entries {
            Ok(mut entries) => {
                entries.sort_by_key(fs::DirEntry::file_name);
                entries
            }
            Err(error) => {
                below.unread.push(unread(&folder, &format!("the folder can't be listed: {error}")));
                continue;
            }
        };
        for entry in entries.into_iter().filter(|entry| !entry.file_name().as_encoded_bytes().starts_with(b".")) {
            let path = entry.path();
            let is_link = entry.file_type().is_ok_and(|kind| kind.is_symlink());
            let is_toml = path.extension().is_some_and(|end| end.eq_ignore_ascii_case("toml"));
            match fs::metadata(&path) {
                Ok(data) if data.is_dir() => if is_link { &mut links } else { &mut real }.push_back(path),
                Ok(data) if data.is_file() && is_toml && is_link => linked_files.push(path),
                Ok(data) if data.is_file() && is_toml => {
                    files.insert(fs::canonicalize(&path).unwrap_or_else(|_| path.clone()), path);
                }
                Err(error) if is_toml => below.unread.push(unread(&path, &format!("the file can't be looked at: {error}"))),
                _ => {}
            }
        }
    }
    linked_files.sort();
    for path in linked_files {
        files.entry(fs::canonicalize(&path).unwrap_or_else(|_| path.clone())).or_insert(path);
    }
    for path in files.into_values() {
        match beginning(&path) {
            Ok(text) if is_recipe(&text) => below.recipes.push(path),
            Ok(_) => {}
            Err(error) => below.unread.push(unread(&path, &format!("the file can't be read: {error}"))),
        }
    }
    below.recipes.sort();
    below.unread.sort_by(|(a, _), (b, _)| a.cmp(b));
    below
}

fn unread(path: &Path, why: &str) -> (PathBuf, Rejected) {
    (path.to_owned(), Rejected::one(Complaint::whole(&path.display().to_string(), why)))
}

fn beginning(path: &Path) -> io::Result<String> {
    let mut bytes = Vec::new();
    File::open(path)?.take(LOOKED_AT).read_to_end(&mut bytes)?;
    Ok(String::from_utf8_lossy(&bytes).into_owned())
}

/// Whether a text is meant as a recipe, be it a good or a bad one: it is told by its lines, since a bad one may be no TOML.
fn is_recipe(text: &str) -> bool {
    let key =
        |line: &str| line.split('=').next().unwrap_or("").trim_matches(|sign: char| sign.is_whitespace() || sign == '"').to_owned();
    let text = text.trim_start_matches('\u{feff}');
    let top: Vec<String> = text.lines().map(str::trim).take_while(|line| !line.starts_with('[')).map(key).collect();
    let has = |heading: &str| top.iter().any(|key| key == heading);
    if has(RECIPE.key) {
        return true;
    }
    let is_other = [ARM.key, RECORD.key, REASONS.key].into_iter().any(has);
    !is_other && text.lines().any(|line| line.trim().starts_with("[[waypoint]]"))
}

#[cfg(test)]
mod tests {
    use super::is_recipe;

    #[test]
    fn a_recipe_is_told_by_its_heading_or_its_waypoints() {
        for text in [
            "# why\n\nelbowroom-recipe = 1\n",
            "\u{feff}\"elbowroom-recipe\"=9\r\nname = [",
            "elbowroom-recipe\n",
            "elbowroom-recipie = 1\n[[waypoint]]\n",
        ] {
            assert!(is_recipe(text), "{text}");
        }
        for text in [
            "",
            "[package]\nname = \"x\"\n",
            "elbowroom-arm = 1\n[[joint]]\n",
            "elbowroom-signoff = 1\n[[waypoint]]\n",
            "[x]\nelbowroom-recipe = 1\n",
            "# elbowroom-recipe = 1\n",
        ] {
            assert!(!is_recipe(text), "{text}");
        }
    }
}
