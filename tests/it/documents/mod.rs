//! See the files beside this one.
