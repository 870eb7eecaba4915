use std::fmt::Write;

use crate::review::{Accepted, Datum, Person, Record, SealedCheck, SealedSegment, Settled};
use crate::seal::Digest;

use super::content::quoted;
use super::heading;

/// The first lines of every record.
const FOREWORD: &str = "\
# A sign-off record of Elbowroom. It says what was judged and what came of it; it is no leave to run an arm.
# Any change of any byte voids it. \"elbowroom verify\" tells whether it still stands.
";

/// Writes a record. The same record always yields the same bytes, and no other bytes are ever taken for it.
pub fn record_text(record: &Record) -> String {
    let mut out = Out(FOREWORD.to_owned());
    body(&mut out, record);
    for person in &record.people {
        one_person(&mut out, person);
    }
    out.0
}

/// What person `index` (counted from 0) signs: the record as it stood when they had put their name under it.
pub fn signed_part(record: &Record, index: usize) -> String {
    let people = record.people.iter().take(index + 1).cloned().collect();
    record_text(&Record { people, ..record.clone() })
}

struct Out(String);

impl Out {
    fn line(&mut self, line: &str) {
        self.0.push_str(line);
        self.0.push('\n');
    }

    fn text(&mut self, key: &str, value: &str) {
        self.line(&format!("{key} = {}", quoted(value)));
    }

    /// An array with an entry a line; `[]` for none.
    fn list(&mut self, key: &str, entries: impl IntoIterator<Item = String>) {
        let mut rows = String::new();
        for entry in entries {
            // Text takes everything.
            let _ = writeln!(rows, "  {entry},");
        }
        if rows.is_empty() { self.line(&format!("{key} = []")) } else { self.line(&format!("{key} = [\n{rows}]")) }
    }

    fn head(&mut self, table: &str) {
        self.line(&format!("\n{table}"));
    }
}

/// Texts as a TOML array.
fn row<const N: usize>(texts: [&str; N]) -> String {
    format!("[{}]", texts.map(quoted).join(", "))
}

fn body(out: &mut Out, record: &Record) {
    out.line(&format!("{} = 1", heading::RECORD.key));
    out.text("program", &record.program);
    out.text("name", &record.name);
    out.text("verdict", record.verdict.word());
    for (key, file) in [("recipe", &record.recipe), ("arm", &record.arm)] {
        out.line(&format!("{key} = {{ file = {}, sha256 = \"{}\" }}", quoted(&file.path), file.digest));
    }
    out.text("content-sha256", &crate::seal::content_digest(&record.content).to_string());
    out.list("content", record.content.iter().map(|item| row([&item.of, &item.key, &item.value])));
    out.list("tightest", record.tightest.iter().map(|t| row([&t.joint, &t.segment, t.check.key(), &t.room])));
    out.text("clear-to", &record.first_run.highest);
    out.list("stages", record.first_run.stages.iter().map(|(share, verdict)| row([share, verdict.word()])));
    out.list("not-checked", record.not_checked.iter().map(|told| quoted(told)));
    out.list("cautions", record.cautions.iter().map(|told| quoted(told)));
    for segment in &record.segments {
        one_segment(out, segment);
    }
    out.head("[cycle]");
    out.text("sha256", &record.cycle.digest.to_string());
    out.list("checks", record.cycle.checks.iter().map(check_row));
    record.accepted.iter().for_each(|accepted| one_accepted(out, accepted));
    record.settled.iter().for_each(|settled| one_settled(out, settled));
    record.data.iter().for_each(|datum| one_datum(out, datum));
}

fn one_segment(out: &mut Out, segment: &SealedSegment) {
    out.head("[[segment]]");
    out.text("to", &segment.to);
    if segment.blend {
        out.line("blend = true");
    }
    out.text("verdict", segment.verdict.word());
    out.text("since", &segment.since.to_string());
    out.text("sha256", &segment.digest.to_string());
    out.text("clear-to", &segment.clear_to);
    out.list("checks", segment.checks.iter().map(check_row));
}

/// Check, joint, verdict, room seen, room proved.
fn check_row(check: &SealedCheck) -> String {
    row([check.check.key(), &check.joint, check.verdict.word(), &check.room, &check.proved])
}

fn one_accepted(out: &mut Out, accepted: &Accepted) {
    out.head("[[accepted]]");
    out.text("to", &accepted.matter.to);
    if accepted.matter.blend {
        out.line("blend = true");
    }
    out.text("check", accepted.matter.check.key());
    out.text("joint", &accepted.matter.joint);
    out.text("says", &accepted.says);
    out.text("reason", &accepted.reason);
    out.text("by", &accepted.by);
    out.text("on", &accepted.on.to_string());
}

fn one_settled(out: &mut Out, settled: &Settled) {
    out.head("[[doubt]]");
    out.text("key", &settled.key);
    out.text("says", &settled.says);
    out.text("reason", &settled.reason);
    out.text("by", &settled.by);
    out.text("on", &settled.on.to_string());
}

fn one_datum(out: &mut Out, datum: &Datum) {
    out.head("[[datum]]");
    out.text("of", &datum.of);
    out.text("value", &datum.value);
    out.text("at", &datum.at);
    if datum.confirmed {
        out.line("confirmed = true");
    }
}

/// A person, closed by a seal: the hash of every byte before the seal's own line.
fn one_person(out: &mut Out, person: &Person) {
    out.head("[[person]]");
    out.text("name", &person.name);
    out.text("role", person.role.words());
    out.text("date", &person.date.to_string());
    out.text("note", &person.note);
    if let Some(key) = &person.key {
        out.text("key", key);
    }
    let seal = Digest::of(out.0.as_bytes());
    out.text("seal", &seal.to_string());
}
