//! See the files beside this one.

mod frames;
mod module_order;
mod quantities;
mod sections;
