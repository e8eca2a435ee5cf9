//! Family M: section properties, through the project file.
