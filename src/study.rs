//! Questions asked of the ways: one point, a curve, a map's cell, where it turns. No file, no screen, no clock.

pub mod answer;
pub mod case;
pub mod check;
pub mod curve;
pub mod engine;
pub mod entry;
pub mod field;
pub mod knob;
pub mod landmarks;
pub mod lean;
pub mod spec;
pub mod verdict;
pub mod warning;
pub mod watch;

pub use answer::Answer;
pub use case::Case;
pub use spec::Spec;
