//! Threads for the studies: shares work over the cores and can be called off.
//!
//! Stands outside the engine, which starts no threads, and beside command line and screen, which both use it.

use crate::study::watch::Crew;
use std::num::NonZero;
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};

/// Threads that take the next piece of work as they become free.
#[derive(Clone, Debug)]
pub struct Threads {
    count: usize,
    stop: Arc<AtomicBool>,
}

impl Threads {
    /// One for each core, never more than sixteen.
    pub fn all() -> Self {
        let cores = std::thread::available_parallelism().map_or(1, NonZero::get);
        Self::number(cores.min(16))
    }

    /// This many, at least one.
    pub fn number(count: usize) -> Self {
        Self {
            count: count.max(1),
            stop: Arc::new(AtomicBool::new(false)),
        }
    }

    /// One for each core but one, which is left to whoever waits for keys; stopped when the brake is set.
    pub fn behind_a_screen(stop: Arc<AtomicBool>) -> Self {
        let count = Self::all().count.saturating_sub(1).max(1);
        Self { count, stop }
    }

    /// What stops them when it is set.
    pub fn brake(&self) -> Arc<AtomicBool> {
        Arc::clone(&self.stop)
    }
}

impl Crew for Threads {
    fn each(&self, count: usize, work: &(dyn Fn(usize) + Sync)) {
        let next = AtomicUsize::new(0);
        let take = || {
            while !self.stopped() {
                let k = next.fetch_add(1, Ordering::Relaxed);
                if count <= k {
                    break;
                }
                work(k);
            }
        };
        std::thread::scope(|scope| {
            for _ in 1..self.count.min(count) {
                scope.spawn(take);
            }
            take();
        });
    }

    fn stopped(&self) -> bool {
        self.stop.load(Ordering::Relaxed)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::study::watch::{Stopped, gather};

    #[test]
    fn any_number_of_threads_gives_the_same() {
        let expected: Vec<usize> = (0..1000).map(|k| k * 7).collect();
        for count in [1, 2, 3, 8] {
            let found = gather(&Threads::number(count), 1000, |k| k * 7);
            assert_eq!(found, Ok(expected.clone()), "{count}");
        }
    }

    #[test]
    fn the_brake_stops_them() {
        let threads = Threads::number(2);
        let brake = threads.brake();
        let found = gather(&threads, 1000, |k| {
            if k == 10 {
                brake.store(true, Ordering::Relaxed);
            }
            k
        });
        assert_eq!(found, Err(Stopped));
    }
}
