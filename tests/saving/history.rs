use elbowroom::files::demo;
use elbowroom::program::Edit;
use elbowroom::review::History;

use super::drawn::{Draw, edit, edits, every};

#[test]
fn any_edits_undone_are_the_original_and_redone_the_result() {
    let opened = demo();
    every(60, &edits(40), |all| {
        let mut fresh = 0;
        let mut history = History::of(opened.recipe.clone());
        let mut states = vec![history.recipe().clone()];
        for choices in &all {
            let next = edit(history.recipe(), &mut Draw::chosen(choices.clone()), &mut fresh);
            history.make(&opened.arm, next).expect("it fits");
            states.push(history.recipe().clone());
        }
        for state in states[..all.len()].iter().rev() {
            history.undo().expect("a step to undo");
            assert_eq!(history.recipe(), state);
        }
        assert!(history.undo().is_none() && !history.is_unsaved());
        for state in &states[1..] {
            history.redo().expect("a step to redo");
            assert_eq!(history.recipe(), state);
        }
        assert!(history.redo().is_none());
    });
}

#[test]
fn the_edits_that_undo_and_redo_yield_lead_from_state_to_state() {
    let opened = demo();
    let mut draw = Draw::seeded(7);
    let (mut history, mut followed, mut fresh) = (History::of(opened.recipe.clone()), opened.recipe.clone(), 0);
    for _ in 0..300 {
        let made = match draw.below(4) {
            0 => history.undo().map(|(_, edit)| edit.clone()),
            1 => history.redo().map(|(_, edit)| edit.clone()),
            _ => {
                let next = edit(history.recipe(), &mut draw, &mut fresh);
                history.make(&opened.arm, next.clone()).expect("it fits");
                Some(next)
            }
        };
        if let Some(made) = made {
            made.apply(&mut followed).expect("it fits");
        }
        assert_eq!(followed, **history.recipe());
    }
}

#[test]
fn undo_reaches_back_across_a_save_and_tells_what_is_unsaved() {
    let opened = demo();
    let mut history = History::of(opened.recipe.clone());
    let name = |text: &str| Edit::Name(text.to_owned());
    assert!(!history.is_unsaved());
    history.make(&opened.arm, name("one")).expect("it fits");
    assert!(history.is_unsaved());
    history.mark_saved();
    assert_eq!((history.is_unsaved(), history.saved_after()), (false, Some(1)));
    history.undo().expect("across the save");
    assert_eq!((history.recipe().name.as_str(), history.is_unsaved()), (opened.recipe.name.as_str(), true));
    history.redo().expect("again");
    assert!(!history.is_unsaved());
    history.undo();
    history.make(&opened.arm, name("two")).expect("it fits");
    assert_eq!((history.is_unsaved(), history.saved_after()), (true, None));
    history.make(&opened.arm, name("one")).expect("it fits");
    assert!(!history.is_unsaved(), "it is the same as what was saved");
}

#[test]
fn a_step_is_told_in_words() {
    let opened = demo();
    let mut history = History::of(opened.recipe.clone());
    let mut told = |edit: Edit| history.make(&opened.arm, edit).expect("it fits").to_owned();
    let slower = Edit::change(&opened.recipe, 2, |waypoint| {
        let Some(elbowroom::program::Arrive::Line(speed)) = &mut waypoint.arrive else { panic!("a line") };
        speed.speed = Some(elbowroom::units::Speed::mm_per_s(180.0));
    });
    assert_eq!(told(slower), "waypoint 3 \"on housing\": speed 250 mm/s -> 180 mm/s");
    assert_eq!(told(Edit::Remove { index: 6 }), "waypoint 7 \"pass end\" deleted");
    assert_eq!(told(Edit::Reorder { from: 1, to: 2 }), "waypoint 2 \"above rack\" moved to place 3");
    assert_eq!(told(Edit::Name("Other".to_owned())), "recipe: name Housing transfer -> Other");
    let mut loads = opened.recipe.loads.clone();
    loads[0].body.mass = 7.0;
    assert_eq!(told(Edit::Loads(loads)), "load 1 \"housing\": mass 6.5 kg -> 7 kg");
}
