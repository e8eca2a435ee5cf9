//! The analysis held against signs, published formulas and laws, on models built by hand.

mod build;
mod hinges;
mod imposed;
mod mechanisms;
mod sections;
mod signs;
