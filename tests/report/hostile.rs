//! Names that try to be something else.

use elbowroom::files::{self, Opened};
use elbowroom::report::Standing;
use elbowroom::review::{SealedFile, Sources};
use elbowroom::seal::{Digest, Item};
use pulldown_cmark::{Event, Options, Parser, Tag, TagEnd};

use super::tags::{Piece, assert_sound, pieces};
use super::{Written, written_with};

/// Each tries to leave its place in one format or the other. Each is one name, whatever is in it.
const NAMES: [&str; 14] = [
    "<script>alert(1)</script>",
    "</td></table><img src=x onerror=alert(1)>",
    "\" onmouseover=\"alert(1)",
    "' id='findings",
    "a | b || c",
    "`code` ``more`` ```",
    "[here](javascript:alert(1)) ![x](ftp://x/y.png)",
    "# heading\n\n## Findings\n| a |\n|---|",
    "line one\r\nline two\u{2028}three",
    "*bold* _under_ ~~gone~~ \\| \\",
    "&lt;b&gt; &amp; &#x41; <!-- gone",
    "gate\u{202e}txt.exe\u{2066}\u{200b}\u{feff}\u{7}\u{1b}[31m\u{0}",
    "see www.example.test and ftp://example.test @anna #12 $x^2$ 100 %",
    "--- +++ === 1. 2) > quote",
];

/// The demonstration with hostile names for everything that has one.
fn hostile() -> Written {
    let mut opened = files::demo();
    let mut names = NAMES.iter().cycle();
    let mut next = |at: usize| format!("{}{at}", names.next().expect("endless"));
    let old: Vec<String> = opened.recipe.waypoints.iter().map(|waypoint| waypoint.name.clone()).collect();
    for (index, _) in old.iter().enumerate() {
        opened.recipe.waypoints[index].name = next(index);
    }
    opened.recipe.name = NAMES[0].to_owned() + NAMES[4] + NAMES[11];
    opened.recipe.tools[0].name = NAMES[1].to_owned() + NAMES[5];
    let load = NAMES[2].to_owned() + NAMES[6];
    for waypoint in &mut opened.recipe.waypoints {
        waypoint.tool = waypoint.tool.as_ref().map(|_| opened.recipe.tools[0].name.clone());
        if let Some(elbowroom::program::Then::Take(taken)) = &mut waypoint.then {
            taken.clone_from(&load);
        }
        if let elbowroom::program::Taught::Pose { near: Some(near), .. } = &mut waypoint.taught {
            let at = old.iter().position(|name| name == near).expect("a waypoint");
            *near = format!("{}{at}", NAMES[at % NAMES.len()]);
        }
    }
    opened.recipe.loads[0].name = load;
    let sources = sources(&opened);
    let told = NAMES.iter().map(|name| (*name).to_owned()).collect();
    written_with(&opened, &sources, Standing::Recorded { stands: false, told, record: None }, true)
}

/// What a file says in the same tone.
fn sources(opened: &Opened) -> Sources {
    let item = |(line, name): (usize, &&str)| Item {
        of: format!("tool \"{name}\""),
        key: (*name).to_owned(),
        value: (*name).to_owned(),
        line,
    };
    let file = |path: &str| SealedFile { path: path.to_owned(), digest: Digest::of(opened.recipe_source.text.as_bytes()) };
    Sources { recipe: file(NAMES[7]), arm: file(NAMES[1]), content: NAMES.iter().enumerate().map(item).collect() }
}

/// A name as a report may show it: nothing hidden in it.
fn shown(name: &str) -> Vec<String> {
    let hidden = |sign: char| sign.is_control() || matches!(sign, '\u{200b}' | '\u{2028}' | '\u{202e}' | '\u{2066}' | '\u{feff}');
    name.split(hidden).map(|part| part.trim().to_owned()).filter(|part| !part.is_empty()).collect()
}

#[test]
fn html_shows_hostile_names_and_is_what_it_was() {
    let (written, harmless) = (hostile(), super::written(&files::demo(), true));
    assert_sound(&written.html);
    written.keep("hostile.html");
    let kinds = |html: &str| -> Vec<String> {
        let named = |piece: Piece| if let Piece::Begins(name, _) = piece { Some(name) } else { None };
        pieces(html)
            .into_iter()
            .filter_map(named)
            .filter(|name| ["section", "h1", "h2", "script", "img", "style"].contains(&name.as_str()))
            .collect()
    };
    assert_eq!(kinds(&written.html), kinds(&harmless.html));
    let text: String = pieces(&written.html)
        .iter()
        .filter_map(|piece| if let Piece::Text(text) = piece { Some(text.as_str()) } else { None })
        .collect();
    for name in NAMES {
        for part in shown(name) {
            assert!(text.contains(&part), "{part}");
        }
    }
    let hidden = |sign: char| {
        (sign.is_control() && sign != '\n')
            || matches!(sign, '\u{200b}'..='\u{200f}' | '\u{202a}'..='\u{202e}' | '\u{2066}' | '\u{feff}')
    };
    assert!(!written.html.contains(hidden) && !written.markdown.contains(hidden));
    assert!(text.contains("gate⟨U+202E⟩txt.exe") && text.contains("line one⟨U+000D⟩⟨U+000A⟩line two"));
}

#[test]
fn markdown_shows_hostile_names_and_is_what_it_was() {
    let (written, harmless) = (hostile(), super::written(&files::demo(), true));
    let options = Options::ENABLE_TABLES
        | Options::ENABLE_STRIKETHROUGH
        | Options::ENABLE_MATH
        | Options::ENABLE_FOOTNOTES
        | Options::ENABLE_TASKLISTS;
    let mut text = String::new();
    let (mut cells, mut columns) = (0, 0);
    for event in Parser::new_ext(&written.markdown, options) {
        match event {
            Event::Text(more) | Event::Code(more) => text.push_str(&more),
            Event::SoftBreak | Event::HardBreak => panic!("a line breaks after {}", &text[text.len().saturating_sub(80)..]),
            // The head, and what keeps a mention apart.
            Event::Html(html) => assert_eq!(html.trim(), "<!-- elbowroom-report/1 -->"),
            Event::InlineHtml(html) => assert_eq!(&*html, "<!-- -->"),
            Event::InlineMath(math) | Event::DisplayMath(math) => panic!("{math}"),
            Event::Start(Tag::Link { dest_url, .. } | Tag::Image { dest_url, .. }) => panic!("{dest_url}"),
            Event::Start(Tag::Emphasis | Tag::Strikethrough | Tag::BlockQuote(_) | Tag::FootnoteDefinition(_)) => {
                panic!("after {text}")
            }
            Event::Start(Tag::Table(alignments)) => columns = alignments.len(),
            Event::Start(Tag::TableRow | Tag::TableHead) => cells = 0,
            Event::Start(Tag::TableCell) => cells += 1,
            Event::End(TagEnd::TableRow | TagEnd::TableHead) => assert_eq!(cells, columns),
            Event::End(TagEnd::TableCell | TagEnd::Paragraph | TagEnd::Item | TagEnd::Heading(_)) => text.push('\n'),
            _ => {}
        }
    }
    for name in NAMES {
        for part in shown(name) {
            assert!(text.contains(&part), "{part}");
        }
    }
    let headings = |markdown: &str| markdown.lines().filter(|line| line.starts_with("# ") || line.starts_with("## ")).count();
    assert_eq!(headings(&written.markdown), headings(&harmless.markdown));
    // Addresses that would become links by themselves, mentions and tickets.
    for sign in ["www.", "ftp:", "@a", " #1"] {
        assert!(!written.markdown.contains(sign), "{sign}");
    }
}
