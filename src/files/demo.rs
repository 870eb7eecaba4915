use super::{Opened, Source, read_arm, read_recipe};

/// The demonstration cell that is built into the program, the same as `recipes/housing-transfer.toml`.
pub fn demo() -> Opened {
    let recipe_source = Source {
        path: "housing-transfer.toml (built in)".to_owned(),
        text: include_str!("../../recipes/housing-transfer.toml").to_owned(),
    };
    let arm_source = Source {
        path: "six-axis-12kg.toml (built in)".to_owned(),
        text: include_str!("../../recipes/arms/six-axis-12kg.toml").to_owned(),
    };
    // Both texts are part of the program; a test reads them.
    let arm = read_arm(&arm_source.text, &arm_source.path).expect("the built-in arm file holds together");
    let recipe = read_recipe(&recipe_source.text, &recipe_source.path, &arm).expect("the built-in recipe holds together");
    Opened { recipe, arm, recipe_source, arm_source }
}

#[cfg(test)]
mod tests {
    use crate::program::Arrive;

    use super::*;

    #[test]
    fn the_built_in_demo_reads() {
        let opened = demo();
        assert_eq!(opened.recipe.waypoints.len(), 14);
        assert_eq!(opened.arm.len(), 6);
        assert!(opened.arm.has_masses());
        assert_eq!(opened.recipe.hanging_at(3).before.map(|load| load.name.as_str()), Some("housing"));
        assert_eq!(opened.recipe.hanging_at(11).after, None);
        assert!(matches!(opened.recipe.waypoints[9].arrive, Some(Arrive::Line(_))));
    }
}
