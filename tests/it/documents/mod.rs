//! What the program writes: drawings and packages.
mod figures;
