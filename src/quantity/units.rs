//! Units, the two systems of units, and which unit prints which kind of value.

use std::collections::BTreeMap;

use super::symbols::unit;
use super::{Dimension, Kind};

/// One unit with its factor to SI base units.
#[derive(Clone, Debug, PartialEq)]
pub struct Unit {
    /// As printed, e.g. `kN m`, `mm²`, `°`; empty for plain numbers.
    pub label: String,
    /// SI base units in one of this unit.
    pub factor: f64,
    pub dimension: Dimension,
}

/// System of units for printing.
#[derive(Clone, Copy, Debug, PartialEq, Eq, serde::Serialize, serde::Deserialize)]
pub enum System {
    #[serde(rename = "SI")]
    Si,
    #[serde(rename = "US")]
    Us,
}

/// The unit of every kind.
#[derive(Clone, Debug, PartialEq)]
pub struct Units {
    pub system: System,
    /// One unit a kind, none missing.
    units: BTreeMap<Kind, Unit>,
}

impl Units {
    /// The usual units of a system.
    #[must_use]
    pub fn new(system: System) -> Self {
        let usual = |kind: Kind| {
            let label = match system {
                System::Si => kind.usual_unit(),
                System::Us => kind.usual_unit_us(),
            };
            unit(label, 0).expect("the usual units are made of known symbols")
        };
        Self { system, units: Kind::ALL.into_iter().map(|kind| (kind, usual(kind))).collect() }
    }

    /// The units of a system, some of them replaced by (name of the kind, label, factor), as a record
    /// holds them. Unknown names are passed over.
    #[must_use]
    pub fn from_labels<'a>(
        system: System,
        labels: impl IntoIterator<Item = (&'a str, &'a str, f64)>,
    ) -> Self {
        let mut units = Self::new(system);
        for (name, label, factor) in labels {
            if let Some(kind) = Kind::from_name(name) {
                let unit = Unit { label: label.to_owned(), factor, dimension: kind.dimension() };
                units.units.insert(kind, unit);
            }
        }
        units
    }

    /// The unit that prints a kind.
    ///
    /// # Panics
    /// Never: every kind has its unit from the start.
    #[must_use]
    pub fn get(&self, kind: Kind) -> &Unit {
        self.units.get(&kind).expect("every kind has a unit")
    }

    /// Replaces the unit of a kind.
    ///
    /// # Errors
    /// Gives the unit back when it is not of the dimension of the kind.
    pub fn set(&mut self, kind: Kind, unit: Unit) -> Result<(), Unit> {
        if unit.dimension != kind.dimension() {
            return Err(unit);
        }
        self.units.insert(kind, unit);
        Ok(())
    }

    /// Every kind with its unit, in a fixed order.
    pub fn iter(&self) -> impl Iterator<Item = (Kind, &Unit)> {
        self.units.iter().map(|(kind, unit)| (*kind, unit))
    }
}
