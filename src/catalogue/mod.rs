//! The tables in `catalogue/`, embedded in the program, each row with its source.
