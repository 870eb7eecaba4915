//! What voids a record and what does not, over every figure of a recipe and its arm.

use std::collections::BTreeMap;
use std::sync::Arc;

use elbowroom::checks::{SegmentSurvey, Watch};
use elbowroom::files::{Opened, Source, content, read_arm, read_recipe};
use elbowroom::review::Judged;
use elbowroom::seal::{Digest, content_digest, segment_digest};
use proptest::prelude::*;

/// The recipe and the arm file.
fn texts() -> [String; 2] {
    let read = |name: &str| {
        std::fs::read_to_string(std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("recipes").join(name)).expect("there")
    };
    [read("lid-placing.toml"), read("arms/four-axis-rrpr.toml")]
}

fn opened(texts: &[String; 2]) -> Option<Opened> {
    let [recipe_source, arm_source] = ["recipe", "arm"].map(str::to_owned).map(|path| Source { path, text: String::new() });
    let [recipe_source, arm_source] =
        [Source { text: texts[0].clone(), ..recipe_source }, Source { text: texts[1].clone(), ..arm_source }];
    let arm = read_arm(&arm_source.text, "arm").ok()?;
    let recipe = read_recipe(&recipe_source.text, "recipe", &arm).ok()?;
    Some(Opened { recipe, arm, recipe_source, arm_source })
}

fn digest_of(opened: &Opened) -> Digest {
    let mut items = content(&opened.recipe_source, "");
    items.extend(content(&opened.arm_source, "arm: "));
    content_digest(&items)
}

/// Where numbers stand in the code of a TOML file, comments and names left out.
fn numbers(text: &str) -> Vec<std::ops::Range<usize>> {
    let mut found = Vec::new();
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        let code = line.split('#').next().unwrap_or_default();
        let (mut quoted, mut start) = (false, None);
        // One letter more than there is, so that a number at the end is closed.
        for (k, c) in code.char_indices().chain([(code.len(), '\n')]) {
            let digit = c.is_ascii_digit() || c == '.';
            let begins = c.is_ascii_digit() && !code[..k].ends_with(|before: char| before.is_alphanumeric());
            match start {
                None if !quoted && begins => start = Some(k),
                Some(from) if !digit => {
                    found.push(at + from..at + k);
                    start = None;
                }
                _ => {}
            }
            quoted ^= c == '"';
        }
        at += line.len();
    }
    found
}

/// Every segment by the name of its waypoint: its hash, and what was found on it, its number left out.
fn segments(opened: &Opened) -> BTreeMap<(String, bool), (Digest, SegmentSurvey)> {
    let (arm, recipe) = (Arc::new(opened.arm.clone()), Arc::new(opened.recipe.clone()));
    let judged = Judged::of(&arm, &recipe, None, &Watch::default()).expect("not stopped");
    let plan = &judged.plan;
    let of = |index: usize| {
        let segment = &plan.segments[index];
        let found = (*judged.survey.segments[index]).clone();
        let found = SegmentSurvey { segment: 0, findings: Vec::new(), ..found };
        ((recipe.waypoints[segment.to].name.clone(), segment.blend), (segment_digest(&arm, &recipe, plan, index), found))
    };
    (0..plan.segments.len()).map(of).collect()
}

#[test]
fn every_figure_of_recipe_and_arm_is_part_of_the_content() {
    let texts = texts();
    let before = digest_of(&opened(&texts).expect("fine"));
    let mut edited = 0;
    for file in 0..2 {
        for place in numbers(&texts[file]) {
            let mut after = texts.clone();
            // The last digit changes, so the number does.
            let last = place.end - 1;
            let digit = if texts[file].as_bytes()[last] == b'1' { "2" } else { "1" };
            after[file].replace_range(last..place.end, digit);
            // A figure that can't be is refused, which voids as well.
            let Some(opened) = opened(&after) else { continue };
            edited += 1;
            let line = texts[file][..place.start].lines().count();
            assert_ne!(digest_of(&opened), before, "file {file}, line {line}: {}", &texts[file][place]);
        }
    }
    assert!(edited > 150, "only {edited} figures were edited");
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 48, rng_seed: proptest::test_runner::RngSeed::Fixed(6), failure_persistence: None, ..ProptestConfig::default() })]

    /// Where everything that a verdict depends on is in a segment's hash, no edit can leave the hash and change what is found.
    #[test]
    fn a_segment_whose_hash_is_the_same_is_judged_the_same(file in 0usize..2, which in any::<prop::sample::Index>(), by in 0.9f64..1.1) {
        let texts = texts();
        let before = segments(&opened(&texts).expect("fine"));
        let places = numbers(&texts[file]);
        let place = places[which.index(places.len())].clone();
        let value: f64 = texts[file][place.clone()].parse().expect("a number");
        let mut after = texts.clone();
        after[file].replace_range(place, &format!("{:.3}", value * by + 0.01 * (by - 1.0)));
        if let Some(opened) = opened(&after) {
            for (name, (digest, found)) in segments(&opened) {
                if let Some((_, was)) = before.get(&name).filter(|(known, _)| *known == digest) {
                    // As text, in which what is not judged, and so no number, is the same as itself.
                    prop_assert!(format!("{found:?}") == format!("{was:?}"), "{name:?} is judged otherwise");
                }
            }
        }
    }

    /// Comments, blanks, and ways of writing a number change the bytes and nothing else.
    #[test]
    fn layout_never_voids_content(file in 0usize..2, line in any::<prop::sample::Index>(), words in "[ -~]{0,40}", blanks in 0usize..5) {
        let texts = texts();
        let lines: Vec<&str> = texts[file].lines().collect();
        let at = line.index(lines.len());
        let mut after = texts.clone();
        after[file] = lines
            .iter()
            .enumerate()
            .map(|(k, line)| {
                // A comment behind a line that has none, and one before it.
                let behind = if line.contains('#') || k != at { String::new() } else { format!("{}# {words}", " ".repeat(blanks)) };
                let above = if k == at { format!("#{words}\n{}\n", "\t".repeat(blanks)) } else { String::new() };
                format!("{above}{line}{behind}\r\n")
            })
            .collect();
        prop_assert_eq!(digest_of(&opened(&after).expect("still fine")), digest_of(&opened(&texts).expect("fine")));
    }
}
