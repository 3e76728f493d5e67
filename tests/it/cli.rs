//! Placeholder while the module is being written.
