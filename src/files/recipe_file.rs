use toml::de::DeTable;

use crate::arm::Arm;
use crate::program::{Recipe, Repeat};
use crate::units::{Fault, Field, Step};

use super::page::{Page, parse, without_mark};
use super::table::Table;
use super::waypoint::waypoints;
use super::{Complaint, Rejected, cell, heading, stand_in};

/// Reads a recipe, judged with the arm that it names. `source` is its path as shown to a person.
///
/// # Errors
/// Everything that is wrong with it, in the order in which it stands in the file.
pub fn read_recipe(text: &str, source: &str, arm: &Arm) -> Result<Recipe, Rejected> {
    read_with(text, source, Some(arm))
}

/// Reads a recipe whose arm may be missing; then all that does not depend on the arm is judged.
pub(super) fn read_with(text: &str, source: &str, arm: Option<&Arm>) -> Result<Recipe, Rejected> {
    let text = without_mark(text);
    let root = parse(text, source)?;
    let page = Page::new(text, source, root.get_ref());
    let recipe = recipe_on(&page, root.get_ref(), arm);
    match (recipe, page.rejection()) {
        (_, Some(rejected)) => Err(rejected),
        (Some(recipe), None) => Ok(recipe),
        // Nothing on the page can lead here: a recipe is only withheld with a complaint.
        (None, None) => Err(Rejected::one(Complaint::whole(source, "the recipe could not be read"))),
    }
}

/// The recipe that a text gives, without judging whether it can be; `None` if something in it can't be taken as it stands.
pub(super) fn walked(text: &str, arm: &Arm) -> Option<Recipe> {
    let text = without_mark(text);
    let root = parse(text, "").ok()?;
    let page = Page::new(text, "", root.get_ref());
    let recipe = recipe(&page.top("recipe"), Some(arm));
    page.rejection().is_none().then_some(recipe)
}

/// The arm file that a recipe names and where it says so, as a field; `None` if the recipe has no such text.
pub(super) fn arm_named(text: &str) -> Option<String> {
    let root = DeTable::parse(without_mark(text)).ok()?;
    let name = root.get_ref().get("arm")?.get_ref().as_str()?;
    (!name.trim().is_empty() && !name.contains('\0')).then(|| name.to_owned())
}

/// Complains at the place where a recipe names its arm file.
pub(super) fn complaint_at_arm(text: &str, source: &str, says: &str) -> Rejected {
    let text = without_mark(text);
    let complaint = parse(text, source).map(|root| {
        let page = Page::new(text, source, root.get_ref());
        page.add(Fault::new(Field::top().key("arm"), says));
        page.rejection()
    });
    match complaint {
        Ok(Some(rejected)) | Err(rejected) => rejected,
        Ok(None) => Rejected::one(Complaint::whole(source, says)),
    }
}

fn recipe_on(page: &Page<'_>, root: &DeTable<'_>, arm: Option<&Arm>) -> Option<Recipe> {
    let top = page.top("recipe");
    if !heading::judge(page, root, &top, &heading::RECIPE, &heading::ARM) {
        return None;
    }
    let recipe = recipe(&top, arm);
    let faults = match arm {
        Some(arm) => recipe.faults(arm),
        None => stand_in::arm_for(&recipe).map(|arm| recipe.faults(&arm)).unwrap_or_default(),
    };
    for fault in faults {
        let of_arm = arm.is_none() && ends_with(&fault, "joints");
        if !of_arm && !follows(page, &fault) {
            page.add(fault);
        }
    }
    Some(recipe)
}

fn recipe(top: &Table<'_>, arm: Option<&Arm>) -> Recipe {
    top.only(&[
        heading::RECIPE.key,
        "name",
        "arm",
        "repeat",
        "carrying",
        "mount",
        "acceptance",
        "usual",
        "tool",
        "load",
        "frame",
        "waypoint",
    ]);
    Recipe {
        name: top.text("name", "text").unwrap_or_default().to_owned(),
        arm: top.text("arm", "the path of an arm file, seen from the recipe").unwrap_or_default().to_owned(),
        mount: cell::mount(top),
        acceptance: cell::acceptance(top),
        usual: cell::usual(top),
        tools: cell::tools(top),
        loads: cell::loads(top),
        frames: cell::frames(top),
        repeat: top.word("repeat", &[("start", Repeat::Start), ("never", Repeat::Never)]).unwrap_or_default(),
        carrying: top.maybe_text("carrying").map(str::to_owned),
        waypoints: waypoints(top, arm),
    }
}

/// Whether a fault merely follows from another complaint: a name not found where not every name is known, or a speed asked for
/// where the usual one could not be taken.
fn follows(page: &Page<'_>, fault: &Fault) -> bool {
    let usual = Field::top().key("usual");
    match fault.field.0.last() {
        Some(Step::Key(key)) => match key.as_str() {
            "tool" => page.lacks_names("tool"),
            "near" => page.lacks_names("waypoint"),
            "take" | "carrying" => page.lacks_names("load"),
            "frame" | "in" => page.lacks_names("frame"),
            "speed" | "share" => page.is_bad(&usual.key(key)) && fault.field.0.len() > usual.0.len() + 1,
            _ => false,
        },
        _ => false,
    }
}

fn ends_with(fault: &Fault, key: &str) -> bool {
    matches!(fault.field.0.last(), Some(Step::Key(last)) if last == key)
}

#[cfg(test)]
mod tests {
    use crate::arm::Joints;
    use crate::geometry::V3;
    use crate::program::{Acceptance, Arrive, PushAxes, Taught};
    use crate::units::Share;

    use super::*;
    use crate::files::{open, read_arm};

    #[test]
    fn what_a_recipe_leaves_out_is_usual() {
        let arm = read_arm(include_str!("../../recipes/arms/three-axis-rrp.toml"), "arm").expect("it reads");
        let text = "elbowroom-recipe = 1\nname = \"n\"\narm = \"a\"\n[acceptance]\nholding-reserve = 25\n\
                    [[waypoint]]\nname = \"a\"\njoints = [90, 0, 500]\n\
                    [[waypoint]]\nname = \"b\"\npose = { xyz = [700, 0, 700] }\narrive = \"joint\"\nshare = 50\n";
        let recipe = read_recipe(text, "r", &arm).expect("it reads");
        assert_eq!(recipe.acceptance, Acceptance { holding_reserve: Share::percent(25.0), ..Acceptance::default() });
        assert_eq!(recipe.usual, crate::program::Usual::default());
        assert_eq!(recipe.mount, crate::geometry::Pose::identity());
        assert!(recipe.tools.is_empty() && recipe.carrying.is_none());
        let right_angle = std::f64::consts::FRAC_PI_2;
        assert_eq!(recipe.waypoints[0].taught, Taught::Joints(Joints::from_slice(&[right_angle, 0.0, 0.5])));
        assert_eq!(recipe.waypoints[1].arrive, Some(Arrive::Joint { share: Some(Share::percent(50.0)), accel_share: None }));
    }

    #[test]
    fn a_push_and_a_shown_pose_come_through() {
        let recipe = open(std::path::Path::new("recipes/housing-transfer.toml")).expect("it opens").recipe;
        let pass = &recipe.waypoints[6];
        let push = pass.push.as_ref().expect("it pushes");
        assert_eq!((push.force, push.torque, &push.axes), (V3::new(0.0, 0.0, 40.0), V3::zeros(), &PushAxes::Tool));
        let (Some(shown), Taught::Pose { pose, .. }) = (&pass.shown, &pass.taught) else { panic!("both are given") };
        assert!(((shown.at - pose.at).norm() - 0.012).abs() < 1e-12);
    }

    #[test]
    fn an_orientation_reads_the_same_as_triple_and_as_quaternion() {
        let recipe = open(std::path::Path::new("recipes/lid-placing.toml")).expect("it opens").recipe;
        let turned = |index: usize| match &recipe.waypoints[index].taught {
            Taught::Pose { pose, .. } => pose.rotation.expect("turned").matrix(),
            Taught::Joints(_) => panic!("a pose"),
        };
        assert!((turned(2) - turned(5)).norm() < 1e-12);
    }
}
