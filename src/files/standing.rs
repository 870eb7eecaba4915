use std::path::Path;

use crate::seal::Digest;

use super::records::earlier_record;
use super::sources::{read_text, record_path};

/// Why a recipe has no record that was made of the very same files by this version of the program; `None` if it has one. Nothing is
/// judged for that and no signature looked at: `compare_record` does the one, `check_signature` the other.
pub fn out_of_date(recipe: &Path) -> Option<String> {
    let record = match earlier_record(&record_path(recipe)) {
        Ok(Some(record)) => record,
        Ok(None) => return Some("no record".to_owned()),
        Err(_) => return Some("its record can't be read".to_owned()),
    };
    let is_same = |path: &Path, digest: &Digest| read_text(path).is_ok_and(|source| Digest::of(source.text.as_bytes()) == *digest);
    if !is_same(recipe, &record.recipe.digest) {
        return Some("changed since its record".to_owned());
    }
    let arm = recipe.parent().unwrap_or(Path::new("")).join(&record.arm.path);
    if !is_same(&arm, &record.arm.digest) {
        return Some("its arm file changed since its record".to_owned());
    }
    let version = env!("CARGO_PKG_VERSION");
    (record.program != version).then(|| format!("its record is of version {}, this is {version}", record.program))
}
