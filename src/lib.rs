//! Spanfolio turns one YAML project file into a calculation package for beams and frames.
//!
//! The modules stand in the order in which the data flows; each imports only those before it
//! (`tests/it/laws/module_order.rs` holds this). The way of the data:
//!
//! `files::Sources` → [`project`] → [`model::Model`] → [`analysis::Solution`] → [`record::Record`]
//! → [`package::Package`] → `files`.

pub mod analysis;
pub mod catalogue;
pub mod cli;
pub mod diagnostic;
pub mod figures;
pub mod files;
pub mod model;
pub mod package;
pub mod project;
pub mod quantity;
pub mod record;
pub mod section;
