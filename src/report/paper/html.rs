use crate::checks::Verdict;
use crate::review::Bar;

use super::block::{Block, Cell, Column, Drawing, Labelled, Paper, Shows, Table};
use super::markup::Markup;
use super::{REPORT_FORMAT, Report, arm_svg, chart_svg, paper, ribbon_svg};

/// What stands before everything: the kind of document, and that it is a report of ours.
const HEAD: &str = "<!DOCTYPE html>\n<!-- elbowroom-report/1 -->\n";
/// Nothing is fetched and nothing runs, whatever got into the text.
const POLICY: &str = "default-src 'none'; style-src 'unsafe-inline'";

/// A report as one HTML file that needs no other: no script, nothing fetched, readable in light and dark and on paper (A4 or Letter).
pub fn report_html(report: &Report) -> String {
    let paper = paper(report);
    debug_assert!(HEAD.contains(REPORT_FORMAT));
    let mut page = Markup::default();
    page.own(HEAD);
    page.within("html", &[("lang", &"en")], |page| {
        page.within("head", &[], |page| {
            page.void("meta", &[("charset", &"utf-8")]);
            page.void("meta", &[("http-equiv", &"Content-Security-Policy"), ("content", &POLICY)]);
            page.void("meta", &[("name", &"viewport"), ("content", &"width=device-width, initial-scale=1")]);
            page.void("meta", &[("name", &"color-scheme"), ("content", &"light dark")]);
            page.void("meta", &[("name", &"generator"), ("content", &format!("Elbowroom {}", env!("CARGO_PKG_VERSION")))]);
            page.says("title", &[], &format!("{}: report", paper.title));
            page.within("style", &[], |page| page.own(include_str!("report.css")));
        });
        page.within("body", &[], |page| body(page, &paper));
    });
    page.finished() + "\n"
}

fn body(page: &mut Markup, paper: &Paper) {
    page.within("header", &[], |page| {
        page.says("p", &[("class", &"kind")], "Elbowroom report: a taught arm program before its first run");
        page.says("h1", &[], &paper.title);
    });
    contents(page, paper);
    let arms = arm_svg::Arms::of(paper);
    page.within("main", &[], |page| {
        arms.shared(page);
        let sections = paper.blocks.chunk_by(|_, next| !matches!(next, Block::Section(..)));
        for section in sections {
            let Some(Block::Section(id, heading)) = section.first() else { continue };
            page.within("section", &[("id", id), ("aria-labelledby", &format!("{id}-heading"))], |page| {
                page.says("h2", &[("id", &format!("{id}-heading"))], heading);
                section[1..].iter().for_each(|block| write(page, block, &arms));
            });
        }
    });
}

fn contents(page: &mut Markup, paper: &Paper) {
    page.within("nav", &[("aria-label", &"Contents")], |page| {
        page.within("ul", &[], |page| {
            for block in &paper.blocks {
                if let Block::Section(id, heading) = block {
                    page.within("li", &[], |page| page.says("a", &[("href", &format!("#{id}"))], heading));
                }
            }
        });
    });
}

fn write(page: &mut Markup, block: &Block, arms: &arm_svg::Arms) {
    match block {
        Block::Section(..) => {}
        Block::Part(id, heading) => page.says("h3", &[("id", id)], heading),
        Block::Lead(verdict, sentence) => page.says("p", &[("class", &format!("lead {}", class(*verdict)))], sentence),
        Block::Says(text) => page.says("p", &[], text),
        Block::List(items) => list(page, "ul", items),
        Block::Steps(items) => list(page, "ol", items),
        Block::Labelled(all) => labelled(page, all),
        Block::Table(told) => table(page, told),
        Block::Ribbon(drawn) => ribbon_svg::draw(page, drawn),
        Block::Drawings(heading, all) => {
            heading.iter().for_each(|heading| page.says("h3", &[], heading));
            page.within("div", &[("class", &"drawings")], |page| all.iter().for_each(|drawing| draw(page, drawing, arms)));
        }
    }
}

fn list(page: &mut Markup, name: &'static str, items: &[String]) {
    page.within(name, &[], |page| items.iter().for_each(|item| page.says("li", &[], item)));
}

fn labelled(page: &mut Markup, all: &[Labelled]) {
    page.within("dl", &[], |page| {
        let mut before = "";
        for one in all {
            if one.label != before {
                page.says("dt", &[], one.label);
            }
            before = one.label;
            page.within("dd", &[], |page| {
                page.words(&one.text);
                if !one.bars.is_empty() {
                    bars(page, &one.bars);
                }
            });
        }
    });
}

/// Widest bar, in units of its drawing, and where the limit is: a sum may be more.
const BAR: f64 = 200.0;
const LIMIT: f64 = 160.0;

/// Shares of a sum: name, figure, and a bar whose length stands in the figure too.
fn bars(page: &mut Markup, bars: &[Bar]) {
    // The sum stands last.
    let total = bars.last().map_or(0.0, |bar| bar.share);
    page.within("table", &[("class", &"bars")], |page| {
        page.says("caption", &[], "Shares; the mark is the limit");
        page.within("thead", &[], |page| {
            page.within("tr", &[], |page| {
                page.says("th", &[("scope", &"col")], "share");
                page.says("th", &[("scope", &"col"), ("class", &"figure")], "figure");
                page.says("th", &[("scope", &"col")], "drawn");
            });
        });
        page.within("tbody", &[], |page| {
            for bar in bars {
                page.within("tr", &[], |page| {
                    page.says("th", &[("scope", &"row")], &bar.name);
                    page.says("td", &[("class", &"figure")], &bar.figure);
                    page.within("td", &[], |page| drawn_bar(page, bar, total));
                });
            }
        });
    });
}

fn drawn_bar(page: &mut Markup, bar: &Bar, total: f64) {
    let size = [("viewBox", &"0 0 200 10" as &dyn std::fmt::Display), ("class", &"bar"), ("aria-hidden", &"true")];
    page.within("svg", &size, |page| {
        let width = (bar.share.abs() * LIMIT).min(BAR);
        if width.is_finite() {
            let kind = if bar.share * total < 0.0 { "against" } else { "adds" };
            page.shape("rect", &[("class", &kind), ("x", &0), ("y", &1), ("width", &format!("{width:.1}")), ("height", &8)]);
        }
        page.shape("path", &[("class", &"limit"), ("d", &format!("M{LIMIT} 0V10"))]);
    });
}

/// A table of no more rows is kept on one page.
const SHORT: usize = 16;
/// In a table of more columns than this figures may stand below their verdicts on paper.
const MANY: usize = 8;
/// A table with a cell of more letters than this is not squeezed onto a small screen, but moved.
const LONG: usize = 120;

fn table(page: &mut Markup, told: &Table) {
    // What is wider than the screen is moved by itself, not the whole page; the keyboard must get there too.
    let about = [("class", &"wide" as &dyn std::fmt::Display), ("tabindex", &0), ("role", &"group"), ("aria-label", &told.caption)];
    let mut kind = Vec::new();
    kind.extend((told.rows.len() <= SHORT).then_some("short"));
    kind.extend((told.columns.len() > MANY).then_some("many"));
    kind.extend(told.rows.iter().flatten().any(|cell| cell.words().len() > LONG).then_some("prose"));
    page.within("div", &about, |page| {
        page.within("table", &[("class", &kind.join(" "))], |page| {
            page.says("caption", &[], &told.caption);
            page.within("thead", &[], |page| {
                page.within("tr", &[], |page| {
                    for column in &told.columns {
                        let kind: &str = if column.figures { "figure" } else { "words" };
                        page.says("th", &[("scope", &"col"), ("class", &kind)], column.words);
                    }
                });
            });
            page.within("tbody", &[], |page| told.rows.iter().for_each(|row| table_row(page, row, &told.columns)));
        });
    });
}

fn table_row(page: &mut Markup, row: &[Cell], columns: &[Column]) {
    page.within("tr", &[], |page| {
        for (index, (cell, column)) in row.iter().zip(columns).enumerate() {
            let mut kind = vec![if column.figures { "figure" } else { "words" }];
            kind.extend(matches!(cell, Cell::Code(_)).then_some("code"));
            if let Cell::Verdict(verdict, _) = cell {
                kind.push(class(*verdict));
            }
            let kind = kind.join(" ");
            let inner = |page: &mut Markup| match cell {
                Cell::Verdict(verdict, words) => {
                    page.says("span", &[("class", &"sign"), ("aria-hidden", &"true")], &sign(*verdict));
                    page.words(words);
                }
                Cell::Code(text) => page.says("code", &[], text),
                Cell::Link(id, words) => page.says("a", &[("href", &format!("#{id}"))], words),
                Cell::Text(words) => page.words(words),
            };
            if index == 0 {
                page.within("th", &[("scope", &"row"), ("class", &kind)], inner);
            } else {
                page.within("td", &[("class", &kind)], inner);
            }
        }
    });
}

fn draw(page: &mut Markup, drawing: &Drawing, arms: &arm_svg::Arms) {
    page.within("figure", &[], |page| {
        match &drawing.shows {
            Shows::Chart(curve) => chart_svg::draw(page, curve, &drawing.caption),
            Shows::Arm(stance) => arms.draw(page, stance, &drawing.caption),
        }
        page.says("figcaption", &[], &drawing.caption);
    });
}

/// The class of a verdict in the style sheet. Its colour never stands alone: the word, a letter or a shape is always there too.
pub(super) fn class(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::Clear => "clear",
        Verdict::Tight => "tight",
        Verdict::Unproven => "unproven",
        Verdict::Over => "over",
        Verdict::NoPath => "nopath",
    }
}

/// The letter of a verdict, as it stands in its box.
pub(super) fn sign(verdict: Verdict) -> String {
    if verdict == Verdict::Clear { "·".to_owned() } else { verdict.letter().to_string() }
}
