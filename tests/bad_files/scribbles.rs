//! Files cut short and scribbled over: judged without a panic, whatever they hold.

use elbowroom::files::{demo, read_arm, read_recipe};
use proptest::prelude::*;

use super::{ARM, RECIPE};

#[test]
fn a_file_cut_short_anywhere_is_judged_without_a_panic() {
    let built_in = demo();
    for (text, whole) in [(&built_in.recipe_source.text, true), (&built_in.arm_source.text, false)] {
        for end in (0..text.len()).filter(|end| text.is_char_boundary(*end)) {
            if whole {
                let _ = read_recipe(&text[..end], "r", &built_in.arm);
            } else {
                let _ = read_arm(&text[..end], "a");
            }
        }
    }
}

/// Replaces characters of a text by others, which makes values, keys and punctuation wrong in turn.
fn scribbled(text: &str, scribbles: &[(usize, char)]) -> String {
    let mut chars: Vec<char> = text.chars().collect();
    for (at, c) in scribbles {
        let count = chars.len();
        chars[at % count] = *c;
    }
    chars.into_iter().collect()
}

proptest! {
    #[test]
    fn a_scribbled_file_is_judged_without_a_panic(
        scribbles in proptest::collection::vec((any::<usize>(), prop_oneof![any::<char>(), proptest::sample::select(b"0-[]{}=,.\"# \nen_".to_vec()).prop_map(char::from)]), 1..6)
    ) {
        for rejected in [
            read_arm(&scribbled(ARM, &scribbles), "a").err(),
            read_recipe(&scribbled(RECIPE, &scribbles), "r", &read_arm(ARM, "a").expect("reads")).err(),
        ].into_iter().flatten() {
            prop_assert!(!rejected.complaints.is_empty());
            prop_assert!(rejected.complaints.iter().all(|complaint| complaint.line > 0 && complaint.column > 0));
        }
    }

    #[test]
    fn any_text_at_all_is_judged_without_a_panic(text in any::<String>()) {
        prop_assert!(read_arm(&text, "a").is_err());
    }
}
