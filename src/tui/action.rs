use std::sync::Arc;

use crate::checks::{Check, SegmentSurvey, Survey};
use crate::program::Edit;
use crate::review::{FirstRun, Judged, Progress, Told};

use super::app::FileWish;
use super::jog::Deed;
use super::signing::Decision;
use super::stretch::OnStretch;

/// An action is everything that can happen to the screen: what a person asks for, and what arrives from elsewhere.
#[derive(Debug, Clone)]
pub enum Action {
    /// One row up in the pane that is worked in.
    Up,
    /// One row down.
    Down,
    /// The cursor a step back in time.
    Left,
    /// The cursor a step on in time.
    Right,
    /// The cursor ten steps back.
    LeapBack,
    /// The cursor ten steps on.
    LeapOn,
    /// The cursor to the beginning of what the chart spans.
    ToStart,
    /// The cursor to its end.
    ToEnd,
    /// Work in the next pane.
    NextPane,
    /// Out of what is open.
    Back,
    /// The actions for what is selected, or the chosen one of them.
    Enter,
    /// To the worst finding.
    Worst,
    /// To the next finding.
    NextFinding,
    /// To the finding before.
    PreviousFinding,
    /// The explanation over the whole screen.
    ReadWhy,
    /// What was not checked, and the doubts.
    NotChecked,
    /// Ask for a waypoint's number or a time.
    GoTo,
    /// Ask what the list is narrowed to.
    Find,
    /// The whole list again.
    ShowAll,
    /// The chart spans the segment or the whole cycle.
    Span,
    /// The chart shows the next quantity.
    NextQuantity,
    /// Choose what the chart shows.
    ChooseQuantity,
    /// The chart shows this check.
    Show(Check),
    /// The chart shows the worst of all joints, or the selected one.
    EveryJoint,
    /// The remedies of the finding.
    Remedies,
    /// What was seen and what is proved of the segment, and its bounds proved closer.
    Bounds,
    /// Jog the model from where the cursor is, or end that.
    Jog,
    /// The next step size of jogging.
    StepSize,
    /// Something done where the model was jogged to.
    Deed(Deed),
    /// The keys and the signs.
    Help,
    /// Change the recipe.
    Change(Box<Edit>),
    /// Take the last edit back.
    Undo,
    /// Make the last edit that was taken back again.
    Redo,
    /// Edit the data of the selected waypoint and all else.
    Edit,
    /// The edits of a stretch of waypoints.
    EditStretch,
    /// Do this with the stretch.
    OnStretch(OnStretch),
    /// What a typed text would make of the recipe, judged.
    Previewed(Box<Judged>),
    /// The edits that were made and taken back.
    Edits,
    /// What somebody else changed in the recipe's file.
    Changes,
    /// Sign the recipe off.
    SignOff,
    /// Decide about a finding of the sign-off.
    Decide(Decision),
    /// Write what is taught to its file.
    Save,
    /// Ask for the name of another file to write it to.
    SaveAs,
    /// Do this with the recipe's file.
    File(FileWish),
    /// Look at the recipe and edit nothing, for this reason.
    LookOnly(String),
    /// Copy the selected finding, or what is told of the segment, as text.
    Copy,
    /// Close what is open and change nothing.
    Stay,
    /// End the program; with edits that are not saved, ask first.
    Quit,
    /// End it and give up the edits.
    QuitAnyway,
    /// Let the shell have the terminal for a while.
    Suspend,
    /// A character typed where text is asked for.
    Type(char),
    /// The last typed character away.
    Erase,
    /// A click on a column and row.
    Click(u16, u16),
    /// The terminal has these columns and rows now.
    Resize(u16, u16),
    /// The check has come this far.
    Checking(Progress),
    /// The check is done.
    Judged(Box<Judged>),
    /// What a search for remedies tells, and how far it is; nothing told when it has ended.
    Told(Option<Told>, Option<[usize; 2]>),
    /// A segment of this survey with its bounds proved closer.
    Closer(Arc<Survey>, Box<SegmentSurvey>),
    /// The plan of the first run is made, of this survey.
    Planned(Arc<Survey>, Arc<FirstRun>),
}
