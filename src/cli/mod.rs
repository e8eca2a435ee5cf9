//! Commands: parse arguments, call the library, print, pick the exit status.

pub mod catalogue;
