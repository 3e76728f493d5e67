//! The integration tests, one binary with a module for each concern.

mod arcs;
mod bad;
mod cli;
mod computed;
mod flown;
mod held;
mod lasting;
mod properties;
mod published;
mod scenarios;
mod screens;
mod support;
#[cfg(unix)]
mod terminal;
mod tidy;
mod ties;
