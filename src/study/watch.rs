//! Work that can be shared out and called off: whoever runs a study decides on how many threads, and may stop it.
//!
//! The engine starts no threads itself. Results do not depend on who shares the work, for every item is computed on its own and lands in
//! its own place.

use std::sync::OnceLock;

/// Carries out independent pieces of work.
pub trait Crew: Sync + std::fmt::Debug {
    /// Calls `work` once for each number below `count`, in any order, on any thread, and returns when all are done. May leave
    /// some out once it has been stopped.
    fn each(&self, count: usize, work: &(dyn Fn(usize) + Sync));

    /// Whether the answer is no longer wanted.
    fn stopped(&self) -> bool;
}

/// One thread, never stopped.
#[derive(Clone, Copy, Debug, Default)]
pub struct Alone;

impl Crew for Alone {
    fn each(&self, count: usize, work: &(dyn Fn(usize) + Sync)) {
        (0..count).for_each(work);
    }

    fn stopped(&self) -> bool {
        false
    }
}

/// The answer was no longer wanted.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Stopped;

/// Makes `count` things, in order.
///
/// # Errors
/// [`Stopped`] where the crew was stopped before all were made.
pub fn gather<T: Send + Sync>(
    crew: &dyn Crew,
    count: usize,
    make: impl Fn(usize) -> T + Sync,
) -> Result<Vec<T>, Stopped> {
    let places: Vec<OnceLock<T>> = (0..count).map(|_| OnceLock::new()).collect();
    crew.each(count, &|k| {
        if let Some(place) = places.get(k) {
            let _ = place.set(make(k));
        }
    });
    places
        .into_iter()
        .map(|place| place.into_inner().ok_or(Stopped))
        .collect()
}

/// `Ok` while the answer is wanted.
///
/// # Errors
/// [`Stopped`] once it is not.
pub fn still_wanted(crew: &dyn Crew) -> Result<(), Stopped> {
    if crew.stopped() { Err(Stopped) } else { Ok(()) }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn everything_lands_in_its_place() {
        assert_eq!(gather(&Alone, 5, |k| k * k), Ok(vec![0, 1, 4, 9, 16]));
        assert_eq!(gather(&Alone, 0, |k| k), Ok(vec![]));
    }

    #[test]
    fn a_stopped_crew_gives_nothing() {
        #[derive(Debug)]
        struct Tired;
        impl Crew for Tired {
            fn each(&self, count: usize, work: &(dyn Fn(usize) + Sync)) {
                (0..count / 2).for_each(work);
            }
            fn stopped(&self) -> bool {
                true
            }
        }
        assert_eq!(gather(&Tired, 4, |k| k), Err(Stopped));
        assert_eq!(still_wanted(&Tired), Err(Stopped));
    }
}
