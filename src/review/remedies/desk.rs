use std::sync::Arc;
use std::thread;

use crossbeam_channel::{Receiver, Sender, unbounded};

use crate::checks::{Finding, Watch};

use super::{Judged, Told, kinds_for, search};

/// An errand names one search; later ones are greater.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Errand(u64);

/// News of a search, with the errand that it is of.
#[derive(Debug, Clone)]
pub struct News {
    /// Which search.
    pub errand: Errand,
    /// What was found or tried; `None` when the search is done.
    pub told: Option<Told>,
}

#[derive(Debug)]
struct Job {
    errand: Errand,
    judged: Judged,
    finding: Finding,
    watch: Arc<Watch>,
}

/// A search that runs, and how far it is.
#[derive(Debug)]
struct Running {
    watch: Arc<Watch>,
    tried: Vec<super::RemedyKind>,
    of: usize,
}

/// A desk looks for remedies away from the thread that asks. Only the newest errand counts: it stops the older one, whose news is
/// dropped.
#[derive(Debug)]
pub struct Desk {
    jobs: Sender<Job>,
    news: Receiver<News>,
    newest: Errand,
    running: Option<Running>,
}

impl Desk {
    /// Starts the worker.
    ///
    /// # Errors
    /// Where the system gives no thread.
    pub fn start() -> std::io::Result<Self> {
        let (jobs, taken) = unbounded::<Job>();
        let (tell, news) = unbounded();
        thread::Builder::new().name("remedies".to_owned()).spawn(move || work(&taken, &tell))?;
        Ok(Self { jobs, news, newest: Errand(0), running: None })
    }

    /// Asks for remedies of a finding. An older search is stopped.
    pub fn submit(&mut self, judged: &Judged, finding: &Finding) -> Errand {
        self.stop();
        self.newest = Errand(self.newest.0 + 1);
        let watch = Arc::new(Watch::default());
        let of = kinds_for(judged, finding).len();
        self.running = Some(Running { watch: Arc::clone(&watch), tried: Vec::new(), of });
        // A worker that is gone shows as a closed channel of news.
        let _ = self.jobs.send(Job { errand: self.newest, judged: judged.clone(), finding: *finding, watch });
        self.newest
    }

    /// Where news arrives, to be waited for together with other news. Hand each to [`Desk::accept`].
    pub fn news(&self) -> &Receiver<News> {
        &self.news
    }

    /// What was found or tried, if it is of the newest errand; `None` for the end of it and for what is stale.
    pub fn accept(&mut self, news: News) -> Option<Told> {
        if news.errand != self.newest {
            return None;
        }
        match (&news.told, &mut self.running) {
            (None, running) => *running = None,
            (Some(told), Some(running)) if !running.tried.contains(&told.kind()) => running.tried.push(told.kind()),
            _ => {}
        }
        news.told
    }

    /// How many kinds of remedy the newest search has tried, and of how many; `None` when nothing runs.
    pub fn progress(&self) -> Option<[usize; 2]> {
        self.running.as_ref().map(|running| [running.tried.len(), running.of])
    }

    /// Stops what runs.
    pub fn stop(&mut self) {
        if let Some(running) = self.running.take() {
            running.watch.stop();
        }
    }
}

impl Drop for Desk {
    fn drop(&mut self) {
        self.stop();
    }
}

fn work(jobs: &Receiver<Job>, tell: &Sender<News>) {
    while let Ok(job) = jobs.recv() {
        // Stopped while it waited: a newer one stands behind it.
        if job.watch.is_stopped() {
            continue;
        }
        let mut hears = true;
        search(&job.judged, &job.finding, &job.watch, |told| {
            hears &= tell.send(News { errand: job.errand, told: Some(told) }).is_ok();
        });
        hears &= tell.send(News { errand: job.errand, told: None }).is_ok();
        if !hears {
            return;
        }
    }
}
