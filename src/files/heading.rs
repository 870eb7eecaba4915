use toml::de::DeTable;

use crate::units::nearest_word;

use super::page::Page;
use super::table::Table;
use super::value::number;

/// A heading is the line that says what a file is and in which version it is written.
pub(super) struct Heading {
    /// Its key.
    pub key: &'static str,
    /// What such a file is called, with its article.
    pub file: &'static str,
}

/// The heading of an arm file.
pub(super) const ARM: Heading = Heading { key: "elbowroom-arm", file: "an arm file" };

/// The heading of a recipe.
pub(super) const RECIPE: Heading = Heading { key: "elbowroom-recipe", file: "a recipe" };

/// The heading of a sign-off record.
pub(super) const RECORD: Heading = Heading { key: "elbowroom-signoff", file: "a sign-off record" };

/// The heading of a file of reasons.
pub(super) const REASONS: Heading = Heading { key: "elbowroom-reasons", file: "a file of reasons" };

/// The version that this program reads, of every kind.
const VERSION: f64 = 1.0;

/// Judges the heading of a file where `wanted` is needed and `other` might have been given instead. False if the rest of the file
/// is better not looked at, because it is another kind of file, or none of ours.
pub(super) fn judge(page: &Page<'_>, root: &DeTable<'_>, top: &Table<'_>, wanted: &Heading, other: &Heading) -> bool {
    let first_line = format!("{} has the line \"{} = {VERSION}\"", wanted.file, wanted.key);
    if let Some(value) = root.get(wanted.key) {
        if number(value.get_ref()) == Ok(VERSION) && value.get_ref().is_integer() {
            return true;
        }
        let says = match value.get_ref().as_integer() {
            Some(version) => format!("is {version}; this program reads version {VERSION}"),
            None => format!("must be {VERSION}, the version that this program reads"),
        };
        top.complain(wanted.key, format_args!("{} {says}", wanted.key));
        return false;
    }
    if let Some((key, _)) = root.get_key_value(other.key) {
        page.complain(key.span().start, format!("this is {}, but {} is needed here; {first_line}", other.file, wanted.file));
        return false;
    }
    if root.is_empty() {
        page.complain(0, format!("the file holds nothing; {first_line}"));
        return false;
    }
    if root.keys().any(|key| key.get_ref().len() <= 2 * wanted.key.len() && nearest_word(key.get_ref(), [wanted.key]).is_some()) {
        // A slip of the keys: the walk will say so.
        return true;
    }
    top.missing(wanted.key, &first_line);
    // A file without any of our tables is somebody else's.
    root.contains_key("joint") || root.contains_key("waypoint")
}
