use toml::de::DeTable;

use crate::arm::{Arm, ArmData, Convention, Flange, Joint, Task, TaskRow, WristLimit};

use super::joint::{called, joint};
use super::page::{Page, parse, without_mark};
use super::table::Table;
use super::{Rejected, heading};

/// Reads an arm file. `source` is its path as shown to a person.
///
/// # Errors
/// Everything that is wrong with it, in the order in which it stands in the file.
pub fn read_arm(text: &str, source: &str) -> Result<Arm, Rejected> {
    let text = without_mark(text);
    let root = parse(text, source)?;
    let page = Page::new(text, source, root.get_ref());
    let arm = arm_on(&page, root.get_ref());
    match (arm, page.rejection()) {
        (_, Some(rejected)) => Err(rejected),
        (Some(arm), None) => Ok(arm),
        // Nothing on the page can lead here: an arm is only withheld with a complaint.
        (None, None) => Err(Rejected::one(super::Complaint::whole(source, "the arm could not be built"))),
    }
}

fn arm_on(page: &Page<'_>, root: &DeTable<'_>) -> Option<Arm> {
    let top = page.top("arm file");
    if !heading::judge(page, root, &top, &heading::ARM, &heading::RECIPE) {
        return None;
    }
    match Arm::build(data(&top)) {
        Ok(arm) => Some(arm),
        Err(faults) => {
            faults.into_iter().for_each(|fault| page.add(fault));
            None
        }
    }
}

fn data(top: &Table<'_>) -> ArmData {
    top.only(&[heading::ARM.key, "name", "convention", "characteristic-length", "task", "joint", "flange"]);
    let name = top.text("name", "text").unwrap_or_default().to_owned();
    let tables = top.tables("joint");
    let convention = convention(top, &tables);
    let joints: Vec<Joint> = tables
        .into_iter()
        .enumerate()
        .map(|(index, table)| {
            let thing = called(&table, index);
            joint(&table.called(thing), index, convention)
        })
        .collect();
    let flange = top.table("flange").map(|table| flange(&table.called("flange".to_owned()), top, &joints)).unwrap_or_default();
    ArmData {
        name,
        joints,
        flange,
        characteristic_length: top.maybe_number("characteristic-length").map(|mm| mm / 1000.0),
        task: task(top),
    }
}

fn convention(top: &Table<'_>, joints: &[Table<'_>]) -> Option<Convention> {
    if !top.has("convention") && joints.iter().any(|joint| joint.has("dh")) {
        top.missing("convention", "joints with dh need it: \"classical\" (distal) or \"modified\" (proximal)");
    }
    top.word("convention", &[("classical", Convention::Classical), ("modified", Convention::Modified)])
}

fn task(top: &Table<'_>) -> Option<Task> {
    let mut rows = Vec::new();
    for word in top.maybe_text("task")?.split_whitespace() {
        match TaskRow::from_word(word) {
            Some(row) if rows.contains(&row) => top.complain("task", format_args!("task names {word} twice")),
            Some(row) => rows.push(row),
            None => {
                let known = TaskRow::ALL.map(TaskRow::word).join(", ");
                top.complain("task", format_args!("task names {}; its words are {known}", super::value::quoted(word)));
            }
        }
    }
    let task = Task::of(&rows);
    if task.is_none() && !top.is_bad("task") {
        top.complain("task", "task is empty; it must name at least one direction, such as \"x y z\"");
    }
    task
}

fn flange(table: &Table<'_>, top: &Table<'_>, joints: &[Joint]) -> Flange {
    table.only(&["rated-load", "wrist"]);
    let nameless = top.page().lacks_names("joint");
    let wrist = table.tables("wrist").iter().map(|limit| wrist_limit(limit, joints, nameless)).collect();
    Flange { rated_load: table.maybe_number("rated-load"), wrist }
}

/// Reads one limit at a wrist axis. Where a joint's own name is unknown, a name not found proves nothing.
fn wrist_limit(table: &Table<'_>, joints: &[Joint], nameless: bool) -> WristLimit {
    table.only(&["joint", "moment", "inertia"]);
    let name = table.text("joint", "the name of a joint");
    let joint = name.and_then(|name| joints.iter().position(|joint| joint.name == name));
    if let (Some(name), None, false) = (name, joint, nameless) {
        let known: Vec<_> = joints.iter().map(|joint| joint.name.as_str()).collect();
        let names = if known.is_empty() { "no joints".to_owned() } else { known.join(", ") };
        table.complain("joint", format_args!("there is no joint \"{name}\"; there are {names}"));
    }
    WristLimit { joint: joint.unwrap_or(0), moment: table.number("moment", "N·m"), inertia: table.maybe_number("inertia") }
}

#[cfg(test)]
mod tests {
    use crate::arm::{Curve, Placement};
    use crate::geometry::{Rotation, V3};

    use super::*;

    const SLIDE: &str = r#"
elbowroom-arm = 1
name = "Turn and slide"
task = "x y"

[[joint]]
name = "turn"
kind = "revolute"
place = { xyz = [0, 0, 250], rpy = [0, 90, 0] }
axis = [0, 0.707, 0.707]
range = [-90, 180]
rate = 45
accel = 360
torque = { holding = 50, peak = 80, grounds = "guess" }
brake = 60
link = { mass = 2, com = [10, 0, -20], inertia = [2, 2, 3, 0.1, 0.2, 0.3], grounds = "weighed" }

[[joint]]
name = "slide"
kind = "prismatic"
place = { xyz = [500, 0, 0] }
axis = [1, 0, 0]
range = [0, 400]
rate = 900
accel = 4000

[flange]
rated-load = 3
wrist = [{ joint = "turn", moment = 9 }]
"#;

    #[test]
    fn numbers_become_si_by_the_kind_of_joint() {
        let arm = read_arm(SLIDE, "slide.toml").expect("it reads");
        let [turn, slide] = arm.joints() else { panic!("two joints") };
        let half_turn = std::f64::consts::PI;
        assert!((turn.range.high - half_turn).abs() < 1e-15 && (turn.rate - half_turn / 4.0).abs() < 1e-15);
        assert!((turn.accel - 2.0 * half_turn).abs() < 1e-14);
        assert_eq!((slide.range.high, slide.rate, slide.accel), (0.4, 0.9, 4.0));
        let body = turn.link.expect("a link");
        assert_eq!((body.mass, body.com), (2.0, V3::new(0.01, 0.0, -0.02)));
        let tensor = body.inertia.expect("a tensor");
        assert_eq!((tensor[(0, 1)], tensor[(2, 0)], tensor[(1, 2)], tensor[(2, 2)]), (0.1, 0.2, 0.3, 3.0));
        assert_eq!(turn.torque.map(|torque| (torque.holding, torque.peak)), Some((50.0, Some(Curve::level(80.0)))));
        assert_eq!((slide.torque, slide.link), (None, None));
        assert_eq!(arm.flange().wrist[0].joint, 0);
        assert_eq!(arm.task().words(), "x y");
    }

    #[test]
    fn an_axis_typed_with_three_digits_becomes_a_unit_vector() {
        let arm = read_arm(SLIDE, "slide.toml").expect("it reads");
        let Placement::Axis { place, axis } = arm.joints()[0].placement else { panic!("placed by its axis") };
        assert!((axis.norm() - 1.0).abs() < 1e-15);
        assert!((place.axes - Rotation::from_rpy_deg([0.0, 90.0, 0.0]).matrix()).norm() < 1e-15);
    }

    #[test]
    fn dh_parameters_keep_their_custom_and_their_degrees() {
        let arm = read_arm(include_str!("../../recipes/arms/four-axis-rrpr.toml"), "four").expect("it reads");
        let Placement::Dh { convention, a, alpha_deg, d, .. } = arm.joints()[2].placement else { panic!("placed by dh") };
        assert_eq!((convention, a, alpha_deg, d), (Convention::Modified, 0.275, 180.0, 0.0));
    }
}
