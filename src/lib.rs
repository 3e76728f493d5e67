//! stoop: decide how a spacecraft arrives at a moon or planet.
//!
//! The map, left knows nothing of right:
//!
//! ```text
//! numerics ← physics ← arrival ← study ← { scenario, report } ← { cli, tui } ← main
//! ```
//!
//! - [`numerics`]: roots and minima; knows no physics.
//! - [`physics`]: conics, asymptotes, burns, transfers, bodies; every formula with its source.
//! - [`arrival`]: the ways of arriving (direct, dip, loop, steps), each from one setting to one plan.
//! - [`study`]: questions asked of the ways: answers, curves, landmarks, verdicts, checks.
//! - [`scenario`]: RON text to a checked case and back.
//! - [`report`]: results to text, Markdown, JSON and CSV.
//! - [`crew`]: threads for the studies, used by both mouths.
//! - [`cli`] and [`tui`]: the two mouths of the program; they do not know each other.
//!
//! `DEVELOPERS.md` has the invariants and the recipes for adding to it.

pub mod arrival;
pub mod cli;
pub mod crew;
pub mod numerics;
pub mod physics;
pub mod report;
pub mod scenario;
pub mod study;
pub mod tui;
pub mod visible;
