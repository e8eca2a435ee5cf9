//! The check cases as they stand in `data/`.

use std::collections::BTreeMap;

use indexmap::IndexMap;
use serde::Deserialize;

#[derive(Deserialize)]
pub(super) struct Family {
    pub(super) cases: Vec<Case>,
}

#[derive(Deserialize)]
pub(super) struct Case {
    pub(super) id: String,
    pub(super) title: String,
    pub(super) source: String,
    pub(super) model: Model,
    /// Named load lists, with `combinations` of them or applied one at a time.
    #[serde(default, alias = "load_sets")]
    pub(super) load_cases: IndexMap<String, Vec<Load>>,
    #[serde(default)]
    pub(super) combinations: IndexMap<String, IndexMap<String, f64>>,
    pub(super) expect: Vec<Expected>,
}

#[derive(Deserialize)]
pub(super) struct Model {
    pub(super) kind: String,
    #[serde(default)]
    pub(super) nodes: IndexMap<String, Vec<f64>>,
    #[serde(default)]
    pub(super) members: IndexMap<String, Member>,
    #[serde(default)]
    pub(super) supports: IndexMap<String, IndexMap<String, Restraint>>,
    #[serde(default)]
    pub(super) loads: Vec<Load>,
}

#[derive(Deserialize)]
#[expect(non_snake_case, reason = "the symbols of the data files")]
pub(super) struct Member {
    pub(super) i: String,
    pub(super) j: String,
    pub(super) E: f64,
    pub(super) G: Option<f64>,
    pub(super) A: f64,
    /// Plane members.
    pub(super) I: Option<f64>,
    pub(super) Iy: Option<f64>,
    pub(super) Iz: Option<f64>,
    pub(super) J: Option<f64>,
    pub(super) shear_area: Option<f64>,
    #[serde(default)]
    pub(super) hinge_i: bool,
    #[serde(default)]
    pub(super) hinge_j: bool,
    #[serde(default)]
    pub(super) truss: bool,
    pub(super) alpha: Option<f64>,
    pub(super) depth: Option<f64>,
    pub(super) y_axis: Option<[f64; 3]>,
}

#[derive(Deserialize)]
#[serde(untagged)]
pub(super) enum Restraint {
    /// `fixed` or `free`.
    Word(String),
    /// `axis_deg`.
    Angle(f64),
    /// `{fixed: value}` or `{spring: stiffness}`.
    Value(BTreeMap<String, f64>),
}

#[derive(Deserialize)]
pub(super) struct Load {
    #[serde(rename = "type")]
    pub(super) kind: String,
    pub(super) node: Option<String>,
    pub(super) member: Option<String>,
    pub(super) at: Option<f64>,
    #[serde(default)]
    pub(super) fx: f64,
    #[serde(default)]
    pub(super) fy: f64,
    #[serde(default)]
    pub(super) fz: f64,
    #[serde(default)]
    pub(super) mx: f64,
    #[serde(default)]
    pub(super) my: f64,
    #[serde(default)]
    pub(super) mz: f64,
    pub(super) direction: Option<String>,
    pub(super) q_start: Option<f64>,
    pub(super) q_end: Option<f64>,
    pub(super) from: Option<f64>,
    pub(super) to: Option<f64>,
    pub(super) per: Option<String>,
    #[serde(default, rename = "dT_mean")]
    pub(super) mean: f64,
    #[serde(default, rename = "dT_top_minus_bottom")]
    pub(super) difference: f64,
}

#[derive(Deserialize)]
pub(super) struct Expected {
    pub(super) quantity: String,
    #[serde(default)]
    pub(super) location: Location,
    pub(super) value: f64,
    pub(super) rel_tol: Option<f64>,
    pub(super) abs_tol: Option<f64>,
}

#[derive(Default, Deserialize)]
pub(super) struct Location {
    pub(super) node: Option<String>,
    pub(super) member: Option<String>,
    pub(super) x: Option<f64>,
    pub(super) side: Option<String>,
    /// `all` or a member.
    pub(super) scope: Option<String>,
    pub(super) at_member: Option<String>,
    pub(super) at_x: Option<f64>,
    pub(super) load_set: Option<String>,
    pub(super) extreme: Option<String>,
    pub(super) governing_combination: Option<String>,
}
