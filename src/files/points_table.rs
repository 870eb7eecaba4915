use crate::arm::{Arm, Joints};
use crate::geometry::{Pose, Rotation, V3};
use crate::review::{CellPoint, CellTable, Reported};

use super::{Complaint, Rejected, Source};

/// Names of the columns of a pose, mm and degrees.
const PLACE: [&str; 3] = ["x", "y", "z"];
const TURN: [&str; 3] = ["roll", "pitch", "yaw"];

/// Reads a table of points from the cell: CSV with a header. The column `waypoint` names the waypoint; then either a column a joint,
/// by its name in the arm file (degrees or mm), or `x`, `y`, `z` (mm) and, if wanted, `roll`, `pitch`, `yaw` (degrees, about the fixed
/// x, then y, then z axis) and `frame`. Fields may stand in quotes.
///
/// # Errors
/// Everything that is wrong with it, by line; numbers that are none or not finite are.
pub fn read_points(source: &Source, arm: &Arm) -> Result<CellTable, Rejected> {
    let mut complaints = Vec::new();
    let mut complain = |line: usize, says: String| {
        complaints.push(Complaint { source: source.path.clone(), line, column: 1, says });
    };
    let text = source.text.strip_prefix('\u{feff}').unwrap_or(&source.text);
    let mut lines = text.lines().enumerate().filter(|(_, line)| !line.trim().is_empty());
    let mut table = CellTable::default();
    if let Some((_, header)) = lines.next() {
        let names = fields(header);
        match Columns::of(&names, arm) {
            Err(says) => complain(1, says),
            Ok(columns) => {
                for (index, line) in lines {
                    let line_number = index + 1;
                    let row = fields(line);
                    if row.len() != names.len() {
                        complain(line_number, format!("the row has {} fields; the header names {}", row.len(), names.len()));
                        continue;
                    }
                    match columns.point(&names, &row) {
                        Ok((name, says)) => table.points.push(CellPoint { name, line: line_number, says }),
                        Err(says) => complain(line_number, says),
                    }
                }
            }
        }
    } else {
        complain(1, "the table is empty; its first line must name its columns".to_owned());
    }
    if complaints.is_empty() { Ok(table) } else { Err(Rejected { complaints }) }
}

enum Kind {
    Joints(Vec<(usize, f64)>),
    Pose { place: [usize; 3], turn: Option<[usize; 3]>, frame: Option<usize> },
}

struct Columns {
    name: usize,
    kind: Kind,
}

impl Columns {
    fn of(names: &[String], arm: &Arm) -> Result<Self, String> {
        let at = |wanted: &str| names.iter().position(|name| name == wanted);
        let joints: Vec<&str> = arm.joints().iter().map(|joint| joint.name.as_str()).collect();
        let known = |name: &str| {
            name == "waypoint" || name == "frame" || PLACE.contains(&name) || TURN.contains(&name) || joints.contains(&name)
        };
        if let Some(other) = names.iter().find(|name| !known(name)) {
            return Err(format!(
                "the column {} is not known; columns are waypoint, {}, or x, y, z, roll, pitch, yaw, frame",
                super::value::quoted(other),
                joints.join(", ")
            ));
        }
        if let Some(twice) = names.iter().enumerate().find(|(k, name)| names[..*k].contains(name)) {
            return Err(format!("the column {} is there twice", twice.1));
        }
        let name = at("waypoint").ok_or("the column waypoint is missing")?;
        let of_joints: Vec<Option<usize>> = joints.iter().map(|joint| at(joint)).collect();
        let has_place = PLACE.iter().any(|name| at(name).is_some());
        if of_joints.iter().any(Option::is_some) {
            if has_place || TURN.iter().any(|name| at(name).is_some()) {
                return Err("the table has both joints and poses; keep one of them".to_owned());
            }
            let columns: Option<Vec<usize>> = of_joints.into_iter().collect();
            let columns = columns.ok_or_else(|| format!("every joint needs its column: {}", joints.join(", ")))?;
            let scales = arm.joints().iter().map(|joint| joint.kind.value().per_si());
            return Ok(Self { name, kind: Kind::Joints(columns.into_iter().zip(scales).collect()) });
        }
        let all = |wanted: [&str; 3]| match wanted.map(at) {
            [Some(a), Some(b), Some(c)] => Some([a, b, c]),
            _ => None,
        };
        let place = all(PLACE).ok_or("the columns of all joints, or x, y, z, are missing")?;
        let turn = all(TURN);
        if turn.is_none() && TURN.iter().any(|name| at(name).is_some()) {
            return Err("roll, pitch and yaw go together".to_owned());
        }
        Ok(Self { name, kind: Kind::Pose { place, turn, frame: at("frame") } })
    }

    fn point(&self, names: &[String], row: &[String]) -> Result<(String, Reported), String> {
        let number = |column: usize| -> Result<f64, String> {
            let wrong = || format!("{} is {}; it must be a finite number", names[column], super::value::quoted(&row[column]));
            row[column].parse::<f64>().ok().filter(|value| value.is_finite()).ok_or_else(wrong)
        };
        let three = |columns: [usize; 3]| -> Result<[f64; 3], String> {
            Ok([number(columns[0])?, number(columns[1])?, number(columns[2])?])
        };
        let says = match &self.kind {
            Kind::Joints(columns) => {
                let values: Result<Vec<f64>, String> =
                    columns.iter().map(|(column, per_si)| Ok(number(*column)? / per_si)).collect();
                let values = values?;
                Reported::Joints(Joints::from_fn(values.len(), |j| values[j]))
            }
            Kind::Pose { place, turn, frame } => {
                let at = V3::from(three(*place)?) / 1000.0;
                let rotation = turn.map(three).transpose()?.map_or_else(Rotation::identity, Rotation::from_rpy_deg);
                let frame = frame.map(|column| row[column].clone()).filter(|name| !name.is_empty());
                Reported::Pose { pose: Pose::new(at, rotation), turns: turn.is_some(), frame }
            }
        };
        Ok((row[self.name].clone(), says))
    }
}

/// The fields of a line of CSV (RFC 4180, without line breaks in fields), blanks around them cut.
fn fields(line: &str) -> Vec<String> {
    let mut fields = Vec::new();
    let (mut field, mut quoted) = (String::new(), false);
    let mut letters = line.chars().peekable();
    while let Some(c) = letters.next() {
        match c {
            '"' if quoted && letters.peek() == Some(&'"') => {
                letters.next();
                field.push('"');
            }
            '"' => quoted = !quoted,
            ',' if !quoted => fields.push(std::mem::take(&mut field).trim().to_owned()),
            _ => field.push(c),
        }
    }
    fields.push(field.trim().to_owned());
    fields
}

#[cfg(test)]
mod tests {
    use crate::files::demo;

    use super::*;

    fn read(text: &str) -> Result<CellTable, String> {
        let source = Source { path: "cell.csv".into(), text: text.into() };
        read_points(&source, &demo().arm).map_err(|rejected| rejected.to_string())
    }

    #[test]
    fn rows_become_si_and_names_may_stand_in_quotes() {
        let table = read("waypoint,J2,J1,J3,J4,J5,J6\n\"a, \"\"b\"\"\", 0,180,0,0,0,-90\n").expect("it reads");
        assert_eq!(table.points[0].name, "a, \"b\"");
        let Reported::Joints(q) = &table.points[0].says else { panic!("joints") };
        assert!((q[0] - std::f64::consts::PI).abs() < 1e-15 && (q[5] + std::f64::consts::FRAC_PI_2).abs() < 1e-15);
        let table = read("waypoint,x,y,z,frame\na,1000,0,-5,fixture\n").expect("it reads");
        let Reported::Pose { pose, turns, frame } = &table.points[0].says else { panic!("a pose") };
        assert_eq!((pose.at.x, *turns, frame.as_deref()), (1.0, false, Some("fixture")));
    }

    #[test]
    fn what_is_wrong_is_told_by_line() {
        for (text, says) in [
            ("", "the table is empty"),
            ("name,J1\n", "column \"name\" is not known"),
            ("waypoint,J1,J2\n", "every joint needs its column"),
            ("waypoint,x,y\n", "are missing"),
            ("waypoint,x,y,z,roll\n", "go together"),
            ("waypoint,x,y,z\na,1,2\n", "the row has 3 fields; the header names 4 (cell.csv:2:1)"),
            ("waypoint,x,y,z\na,1,2,nan\n", "z is \"nan\"; it must be a finite number (cell.csv:2:1)"),
            ("waypoint,x,y,z\na,1,2,1e999\n", "it must be a finite number"),
            ("waypoint,x,y,z,x\n", "is there twice"),
        ] {
            let told = read(text).expect_err(text);
            assert!(told.contains(says), "{text}: {told}");
        }
    }
}
