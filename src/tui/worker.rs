//! The worker behind the screen: integrates what the screen has only estimated, coarsely first, and drops it when something newer is asked.

use super::model::CurveLook;
use super::results::{self, Results};
use crate::crew::Threads;
use crate::study::Case;
use crate::study::watch::Crew;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};
use std::sync::mpsc::{Sender, channel};

/// What is to be computed.
#[derive(Clone, Debug)]
pub struct Job {
    /// Which request this is; answers carry it back.
    pub number: u64,
    /// The scenario.
    pub case: Case,
    /// How the curve is looked at.
    pub look: CurveLook,
    /// Terminal size.
    pub size: (u16, u16),
}

/// What comes back.
#[derive(Debug)]
pub enum Report {
    /// So many percent of the work are done.
    Progress {
        /// The request.
        number: u64,
        /// Percent.
        percent: u8,
    },
    /// Results, better than those before.
    Results {
        /// The request.
        number: u64,
        /// The results.
        results: Box<Results>,
    },
    /// The request has come to an unforeseen end; what is on screen stays.
    Failed {
        /// The request.
        number: u64,
    },
}

/// The thread that takes jobs; the newest wins.
#[derive(Debug)]
pub struct Worker {
    jobs: Sender<(Job, Arc<AtomicBool>)>,
    /// Stops the job that runs or waits.
    brake: Arc<AtomicBool>,
}

impl Worker {
    /// Starts the thread. Reports go through `tell`, which says whether anybody still listens.
    pub fn start(tell: impl Fn(Report) -> bool + Send + Sync + 'static) -> Self {
        let (jobs, inbox) = channel::<(Job, Arc<AtomicBool>)>();
        std::thread::spawn(move || {
            while let Ok(mut next) = inbox.recv() {
                // What has piled up behind it is newer.
                while let Ok(newer) = inbox.try_recv() {
                    next = newer;
                }
                let (job, brake) = next;
                let number = job.number;
                let done = std::panic::catch_unwind(std::panic::AssertUnwindSafe(|| {
                    work(&job, brake, &tell)
                }));
                if !done.unwrap_or_else(|_| tell(Report::Failed { number })) {
                    return;
                }
            }
        });
        Self {
            jobs,
            brake: Arc::new(AtomicBool::new(false)),
        }
    }

    /// Hands over a job; whatever was under way is dropped.
    pub fn ask(&mut self, job: Job) {
        self.stop();
        self.brake = Arc::new(AtomicBool::new(false));
        // The thread ends only with the program.
        let _ = self.jobs.send((job, Arc::clone(&self.brake)));
    }

    /// Drops whatever is under way.
    pub fn stop(&self) {
        self.brake.store(true, Ordering::Relaxed);
    }
}

/// Works on one job; `false` where nobody listens any more.
fn work(job: &Job, brake: Arc<AtomicBool>, tell: &(impl Fn(Report) -> bool + Sync)) -> bool {
    let threads = Threads::behind_a_screen(brake);
    let give = |results: Results| {
        tell(Report::Results {
            number: job.number,
            results: Box::new(results),
        })
    };
    let Ok(coarse) = results::coarse(&job.case, &job.look, job.size, &threads) else {
        return true;
    };
    if !give(coarse) {
        return false;
    }
    let counted = Counted {
        crew: &threads,
        done: AtomicUsize::new(0),
        // Columns, scan nodes, and a few dozen smaller things.
        expected: results::axis(&job.case, &job.look, job.size).map_or(0, |axis| axis.points)
            + crate::study::landmarks::INTEGRATED_SCAN_POINTS
            + 24,
        tell: &|percent| {
            tell(Report::Progress {
                number: job.number,
                percent,
            });
        },
    };
    match results::integrated(&job.case, &job.look, job.size, &counted) {
        Ok(results) => give(results),
        Err(_) => true,
    }
}

/// A crew that says how far it is, every tenth of the work.
struct Counted<'a> {
    crew: &'a Threads,
    done: AtomicUsize,
    expected: usize,
    tell: &'a (dyn Fn(u8) + Sync),
}

impl std::fmt::Debug for Counted<'_> {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        f.debug_struct("Counted")
            .field("done", &self.done)
            .field("expected", &self.expected)
            .finish_non_exhaustive()
    }
}

impl Crew for Counted<'_> {
    fn each(&self, count: usize, work: &(dyn Fn(usize) + Sync)) {
        self.crew.each(count, &|k| {
            work(k);
            let done = 1 + self.done.fetch_add(1, Ordering::Relaxed);
            let tenth = |done: usize| (10 * done / self.expected.max(1)).min(9);
            if tenth(done) != tenth(done - 1) {
                (self.tell)(10 * tenth(done) as u8);
            }
        });
    }

    fn stopped(&self) -> bool {
        self.crew.stopped()
    }
}
