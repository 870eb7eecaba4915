use crate::arm::{Grounds, JointKind};
use crate::checks::{Check, Excess};
use crate::units::{Dimension, Force, Length, Mass, Measure};

use super::direction::{heading, in_tool};
use super::listing::{all_of, sum_of};
use super::rate::at_most;
use super::scene::Scene;
use super::{Bar, Label, Paragraph, proof_text};

/// A push that asks less than this of a joint asks nothing, N·m or N.
const TELLING: f64 = 1e-6;

/// What, why, left alone and rests on of holding.
pub(super) fn paragraphs(scene: &Scene, joint: usize, excess: &Excess) -> [Paragraph; 4] {
    let data = scene.joint(joint);
    let what = format!(
        "{} must hold {} of {}: {}. {}",
        data.name,
        excess.demand.signed(),
        excess.limit,
        excess.room.asks(),
        at_most(excess)
    );
    let alone = if excess.room.as_fraction() < 0.0 {
        format!(
            "The motor of {} can give more than its continuous rating for a short time, so a quick trial may look well. In \
             production it overheats and its protection stops the arm, or {} sinks under the weight.",
            data.name, data.name
        )
    } else {
        format!(
            "{} holds this as long as the data are right. A part heavier than typed, a centre farther out, or friction and \
             speeding up on top use up what is left; the motor runs hot when it stands here for long.",
            data.name
        )
    };
    [
        Paragraph::says(Label::What, what.trim_end().to_owned()),
        Paragraph { label: Label::Why, text: why(scene, joint, excess.demand), bars: bars(scene, joint, excess.limit, true) },
        Paragraph::says(Label::LeftAlone, alone),
        Paragraph::says(
            Label::RestsOn,
            format!("{} {}", rests_on(scene, joint), proof_text(scene.survey(), scene.survey().check(Check::Holding))),
        ),
    ]
}

/// Who asks how much: every link, tool, load and process force that asks anything of the joint. The figures add up to the total.
pub(super) fn bars(scene: &Scene, joint: usize, limit: Measure, with_push: bool) -> Vec<Bar> {
    let shares = scene.shares();
    let mut rows: Vec<(String, f64)> =
        shares.links.iter().enumerate().map(|(j, link)| (format!("link of {}", scene.joint(j).name), link[joint])).collect();
    let [tool, load] = scene.carried_names();
    rows.push((tool, shares.tool[joint]));
    rows.push((load, shares.load[joint]));
    if with_push {
        rows.push(("push of the work".to_owned(), shares.push[joint]));
    }
    rows.push(("balancer".to_owned(), -balance(scene, joint)));
    sum_of(rows, limit)
}

/// What a balancer exerts on the joint here, N·m or N.
fn balance(scene: &Scene, joint: usize) -> f64 {
    scene.joint(joint).drive.balance(scene.instant.q[joint])
}

fn why(scene: &Scene, joint: usize, demand: Measure) -> String {
    let data = scene.joint(joint);
    let balance = balance(scene, joint);
    let pulled = Measure::si(-demand.si - balance, demand.of);
    let turned = match data.kind {
        JointKind::Revolute => "pull",
        JointKind::Prismatic => "press",
    };
    let what_pulls = if scene.push.is_some() { "Weight and process force" } else { "The weight" };
    let verb =
        if scene.push.is_some() { turned.to_owned() } else { format!("{turned}{}", if turned == "press" { "es" } else { "s" }) };
    let mut text = format!(
        "{what_pulls} {verb} {} with {}, so its motor must supply {} to stand still.",
        data.name,
        pulled.signed(),
        demand.signed()
    );
    if balance != 0.0 {
        text += &format!(" Its balancer gives {} of its own.", data.effort_of(balance).signed());
    }
    text += &lever(scene, joint);
    text += &push(scene, joint);
    text + " Standing still asks all of this, so going slower helps nothing."
}

/// How far tool and load are out from a joint's axis, across gravity.
pub(super) fn lever(scene: &Scene, joint: usize) -> String {
    let mass = scene.carried.mass();
    let data = scene.joint(joint);
    if mass <= 0.0 {
        return " Nothing with a mass hangs on the flange here.".to_owned();
    }
    let carries = match (scene.carried.tool_mass > 0.0, scene.carried.load_mass > 0.0) {
        (true, true) => "Tool and load together",
        (false, true) => "The load",
        _ => "The tool",
    };
    let weigh = if scene.carried.tool_mass > 0.0 && scene.carried.load_mass > 0.0 { "weigh" } else { "weighs" };
    let flange = scene.instant.posture.flange();
    let centre = flange.point(&(scene.carried.moment() / mass));
    let posture = &scene.instant.posture;
    let down = scene.judged.plan.gravity.normalize();
    if data.kind == JointKind::Prismatic {
        return format!(" {carries} {weigh} {}.", Mass::kg(mass));
    }
    let lever = posture.axis(joint).dot(&(centre - posture.origin(joint)).cross(&down)).abs();
    let out = format!("{} out from the axis of {}, measured level", Length::m(lever).measure().text(0), data.name);
    format!(" {carries} {weigh} {}, and the centre of that is {out}.", Mass::kg(mass))
}

/// What a process force does to the joint, and which way round it was given.
fn push(scene: &Scene, joint: usize) -> String {
    let Some(push) = scene.push else { return String::new() };
    let recipe = &scene.judged.recipe;
    let shares = scene.shares();
    let (share, total) = (shares.push[joint], shares.total()[joint] - balance(scene, joint));
    let effect = if share.abs() < TELLING {
        "asks nothing of this joint".to_owned()
    } else {
        let without = scene.joint(joint).effort_of(total - share);
        let adds = if total.abs() < (total - share).abs() {
            "relieves this joint"
        } else if total * (total - share) < 0.0 {
            "turns the demand round"
        } else {
            "comes on top"
        };
        format!("{adds}: without it the motor would supply {}", without.signed())
    };
    let force = if push.force.norm() > 0.0 {
        format!(
            "{} {}, in its own axes {}",
            Force::n(push.force.norm()),
            heading(recipe, &push.force),
            in_tool(&scene.instant.tcp.axes, &push.force)
        )
    } else {
        Measure::si(push.torque.norm(), Dimension::Torque).to_string()
    };
    format!(" The recipe says that the tool pushes the work with {force}. The work pushes back the other way, and that {effect}.")
}

fn rests_on(scene: &Scene, joint: usize) -> String {
    let data = scene.joint(joint);
    let rating = data.torque.map_or("No rating".to_owned(), |torque| {
        format!("The continuous rating of {}, {} ({})", data.name, data.effort_of(torque.holding), grounds(torque.grounds))
    });
    let links = scene.arm().joints().iter().filter_map(|joint| joint.link);
    let found: Vec<String> = [Grounds::Sheet, Grounds::Weighed, Grounds::Guess]
        .into_iter()
        .filter(|wanted| links.clone().any(|link| link.grounds == *wanted))
        .map(|wanted| grounds(wanted).to_owned())
        .collect();
    let links = if found.is_empty() { "no link masses".to_owned() } else { format!("the link masses ({})", all_of(&found)) };
    format!("{rating}, {links}, and the masses and centres of tool and load as typed. Friction is not credited.")
}

/// Where a datum comes from, in words.
pub(super) fn grounds(grounds: Grounds) -> &'static str {
    match grounds {
        Grounds::Sheet => "from the maker's sheet",
        Grounds::Weighed => "weighed on the real arm",
        Grounds::Guess => "a guess",
    }
}
