//! See the files beside this one.

mod audit_parts;
mod by_span;
mod check_places;
mod checks;
mod compare;
mod formulas;
mod frames;
mod generated;
mod governing;
mod module_order;
mod quantities;
mod record;
mod reduction;
mod sections;
mod self_check;
mod worst_place;
