//! One test program: published values, laws, commands and documents.

mod commands;
mod documents;
mod laws;
mod published;
mod repository;
mod support;
