//! The analysis held against signs, published formulas and laws, on models built by hand.

mod build;
mod hinges;
mod imposed;
mod mechanisms;
mod plan;
mod random;
mod sections;
mod signs;
