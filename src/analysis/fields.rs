//! Polynomials along a member.

use std::fmt;

use serde::de::{Error, MapAccess, Visitor};
use serde::ser::SerializeMap;
use serde::{Deserialize, Deserializer, Serialize, Serializer};

use crate::model::{EFFECTS, Effect, STORED};

/// Coefficients in s = x − from, lowest power first; up to the quintic of a linearly loaded member.
pub type Polynomial = [f64; 6];

/// One polynomial for each effect of [`EFFECTS`], in that order.
#[derive(Clone, Debug, PartialEq)]
pub struct Fields(pub [Polynomial; EFFECTS.len()]);

/// Value of a polynomial at `s`, by Horner's rule.
#[must_use]
pub fn evaluate(polynomial: &Polynomial, s: f64) -> f64 {
    polynomial.iter().rev().fold(0.0, |sum, c| sum * s + c)
}

/// Effect → coefficients without trailing zeros; absent effects are zero, `d_y` and `d_z` left out.
impl Serialize for Fields {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        let mut map = serializer.serialize_map(None)?;
        for (effect, polynomial) in EFFECTS.iter().zip(&self.0).take(STORED) {
            let used = polynomial.iter().rposition(|c| *c != 0.0).map_or(0, |last| last + 1);
            if used > 0 {
                map.serialize_entry(effect.name(), &polynomial[..used])?;
            }
        }
        map.end()
    }
}

impl<'de> Deserialize<'de> for Fields {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct FieldsVisitor;
        impl<'de> Visitor<'de> for FieldsVisitor {
            type Value = Fields;
            fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
                formatter.write_str("a map of effects to coefficients")
            }
            fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Fields, A::Error> {
                let mut fields = Fields([[0.0; 6]; EFFECTS.len()]);
                while let Some((name, used)) = map.next_entry::<String, Vec<f64>>()? {
                    let effect = Effect::from_name(&name)
                        .ok_or_else(|| A::Error::custom(format!("no effect named `{name}`")))?;
                    if used.len() > 6 {
                        return Err(A::Error::custom("more than six coefficients"));
                    }
                    fields.0[effect.index()][..used.len()].copy_from_slice(&used);
                }
                Ok(fields)
            }
        }
        deserializer.deserialize_map(FieldsVisitor)
    }
}
