//! The catalogue and the knobs as text of at most 80 columns and as JSON.

mod bodies;
mod knobs;

pub use bodies::{bodies_json, bodies_text};
pub use knobs::{knobs_json, knobs_text};
