//! Numerical tools that know no physics: roots, minima and the accuracies they work to.
//!
//! Everything here is a pure function of its arguments. Why a search stopped is part of its
//! result; nothing returns NaN or a sentinel.

pub mod integrate;
pub mod minimum;
pub mod root;
pub mod tolerance;
