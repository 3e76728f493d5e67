//! Scenario files: RON text to a checked case and back.
//!
//! Reading goes text → syntax check by the `ron` crate → a tree of our own that knows where everything stands → `Spec`
//! → `Case`. The tree is our own because `ron` reports only the first fault and keeps no places, and because saving
//! must keep the author's comments: values that changed are replaced where they stand.

pub mod decode;
pub mod diagnostic;
pub mod file;
pub mod reference;
pub mod tree;
pub mod write;
