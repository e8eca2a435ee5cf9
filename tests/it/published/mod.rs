//! Printed values from outside the project, run through the real project-file path.

mod case;
mod catalogue;
mod checks;
mod combinations;
mod compare;
mod families;
mod sections;
mod shapes;
mod shear;
mod translate;
