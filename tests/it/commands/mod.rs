//! The built program, run the way an engineer runs it.

mod against;
mod audit;
mod catalogue;
mod checks;
mod compare;
mod files;
mod help;
mod issue;
mod project;
mod revisions;
mod rules;
mod solve;
mod start;
mod trial;
