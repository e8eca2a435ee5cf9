//! Formulas with their values, and the unit in which each value prints.

use crate::calc::Value;
use crate::checks::StepValue;
use crate::model::{Bound, Placed, Slot, Step};
use crate::quantity::{Dimension, Kind, Quantity, System, Units};
use crate::record::{StepRecord, StepValueRecord};

/// What the readings of a formula are bound to, and the values of the steps before it.
pub(super) struct Bindings<'b> {
    pub(super) units: &'b Units,
    pub(super) bound: &'b [Option<Bound>],
    /// By step so far: the unit in which its value prints.
    pub(super) printed: Vec<Option<String>>,
}

impl Bindings<'_> {
    /// The next step; those after it print its value in the same unit.
    pub(super) fn next(&mut self, step: &Step, value: &StepValue) -> StepRecord {
        let named = (step.symbol.as_str(), &step.formula);
        let record = self.step(named, value, step.meaning.as_ref(), step.clause.as_ref());
        self.printed.push(match &record.value {
            StepValueRecord::Number(_, unit) => Some(unit.clone()),
            StepValueRecord::Truth(_) | StepValueRecord::Word(_) => None,
        });
        record
    }

    /// A formula with everything it read.
    pub(super) fn step(
        &self,
        (symbol, placed): (&str, &Placed),
        value: &StepValue,
        meaning: Option<&String>,
        clause: Option<&String>,
    ) -> StepRecord {
        let formula = &placed.formula;
        let unit = formula.unit.as_ref().map(|unit| unit.label.clone());
        let values = formula
            .readings
            .iter()
            .zip(&placed.slots)
            .zip(&value.readings)
            .map(|((reading, slot), value)| (reading.text.clone(), self.reading(slot, value)))
            .collect();
        // A formula that only reads a value prints as that does.
        let only = match placed.slots.as_slice() {
            [slot] if formula.text == formula.readings[0].text => {
                Some(self.reading(slot, &value.value))
            }
            _ => None,
        };
        StepRecord {
            symbol: symbol.to_owned(),
            formula: formula.text.clone(),
            values,
            taken: value.taken.clone(),
            value: match (unit, only) {
                (None, Some(only)) => only,
                (unit, _) => self.value(&value.value, unit, None),
            },
            meaning: meaning.cloned(),
            clause: clause.cloned(),
        }
    }

    fn reading(&self, slot: &Slot, value: &Value) -> StepValueRecord {
        match slot {
            Slot::Step(index) => {
                self.value(value, self.printed.get(*index).cloned().flatten(), None)
            }
            Slot::Reading(index) => {
                let kind = self.bound.get(*index).and_then(|bound| bound.as_ref()?.kind);
                self.value(value, None, kind)
            }
        }
    }

    fn value(&self, value: &Value, stated: Option<String>, kind: Option<Kind>) -> StepValueRecord {
        match value {
            Value::Truth(truth) => StepValueRecord::Truth(*truth),
            Value::Word(word) => StepValueRecord::Word(word.to_string()),
            Value::Number(quantity) => {
                let unit = stated
                    .or_else(|| kind.map(|kind| self.units.get(kind).label.clone()))
                    .unwrap_or_else(|| usual_unit(self.units, *quantity));
                StepValueRecord::Number(quantity.value, unit)
            }
        }
    }
}

/// Pa: forces per area below this are loads on areas or pressures on the ground, above it stresses.
const FLOOR_LOADS: f64 = 1e6;

/// The unit of a value that only its dimension tells: of lengths, areas and volumes by their size.
pub(super) fn usual_unit(units: &Units, quantity: Quantity) -> String {
    let (metre, foot) = (1.0, 0.3048);
    let whole = if units.system == System::Si { metre } else { foot };
    let large = |power: i32| quantity.value.abs() >= libm::pow(whole, f64::from(power)) * 0.2;
    let own = |kind: Kind| units.get(kind).label.clone();
    let base = if units.system == System::Si { "m" } else { "ft" };
    match quantity.dimension {
        Dimension::LENGTH if quantity.value.abs() >= whole => own(Kind::Length),
        Dimension::LENGTH => own(Kind::SectionLength),
        Dimension::AREA if large(2) => format!("{base}²"),
        Dimension::AREA => own(Kind::Area),
        Dimension::VOLUME if large(3) => format!("{base}³"),
        Dimension::VOLUME => own(Kind::SectionModulus),
        // What a floor carries, or what a section does.
        Dimension::PRESSURE if quantity.value.abs() < FLOOR_LOADS => own(Kind::AreaLoad),
        dimension => {
            let kind = [
                Kind::Number,
                Kind::Force,
                Kind::Moment,
                Kind::LineLoad,
                Kind::Stress,
                Kind::SecondMoment,
                Kind::Warping,
                Kind::MassDensity,
                Kind::WeightDensity,
                Kind::Temperature,
                Kind::Expansion,
                Kind::Angle,
                Kind::RotationSpring,
            ]
            .into_iter()
            .find(|kind| kind.dimension() == dimension);
            kind.map_or_else(|| dimension.base_units(), own)
        }
    }
}
