//! Files that the program reads and writes: project files, drawings and packages.

mod against;
mod at_revision;
mod at_revision_refused;
mod demos;
mod figures;
mod package;
mod page;
mod project_file;
mod project_schema;
mod project_untrusted;
mod resolve;
mod uncommitted;
