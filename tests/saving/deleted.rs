//! Comments at what is deleted: which go with it, which stay, and how they come back.

use std::sync::Arc;

use elbowroom::files::{Texts, demo, read_recipe};
use elbowroom::program::{Edit, Recipe};

use super::drawn::{Draw, choices, edit, edits, every};
use super::layouts::layout;

const TEXT: &str = "\
elbowroom-recipe = 1
name = \"n\"
arm = \"a\"

# The first, by hand.
[[waypoint]]
name = \"one\"
joints = [0, 0, 0, 0, 0, 0]

# Alone: from here on with the part.

# ==== second half ====
# Slow: the part swings.
[[waypoint]]
name = \"two\"  # was \"2\"
# two lines of joints before
joints = [1, 0, 0, 0, 0, 0]
arrive = \"joint\"
share = 50
# share = 60
# ---- third ----
[[waypoint]]
name = \"three\"
joints = [2, 0, 0, 0, 0, 0]
arrive = \"joint\"
share = 50
";

const WITHOUT_TWO: &str = "\
elbowroom-recipe = 1
name = \"n\"
arm = \"a\"

# The first, by hand.
[[waypoint]]
name = \"one\"
joints = [0, 0, 0, 0, 0, 0]

# Alone: from here on with the part.

# ==== second half ====
# ---- third ----
[[waypoint]]
name = \"three\"
joints = [2, 0, 0, 0, 0, 0]
arrive = \"joint\"
share = 50
";

fn opened(text: &str) -> (Texts, Recipe) {
    let recipe = read_recipe(text, "r", &demo().arm).expect("it reads");
    (Texts::of(text.to_owned(), Arc::new(recipe.clone())), recipe)
}

/// Saves as the screen does, and yields the text.
fn save(texts: &mut Texts, now: &Recipe) -> String {
    let new = texts.next(now, &demo().arm);
    assert!(new.kept);
    texts.saved(new.text.clone(), Arc::new(now.clone()));
    new.text
}

#[test]
fn what_is_attached_goes_and_headings_and_what_stands_alone_stay() {
    let (mut texts, mut now) = opened(TEXT);
    Edit::Remove { index: 1 }.apply(&mut now).expect("there");
    let gone = texts.gone_in(&texts.next(&now, &demo().arm).text);
    assert_eq!(save(&mut texts, &now), WITHOUT_TWO.replace("====\n# ----", "====\n\n# ----"));
    assert_eq!(gone, 4);
}

#[test]
fn undo_brings_all_of_it_back_after_a_save_too() {
    let (mut texts, original) = opened(TEXT);
    let mut now = original.clone();
    let back = Edit::Remove { index: 1 }.apply(&mut now).expect("there");
    save(&mut texts, &now);
    // With another edit saved in between, what was deleted comes back with its comments, and the other edit stays.
    let renamed = Edit::Name("other".to_owned()).apply(&mut now).expect("it fits");
    save(&mut texts, &now);
    back.apply(&mut now).expect("it fits");
    assert_eq!(save(&mut texts, &now), TEXT.replace("\"n\"", "\"other\""));
    renamed.apply(&mut now).expect("it fits");
    assert_eq!(now, original);
    assert_eq!(save(&mut texts, &now), TEXT);
}

/// Any edits, a save after each, then all undone with a save after each: whatever went on the way, every comment is there again.
#[test]
fn any_edits_saved_one_by_one_and_undone_leave_every_comment() {
    let arm = demo().arm;
    every(150, &(choices(400), edits(6)), |(choices, all)| {
        let (text, _) = layout(&mut Draw::chosen(choices));
        let Ok(recipe) = read_recipe(&text, "drawn", &arm) else { return };
        let mut texts = Texts::of(text.clone(), Arc::new(recipe.clone()));
        let (mut now, mut fresh, mut back) = (recipe, 0, Vec::new());
        let keep = |texts: &mut Texts, now: &Recipe| {
            let new = texts.next(now, &arm).text;
            texts.saved(new, Arc::new(now.clone()));
        };
        for choices in all {
            let next = edit(&now, &mut Draw::chosen(choices), &mut fresh);
            back.push(next.apply(&mut now).expect("it fits"));
            keep(&mut texts, &now);
        }
        for edit in back.iter().rev() {
            edit.apply(&mut now).expect("it fits");
            keep(&mut texts, &now);
        }
        let comments = |text: &str| text.matches("# note").count();
        assert_eq!(comments(texts.text()), comments(&text), "{text}\n->\n{}", texts.text());
    });
}
