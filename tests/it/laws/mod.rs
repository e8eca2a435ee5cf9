//! See the files beside this one.

mod module_order;
mod quantities;
