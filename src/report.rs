//! Results to text, Markdown, JSON, CSV and pictures. Pure: no input, no output.

pub mod brief;
pub mod checks;
pub mod lists;
pub mod plot;
pub mod sources;
pub mod sweep;
pub mod words;
