use crate::arm::{Arm, JointKind, Joints};
use crate::units::{Dimension, tidy};

/// The decimals of joint values in a starting recipe: tenths of a degree or of a millimetre.
const TENTHS: f64 = 10.0;

/// How far the second waypoint is from the first, as a share of every joint's range.
const A_LITTLE: f64 = 0.05;

/// The text of a starting arm file, with comments on everything that a person fills in.
pub fn starting_arm() -> &'static str {
    include_str!("starter_arm.toml")
}

/// Postures that a starting recipe may begin at: the middle of all ranges, then some that are nearer to where arms rest. All within
/// the ranges, rad or m.
pub fn starting_postures(arm: &Arm) -> Vec<Joints> {
    let of = |place: &dyn Fn(f64, f64) -> f64| {
        Joints::from_fn(arm.len(), |j| {
            let range = arm.joints()[j].range;
            place(range.low, range.high).clamp(range.low, range.high)
        })
    };
    vec![
        of(&|low, high| f64::midpoint(low, high)),
        of(&|_, _| 0.0),
        of(&|low, high| low + 0.4 * (high - low)),
        of(&|low, high| low + 0.6 * (high - low)),
        of(&|low, high| low + 0.3 * (high - low)),
    ]
}

/// The text of a starting recipe for an arm: two waypoints near `at`, with comments on everything that a person fills in. `arm_path`
/// is the arm file's path as the recipe names it.
pub fn starting_recipe(arm: &Arm, arm_path: &str, at: &Joints) -> String {
    let away = Joints::from_fn(arm.len(), |j| {
        let range = arm.joints()[j].range;
        let step = A_LITTLE * (range.high - range.low);
        if at[j] + step <= range.high { at[j] + step } else { at[j] - step }
    });
    let names: Vec<&str> = arm.joints().iter().map(|joint| joint.name.as_str()).collect();
    let slides = arm.joints().iter().any(|joint| joint.kind == JointKind::Prismatic);
    include_str!("starter_recipe.toml")
        .replace("ARM_PATH", &arm_path.replace('\\', "\\\\").replace('"', "\\\""))
        .replace("JOINT_NAMES", &names.join(", ").replace(char::is_control, " "))
        .replace("UNITS", if slides { "degrees, mm for joints that slide" } else { "degrees" })
        .replace("FIRST_VALUES", &values(arm, at))
        .replace("SECOND_VALUES", &values(arm, &away))
}

/// Joint values as a recipe has them, rounded towards the middle of the range so that they stay within it.
fn values(arm: &Arm, q: &Joints) -> String {
    let of = |(value, joint): (&f64, &crate::arm::Joint)| {
        let dimension: Dimension = joint.kind.value();
        let middle = f64::midpoint(joint.range.low, joint.range.high);
        let tenths = value * dimension.per_si() * TENTHS;
        let rounded = if *value > middle { tenths.floor() } else { tenths.ceil() };
        (tidy(rounded / TENTHS) + 0.0).to_string()
    };
    q.iter().zip(arm.joints()).map(of).collect::<Vec<_>>().join(", ")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::files::{read_arm, read_recipe};

    #[test]
    fn a_starting_recipe_reads_for_the_starting_arm_at_every_posture() {
        let arm = read_arm(starting_arm(), "arm.toml").expect("it reads");
        for at in starting_postures(&arm) {
            let text = starting_recipe(&arm, "my \"own\" arm.toml", &at);
            let recipe = read_recipe(&text, "recipe.toml", &arm).unwrap_or_else(|why| panic!("{why}\n{text}"));
            assert_eq!((recipe.waypoints.len(), recipe.arm.as_str()), (2, "my \"own\" arm.toml"));
        }
    }
}
