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
    WristLimit {
        joint: joint.unwrap_or(0),
        moment: table.number("moment", "N·m"),
        inertia: table.maybe_number("inertia"),
    }
}
