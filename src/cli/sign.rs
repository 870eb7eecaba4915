use std::path::Path;
use std::sync::Arc;
use std::time::{SystemTime, UNIX_EPOCH};

use anyhow::Context;

use crate::checks::Watch;
use crate::files::{
    Asks, OwnKey, earlier_record, keep_record, open_itself, read_reasons, read_text, reasons_template, record_path, signed_part,
    sources,
};
use crate::review::{
    Around, Compared, Date, Earlier, Judged, Outcome, Person, Record, SignOff, Sources, compare_record, first_run,
};

use super::args::SignArgs;
use super::code::Code;
use super::key::own_key;
use super::out;

/// What is about to be signed.
pub(super) struct Opened {
    pub judged: Judged,
    pub sources: Sources,
    pub run: crate::review::FirstRun,
}

/// Opens and judges a recipe for a record; a link is refused, since it may lead elsewhere tomorrow.
///
/// # Errors
/// All that is wrong with its files.
pub(super) fn opened(recipe: &Path) -> anyhow::Result<Opened> {
    let opened = open_itself(recipe)?;
    let sources = sources(&opened);
    let (arm, recipe) = (Arc::new(opened.arm), Arc::new(opened.recipe));
    let judged = Judged::of(&arm, &recipe, None, &Watch::default()).expect("nobody stops this watch");
    let run = first_run(&judged, &Watch::default()).expect("nobody stops this watch");
    Ok(Opened { judged, sources, run })
}

/// Signs a recipe off: writes its record, or puts one more name under the record that stands.
pub(super) fn run(args: &SignArgs) -> anyhow::Result<Code> {
    let Opened { judged, sources, run } = opened(&args.recipe)?;
    let mut sign_off = SignOff::of(&judged, &sources);
    let place = record_path(&args.recipe);
    let earlier = earlier_record(&place).context("the record that is there can't be read; move it away first")?;
    let taken = earlier.as_ref().map_or(0, |earlier| sign_off.take_over(earlier));
    if args.template {
        out::print(&reasons_template(&sign_off))?;
        return Ok(Code::Clear);
    }
    let name = args.name.clone().context("--name is needed: who stands for it")?;
    let date = args.date.map_or_else(today, Ok)?;
    if let Some(reasons) = &args.reasons {
        read_reasons(&read_text(reasons)?, &mut sign_off, &name, date)?;
    }
    if let Err(hindrances) = sign_off.can_sign(Around { data_one_by_one: true, ..Around::default() }) {
        out::complain(&format!("{}: not signed:", args.recipe.display()));
        for hindrance in hindrances {
            out::complain(&format!("  {hindrance}"));
        }
        out::complain("elbowroom sign --template prints a file of answers to fill in for --reasons");
        return Ok(Code::NotClear);
    }
    let key = args.key.as_deref().map(own_key).transpose()?;
    let person = Person {
        name,
        role: args.role,
        date,
        note: args.note.clone().unwrap_or_default(),
        key: key.as_ref().map(OwnKey::fingerprint),
    };
    let stands = earlier.filter(|earlier| is_the_same(&compare_record(earlier, &judged, &sources, &run)));
    let (record, is_new) = match stands {
        // One more name under the same record.
        Some(mut record) => {
            record.people.push(person);
            (record, false)
        }
        None => {
            let before = earlier_record(&place)?;
            let bare = Record::of(&judged, &sources, &run, &before.as_ref().map_or_else(Earlier::default, Earlier::of), date);
            let mut record = sign_off.decided(bare);
            record.people.push(person);
            (record, true)
        }
    };
    let told = keep(&place, &record, is_new, key.as_ref())?;
    let still = if taken > 0 { format!("{taken} answers of the earlier record still hold\n") } else { String::new() };
    out::print(&(still + &told))?;
    Ok(Code::Clear)
}

fn is_the_same(compared: &Compared) -> bool {
    compared.outcome == Outcome::Stands && compared.other_bytes.is_empty()
}

/// Writes record and signature, and tells where they are.
fn keep(place: &Path, record: &Record, is_new: bool, key: Option<&OwnKey>) -> anyhow::Result<String> {
    let index = record.people.len() - 1;
    // Signed before anything is written, so that a wrong passphrase leaves everything as it was.
    let signature = key.map(|key| key.sign(&signed_part(record, index), Asks::OnTheTerminal)).transpose()?;
    let kept = keep_record(place, record, is_new, signature.as_deref())?;
    let mut told: Vec<String> = kept.aside.iter().map(|aside| format!("the earlier record is now {}", aside.display())).collect();
    told.push(format!("record: {}, seal {}", place.display(), kept.seal.code()));
    told.push(kept.signature.map_or("no signature: a name only".to_owned(), |at| format!("signature: {}", at.display())));
    let person = &record.people[index];
    told.push(format!(
        "{} {} on {}; the record says what was judged and is no leave to run an arm",
        person.role.words(),
        person.name,
        person.date
    ));
    Ok(told.join("\n") + "\n")
}

/// Today in UTC.
fn today() -> anyhow::Result<Date> {
    let since = SystemTime::now().duration_since(UNIX_EPOCH).context("the clock stands before 1970; give --date")?;
    Ok(Date::after_1970(since.as_secs()))
}
