use toml::de::{DeTable, DeValue};

use crate::checks::{Check, Verdict};
use crate::review::{
    Accepted, Date, Datum, Matter, Person, Record, Role, SealedCheck, SealedCycle, SealedFile, SealedRun, SealedSegment, Settled,
    Tightest,
};
use crate::seal::{Digest, Item, content_digest};

use super::page::{Page, parse, without_mark};
use super::table::Table;
use super::{Complaint, Rejected, Source, heading, record_text};

/// Reads a record. Only the very bytes that [`record_text`] writes are taken.
///
/// # Errors
/// Everything that is wrong with its tables; or, where those are in order, the first line that is not as it was written.
pub fn read_record(source: &Source) -> Result<Record, Rejected> {
    let text = without_mark(&source.text);
    let root = parse(text, &source.path)?;
    let page = Page::new(text, &source.path, root.get_ref());
    let record = record_on(&page, root.get_ref());
    if let Some(rejected) = page.rejection() {
        return Err(rejected);
    }
    let whole = |says: String, line: usize| {
        Rejected::one(Complaint { source: source.path.clone(), line, column: usize::from(line > 0), says })
    };
    let Some(record) = record else { return Err(whole("the record could not be read".to_owned(), 0)) };
    let written = record_text(&record);
    if written == source.text {
        return Ok(record);
    }
    let line = written.lines().zip(source.text.lines()).position(|(a, b)| a != b);
    let line = line.unwrap_or_else(|| written.lines().count().min(source.text.lines().count()));
    Err(whole(
        "the record was changed after it was written: this line, or what its seal stands for, is not as it was".to_owned(),
        line + 1,
    ))
}

fn record_on(page: &Page<'_>, root: &DeTable<'_>) -> Option<Record> {
    let top = page.top("record");
    if !heading::judge(page, root, &top, &heading::RECORD, &heading::RECIPE) {
        return None;
    }
    top.only(&[
        heading::RECORD.key,
        "program",
        "name",
        "verdict",
        "recipe",
        "arm",
        "content-sha256",
        "content",
        "tightest",
        "clear-to",
        "stages",
        "not-checked",
        "cautions",
        "segment",
        "cycle",
        "accepted",
        "doubt",
        "datum",
        "person",
    ]);
    let content: Vec<Item> = top.rows("content").into_iter().map(|[of, key, value]| Item { of, key, value, line: 0 }).collect();
    let digest_of_content = digest(&top, "content-sha256");
    if !top.is_bad("content") && digest_of_content.is_some_and(|digest| digest != content_digest(&content)) {
        top.complain("content-sha256", "content-sha256 is not the hash of the content below it: one of the two was changed");
    }
    let people: Vec<Person> = top.tables("person").iter().map(person).collect::<Option<_>>().unwrap_or_default();
    if people.is_empty() {
        top.missing("person", "a record has at least one [[person]] who stands for it");
    }
    Some(Record {
        program: top.words("program")?,
        name: top.words("name")?,
        verdict: verdict(&top)?,
        recipe: file(&top, "recipe")?,
        arm: file(&top, "arm")?,
        content,
        tightest: top.rows("tightest").into_iter().map(|row| tightest(&top, row)).collect::<Option<_>>()?,
        first_run: SealedRun {
            highest: top.words("clear-to")?,
            stages: top.rows("stages").into_iter().map(|row| stage(&top, row)).collect::<Option<_>>()?,
        },
        not_checked: top.long_texts("not-checked"),
        cautions: top.long_texts("cautions"),
        segments: top.tables("segment").iter().map(segment).collect::<Option<_>>()?,
        cycle: cycle(&top)?,
        accepted: top.tables("accepted").iter().map(accepted).collect::<Option<_>>()?,
        settled: top.tables("doubt").iter().map(settled).collect::<Option<_>>()?,
        data: top.tables("datum").iter().map(datum).collect::<Option<_>>()?,
        people,
    })
}

fn digest(table: &Table<'_>, key: &str) -> Option<Digest> {
    let given = table.words(key)?;
    let digest = Digest::from_hex(&given);
    if digest.is_none() {
        table.complain(key, format_args!("{key} must be 64 hexadecimal figures in lower case"));
    }
    digest
}

fn date(table: &Table<'_>, key: &str) -> Option<Date> {
    let given = table.words(key)?;
    let date = Date::read(&given);
    if date.is_none() {
        table.complain(key, format_args!("{key} must be a day, YYYY-MM-DD"));
    }
    date
}

fn verdict(table: &Table<'_>) -> Option<Verdict> {
    let words = Verdict::ALL.map(|verdict| (verdict.word(), verdict));
    if !table.has("verdict") {
        table.missing("verdict", "it must be one of the verdicts");
    }
    table.word("verdict", &words)
}

fn check_word(table: &Table<'_>, key: &str, word: &str) -> Option<Check> {
    let check = Check::from_key(word);
    if check.is_none() {
        table.complain(key, format_args!("{key} names no check: {}", super::value::quoted(word)));
    }
    check
}

fn file(top: &Table<'_>, key: &str) -> Option<SealedFile> {
    if !top.has(key) {
        top.missing(key, "it must be a table { file, sha256 }");
    }
    let table = top.table(key)?;
    table.only(&["file", "sha256"]);
    Some(SealedFile { path: table.words("file")?, digest: digest(&table, "sha256")? })
}

fn tightest(top: &Table<'_>, [joint, segment, check, room]: [String; 4]) -> Option<Tightest> {
    Some(Tightest { joint, segment, check: check_word(top, "tightest", &check)?, room })
}

fn stage(top: &Table<'_>, [share, word]: [String; 2]) -> Option<(String, Verdict)> {
    let verdict = Verdict::from_word(&word);
    if verdict.is_none() {
        top.complain("stages", format_args!("stages names no verdict: {}", super::value::quoted(&word)));
    }
    Some((share, verdict?))
}

fn checks(table: &Table<'_>) -> Option<Vec<SealedCheck>> {
    let check = |[key, joint, word, room, proved]: [String; 5]| {
        let verdict = Verdict::from_word(&word);
        if verdict.is_none() {
            table.complain("checks", format_args!("checks names no verdict: {}", super::value::quoted(&word)));
        }
        Some(SealedCheck { check: check_word(table, "checks", &key)?, joint, verdict: verdict?, room, proved })
    };
    table.rows("checks").into_iter().map(check).collect()
}

fn segment(table: &Table<'_>) -> Option<SealedSegment> {
    table.only(&["to", "blend", "verdict", "since", "sha256", "clear-to", "checks"]);
    Some(SealedSegment {
        to: table.words("to")?,
        blend: table.is_true("blend"),
        verdict: verdict(table)?,
        since: date(table, "since")?,
        digest: digest(table, "sha256")?,
        clear_to: table.words("clear-to")?,
        checks: checks(table)?,
    })
}

fn cycle(top: &Table<'_>) -> Option<SealedCycle> {
    if !top.has("cycle") {
        top.missing("cycle", "it must be a table [cycle]");
    }
    let table = top.table("cycle")?;
    table.only(&["sha256", "checks"]);
    Some(SealedCycle { digest: digest(&table, "sha256")?, checks: checks(&table)? })
}

fn accepted(table: &Table<'_>) -> Option<Accepted> {
    table.only(&["to", "blend", "check", "joint", "says", "reason", "by", "on"]);
    let check = table.words("check")?;
    let matter = Matter {
        to: table.words("to")?,
        blend: table.is_true("blend"),
        check: check_word(table, "check", &check)?,
        joint: table.words("joint")?,
    };
    Some(Accepted {
        matter,
        says: table.words("says")?,
        reason: table.words("reason")?,
        by: table.words("by")?,
        on: date(table, "on")?,
    })
}

fn settled(table: &Table<'_>) -> Option<Settled> {
    table.only(&["key", "says", "reason", "by", "on"]);
    Some(Settled {
        key: table.words("key")?,
        says: table.words("says")?,
        reason: table.words("reason")?,
        by: table.words("by")?,
        on: date(table, "on")?,
    })
}

fn datum(table: &Table<'_>) -> Option<Datum> {
    table.only(&["of", "value", "at", "confirmed"]);
    let confirmed = table.is_true("confirmed");
    Some(Datum { of: table.words("of")?, value: table.words("value")?, at: table.words("at")?, confirmed })
}

fn person(table: &Table<'_>) -> Option<Person> {
    table.only(&["name", "role", "date", "note", "key", "seal"]);
    // The seal is judged with the bytes: only what would be written again is taken.
    digest(table, "seal");
    let role = table.word("role", &Role::ALL.map(|role| (role.words(), role)));
    if !table.has("role") {
        table.missing("role", "it must be \"prepared by\" or \"checked by\"");
    }
    let key = if table.has("key") { table.words("key") } else { None };
    Some(Person { name: table.words("name")?, role: role?, date: date(table, "date")?, note: table.words("note")?, key })
}

impl Table<'_> {
    /// Text of any length that must be there.
    pub(super) fn words(&self, key: &str) -> Option<String> {
        if !self.has(key) {
            self.missing(key, "it must be text in quotes");
        }
        let value = self.get(key)?.get_ref();
        let text = value.as_str().map(str::to_owned);
        if text.is_none() {
            self.complain(key, format_args!("{key} is {}; it must be text in quotes", super::value::describe(value)));
        }
        text
    }

    /// The texts of an array that must be there; none where it can't be taken.
    pub(super) fn long_texts(&self, key: &str) -> Vec<String> {
        let wanted = "it must be an array of texts";
        if !self.has(key) {
            self.missing(key, wanted);
        }
        let Some(value) = self.get(key) else { return Vec::new() };
        let texts = value.get_ref().as_array().map(|items| items.iter().map(|item| item.get_ref().as_str().map(str::to_owned)));
        let texts: Option<Vec<String>> = texts.and_then(Iterator::collect);
        texts.unwrap_or_else(|| {
            self.complain(key, format_args!("{key} is not what is needed here; {wanted}"));
            Vec::new()
        })
    }

    /// The rows of an array of arrays of `N` texts each that must be there; none where it can't be taken.
    pub(super) fn rows<const N: usize>(&self, key: &str) -> Vec<[String; N]> {
        let wanted = format!("it must be an array of rows of {N} texts");
        if !self.has(key) {
            self.missing(key, &wanted);
        }
        let Some(value) = self.get(key) else { return Vec::new() };
        let row = |item: &DeValue<'_>| -> Option<[String; N]> {
            let texts: Option<Vec<String>> =
                item.as_array()?.iter().map(|text| text.get_ref().as_str().map(str::to_owned)).collect();
            texts?.try_into().ok()
        };
        let rows = value.get_ref().as_array().map(|items| items.iter().map(|item| row(item.get_ref())));
        let rows: Option<Vec<[String; N]>> = rows.and_then(Iterator::collect);
        rows.unwrap_or_else(|| {
            self.complain(key, format_args!("{key} is not what is needed here; {wanted}"));
            Vec::new()
        })
    }
}
