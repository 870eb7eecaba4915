use std::sync::Arc;

use ratatui::layout::Rect;

use crate::arm::Arm;
use crate::checks::{Check, SegmentSurvey, Survey};
use crate::program::{Edit, Recipe};
use crate::review::drawn::Subject;
use crate::review::{FirstRun, History, Judged, Progress, Session};

use super::action::Action;
use super::editing::{Editing, Preview};
use super::jog::Jogging;
use super::keymap::Keymap;
use super::keys::Binding;
use super::remedies::Remedies;
use super::scene::Scene;
use super::signing::Signing;
use super::theme::Theme;

/// A pane that can be worked in.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Pane {
    /// Waypoints and segments.
    List,
    /// The explanation.
    Why,
    /// The joints at the cursor.
    Joints,
    /// The chart.
    Chart,
}

impl Pane {
    /// The pane that Tab goes to from this one.
    #[must_use]
    pub fn next(self) -> Self {
        match self {
            Self::List => Self::Why,
            Self::Why => Self::Joints,
            Self::Joints => Self::Chart,
            Self::Chart => Self::List,
        }
    }

    /// Its name.
    pub fn name(self) -> &'static str {
        match self {
            Self::List => "Segments",
            Self::Why => "Why",
            Self::Joints => "At the cursor",
            Self::Chart => "Chart",
        }
    }
}

/// A page is a text that fills the screen.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Page {
    /// The explanation of what is selected.
    Why,
    /// What is proved of the segment.
    Bounds,
    /// The edits that were made and taken back.
    Edits,
    /// What is different from something else.
    Changes,
    /// What was not checked, and the doubts.
    NotChecked,
    /// Keys and signs.
    Help,
}

/// A question that is answered by typing.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Question {
    /// A waypoint's number or a time.
    GoTo,
    /// What the list is narrowed to.
    Find,
    /// The value of the row that is jogged.
    JogValue,
    /// The waypoint whose posture is jogged from.
    JogWaypoint,
    /// The name of the waypoint that is recorded.
    RecordName {
        /// As a pose rather than as joint values.
        as_pose: bool,
    },
    /// A file's name.
    SaveAs,
    /// Three lengths by which a stretch is shifted.
    ShiftBy,
    /// Who signs off.
    SignName,
    /// What they want to say.
    SignNote,
    /// The key file to sign with.
    KeyFile,
    /// The passphrase of that key, which is not shown.
    Passphrase,
    /// What was found about a doubt, by its number.
    Settle(usize),
    /// Why a finding is accepted, by its number.
    AcceptBecause(usize),
    /// Why it is refused.
    RefuseBecause(usize),
}

/// What is typed in answer to a question.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Asking {
    /// The question.
    pub question: Question,
    /// What has been typed.
    pub typed: String,
}

/// An item is one action of a menu.
#[derive(Debug, Clone)]
pub struct Item {
    /// What it does.
    pub name: String,
    /// The key that does the same, if there is one.
    pub key: String,
    /// The action.
    pub action: Action,
}

impl Item {
    /// The item of a key.
    pub fn of(binding: &Binding, keymap: &Keymap, theme: Theme) -> Self {
        let key = keymap.names(binding, theme.ascii).into_iter().next().unwrap_or_default();
        Self { name: binding.hint.to_owned(), key, action: binding.action.clone() }
    }
}

/// A menu of named actions, of which one is chosen.
#[derive(Debug, Clone)]
pub struct Menu {
    /// What it is about.
    pub title: String,
    /// What can be chosen.
    pub items: Vec<Item>,
    /// Which one is chosen.
    pub chosen: usize,
}

/// What the screen is doing.
#[derive(Debug, Clone)]
pub enum Mode {
    /// The panes.
    Panes,
    /// A page over the whole screen, scrolled down by some lines.
    Page(Page, usize),
    /// A menu over the panes.
    Menu(Menu),
    /// The remedies of the finding, one of them chosen.
    Remedies,
    /// The model jogged by hand.
    Jog,
    /// Data that can be edited.
    Editing(Editing),
    /// A sign-off.
    SignOff,
    /// A question in the lowest row.
    Asking(Asking),
}

/// What is to become of the program.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Wish {
    /// Go on.
    GoOn,
    /// End.
    Quit,
    /// Give the terminal back for a while.
    Suspend,
    /// Do something with the recipe's file.
    File(FileWish),
    /// Copy a text to the clipboard of the person's own terminal.
    Copy(String),
}

/// What is to be done with the recipe's file.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum FileWish {
    /// Write what is taught, and end if so.
    Save {
        /// Whether to end the program when it is written.
        then_quit: bool,
    },
    /// Write it over what somebody else has written meanwhile.
    SaveOver,
    /// Write it to a file of this name.
    SaveAs(String),
    /// Read the file again and give the edits up.
    Reload,
    /// Make the edits again that an earlier run left behind.
    TakeUp,
    /// Throw them away.
    Forget,
    /// Read the files for a sign-off.
    SignOff,
    /// Write the record of the sign-off.
    WriteRecord,
    /// Read the key file of this name, to sign with.
    TakeKey(String),
    /// Unlock that key with this passphrase.
    Unlock(Hidden),
    /// Tell what is different since the record was made.
    SinceRecord,
    /// Open the recipe although somebody else has it open.
    OpenAllTheSame,
}

/// A text that is neither drawn nor told, such as a passphrase.
#[derive(Clone, PartialEq, Eq)]
pub struct Hidden(pub String);

impl std::fmt::Debug for Hidden {
    fn fmt(&self, f: &mut std::fmt::Formatter) -> std::fmt::Result {
        f.write_str("(hidden)")
    }
}

/// What the chart is set to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct ChartSetting {
    /// Which check.
    pub check: Check,
    /// The worst of all joints instead of the selected one.
    pub every_joint: bool,
    /// The whole cycle instead of the segment.
    pub cycle: bool,
}

/// The app is everything that the screen shows and that keys can change.
#[derive(Debug)]
pub struct App {
    /// The arm.
    pub arm: Arc<Arm>,
    /// What is taught now, with every edit that led there.
    pub history: History,
    /// Edits that are still to be noted down.
    pub made: Vec<Edit>,
    /// Where a stretch of waypoints to be edited begins, counted from 0.
    pub mark: Option<usize>,
    /// What a typed text would make of the recipe.
    pub preview: Option<Preview>,
    /// What is different from something else, a sentence each, below a title.
    pub changes: (String, Vec<String>),
    /// The sign-off that is worked on.
    pub signing: Option<Signing>,
    /// Why nothing may be edited, if so.
    pub look_only: Option<String>,
    /// Whether what is taught now is still to be checked.
    pub unchecked: bool,
    /// Which keys ask for what.
    pub keymap: Keymap,
    /// How things look.
    pub theme: Theme,
    /// The screen.
    pub area: Rect,
    /// The review; `None` until the first check is done.
    pub session: Option<Session>,
    /// How far a running check is.
    pub progress: Option<Progress>,
    /// What the screen is doing.
    pub mode: Mode,
    /// Where the model was jogged to, while it is; menus, pages and questions may stand over it.
    pub jog: Option<Jogging>,
    /// The pane that is worked in.
    pub pane: Pane,
    /// The selected joint.
    pub joint: usize,
    /// What the chart is set to.
    pub chart: ChartSetting,
    /// The segment whose bounds are to be proved closer.
    pub tighten: Option<usize>,
    /// A segment with its bounds proved closer, and the survey that it belongs to.
    pub closer: Option<(Arc<Survey>, Box<SegmentSurvey>)>,
    /// What is to be done once the plan of the first run is made.
    pub planning: Option<FileWish>,
    /// The plan of the first run, and the survey that it belongs to.
    pub first_run: Option<(Arc<Survey>, Arc<FirstRun>)>,
    /// What is known of the remedies of the finding that is looked at.
    pub remedies: Remedies,
    /// Lines that the explanation is scrolled down.
    pub why_scroll: usize,
    /// What the list is narrowed to; empty where all is shown.
    pub filter: String,
    /// A line for the person, until the next key.
    pub message: Option<String>,
    /// What is to become of the program.
    pub wish: Wish,
    /// What is drawn, computed from the rest.
    pub scene: Scene,
}

impl App {
    /// The screen before anything was checked.
    pub fn new(arm: Arc<Arm>, recipe: Recipe, theme: Theme, area: Rect) -> Self {
        let progress = Some(Progress { done: 0, of: recipe.waypoints.len().saturating_sub(1) });
        Self {
            arm,
            history: History::of(recipe),
            made: Vec::new(),
            mark: None,
            preview: None,
            changes: (String::new(), Vec::new()),
            signing: None,
            look_only: None,
            unchecked: true,
            keymap: Keymap::default(),
            theme,
            area,
            session: None,
            progress,
            mode: Mode::Panes,
            jog: None,
            pane: Pane::List,
            joint: 0,
            chart: ChartSetting { check: Check::Rate, every_joint: false, cycle: false },
            tighten: None,
            closer: None,
            planning: None,
            first_run: None,
            remedies: Remedies::default(),
            why_scroll: 0,
            filter: String::new(),
            message: None,
            wish: Wish::GoOn,
            scene: Scene::default(),
        }
    }

    /// The plan of the first run of what is judged now, if it is made.
    pub fn first_run(&self) -> Option<&Arc<FirstRun>> {
        let judged = self.judged()?;
        self.first_run.as_ref().filter(|(survey, _)| Arc::ptr_eq(survey, &judged.survey)).map(|(_, run)| run)
    }

    /// The recipe that the panes show: the one that was judged last, so that no pane mixes it with a newer one.
    pub fn recipe(&self) -> &Recipe {
        self.session.as_ref().map_or(self.history.recipe(), |session| &session.judged().recipe)
    }

    /// What is taught now, with every edit, judged or not.
    pub fn taught(&self) -> &Arc<Recipe> {
        self.history.recipe()
    }

    /// The judged recipe.
    pub fn judged(&self) -> Option<&Judged> {
        self.session.as_ref().map(Session::judged)
    }

    /// The segment that the cursor is on, counted from 0.
    pub fn segment(&self) -> usize {
        self.session.as_ref().map_or(0, |session| session.cursor().segment)
    }

    /// What the chart shows now.
    pub fn subject(&self) -> Subject {
        Subject {
            check: self.chart.check,
            joint: (!self.chart.every_joint && self.chart.check.is_per_joint()).then_some(self.joint),
            segment: (!self.chart.cycle).then(|| self.segment()),
        }
    }
}
