//! What stands in a report, in which order.

use super::tags::{Piece, assert_sound, pieces, texts};
use super::{recipe, written};
use elbowroom::files;

/// Headings, captions, columns, labels and what drawings say, a line each.
fn outline(html: &str) -> String {
    let pieces = pieces(html);
    let mut lines = Vec::new();
    for (index, piece) in pieces.iter().enumerate() {
        let Piece::Begins(name, attributes) = piece else { continue };
        let value = |wanted: &str| attributes.iter().find(|(key, _)| key == wanted).map_or("", |(_, value)| value.as_str());
        let told = || texts(&pieces[index..], name).swap_remove(0).replace('\n', " ");
        match name.as_str() {
            "h1" => lines.push(format!("# {}", told())),
            "h2" => lines.push(format!("## {}", told())),
            "h3" => lines.push(format!("### {}", told())),
            "caption" => lines.push(format!("table: {}", told())),
            "thead" => {
                let end = pieces[index..].iter().position(|piece| *piece == Piece::Ends("thead".to_owned())).expect("it ends");
                lines.push(format!("  {}", texts(&pieces[index..index + end], "th").join(" | ")));
            }
            "tbody" => {
                let end = pieces[index..].iter().position(|piece| *piece == Piece::Ends("tbody".to_owned())).expect("it ends");
                let rows =
                    pieces[index..index + end].iter().filter(|piece| matches!(piece, Piece::Begins(name, _) if name == "tr"));
                lines.push(format!("  {} rows", rows.count()));
            }
            "p" => lines.push(format!("p: {}", told().chars().take(60).collect::<String>())),
            "dt" => lines.push(format!("label: {}", told())),
            "ul" | "ol" => {
                let end = pieces[index..].iter().position(|piece| *piece == Piece::Ends(name.clone())).expect("it ends");
                lines.push(format!("{name}: {} entries", texts(&pieces[index..index + end], "li").len()));
            }
            "svg" if value("role") == "img" => lines.push(format!("drawn: {}", value("aria-label"))),
            _ => {}
        }
    }
    lines.join("\n")
}

#[test]
fn a_report_of_the_demonstration_tells_all_in_order() {
    let written = written(&files::demo(), true);
    assert_sound(&written.html);
    insta::assert_snapshot!("demo_markdown", written.markdown);
    insta::assert_snapshot!("demo_outline", outline(&written.html));
    let order =
        ["Summary", "The data judged", "Findings", "Doubts", "Segments", "First run", "Not checked", "Sign-off", "Cautions"];
    let order: Vec<&str> = order.into_iter().chain(["Version and files read"]).collect();
    assert_eq!(texts(&pieces(&written.html), "h2"), order);
    let headings: Vec<&str> = written.markdown.lines().filter_map(|line| line.strip_prefix("## ")).collect();
    assert_eq!(headings, order);
}

#[test]
fn a_clean_recipe_is_clear_as_far_as_judged() {
    let written = written(&files::open(&recipe("lid-placing.toml")).expect("it opens"), true);
    assert_sound(&written.html);
    insta::assert_snapshot!("clean_outline", outline(&written.html));
    assert!(written.markdown.contains("Lid placing: READY TO SIGN: 8 clear"));
    assert!(written.markdown.contains("Clear as far as judged: all 8 segments leave their reserve"));
    for html in [&written.html, &written.markdown] {
        assert!(!html.contains("MAY RUN") && html.contains("Nobody has signed this recipe off."));
    }
}

#[test]
fn what_has_no_path_or_is_unproven_is_told_plainly() {
    let mut opened = files::demo();
    let elbowroom::program::Taught::Pose { pose, .. } = &mut opened.recipe.waypoints[1].taught else { panic!("a pose") };
    pose.at.x += 1.0;
    let written = written(&opened, false);
    assert_sound(&written.html);
    written.keep("no-path.html");
    for told in [
        "NOT READY: 1 no path, 1 over, 1 unproven, 1 tight, 9 clear",
        "Not clear: 4 of 13 segments are not clear. 1 segment is unproven: nothing bad was seen, but it is not known to be clear.",
        "| **no path** | 1 | 2 |",
        "| **unproven** | 1 | 3 |",
        "All that comes after the place where the path is lost, on segment 2, 3.",
    ] {
        assert!(written.markdown.contains(told), "{told}");
    }
}

#[test]
fn nothing_in_it_comes_from_elsewhere() {
    for name in ["housing-transfer.toml", "lid-placing.toml", "sealant-ring.toml", "tray-feed.toml"] {
        let written = written(&files::open(&recipe(name)).expect("it opens"), false);
        assert_sound(&written.html);
        let policy = "<meta http-equiv=\"Content-Security-Policy\" content=\"default-src &#39;none&#39;; style-src &#39;unsafe-inline&#39;\">";
        assert_eq!(written.html.matches(policy).count(), 1);
        let rest = written.html.replace(policy, "").to_lowercase();
        for outward in ["<script", "http", "url(", "@import", "javascript:", "<img", "<link", "<iframe"] {
            assert!(!rest.contains(outward), "{name}: {outward}");
        }
    }
}

#[test]
fn the_same_input_makes_the_same_bytes() {
    let opened = files::open(&recipe("sealant-ring.toml")).expect("it opens");
    let (one, other) = (written(&opened, true), written(&opened, true));
    assert!(one.html == other.html && one.markdown == other.markdown);
}
