use std::cell::Cell;

use elbowroom::arm::Arm;
use elbowroom::files::{demo, open, read_recipe, text_of_edited, text_of_new};
use elbowroom::program::{Edit, Recipe};

use super::drawn::{Draw, altered, choices, edit, edits, every};
use super::layouts::layout;

/// Reads what may have faults: what a drawn layout left out is put in as far as names go.
fn read(text: &str, arm: &Arm) -> Option<Recipe> {
    read_recipe(text, "drawn", arm).ok()
}

/// The numbers of the comments that are left in a text.
fn comments(text: &str) -> Vec<usize> {
    let mut found: Vec<usize> =
        text.split("# note").skip(1).map(|rest| rest[..rest.find(',').expect("a comma")].parse().expect("a number")).collect();
    found.sort_unstable();
    found
}

/// Whether two recipes are the same to within last digits of orientations that pass through angles.
fn assert_same(read: &Recipe, now: &Recipe, told: &str) {
    let (read, now) = (format!("{read:?}"), format!("{now:?}"));
    let (mut a, mut b) = (read.split([' ', '[', ']', ',']), now.split([' ', '[', ']', ',']));
    loop {
        match (a.next(), b.next()) {
            (None, None) => return,
            (Some(a), Some(b)) if a == b => {}
            (Some(a), Some(b)) => match (a.parse::<f64>(), b.parse::<f64>()) {
                (Ok(a), Ok(b)) if (a - b).abs() <= 4e-15 => {}
                _ => panic!("{a} instead of {b}; {told}"),
            },
            other => panic!("{other:?}; {told}"),
        }
    }
}

#[test]
fn without_an_edit_every_byte_stays() {
    let arm = demo().arm;
    let mut draw = Draw::seeded(1);
    let mut read_well = 0;
    for _ in 0..200 {
        let (text, _) = layout(&mut draw);
        if let Some(recipe) = read(&text, &arm) {
            read_well += 1;
            let saved = text_of_edited(&text, &recipe, &recipe.clone(), &arm);
            assert!(saved.text == text && saved.kept);
        }
    }
    assert!(read_well > 50, "only {read_well} of 200 drawn layouts could be read");
}

#[test]
fn drawn_edits_of_drawn_layouts_read_back_and_keep_the_comments() {
    let arm = demo().arm;
    let judged = Cell::new(0);
    every(1500, &(choices(400), edits(5)), |(choices, all)| {
        let (text, count) = layout(&mut Draw::chosen(choices));
        let Some(before) = read(&text, &arm) else { return };
        let (mut now, mut fresh) = (before.clone(), 0);
        for choices in all {
            edit(&now, &mut Draw::chosen(choices), &mut fresh).apply(&mut now).expect("it fits");
        }
        let saved = text_of_edited(&text, &before, &now, &arm);
        assert!(saved.kept, "written afresh\n{text}");
        assert_eq!(saved.text.starts_with('\u{feff}'), text.starts_with('\u{feff}'));
        if text.contains("\r\n") {
            assert_eq!(saved.text.matches('\n').count(), saved.text.matches("\r\n").count(), "line ends");
        }
        if now.faults(&arm).is_empty() {
            judged.set(judged.get() + 1);
            let again = read(&saved.text, &arm).unwrap_or_else(|| panic!("it does not read\n{}", saved.text));
            assert_same(&again, &now, &saved.text);
        }
        // A note is only gone with what it stood at; none is doubled.
        let left = comments(&saved.text);
        assert!(left.windows(2).all(|pair| pair[0] < pair[1]), "a comment is doubled\n{text}\n->\n{}", saved.text);
        assert!(left.len() <= count);
        let nothing_gone = before.waypoints.iter().all(|old| now.waypoints.iter().any(|new| new == old));
        if nothing_gone
            && now.tools == before.tools
            && now.frames == before.frames
            && now.loads == before.loads
            && now.acceptance == before.acceptance
            && now.mount == before.mount
            && now.carrying == before.carrying
        {
            assert_eq!(left.len(), count, "{text}\n->\n{}", saved.text);
        }
    });
    assert!(std::env::var_os("ELBOWROOM_TEST_CASES").is_some() || judged.get() > 200, "only {} could be read again", judged.get());
}

#[test]
fn an_edit_of_one_waypoint_touches_no_line_of_another() {
    let arm = demo().arm;
    let mut judged = 0;
    for seed in 0..600 {
        let mut draw = Draw::seeded(seed + 5000);
        let (text, _) = layout(&mut draw);
        let Some(before) = read(&text, &arm).filter(|_| text.contains("[[waypoint]]")) else { continue };
        let index = draw.below(before.waypoints.len());
        let mut now = before.clone();
        now.waypoints[index] = altered(&before.waypoints[index], &mut draw);
        let saved = text_of_edited(&text, &before, &now, &arm).text;
        // Bytes up to the heading of this waypoint, and from the heading of the next one on.
        let headings: Vec<usize> = text.match_indices("[[waypoint]]").map(|(at, _)| at).collect();
        let before_it = &text[..headings[index]];
        assert!(saved.starts_with(before_it), "seed {seed}\n{text}\n->\n{saved}");
        if let Some(next) = headings.get(index + 1) {
            assert!(saved.ends_with(&text[*next..]), "seed {seed}\n{text}\n->\n{saved}");
        }
        judged += 1;
    }
    assert!(judged > 100, "only {judged}");
}

#[test]
fn edits_saved_one_after_the_other_come_to_the_same_as_all_at_once() {
    let arm = demo().arm;
    for seed in 0..40 {
        let mut draw = Draw::seeded(seed + 900);
        let opened = demo();
        let (mut text, mut recipe, mut fresh) = (opened.recipe_source.text, opened.recipe, 0);
        for _ in 0..10 {
            let mut now = recipe.clone();
            edit(&recipe, &mut draw, &mut fresh).apply(&mut now).expect("it fits");
            let saved = text_of_edited(&text, &recipe, &now, &arm);
            assert!(saved.kept, "seed {seed}");
            (text, recipe) = (saved.text, now);
        }
        if recipe.faults(&arm).is_empty() {
            assert_same(&read(&text, &arm).expect("it reads"), &recipe, &text);
        }
    }
}

#[test]
fn undone_edits_leave_the_text_as_it_was_even_if_saved_between() {
    let opened = demo();
    let text = &opened.recipe_source.text;
    for index in [1, 2, 6, 13] {
        let edits = [Edit::Reorder { from: index, to: 4 }, Edit::change(&opened.recipe, index, |w| w.name = "other".to_owned())];
        for edit in edits {
            let mut now = opened.recipe.clone();
            edit.apply(&mut now).expect("it fits");
            let saved = text_of_edited(text, &opened.recipe, &now, &opened.arm);
            assert!(saved.kept && (index == 4 || saved.text != *text));
            let back = text_of_edited(&saved.text, &now, &opened.recipe, &opened.arm);
            assert_eq!(back.text, *text, "{edit:?}");
        }
    }
}

#[test]
fn comments_in_front_of_a_waypoint_go_with_it_and_those_alone_stay() {
    let arm = demo().arm;
    let text = "elbowroom-recipe = 1\nname = \"n\"\narm = \"a\"\n\n# of one\n[[waypoint]]\nname = \"one\"\njoints = [0, 0, 0, 0, 0, 0]\n\n\
                # ---- the second half ----\n\n# of two\n[[waypoint]]\nname = \"two\"  # behind\njoints = [1, 0, 0, 0, 0, 0]\narrive = \"joint\"\nshare = 50\n\n\
                # of three\n[[waypoint]]\nname = \"three\"\njoints = [2, 0, 0, 0, 0, 0]\narrive = \"joint\"\nshare = 50\n";
    let before = read(text, &arm).expect("it reads");
    let mut now = before.clone();
    Edit::Reorder { from: 2, to: 1 }.apply(&mut now).expect("it fits");
    assert_eq!(
        text_of_edited(text, &before, &now, &arm).text,
        "elbowroom-recipe = 1\nname = \"n\"\narm = \"a\"\n\n# of one\n[[waypoint]]\nname = \"one\"\njoints = [0, 0, 0, 0, 0, 0]\n\n\
         # of three\n[[waypoint]]\nname = \"three\"\njoints = [2, 0, 0, 0, 0, 0]\narrive = \"joint\"\nshare = 50\n\n\
         # ---- the second half ----\n\n# of two\n[[waypoint]]\nname = \"two\"  # behind\njoints = [1, 0, 0, 0, 0, 0]\narrive = \"joint\"\nshare = 50\n"
    );
    Edit::Remove { index: 1 }.apply(&mut now).expect("it fits");
    let removed = text_of_edited(text, &before, &now, &arm).text;
    assert!(!removed.contains("three") && removed.contains("second half") && removed.contains("# behind"));
}

#[test]
fn a_recipe_without_a_text_is_written_whole() {
    for name in ["housing-transfer", "lid-placing", "sealant-ring", "tray-feed"] {
        let path = format!("{}/recipes/{name}.toml", env!("CARGO_MANIFEST_DIR"));
        let opened = open(std::path::Path::new(&path)).expect("it opens");
        let text = text_of_new(&opened.recipe, &opened.arm);
        assert_same(&read(&text, &opened.arm).expect("it reads"), &opened.recipe, &text);
    }
}
