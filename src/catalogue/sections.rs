//! Sections by designation.

use super::NotFound;
use super::names::{key, letters, nearest};
use super::table::{Printed, Row, Table};
use crate::section::{self, Properties, Shape, Taper};

/// A section of a table.
#[derive(Clone, Debug, PartialEq)]
pub struct CatalogueSection {
    /// As in the table, e.g. `IPE 300`.
    pub designation: String,
    /// Name of its [`Family`].
    pub family: &'static str,
    pub properties: Properties,
    /// The row as the table gives it.
    pub printed: Vec<Printed>,
    /// Where the table comes from, and which values are computed.
    pub source: String,
}

/// One table of sections.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Family {
    /// E.g. `IPE`; what [`family`] takes.
    pub name: &'static str,
    /// What a designation begins with, as a key; nothing for timber.
    prefix: &'static str,
    rule: Rule,
    text: &'static str,
}

/// How a row gives a shape.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Rule {
    /// Rolled I with I_t by the formula of the European tables.
    EuropeanI,
    /// Rolled I with I_t after El Darwish and Johnston, as the British tables have it.
    BritishI,
    /// Likewise, root radius = k_des - t_f.
    AmericanI,
    Channel,
    EqualAngle,
    /// Outer corner radius over thickness; the inner is one thickness.
    Hollow {
        outer_tenths: u8,
    },
    Tube,
    Rectangle,
}

macro_rules! family {
    ($name:literal, $prefix:literal, $rule:expr, $file:literal) => {
        Family {
            name: $name,
            prefix: $prefix,
            rule: $rule,
            text: include_str!(concat!("../../catalogue/sections/", $file)),
        }
    };
}

/// In the order in which they are listed.
static FAMILIES: [Family; 18] = [
    family!("IPE", "IPE", Rule::EuropeanI, "ipe.csv"),
    family!("HEA", "HEA", Rule::EuropeanI, "hea.csv"),
    family!("HEB", "HEB", Rule::EuropeanI, "heb.csv"),
    family!("HEM", "HEM", Rule::EuropeanI, "hem.csv"),
    family!("UB", "UB", Rule::BritishI, "ub.csv"),
    family!("UC", "UC", Rule::BritishI, "uc.csv"),
    family!("UPN", "UPN", Rule::Channel, "upn.csv"),
    family!("UPE", "UPE", Rule::Channel, "upe.csv"),
    family!("PFC", "PFC", Rule::Channel, "pfc.csv"),
    family!("L", "L", Rule::EqualAngle, "angles.csv"),
    family!("SHS", "SHS", Rule::Hollow { outer_tenths: 15 }, "shs.csv"),
    family!("RHS", "RHS", Rule::Hollow { outer_tenths: 15 }, "rhs.csv"),
    family!("CHS", "CHS", Rule::Tube, "chs.csv"),
    family!("W", "W", Rule::AmericanI, "w.csv"),
    family!("HSS", "HSS", Rule::Hollow { outer_tenths: 20 }, "hss.csv"),
    family!("Pipe", "PIPE", Rule::Tube, "pipe.csv"),
    family!("timber", "", Rule::Rectangle, "timber.csv"),
    family!("lumber", "", Rule::Rectangle, "lumber.csv"),
];

/// All tables of sections.
#[must_use]
pub fn families() -> &'static [Family] {
    &FAMILIES
}

/// The section of a name.
///
/// # Errors
/// With the nearest names when there is none.
pub fn section(name: &str) -> Result<CatalogueSection, NotFound> {
    let wanted = key(name);
    for family in FAMILIES.iter().filter(|family| family.prefix == letters(&wanted)) {
        let table = Table::new(family.text);
        if let Some(row) = table.rows().find(|row| key(row.name()) == wanted) {
            return Ok(family.section(&table, &row));
        }
    }
    Err(NotFound {
        message: format!("no section named `{}` in the catalogue", name.trim()),
        nearest: nearest(name, FAMILIES.iter().flat_map(Family::designations)),
    })
}

/// All sections of a family in the order of its table.
///
/// # Errors
/// With the nearest names of families when there is none.
pub fn family(name: &str) -> Result<Vec<CatalogueSection>, NotFound> {
    match FAMILIES.iter().find(|family| key(family.name) == key(name)) {
        Some(family) => {
            let table = Table::new(family.text);
            Ok(table.rows().map(|row| family.section(&table, &row)).collect())
        }
        None => Err(NotFound {
            message: format!("no family of sections named `{}` in the catalogue", name.trim()),
            nearest: nearest(name, FAMILIES.iter().map(|family| family.name.to_owned())),
        }),
    }
}

impl Family {
    /// What the table holds, e.g. `IPE 80 to IPE 600, hot-rolled I sections`.
    #[must_use]
    pub fn title(&self) -> &'static str {
        Table::new(self.text).note("title")
    }

    /// Where the table comes from.
    #[must_use]
    pub fn source(&self) -> &'static str {
        Table::new(self.text).note("source")
    }

    /// How the table was verified.
    #[must_use]
    pub fn verified(&self) -> &'static str {
        Table::new(self.text).note("verified")
    }

    /// Axes and symbols of the table.
    #[must_use]
    pub fn axes(&self) -> &'static str {
        Table::new(self.text).note("axes")
    }

    /// Designations in the order of the table.
    #[must_use]
    pub fn designations(&self) -> Vec<String> {
        Table::new(self.text).names().collect()
    }

    fn section(&self, table: &Table, row: &Row<'_>) -> CatalogueSection {
        CatalogueSection {
            designation: row.name().to_owned(),
            family: self.name,
            properties: self
                .rule
                .properties(row)
                .expect("every row of every table is read by a test"),
            printed: row.printed().collect(),
            source: format!("{}; {}", table.note("source"), self.rule.computed()),
        }
    }
}

const TORSION_OF_TABLE: &str = "I_t from the catalogue's table, computed there by a finite-element warping function over the nominal shape";
const WARPING_OF_TABLE: &str = "I_w and shear centre from the catalogue's table, computed there by a finite-element warping function over the nominal shape";

impl Rule {
    fn properties(self, row: &Row<'_>) -> Option<Properties> {
        let properties = self.shape(row)?.properties().ok()?;
        Some(match self {
            Self::EuropeanI => Properties {
                i_t: section::european_i_torsion(
                    row.number("h")?,
                    row.number("b")?,
                    row.number("t_w")?,
                    row.number("t_f")?,
                    row.number("r")?,
                ),
                methods: section::Methods {
                    torsion: Some(section::EUROPEAN_TORSION),
                    ..properties.methods
                },
                ..properties
            },
            Self::BritishI | Self::AmericanI => {
                let arm = row.number("h")? - row.number("t_f")?;
                Properties {
                    i_w: Some(properties.i_z * arm * arm / 4.0),
                    methods: section::Methods {
                        warping: Some(
                            "I_w = I_z (h - t_f)²/4, as the British and US tables have it; shear centre by symmetry",
                        ),
                        ..properties.methods
                    },
                    ..properties
                }
            }
            Self::Channel => Properties {
                i_t: row.number("I_t")?,
                i_w: Some(row.number("I_w")?),
                shear_centre: Some([-row.number("y_m")?, 0.0]),
                methods: section::Methods {
                    torsion: Some(TORSION_OF_TABLE),
                    warping: Some(WARPING_OF_TABLE),
                    ..properties.methods
                },
                ..properties
            },
            Self::EqualAngle => Properties {
                i_t: row.number("I_t")?,
                methods: section::Methods { torsion: Some(TORSION_OF_TABLE), ..properties.methods },
                ..properties
            },
            _ => properties,
        })
    }

    fn shape(self, row: &Row<'_>) -> Option<Shape> {
        let number = |symbol| row.number(symbol);
        Some(match self {
            Self::EuropeanI | Self::BritishI => Shape::I {
                depth: number("h")?,
                width: number("b")?,
                web: number("t_w")?,
                flange: number("t_f")?,
                root_radius: number("r"),
            },
            Self::AmericanI => Shape::I {
                depth: number("h")?,
                width: number("b")?,
                web: number("t_w")?,
                flange: number("t_f")?,
                root_radius: Some(number("k_des")? - number("t_f")?),
            },
            Self::Channel => {
                let (depth, width, web) = (number("h")?, number("b")?, number("t_w")?);
                let slope = number("slope")?;
                // DIN 1026-1: at half the width, or at half the outstand of the deeper ones.
                let measured_at = if depth > 0.3005 { (width + web) / 2.0 } else { width / 2.0 };
                Shape::Channel {
                    depth,
                    width,
                    web,
                    flange: number("t_f")?,
                    root_radius: number("r"),
                    toe_radius: number("r_toe"),
                    taper: (slope > 0.0).then_some(Taper { slope, measured_at }),
                }
            }
            Self::EqualAngle => Shape::Angle {
                depth: number("h")?,
                width: number("h")?,
                thickness: number("t")?,
                root_radius: number("r"),
                toe_radius: number("r_toe"),
            },
            Self::Hollow { outer_tenths } => {
                let thickness = number("t")?;
                Shape::RectangularHollow {
                    width: number("b")?,
                    depth: number("h")?,
                    thickness,
                    outer_radius: Some(f64::from(outer_tenths) / 10.0 * thickness),
                    inner_radius: Some(thickness),
                }
            }
            Self::Tube => Shape::Tube { diameter: number("d")?, thickness: number("t")? },
            Self::Rectangle => Shape::Rectangle { width: number("b")?, depth: number("h")? },
        })
    }

    /// Which values do not stand in the table but come from its dimensions.
    fn computed(self) -> &'static str {
        match self {
            Self::EuropeanI | Self::BritishI | Self::AmericanI => {
                "properties computed from the nominal dimensions, root fillets included"
            }
            Self::Channel => {
                "A, I and W computed from the nominal dimensions, fillets included; I_t, I_w and shear centre from the table"
            }
            Self::EqualAngle => {
                "A, I and W computed from the nominal dimensions, root and toe radii included; I_t from the table"
            }
            Self::Hollow { outer_tenths: 15 } => {
                "properties computed from the nominal dimensions, corner radii 1.5 t and 1.0 t"
            }
            Self::Hollow { .. } => {
                "properties computed from the nominal size and design thickness, corner radii 2 t and t"
            }
            Self::Tube => "properties computed from diameter and thickness of the table",
            Self::Rectangle => "properties computed from width and depth",
        }
    }
}
