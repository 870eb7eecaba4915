use super::action::Action;
use super::app::{App, Asking, FileWish, Hidden, Mode, Question, Wish};
use super::update::follow_finding;
use super::{filter, jog, signing, stretch};

/// The question as it stands in the lowest row.
pub fn prompt(question: Question) -> &'static str {
    match question {
        Question::GoTo => "Go to waypoint or time (10 or 12.4s): ",
        Question::Find => "Show only (name, verdict or check): ",
        Question::SaveAs => "Save as: ",
        Question::SignName => "Your name: ",
        Question::SignNote => "Note: ",
        Question::KeyFile => "Key file (such as ~/.ssh/id_ed25519; empty: a name only): ",
        Question::Passphrase => "Passphrase of the key (not shown): ",
        Question::Settle(_) => "What you found: ",
        Question::AcceptBecause(_) => "Accepted because: ",
        Question::RefuseBecause(_) => "Refused because: ",
        Question::ShiftBy => "Shift by x y z in mm (0 0 12.5): ",
        Question::JogValue => "Value (mm or degrees, or with its unit): ",
        Question::JogWaypoint => "Jog from waypoint (number or name): ",
        Question::RecordName { .. } => "Name of the new waypoint: ",
    }
}

/// Handles a key while text is asked for.
pub(super) fn answer(app: &mut App, action: &Action) {
    let Mode::Asking(asking) = &mut app.mode else { return };
    match action {
        Action::Type(sign) if !sign.is_control() => asking.typed.push(*sign),
        Action::Back => app.mode = asked_from(asking.question),
        Action::Erase if asking.typed.is_empty() => app.mode = asked_from(asking.question),
        Action::Erase => asking.typed.truncate(asking.typed.len() - asking.typed.chars().next_back().map_or(0, char::len_utf8)),
        Action::Enter => {
            let asking = asking.clone();
            app.mode = Mode::Panes;
            if let Err(why) = settle(app, &asking) {
                app.message = Some(why);
            }
        }
        _ => {}
    }
}

/// What the screen was doing when it asked.
fn asked_from(question: Question) -> Mode {
    match question {
        Question::SignName
        | Question::SignNote
        | Question::KeyFile
        | Question::Passphrase
        | Question::Settle(_)
        | Question::AcceptBecause(_)
        | Question::RefuseBecause(_) => Mode::SignOff,
        _ => Mode::Panes,
    }
}

/// Goes where the answer says, or tells why not.
fn settle(app: &mut App, asking: &Asking) -> Result<(), String> {
    let typed = asking.typed.trim().to_owned();
    if matches!(asked_from(asking.question), Mode::SignOff) {
        app.mode = Mode::SignOff;
    }
    match asking.question {
        asked @ (Question::SignName
        | Question::SignNote
        | Question::Settle(_)
        | Question::AcceptBecause(_)
        | Question::RefuseBecause(_)) => signing::answered(app, asked, &typed),
        Question::KeyFile => {
            app.wish = Wish::File(FileWish::TakeKey(typed));
            Ok(())
        }
        // Blanks are part of it.
        Question::Passphrase => {
            app.wish = Wish::File(FileWish::Unlock(Hidden(asking.typed.clone())));
            Ok(())
        }
        Question::SaveAs | Question::ShiftBy if typed.is_empty() => Ok(()),
        Question::ShiftBy => {
            stretch::act(app, &stretch::OnStretch::Shift(typed));
            Ok(())
        }
        Question::SaveAs => {
            app.wish = Wish::File(FileWish::SaveAs(typed));
            Ok(())
        }
        Question::GoTo => go_to(app, &typed),
        Question::Find => filter::take(app, &typed),
        Question::JogValue => jog::settle_value(app, &typed),
        Question::JogWaypoint => jog::settle_waypoint(app, &typed),
        Question::RecordName { as_pose } => jog::record(app, &typed, as_pose),
    }
}

fn go_to(app: &mut App, typed: &str) -> Result<(), String> {
    if typed.is_empty() {
        return Ok(());
    }
    let session = app.session.as_mut().ok_or("not checked yet")?;
    // Some keyboards have a comma where others have a point.
    if let Some(time) = typed.strip_suffix(['s', 'S']) {
        let time: f64 = time.trim().replace(',', ".").parse().map_err(|_| format!("\"{typed}\" is not a time"))?;
        if !time.is_finite() {
            return Err(format!("\"{typed}\" is not a time"));
        }
        session.go_to_time(time);
        return Ok(());
    }
    let count = session.judged().recipe.waypoints.len();
    match typed.parse::<usize>() {
        Ok(1) => session.go_to_start(),
        Ok(number) if (2..=count).contains(&number) => {
            session.go_to_waypoint(number - 1);
            follow_finding(app);
        }
        Ok(number) => return Err(format!("there is no waypoint {number}; there are {count}")),
        Err(_) => return Err(format!("\"{typed}\" is neither a waypoint's number nor a time such as 12.4s")),
    }
    Ok(())
}
