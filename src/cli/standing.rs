use std::path::{Path, PathBuf};

use crate::files::{Opened, is_there, no_link, read_record, read_text, record_path, signature_path, signed_part};
use crate::report::Standing;
use crate::review::{Compared, FirstRun, Judged, Outcome, Record, Sources, compare_record};
use crate::seal::{Digest, Signers, check_signature};

/// Whether the record beside a recipe stands, as `verify` says it; a record that can't be read does not.
///
/// # Errors
/// That the list of signers can't be read.
pub(super) fn standing(
    recipe: &Path,
    opened: &Opened,
    judged: &Judged,
    sources: &Sources,
    run: &FirstRun,
    signers: Option<&Path>,
) -> anyhow::Result<Standing> {
    let place = record_path(recipe);
    let name = place.file_name().unwrap_or_default().to_string_lossy().into_owned();
    if !is_there(&place) {
        return Ok(Standing::Nothing(format!("There is no record {name} beside it.")));
    }
    let falls = |why: String| Ok(Standing::Recorded { stands: false, told: vec![why], record: None });
    let links = [place.as_path(), recipe, Path::new(&opened.arm_source.path)];
    if let Some(link) = links.into_iter().find_map(|path| no_link(path).err()) {
        return falls(link.to_string());
    }
    let (source, record) = match read_text(&place).and_then(|source| read_record(&source).map(|record| (source, record))) {
        Ok(read) => read,
        Err(rejected) => return falls(format!("It can't be read: {rejected}")),
    };
    if let Err(other) = recipe_of(&place, &record) {
        return falls(other.to_string());
    }
    let (mut told, unchanged) = outcome(&compare_record(&record, judged, sources, run));
    let (names, good) = signatures(&place, signers, &record)?;
    told.extend(names);
    let seal = Digest::of(source.text.as_bytes());
    Ok(Standing::Recorded { stands: unchanged && good, told, record: Some((Box::new(record), seal)) })
}

/// The recipe that a record is of: beside it, under the name that it gives.
pub(super) fn recipe_of(place: &Path, record: &Record) -> anyhow::Result<PathBuf> {
    let recipe = place.with_file_name(&record.recipe.path);
    anyhow::ensure!(
        Path::new(&record.recipe.path).components().count() == 1,
        "the record names its recipe by a path, {}; it must be a name in its own folder",
        record.recipe.path
    );
    anyhow::ensure!(
        record_path(&recipe) == place,
        "the record is of {} and must be called {}: it was renamed, or belongs to another recipe",
        record.recipe.path,
        record_path(&recipe).display()
    );
    Ok(recipe)
}

/// What became of a record, in lines, and whether it stands.
pub(super) fn outcome(compared: &Compared) -> (Vec<String>, bool) {
    let mut lines = Vec::new();
    let bytes = |compared: &Compared| compared.other_bytes.join(" and ");
    let stands = match compared.outcome {
        Outcome::Stands if compared.other_bytes.is_empty() => {
            lines.push("the record stands: the same files, the same results".to_owned());
            true
        }
        Outcome::Stands => {
            lines.push(format!(
                "the record stands: {} changed in layout or comments only, and the results are the same",
                bytes(compared)
            ));
            true
        }
        Outcome::ContentChanged => {
            lines.push("content changed:".to_owned());
            for change in &compared.changes {
                let value = |value: &Option<String>| value.clone().unwrap_or_else(|| "nothing".to_owned());
                lines.push(format!("  {}, {}: {} -> {}", change.of, change.key, value(&change.before), value(&change.after)));
            }
            lines.extend(compared.segments.iter().map(|segment| format!("  {}", segment.words())));
            let count = compared.standing.len();
            lines.push(format!("  {count} segments stand as they were signed; the others need signing again"));
            false
        }
        Outcome::OtherVersion => {
            lines.push("made by another version whose results differ:".to_owned());
            lines.extend(compared.differences.iter().map(|told| format!("  {told}")));
            false
        }
        Outcome::ResultsDiffer => {
            lines.push("the record says something else than is found in the same content:".to_owned());
            lines.extend(compared.differences.iter().map(|told| format!("  {told}")));
            false
        }
    };
    (lines, stands)
}

/// What the names under a record are worth, a line each, and whether no signature is bad, missing or of an unknown signer.
pub(super) fn signatures(place: &Path, signers: Option<&Path>, record: &Record) -> anyhow::Result<(Vec<String>, bool)> {
    let list = signers.map(|path| read_text(path).map(|source| Signers::read(&source.text))).transpose()?;
    let mut lines = Vec::new();
    let mut good = true;
    for (line, why) in list.iter().flat_map(|list| &list.left_out) {
        lines.push(format!("line {line} of the list of signers is left out: {why}"));
    }
    for (index, person) in record.people.iter().enumerate() {
        let who = format!("{} {} on {}", person.role.words(), person.name, person.date);
        let beside = signature_path(place, index);
        let there = is_there(&beside);
        let told = match (&person.key, there) {
            (None, false) => "no signature: a name only".to_owned(),
            (None, true) => {
                good = false;
                format!("signature bad: {} stands there although the record names no key", beside.display())
            }
            (Some(_), false) => {
                good = false;
                format!("signature missing: {} should stand beside the record", beside.display())
            }
            (Some(key), true) => {
                no_link(&beside)?;
                let armoured = read_text(&beside)?.text;
                match check_signature(&armoured, signed_part(record, index).as_bytes()) {
                    Err(bad) => {
                        good = false;
                        format!("signature bad: {bad}")
                    }
                    Ok(signed) if signed.fingerprint != *key => {
                        good = false;
                        format!("signature bad: made by {}, the record names {key}", signed.fingerprint)
                    }
                    Ok(signed) => match list.as_ref().map(|list| list.whose(&signed)) {
                        None => format!("signature good by {key}; whose key that is was not asked (--signers)"),
                        Some(Some(signer)) => format!("signature good, by the key of {}", signer.principal),
                        Some(None) => {
                            good = false;
                            format!("signer unknown: the signature is good, but {key} is not in the list of signers")
                        }
                    },
                }
            }
        };
        lines.push(format!("{who}: {told}"));
    }
    if list.is_some() && record.people.last().is_none_or(|person| person.key.is_none()) {
        good = false;
        // A signature stands for all above it, so only what comes after the last one can have been put there by anybody.
        lines.push(if record.people.iter().all(|person| person.key.is_none()) {
            "no signature although a list of signers was given".to_owned()
        } else {
            "no signature covers the last name, although a list of signers was given: anybody can have put it there".to_owned()
        });
    }
    Ok((lines, good))
}
