//! The shapes that a project can name, their dimensions in m, and what is checked of them.

use super::{Properties, closed, open, polygon};

/// A cross-section by its nominal dimensions, m. Field names are the keys of the project file.
#[derive(Clone, Debug, PartialEq)]
pub enum Shape {
    Rectangle {
        width: f64,
        depth: f64,
    },
    Circle {
        diameter: f64,
    },
    Tube {
        diameter: f64,
        thickness: f64,
    },
    /// Left out: outer radius 1.5 × thickness and inner radius 1.0 × thickness, as EN 10210-2 takes
    /// for calculation; with one of them given, the other differs by the thickness.
    RectangularHollow {
        width: f64,
        depth: f64,
        thickness: f64,
        outer_radius: Option<f64>,
        inner_radius: Option<f64>,
    },
    /// With a root radius: rolled. Without: welded, no fillets counted.
    I {
        depth: f64,
        width: f64,
        web: f64,
        flange: f64,
        root_radius: Option<f64>,
    },
    UnequalI {
        depth: f64,
        web: f64,
        top_width: f64,
        top_flange: f64,
        bottom_width: f64,
        bottom_flange: f64,
        root_radius: Option<f64>,
    },
    /// Web at -y, flanges towards +y.
    Channel {
        depth: f64,
        width: f64,
        web: f64,
        flange: f64,
        root_radius: Option<f64>,
        toe_radius: Option<f64>,
        taper: Option<Taper>,
    },
    /// Heel at -y, -z: `width` along +y, `depth` along +z.
    Angle {
        depth: f64,
        width: f64,
        thickness: f64,
        root_radius: Option<f64>,
        toe_radius: Option<f64>,
    },
    /// Flange on top.
    T {
        depth: f64,
        width: f64,
        web: f64,
        flange: f64,
        root_radius: Option<f64>,
    },
    /// Corners (y, z) in order, either way round, from any origin.
    Polygon {
        points: Vec<[f64; 2]>,
        holes: Vec<Vec<[f64; 2]>>,
        /// I_t, m⁴. Needed where there are holes; without it a solid polygon takes an approximation.
        torsion_constant: Option<f64>,
    },
}

/// The inner face of a channel's flanges slopes; the outer face is square to the web.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Taper {
    /// Rise over run, e.g. 0.08.
    pub slope: f64,
    /// Where the flange thickness is measured, from the back of the web, m.
    pub measured_at: f64,
}

/// A dimension that cannot be.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("{message}")]
pub struct ShapeError {
    /// The key at fault, as in the fields of [`Shape`].
    pub dimension: &'static str,
    pub message: String,
}

impl ShapeError {
    pub(super) fn new(dimension: &'static str, message: impl Into<String>) -> Self {
        Self { dimension, message: message.into() }
    }
}

impl Shape {
    /// Properties about the centroid.
    ///
    /// # Errors
    /// When a dimension is not positive, too large for the others, or a polygon is not simple.
    pub fn properties(&self) -> Result<Properties, ShapeError> {
        Ok(Properties { form: self.form(), ..self.computed()? })
    }

    /// The word of the project file.
    #[must_use]
    pub const fn form(&self) -> &'static str {
        match self {
            Self::Rectangle { .. } => "rectangle",
            Self::Circle { .. } => "circle",
            Self::Tube { .. } => "tube",
            Self::RectangularHollow { .. } => "rectangular hollow",
            Self::I { .. } => "I",
            Self::UnequalI { .. } => "unequal I",
            Self::Channel { .. } => "channel",
            Self::Angle { .. } => "angle",
            Self::T { .. } => "T",
            Self::Polygon { .. } => "polygon",
        }
    }

    fn computed(&self) -> Result<Properties, ShapeError> {
        match self {
            Self::Rectangle { width, depth } => closed::rectangle(*width, *depth),
            Self::Circle { diameter } => closed::circle(*diameter),
            Self::Tube { diameter, thickness } => closed::tube(*diameter, *thickness),
            Self::RectangularHollow { width, depth, thickness, outer_radius, inner_radius } => {
                closed::hollow(*width, *depth, *thickness, *outer_radius, *inner_radius)
            }
            Self::I { depth, width, web, flange, root_radius } => {
                open::i_section(&open::ISection {
                    depth: *depth,
                    web: *web,
                    widths: [*width; 2],
                    flanges: [*flange; 2],
                    root_radius: *root_radius,
                    equal: true,
                })
            }
            Self::UnequalI {
                depth,
                web,
                top_width,
                top_flange,
                bottom_width,
                bottom_flange,
                root_radius,
            } => open::i_section(&open::ISection {
                depth: *depth,
                web: *web,
                widths: [*top_width, *bottom_width],
                flanges: [*top_flange, *bottom_flange],
                root_radius: *root_radius,
                equal: false,
            }),
            Self::Channel { depth, width, web, flange, root_radius, toe_radius, taper } => {
                open::channel(&open::Channel {
                    depth: *depth,
                    width: *width,
                    web: *web,
                    flange: *flange,
                    root_radius: *root_radius,
                    toe_radius: *toe_radius,
                    taper: *taper,
                })
            }
            Self::Angle { depth, width, thickness, root_radius, toe_radius } => {
                open::angle(*depth, *width, *thickness, *root_radius, *toe_radius)
            }
            Self::T { depth, width, web, flange, root_radius } => {
                open::t_section(*depth, *width, *web, *flange, *root_radius)
            }
            Self::Polygon { points, holes, torsion_constant } => {
                polygon::polygon(points, holes, *torsion_constant)
            }
        }
    }
}

/// Refuses a dimension that is not a positive length below 1 km.
pub(super) fn positive(key: &'static str, value: f64) -> Result<(), ShapeError> {
    // Beyond 1 km powers of a length lose meaning, and a unit has gone wrong.
    if value > 0.0 && value < 1e3 && value > 1e-6 {
        Ok(())
    } else if value > 0.0 {
        Err(ShapeError::new(key, format!("`{key}` must be between 0.001 mm and 1 km")))
    } else {
        Err(ShapeError::new(key, format!("`{key}` must be greater than zero")))
    }
}

/// Refuses a radius below zero; none is 0.
pub(super) fn radius(key: &'static str, value: Option<f64>) -> Result<f64, ShapeError> {
    let value = value.unwrap_or(0.0);
    if (0.0..1e3).contains(&value) {
        Ok(value)
    } else {
        Err(ShapeError::new(key, format!("`{key}` must be zero or more")))
    }
}

/// Refuses `small` where it does not stay below `limit`.
pub(super) fn below(
    key: &'static str,
    small: f64,
    limit: f64,
    what: &str,
) -> Result<(), ShapeError> {
    if small < limit * (1.0 - 1e-9) {
        Ok(())
    } else {
        Err(ShapeError::new(key, format!("`{key}` must be less than {what}")))
    }
}
