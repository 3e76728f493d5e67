//! Results to text, Markdown, JSON, CSV and pictures. Pure: no input, no output.

pub mod brief;
pub mod checks;
mod json;
pub mod lists;
pub mod path;
pub mod picture;
pub mod plot;
mod rerun;
pub mod sources;
pub mod stops;
pub mod sweep;
pub mod words;
