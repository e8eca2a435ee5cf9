//! What is too small to be listed.

use serde::{Deserialize, Serialize};

use crate::quantity::{Dimension, Kind, Printer, Quantity};
use crate::record::Map;

/// A change is listed when it passes the relative and the absolute threshold of its quantity.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Thresholds {
    /// Share of the larger of both values.
    pub relative: f64,
    /// Name of a kind of quantity → SI value.
    pub absolute: Map<f64>,
    /// Difference of utilisations.
    pub utilisation: f64,
    /// Share of a member's length by which a governing position may move unsaid.
    pub position: f64,
}

impl Default for Thresholds {
    /// 0.1 %, 0.01 kN, 0.01 kN m, 0.01 mm, 0.001 mrad, 0.001 of utilisation and 1 % of the length: what a
    /// package printed with four digits hardly shows.
    fn default() -> Self {
        let absolute = [
            (Kind::Force, 10.0),
            (Kind::Moment, 10.0),
            (Kind::Deflection, 1e-5),
            (Kind::Rotation, 1e-6),
        ];
        Self {
            relative: 1e-3,
            absolute: absolute.map(|(kind, si)| (kind.name().to_owned(), si)).into_iter().collect(),
            utilisation: 1e-3,
            position: 1e-2,
        }
    }
}

/// How far apart two values are.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Apart {
    Same,
    Below,
    Listed,
}

impl Thresholds {
    /// Values that differ by round-off only.
    const SAME: f64 = 1e-9;

    /// Holds two values of a kind against each other.
    pub(super) fn apart(&self, kind: Kind, old: f64, new: f64) -> Apart {
        let absolute = self.absolute.get(kind.name()).copied().unwrap_or_default();
        self.judged(old, new, absolute)
    }

    /// Holds two utilisations against each other.
    pub(super) fn utilisations_apart(&self, old: f64, new: f64) -> Apart {
        self.judged(old, new, self.utilisation)
    }

    fn judged(&self, old: f64, new: f64, absolute: f64) -> Apart {
        let difference = (new - old).abs();
        let larger = old.abs().max(new.abs());
        if difference <= Self::SAME * larger {
            Apart::Same
        } else if difference <= self.relative * larger || difference <= absolute {
            Apart::Below
        } else {
            Apart::Listed
        }
    }

    /// Puts a quantity in place of the absolute threshold of its kind: a force, a moment, a length, an
    /// angle, or a plain number for utilisations.
    ///
    /// # Errors
    /// When it is of none of these, or below zero.
    pub fn set(&mut self, quantity: &Quantity) -> Result<(), String> {
        if quantity.value < 0.0 {
            return Err("a threshold is not below zero".to_owned());
        }
        if quantity.dimension == Dimension::NONE {
            self.utilisation = quantity.value;
            return Ok(());
        }
        let kinds = [Kind::Force, Kind::Moment, Kind::Deflection, Kind::Rotation];
        let Some(kind) = kinds.into_iter().find(|kind| kind.dimension() == quantity.dimension)
        else {
            return Err(format!(
                "there is no threshold for {}: give a force, a moment, a length, an angle or a plain \
                 number (utilisation)",
                quantity.dimension.name_with_article()
            ));
        };
        self.absolute.insert(kind.name().to_owned(), quantity.value);
        Ok(())
    }

    /// The thresholds in words, in the units of a printer.
    #[must_use]
    pub fn words(&self, printer: &Printer) -> String {
        let mut parts = vec![format!("{} %", crate::quantity::print(self.relative * 100.0, 4))];
        parts.extend(self.absolute.iter().filter_map(|(name, si)| {
            let kind = Kind::from_name(name)?;
            Some(format!("{} of {}", printer.with_unit(kind, *si), name.replace('_', " ")))
        }));
        parts.push(format!("{} of utilisation", crate::quantity::print(self.utilisation, 4)));
        parts.join(", ")
    }
}
