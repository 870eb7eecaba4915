use toml::de::DeTable;

use crate::checks::Check;
use crate::review::{Date, Matter, NotTaken, Reason, SignOff};

use super::content::quoted;
use super::page::{Page, parse, without_mark};
use super::table::Table;
use super::{Rejected, Source, heading};

/// Puts the answers of a file of reasons into a sign-off: `accept` for findings, `settle` for doubts, `confirm` for data.
///
/// # Errors
/// Everything that is wrong with the file, and every answer that no question belongs to or that can't be taken. The sign-off is then
/// not to be used.
pub fn read_reasons(source: &Source, sign_off: &mut SignOff, by: &str, on: Date) -> Result<(), Rejected> {
    let text = without_mark(&source.text);
    let root = parse(text, &source.path)?;
    let page = Page::new(text, &source.path, root.get_ref());
    answer(&page, root.get_ref(), sign_off, by, on);
    page.rejection().map_or(Ok(()), Err)
}

fn answer(page: &Page<'_>, root: &DeTable<'_>, sign_off: &mut SignOff, by: &str, on: Date) {
    let top = page.top("reasons");
    if !heading::judge(page, root, &top, &heading::REASONS, &heading::RECIPE) {
        return;
    }
    top.only(&[heading::REASONS.key, "accept", "settle", "confirm"]);
    let reason = |table: &Table<'_>| {
        let words = table.text("reason", "the reason in words")?;
        Some(Reason { words: words.to_owned(), by: by.to_owned(), on })
    };
    let taken = |table: &Table<'_>, key: &str, result: Result<(), NotTaken>| {
        if let Err(why) = result {
            table.complain(key, why);
        }
    };
    for table in top.tables("accept") {
        table.only(&["to", "blend", "check", "joint", "says", "reason"]);
        let Some((matter, reason)) = matter(&table).zip(reason(&table)) else { continue };
        let found = sign_off.questions().iter().position(|question| question.matter == matter);
        let Some(index) = found else {
            table.complain("to", "there is no such finding; elbowroom sign --template lists them");
            continue;
        };
        // Where the file says what was accepted, that must still be what was found.
        let says = &sign_off.questions()[index].says;
        match table.maybe_text("says") {
            Some(given) if given != says => {
                table.complain("says", format_args!("the finding now says {}", quoted(says)));
            }
            _ => taken(&table, "reason", sign_off.accept(index, reason)),
        }
    }
    for table in top.tables("settle") {
        table.only(&["doubt", "says", "reason"]);
        let Some((key, reason)) = table.text("doubt", "the doubt's short name").zip(reason(&table)) else { continue };
        match sign_off.doubts().iter().position(|doubt| doubt.key == key) {
            Some(index) => taken(&table, "reason", sign_off.settle(index, reason)),
            None => table.complain("doubt", "there is no such doubt; elbowroom sign --template lists them"),
        }
    }
    for table in top.tables("confirm") {
        table.only(&["of", "value", "at"]);
        let Some((of, value)) = table.words("of").zip(table.words("value")) else { continue };
        match sign_off.data().iter().position(|datum| datum.of == of) {
            None => table.complain("of", "there is no such datum; elbowroom sign --template lists them"),
            Some(index) if sign_off.data()[index].value != value => {
                table.complain("value", format_args!("the value is now {}", quoted(&sign_off.data()[index].value)));
            }
            Some(index) => taken(&table, "of", sign_off.confirm(index, true)),
        }
    }
}

fn matter(table: &Table<'_>) -> Option<Matter> {
    let to = table.text("to", "the waypoint that the segment arrives at")?.to_owned();
    let check = table.word("check", &Check::ALL.map(|check| (check.key(), check)));
    if !table.has("check") {
        table.missing("check", "it must be the name of a check");
    }
    Some(Matter { to, blend: table.is_true("blend"), check: check?, joint: table.maybe_text("joint").unwrap_or("").to_owned() })
}

/// A file of reasons with every question in it and every answer left empty, for a person to fill in. Data stand in it as comments:
/// each is confirmed by taking away the marks before it.
pub fn reasons_template(sign_off: &SignOff) -> String {
    let mut text = format!(
        "# Answers for \"elbowroom sign --reasons\". An entry without a reason is not taken.\n{} = 1\n",
        heading::REASONS.key
    );
    for doubt in sign_off.doubts() {
        text += &format!("\n# {}\n[[settle]]\ndoubt = {}\nreason = \"\"\n", doubt.says, quoted(&doubt.key));
    }
    for question in sign_off.questions() {
        if !question.may_be_accepted() {
            text += &format!("\n# To \"{}\": {}. No reason is enough for that.\n", question.matter.to, question.says);
            continue;
        }
        let blend = if question.matter.blend { "blend = true\n" } else { "" };
        text += &format!(
            "\n[[accept]]\nto = {}\n{blend}check = \"{}\"\njoint = {}\nsays = {}\nreason = \"\"\n",
            quoted(&question.matter.to),
            question.matter.check.key(),
            quoted(&question.matter.joint),
            quoted(&question.says)
        );
    }
    for datum in sign_off.data() {
        text += &format!("\n# {}\n# [[confirm]]\n# of = {}\n# value = {}\n", datum.at, quoted(&datum.of), quoted(&datum.value));
    }
    text
}
