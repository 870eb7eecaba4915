use std::sync::Arc;
use std::thread;

use crossbeam_channel::{Receiver, Sender, unbounded};

use crate::arm::Arm;
use crate::checks::{SegmentSurvey, Survey, Watch, tightened};
use crate::program::Recipe;

use super::{FirstRun, Judged, first_run};

/// A ticket names one request; later requests have greater tickets.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Ticket(u64);

/// A reply is finished work with the ticket of its request.
#[derive(Debug, Clone)]
pub struct Reply {
    /// Which request it answers.
    pub ticket: Ticket,
    /// What became of it.
    pub done: Done,
}

/// What a worker has done.
#[derive(Debug, Clone)]
pub enum Done {
    /// A recipe judged.
    Judged(Judged),
    /// One segment with its bounds proved closer, and the survey whose segment it is.
    Closer(Arc<Survey>, Box<SegmentSurvey>),
    /// The plan of the first run of a recipe, and the survey that it belongs to.
    Planned(Arc<Survey>, Arc<FirstRun>),
}

/// How far the newest request is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Progress {
    /// Segments checked.
    pub done: usize,
    /// Segments in all.
    pub of: usize,
}

#[derive(Debug)]
enum Job {
    Judge { ticket: Ticket, arm: Arc<Arm>, recipe: Arc<Recipe>, before: Option<Judged>, watch: Arc<Watch> },
    Tighten { ticket: Ticket, judged: Judged, segment: usize },
    Plan { ticket: Ticket, judged: Judged, watch: Arc<Watch> },
}

#[derive(Debug)]
struct Running {
    watch: Arc<Watch>,
    of: usize,
}

/// A recheck plans and surveys recipes away from the thread that asks. Only the newest request counts: it stops the older one, whose
/// reply is dropped.
#[derive(Debug)]
pub struct Recheck {
    jobs: Sender<Job>,
    replies: Receiver<Reply>,
    newest: Ticket,
    running: Option<Running>,
    /// Stops a plan of the first run that is being made.
    planning: Option<Arc<Watch>>,
}

impl Recheck {
    /// Starts the worker.
    ///
    /// # Errors
    /// Where the system gives no thread.
    pub fn start() -> std::io::Result<Self> {
        let (jobs, taken) = unbounded::<Job>();
        let (answer, replies) = unbounded();
        thread::Builder::new().name("recheck".to_owned()).spawn(move || work(&taken, &answer))?;
        Ok(Self { jobs, replies, newest: Ticket(0), running: None, planning: None })
    }

    /// Asks for a recipe to be checked; what `before` judged alike is taken over. An older request is stopped.
    pub fn submit(&mut self, arm: &Arc<Arm>, recipe: &Arc<Recipe>, before: Option<Judged>) -> Ticket {
        self.stop();
        self.newest = Ticket(self.newest.0 + 1);
        let watch = Arc::new(Watch::default());
        self.running = Some(Running { watch: Arc::clone(&watch), of: recipe.waypoints.len().saturating_sub(1) });
        let (arm, recipe) = (Arc::clone(arm), Arc::clone(recipe));
        // A worker that is gone shows as a closed channel of replies.
        let _ = self.jobs.send(Job::Judge { ticket: self.newest, arm, recipe, before, watch });
        self.newest
    }

    /// Asks for the bounds of one segment (counted from 0) of what was judged last to be proved closer.
    pub fn tighten(&mut self, judged: &Judged, segment: usize) {
        let _ = self.jobs.send(Job::Tighten { ticket: self.newest, judged: judged.clone(), segment });
    }

    /// Asks for the plan of the first run of what was judged last. A check that is asked for meanwhile stops it.
    pub fn plan(&mut self, judged: &Judged) {
        let watch = Arc::new(Watch::default());
        if let Some(older) = self.planning.replace(Arc::clone(&watch)) {
            older.stop();
        }
        let _ = self.jobs.send(Job::Plan { ticket: self.newest, judged: judged.clone(), watch });
    }

    /// Where replies arrive, to be waited for together with other news. Hand each to [`Recheck::accept`].
    pub fn replies(&self) -> &Receiver<Reply> {
        &self.replies
    }

    /// What a reply brings, if it belongs to the newest request.
    pub fn accept(&mut self, reply: Reply) -> Option<Done> {
        (reply.ticket == self.newest).then(|| {
            if matches!(reply.done, Done::Judged(_)) {
                self.running = None;
            }
            reply.done
        })
    }

    /// How far the newest request is; `None` when nothing runs.
    pub fn progress(&self) -> Option<Progress> {
        self.running.as_ref().map(|running| Progress { done: running.watch.done().min(running.of), of: running.of })
    }

    /// Stops what runs.
    pub fn stop(&mut self) {
        if let Some(running) = self.running.take() {
            running.watch.stop();
        }
        if let Some(planning) = self.planning.take() {
            planning.stop();
        }
    }
}

impl Drop for Recheck {
    fn drop(&mut self) {
        self.stop();
    }
}

fn work(jobs: &Receiver<Job>, answer: &Sender<Reply>) {
    while let Ok(job) = jobs.recv() {
        let reply = match job {
            // Stopped while it waited: a newer one stands behind it.
            Job::Judge { watch, .. } if watch.is_stopped() => None,
            Job::Judge { ticket, arm, recipe, before, watch } => {
                Judged::of(&arm, &recipe, before.as_ref(), &watch).map(|judged| Reply { ticket, done: Done::Judged(judged) })
            }
            Job::Tighten { ticket, judged, segment } => {
                let closer = tightened(&judged.arm, &judged.recipe, &judged.plan, segment);
                Some(Reply { ticket, done: Done::Closer(judged.survey, Box::new(closer)) })
            }
            Job::Plan { ticket, judged, watch } => {
                first_run(&judged, &watch).map(|run| Reply { ticket, done: Done::Planned(judged.survey, Arc::new(run)) })
            }
        };
        if let Some(reply) = reply
            && answer.send(reply).is_err()
        {
            return;
        }
    }
}
