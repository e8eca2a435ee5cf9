//! See the files beside this one.

mod catalogue;
