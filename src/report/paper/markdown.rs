use crate::checks::Verdict;

use super::block::{Block, Cell, Labelled, Ribbon, Table};
use super::markdown_text::{code, escaped};
use super::{REPORT_FORMAT, Report, paper};

/// A report as Markdown with tables, for a pull request or a ticket. Drawings are left out; all that they show stands in words. No
/// address and no markup of its own can come in by the text of the files.
pub fn report_markdown(report: &Report) -> String {
    let paper = paper(report);
    let mut parts = vec![format!("<!-- {REPORT_FORMAT} -->"), format!("# {}", escaped(&paper.title))];
    parts.extend(paper.blocks.iter().map(block).filter(|text| !text.is_empty()));
    parts.join("\n\n") + "\n"
}

fn block(block: &Block) -> String {
    match block {
        Block::Section(_, heading) => format!("## {heading}"),
        Block::Part(_, heading) => format!("### {}", escaped(heading)),
        Block::Lead(_, sentence) => format!("**{}**", escaped(sentence)),
        Block::Says(text) => escaped(text),
        Block::List(items) => items.iter().map(|item| format!("- {}", escaped(item))).collect::<Vec<_>>().join("\n"),
        Block::Steps(items) => {
            items.iter().enumerate().map(|(k, item)| format!("{}. {}", k + 1, escaped(item))).collect::<Vec<_>>().join("\n")
        }
        Block::Labelled(all) => labelled(all),
        Block::Table(told) => table(told),
        Block::Ribbon(drawn) => ribbon(drawn),
        Block::Drawings(..) => String::new(),
    }
}

/// A paragraph for each, the label before the first of its kind; shares of a sum below them.
fn labelled(all: &[Labelled]) -> String {
    let mut parts = Vec::new();
    let mut before = "";
    for one in all {
        let again = one.label == before;
        before = one.label;
        let alone = all.iter().filter(|other| other.label == one.label).count() == 1;
        match (again, alone) {
            (_, true) => parts.push(format!("**{}**: {}", one.label, escaped(&one.text))),
            (false, false) => parts.push(format!("**{}**:\n\n- {}", one.label, escaped(&one.text))),
            // Its own list goes on.
            (true, false) => match parts.last_mut() {
                Some(last) if last.contains("\n- ") => last.push_str(&format!("\n- {}", escaped(&one.text))),
                _ => parts.push(format!("- {}", escaped(&one.text))),
            },
        }
        if !one.bars.is_empty() {
            let rows: String =
                one.bars.iter().map(|bar| format!("\n| {} | {} |", escaped(&bar.name), escaped(&bar.figure))).collect();
            parts.push(format!("| share | figure |\n|---|---:|{rows}"));
        }
    }
    parts.join("\n\n")
}

fn table(told: &Table) -> String {
    let row = |cells: Vec<String>| format!("| {} |", cells.join(" | "));
    let heads = row(told.columns.iter().map(|column| escaped(column.words)).collect());
    let rule: String = told.columns.iter().map(|column| if column.figures { "---:|" } else { "---|" }).collect();
    let rows = told.rows.iter().map(|cells| row(cells.iter().map(cell).collect()));
    let lines: Vec<String> = [heads, format!("|{rule}")].into_iter().chain(rows).collect();
    format!("{}:\n\n{}", escaped(&told.caption), lines.join("\n"))
}

fn cell(cell: &Cell) -> String {
    match cell {
        Cell::Code(text) => code(text),
        Cell::Verdict(Verdict::Clear, words) => escaped(words),
        // What is not clear stands out where colours can't be had.
        Cell::Verdict(_, words) => format!("**{}**", escaped(words)),
        Cell::Text(words) | Cell::Link(_, words) => escaped(words),
    }
}

/// The ribbon in letters. Only checks' words, numbers and letters stand in it, none of which a person wrote.
fn ribbon(drawn: &Ribbon) -> String {
    let rows = drawn.coarse.in_rows(usize::MAX);
    let label = rows.iter().map(|(word, _)| word.len()).max().unwrap_or(0);
    let cells = rows.iter().map(|(_, cells)| cells.len()).max().unwrap_or(0);
    let mut numbers = vec![' '; cells];
    for ((number, ..), [first, end]) in drawn.segments.iter().zip(&drawn.coarse.segments) {
        if number.len() < end.saturating_sub(*first) {
            numbers[*first] = '|';
            numbers.splice(first + 1..first + 1 + number.len(), number.chars());
        }
    }
    let line = |word: &str, cells: &str| format!("{word:>label$} {cells}").trim_end().to_owned();
    let mut lines = vec![line("segment", &numbers.iter().collect::<String>())];
    for (word, cells) in &rows {
        let letters: String = cells.iter().map(|cell| cell.map_or(' ', Verdict::letter)).collect();
        lines.push(line(word, &letters));
    }
    let legend = Verdict::ALL.iter().rev().map(|verdict| format!("{} {}", verdict.letter(), verdict.word()));
    let legend: Vec<String> = legend.collect();
    format!(
        "The worst verdict of every check along the {:.2} s of the cycle ({}):\n\n```text\n{}\n```",
        drawn.lasts,
        legend.join(", ").replace('#', "\\#"),
        lines.join("\n")
    )
}
