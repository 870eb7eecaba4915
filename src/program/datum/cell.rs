use crate::arm::{Body, Grounds};
use crate::geometry::{M3, Pose, V3};
use crate::program::{BASE, Edit, Frame, Load, Recipe, Repeat, Tool, WORLD, rename};
use crate::units::{Dimension, Measure};

use super::Datum;
use super::sheet::{Sheet, one_of, or_nothing, words};

/// What stands where a tool may turn about its own axis as it likes.
const FREELY: &str = "yes";
const REPEATS: [(&str, Repeat); 2] = [("start", Repeat::Start), ("never", Repeat::Never)];
const GROUNDS: [(&str, Grounds); 3] = [("sheet", Grounds::Sheet), ("weighed", Grounds::Weighed), ("guess", Grounds::Guess)];
/// The elements of a tensor in the order of a file, with their row and column.
const ELEMENTS: [(&str, usize, usize); 6] = [
    ("inertia xx", 0, 0),
    ("inertia yy", 1, 1),
    ("inertia zz", 2, 2),
    ("inertia xy", 0, 1),
    ("inertia xz", 0, 2),
    ("inertia yz", 1, 2),
];

/// The word of a value out of a few.
fn word_of<V: PartialEq>(known: &[(&'static str, V)], value: &V) -> String {
    known.iter().find(|(_, meaning)| meaning == value).map_or(String::new(), |(word, _)| (*word).to_owned())
}

pub(super) fn recipe(recipe: &Recipe) -> Vec<Datum> {
    let mut name = Sheet::of(&recipe.name, Edit::Name);
    name.datum("name", ("", recipe.name.clone()), |name, text| not_empty(text).map(|text| *name = text));
    let mut repeat = Sheet::of(&recipe.repeat, Edit::Repeat);
    repeat.choice("repeat", word_of(&REPEATS, &recipe.repeat), words(&REPEATS), |repeat, text| {
        *repeat = one_of(text, &REPEATS)?;
        Ok(())
    });
    let mut carrying = Sheet::of(&recipe.carrying, Edit::Carrying);
    let loads = recipe.loads.iter().map(|load| load.name.clone()).collect();
    carrying.choice("carrying", recipe.carrying.clone().unwrap_or_default(), loads, |carrying, text| {
        *carrying = or_nothing(text);
        Ok(())
    });
    [name.listed(), repeat.listed(), carrying.listed()].concat()
}

pub(super) fn mount(recipe: &Recipe) -> Vec<Datum> {
    let mut sheet = Sheet::of(&recipe.mount, Edit::Mount);
    sheet.pose("", recipe.mount, |mount: &mut Pose| mount);
    sheet.listed()
}

/// A name that may not be empty.
pub(super) fn not_empty(text: &str) -> Result<String, String> {
    or_nothing(text).ok_or_else(|| "it is empty; it must be text".to_owned())
}

/// The datum of a name; what refers to it follows.
fn naming(recipe: &Recipe, now: &str, rename: impl Fn(&Recipe, &str) -> Edit + Send + Sync + 'static) -> Vec<Datum> {
    let (whole, old) = (recipe.clone(), now.to_owned());
    let mut sheet = Sheet::of(&old, move |name: String| rename(&whole, &name));
    sheet.datum("name", ("", now.to_owned()), |name, text| not_empty(text).map(|text| *name = text));
    sheet.listed()
}

pub(super) fn tool(recipe: &Recipe, index: usize) -> Vec<Datum> {
    let Some(tool) = recipe.tools.get(index) else { return Vec::new() };
    let all = recipe.tools.clone();
    let mut sheet = Sheet::of(tool, move |tool: Tool| Edit::Tools(with(&all, index, tool)));
    sheet.pose("tcp ", tool.tcp, |tool| &mut tool.tcp);
    let mass = tool.body.map(|body| body.mass);
    sheet.maybe("mass", (Dimension::Mass, mass), |tool, si| {
        tool.body = si.map(|mass| Body { mass, ..tool.body.unwrap_or(MASSLESS) });
    });
    if let Some(body) = &tool.body {
        list_body(&mut sheet, body, |tool: &mut Tool| tool.body.get_or_insert(MASSLESS));
    }
    for (k, point) in tool.points.iter().enumerate() {
        sheet.vector(&format!("point \"{}\" ", point.name), (Dimension::Length, point.at), move |tool: &mut Tool| {
            &mut tool.points[k].at
        });
    }
    let freely = if tool.turns_freely { FREELY.to_owned() } else { String::new() };
    sheet.choice("turns-freely", freely, vec![FREELY.to_owned()], |tool, text| {
        tool.turns_freely = match text {
            "" => false,
            FREELY => true,
            _ => return Err(format!("it must be \"{FREELY}\" or nothing")),
        };
        Ok(())
    });
    let mut data = naming(recipe, &tool.name, move |recipe, name| rename::tool(recipe, index, name));
    data.extend(sheet.listed());
    data
}

pub(super) fn load(recipe: &Recipe, index: usize) -> Vec<Datum> {
    let Some(load) = recipe.loads.get(index) else { return Vec::new() };
    let all = recipe.loads.clone();
    let mut sheet = Sheet::of(load, move |load: Load| Edit::Loads(with(&all, index, load)));
    sheet.measure("mass", Measure::si(load.body.mass, Dimension::Mass), |load, si| load.body.mass = si);
    list_body(&mut sheet, &load.body, |load: &mut Load| &mut load.body);
    let mut data = naming(recipe, &load.name, move |recipe, name| rename::load(recipe, index, name));
    data.extend(sheet.listed());
    data
}

/// What a body is whose mass is about to be given.
const MASSLESS: Body = Body { mass: 0.0, com: V3::new(0.0, 0.0, 0.0), inertia: None, grounds: Grounds::Sheet };

/// Lists centre, inertia and grounds of a body.
fn list_body<T: Clone + Send + Sync + 'static>(
    sheet: &mut Sheet<T>,
    body: &Body,
    slot: impl Fn(&mut T) -> &mut Body + Send + Sync + Copy + 'static,
) {
    sheet.vector("com ", (Dimension::Length, body.com), move |thing| &mut slot(thing).com);
    for (name, row, column) in ELEMENTS {
        let now = body.inertia.map(|tensor| tensor[(row, column)]);
        sheet.maybe(name, (Dimension::Inertia, now), move |thing, si| {
            let body = slot(thing);
            // Nothing in one element takes the tensor away; a number in the first one brings it.
            body.inertia = si.map(|si| {
                let mut tensor = body.inertia.unwrap_or_else(M3::zeros);
                tensor[(row, column)] = si;
                tensor[(column, row)] = si;
                tensor
            });
        });
    }
    sheet.choice("grounds", word_of(&GROUNDS, &body.grounds), words(&GROUNDS), move |thing, text| {
        slot(thing).grounds = one_of(text, &GROUNDS)?;
        Ok(())
    });
}

pub(super) fn frame(recipe: &Recipe, index: usize) -> Vec<Datum> {
    let Some(frame) = recipe.frames.get(index) else { return Vec::new() };
    let all = recipe.frames.clone();
    let mut sheet = Sheet::of(frame, move |frame: Frame| Edit::Frames(with(&all, index, frame)));
    sheet.pose("", frame.pose, |frame| &mut frame.pose);
    let parents = [BASE, WORLD]
        .into_iter()
        .chain(recipe.frames[..index].iter().map(|frame| frame.name.as_str()))
        .map(str::to_owned)
        .collect();
    sheet.choice("in", frame.parent.clone(), parents, |frame, text| not_empty(text).map(|text| frame.parent = text));
    let mut data = naming(recipe, &frame.name, move |recipe, name| rename::frame(recipe, index, name));
    data.extend(sheet.listed());
    data
}

fn with<T: Clone>(all: &[T], index: usize, changed: T) -> Vec<T> {
    let mut all = all.to_vec();
    all[index] = changed;
    all
}
