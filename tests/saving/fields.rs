use elbowroom::files::demo;
use elbowroom::program::{Part, data_of};

fn parts() -> Vec<Part> {
    let recipe = demo().recipe;
    let mut parts = vec![Part::Recipe, Part::Mount, Part::Acceptance, Part::Usual];
    parts.extend((0..recipe.tools.len()).map(Part::Tool));
    parts.extend((0..recipe.loads.len()).map(Part::Load));
    parts.extend((0..recipe.waypoints.len()).flat_map(|index| [Part::Waypoint(index), Part::Segment(index)]));
    parts
}

#[test]
fn what_a_field_shows_typed_in_again_changes_nothing_that_can_be_read() {
    let opened = demo();
    let mut count = 0;
    for part in parts() {
        for datum in data_of(&opened.recipe, &opened.arm, part) {
            let edit =
                datum.apply(&opened.recipe, &opened.arm, &datum.text).unwrap_or_else(|why| panic!("{part:?} {datum:?}: {why}"));
            let mut after = opened.recipe.clone();
            edit.apply(&mut after).expect("it fits");
            let texts = |recipe| data_of(recipe, &opened.arm, part).into_iter().map(|d| (d.name, d.text)).collect::<Vec<_>>();
            assert_eq!(texts(&after), texts(&opened.recipe), "{part:?} {datum:?}");
            count += 1;
        }
    }
    assert!(count > 200, "only {count}");
}

#[test]
fn a_typed_text_becomes_that_and_only_that() {
    let opened = demo();
    for (part, name, typed, shown) in [
        (Part::Segment(2), "speed", "0,18 m/s", "180"),
        (Part::Segment(2), "accel", "900", "900"),
        (Part::Waypoint(1), "yaw", "-30,5", "-30.5"),
        (Part::Waypoint(0), "J2", "-0,5 rad", "-28.64788975654"),
        (Part::Waypoint(2), "then", "", ""),
        (Part::Waypoint(2), "dwell", "250 ms", "0.25"),
        (Part::Tool(0), "tcp z", "17 cm", "170"),
        (Part::Tool(0), "inertia xy", "0.001", "0.001"),
        (Part::Load(0), "mass", "7000 g", "7"),
        (Part::Mount, "pitch", "180", "0"),
        (Part::Acceptance, "stages", "20 60 100", "20 60 100"),
        (Part::Usual, "jerk", "8000", "8000"),
    ] {
        let data = data_of(&opened.recipe, &opened.arm, part);
        let at = data.iter().position(|datum| datum.name == name).unwrap_or_else(|| panic!("no {name}"));
        let edit = data[at].apply(&opened.recipe, &opened.arm, typed).unwrap_or_else(|why| panic!("{name}: {why}"));
        let mut after = opened.recipe.clone();
        edit.apply(&mut after).expect("it fits");
        let now = data_of(&after, &opened.arm, part);
        if name != "pitch" {
            assert_eq!(now[at].text, shown, "{name}");
            let others = |data: &[elbowroom::program::Datum]| {
                data.iter().filter(|datum| datum.name != name).map(|datum| format!("{datum:?}")).collect::<Vec<_>>()
            };
            assert_eq!(others(&now), others(&data), "{name}");
        }
    }
}

#[test]
fn a_text_that_can_not_be_is_refused_with_thing_value_and_bound() {
    let opened = demo();
    let refused = |part: Part, name: &str, typed: &str| {
        let data = data_of(&opened.recipe, &opened.arm, part);
        let datum = data.iter().find(|datum| datum.name == name).expect("there is that field");
        datum.apply(&opened.recipe, &opened.arm, typed).expect_err("refused")
    };
    assert_eq!(refused(Part::Segment(2), "speed", "-5"), "waypoint 3 \"on housing\": speed is -5; it must be above 0");
    assert_eq!(refused(Part::Segment(2), "speed", "fast"), "speed: \"fast\" is no number");
    assert_eq!(
        refused(Part::Segment(1), "share", "140"),
        "waypoint 2 \"above rack\": share is 140 %; it must be above 0 and at most 100"
    );
    assert!(refused(Part::Waypoint(2), "then", "take hosing").contains("did you mean \"housing\"?"));
    assert!(refused(Part::Waypoint(2), "name", "ready").contains("is taken already"));
    assert!(refused(Part::Waypoint(2), "name", "").contains("empty"));
    assert!(refused(Part::Waypoint(2), "fly-by", "10").contains("fly-by"));
    assert!(refused(Part::Acceptance, "stages", "60 20").contains("rising"));
    assert!(refused(Part::Segment(2), "tool", "griper").contains("did you mean \"gripper\"?"));
    assert!(refused(Part::Segment(1), "arrive", "arc").contains("record"));
}

#[test]
fn references_follow_a_renamed_thing() {
    let opened = demo();
    let data = data_of(&opened.recipe, &opened.arm, Part::Load(0));
    let edit = data[0].apply(&opened.recipe, &opened.arm, "casting").expect("a free name");
    let mut after = opened.recipe.clone();
    edit.apply(&mut after).expect("it fits");
    let takes = Some(elbowroom::program::Then::Take("casting".to_owned()));
    assert!(after.waypoints.iter().any(|waypoint| waypoint.then == takes));
    assert!(after.faults(&opened.arm).is_empty());
}
