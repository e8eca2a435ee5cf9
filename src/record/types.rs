//! The shapes of a Record, as in record.json.

use indexmap::IndexMap;
use serde::{Deserialize, Serialize};

use super::{CheckRecord, NarrativeRecord, RelationsRecord, RuleUseRecord, WorkingRecord};
use crate::analysis::{Arithmetic, Fields};
use crate::model::{FORCES, Side};
use crate::quantity::{Printer, Units};

/// The form of record.json written by this program.
pub const FORMAT: u32 = 1;

/// A map that keeps the order of the project file.
pub type Map<T> = IndexMap<String, T>;

/// Everything resolved and computed.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Record {
    pub format: u32,
    pub program: ProgramRecord,
    /// SHA-256 over sorted path and content of the sources, hexadecimal.
    pub fingerprint: String,
    pub arithmetic: Arithmetic,
    pub project: ProjectRecord,
    pub basis: BasisRecord,
    pub model: ModelRecord,
    pub combinations: Map<CombinationRecord>,
    /// Rules that made combinations.
    #[serde(default)]
    pub rules: Vec<RuleUseRecord>,
    pub results: Results,
    /// By check and what it is made on, then the agreements of hand calculations.
    pub checks: Vec<CheckRecord>,
    #[serde(default)]
    pub workings: Vec<WorkingRecord>,
    #[serde(default)]
    pub narrative: Vec<NarrativeRecord>,
    pub registers: Registers,
    pub self_check: SelfCheckRecord,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ProgramRecord {
    pub name: String,
    pub version: String,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ProjectRecord {
    pub title: String,
    pub number: String,
    pub client: Option<String>,
    pub subject: Option<String>,
    pub revisions: Vec<RevisionRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct RevisionRecord {
    pub mark: String,
    pub date: String,
    pub status: String,
    pub note: String,
    pub originated: String,
    pub checked: String,
    pub approved: String,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct BasisRecord {
    pub national_annex: Option<String>,
    pub consequence_class: Option<String>,
    pub working_life: Option<String>,
    pub standards: Vec<StandardRecord>,
    pub assumptions: Vec<AssumptionRecord>,
    pub deferred: Vec<DeferralRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StandardRecord {
    pub id: String,
    pub title: String,
    pub edition: String,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct AssumptionRecord {
    pub id: String,
    pub text: String,
    /// `confirmed` or `to confirm`.
    pub status: String,
    pub by: Option<String>,
    pub source: Option<String>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct DeferralRecord {
    pub id: String,
    pub text: String,
    pub to: String,
    pub checks: Vec<String>,
}

/// The resolved input.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ModelRecord {
    pub materials: Map<MaterialRecord>,
    pub sections: Map<SectionRecord>,
    pub structures: Map<StructureRecord>,
    /// In order of dependency.
    pub solve_order: Vec<String>,
    pub units: UnitsRecord,
    pub analysis: AnalysisRecord,
    pub package: PackageRecord,
    pub values: Map<ValueRecord>,
    pub build_ups: Map<Vec<LayerRecord>>,
    pub cases: Map<CaseRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MaterialRecord {
    pub title: String,
    pub family: String,
    #[serde(rename = "E")]
    pub e: f64,
    #[serde(rename = "G")]
    pub g: f64,
    pub density: f64,
    pub expansion: f64,
    /// Strengths and the like by symbol, SI, with the name of their kind.
    pub strengths: Map<(f64, String)>,
    pub service_class: Option<String>,
    pub source: String,
}

/// A section as used.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SectionRecord {
    pub title: String,
    /// Symbol → value, SI, in printing order: A I_y I_z I_t I_w … as `section::Properties::by_symbol`.
    #[serde(flatten)]
    pub properties: Map<f64>,
    /// Nominal dimensions by symbol, m.
    pub dimensions: Map<f64>,
    /// Loops of (y, z) about the centroid, m; empty where only properties are known.
    pub outline: Vec<Vec<[f64; 2]>>,
    /// How the values that are not exact were found.
    #[serde(default)]
    pub methods: Vec<String>,
    pub source: String,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StructureRecord {
    /// `plane` or `space`.
    pub frame: String,
    pub nodes: Map<NodeRecord>,
    pub members: Map<MemberRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct NodeRecord {
    pub at: [f64; 3],
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub support: Option<SupportRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SupportRecord {
    pub kind: String,
    /// `free`, `fixed` or a stiffness, for X Y Z RX RY RZ.
    pub freedoms: [FreedomRecord; 6],
    pub axes: [[f64; 3]; 3],
    pub turned: Option<String>,
    pub uplift_anchored: bool,
}

/// Restraint of one freedom or release of one internal force.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum FreedomRecord {
    Word(FreedomWord),
    Spring(f64),
}

#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum FreedomWord {
    Free,
    Fixed,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MemberRecord {
    pub along: Vec<String>,
    pub stations: Vec<f64>,
    pub length: f64,
    /// Rows are local x, y, z in global coordinates.
    pub axes: [[f64; 3]; 3],
    pub section: String,
    pub material: String,
    pub hinges: Vec<HingeRecord>,
    pub spans: Vec<SpanRecord>,
    pub held: HeldRecord,
    /// About y and z.
    pub buckling_length: [Option<f64>; 2],
    /// Factor on imposed loads in combinations, for this member alone, with its source.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub imposed_reduction: Option<(f64, String)>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub axial_only: Option<AxialOnlyRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct AxialOnlyRecord {
    pub compression_accepted: bool,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct HingeRecord {
    pub node: String,
    pub x: f64,
    /// Only released forces: name → `free` or stiffness.
    pub releases: Map<FreedomRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SpanRecord {
    pub nodes: [String; 2],
    pub from: f64,
    pub to: f64,
    pub free: [bool; 2],
}

/// `not stated`, `continuous`, or node names joined by commas.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct HeldRecord {
    pub top: String,
    pub bottom: String,
}

/// Kind name → unit label, with the factor to SI.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct UnitsRecord {
    pub system: crate::quantity::System,
    pub significant: usize,
    pub units: Map<(String, f64)>,
}

impl UnitsRecord {
    /// Prints values in the project's units.
    #[must_use]
    pub fn printer(&self) -> Printer {
        let labels = self
            .units
            .iter()
            .map(|(kind, (label, factor))| (kind.as_str(), label.as_str(), *factor));
        Printer { units: Units::from_labels(self.system, labels), significant: self.significant }
    }
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct AnalysisRecord {
    pub order: String,
    pub imperfections: String,
    pub shear_deformation: bool,
    /// m/s², used for self-weight.
    pub gravity: f64,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PackageRecord {
    /// Members drawn and held in the file.
    pub drawn: Vec<String>,
    /// Members whose fields the file leaves out.
    pub left_out: Vec<String>,
    /// `tension side` or `compression side`.
    pub moments: String,
    /// `A4` or `Letter`.
    pub paper: String,
    pub local_axes: bool,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ValueRecord {
    pub value: f64,
    /// The unit in which it prints.
    #[serde(default)]
    pub unit: String,
    pub written: String,
    pub source: Option<String>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct LayerRecord {
    pub layer: String,
    pub load: f64,
    pub source: Option<String>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct CaseRecord {
    pub title: String,
    pub nature: String,
    pub category: Option<String>,
    pub duration: Option<String>,
    pub source: Option<String>,
    pub self_weight: bool,
    #[serde(skip_serializing_if = "RelationsRecord::is_empty", default)]
    pub relations: RelationsRecord,
    /// ψ0, ψ1, ψ2 where the project states them.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub psi: Option<[f64; 3]>,
    /// Of a case that acts by span.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub by_span: Option<BySpanRecord>,
    pub loads: Vec<LoadRecord>,
    /// Structure → Fx Fy Fz Mx My Mz of all loads about the global origin.
    pub resultant: Map<[f64; 6]>,
}

/// A case whose spans may be loaded or not.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct BySpanRecord {
    /// `any`, `alternate` or `alternate and adjacent`.
    pub loading: String,
    /// Names of its parts; each is a state.
    pub parts: Vec<String>,
    /// Parts that act together; left out where any may.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub sets: Vec<Vec<String>>,
}

/// A load as tables and drawings need it.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct LoadRecord {
    /// The deciding key of the project file, e.g. `uniform`, `reaction_of`.
    pub form: String,
    pub structure: String,
    pub target: TargetRecord,
    /// Stretch along the member, m.
    pub from: Option<f64>,
    pub to: Option<f64>,
    /// Positions of point loads and handed reactions along the member, m.
    pub at: Vec<f64>,
    /// As printed: `down`, `local -z`, …
    pub direction: String,
    /// `length` or `projected`.
    pub per: String,
    /// As given, SI, along `direction` (see the form): intensities, a force, temperatures top and
    /// bottom, a length; for `force` and `displaced` the six components.
    pub values: Vec<f64>,
    /// What acts, in global axes: intensity (N/m of member) at `from` and `to`, or force then moment.
    pub start: [f64; 3],
    pub end: [f64; 3],
    pub moment: [f64; 3],
    pub width: Option<f64>,
    pub build_up: Option<String>,
    /// The node whose reaction is handed on.
    pub reaction_of: Option<String>,
    pub every: Option<f64>,
    pub span: Option<usize>,
    pub source: Option<String>,
}

#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum TargetRecord {
    Member(String),
    Node(String),
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct CombinationRecord {
    pub number: String,
    pub title: String,
    pub purpose: String,
    /// `superposed` or `solved`.
    pub analysis: String,
    pub factors: Map<f64>,
    pub rule: Option<String>,
    pub clause: Option<String>,
    pub leading: Option<String>,
    pub reason: Option<String>,
    pub duration: Option<String>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct Results {
    pub nodes: Map<NodeResult>,
    pub members: Map<MemberResult>,
    /// Purpose → node → component (`X` … `RZ`); only restrained components.
    pub reactions: Map<Map<Map<ExtremesRecord>>>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct NodeResult {
    /// State → global displacement.
    pub displacement: Map<[f64; 6]>,
    /// State → reaction; empty without a support.
    #[serde(skip_serializing_if = "IndexMap::is_empty", default)]
    pub reaction: Map<[f64; 6]>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct MemberResult {
    /// In memory always there; in the file only of members drawn.
    #[serde(default)]
    pub segments: Vec<SegmentRecord>,
    /// Purpose → effect.
    pub governing: Map<Map<ExtremesRecord>>,
    pub spans: Vec<SpanResult>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SpanResult {
    pub governing: Map<Map<ExtremesRecord>>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SegmentRecord {
    pub from: f64,
    pub to: f64,
    /// State → fields. Written as effect → coefficients, absent effects zero, `d_y` and `d_z` left out.
    pub fields: Map<Fields>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ExtremesRecord {
    pub max: ExtremeRecord,
    pub min: ExtremeRecord,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ExtremeRecord {
    pub value: f64,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub x: Option<f64>,
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub side: Option<Side>,
    /// Name of the combination.
    pub state: String,
    /// Parts that act, of cases that act by span.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub loaded: Vec<String>,
    pub with: [f64; FORCES],
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub next: Option<RunnerRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct RunnerRecord {
    pub value: f64,
    pub state: String,
}

/// Items that gather on the first page.
#[derive(Clone, Debug, Default, PartialEq, Serialize, Deserialize)]
pub struct Registers {
    pub open_items: Vec<OpenItem>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct OpenItem {
    /// `assumption`, `uplift`, `compression`, `first order`, `members without checks`, …
    pub kind: String,
    pub text: String,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct SelfCheckRecord {
    pub satisfied: bool,
    /// Structure → its checks.
    pub structures: Map<StructureCheckRecord>,
    pub independent: Option<IndependentRecord>,
    /// Structure → case → J.
    pub strain_energy: Map<Map<f64>>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StructureCheckRecord {
    /// Case → loads against reactions.
    pub balances: Map<BalanceRecord>,
    /// Case → relative residual of nodal equilibrium.
    pub residuals: Map<RelativeRecord>,
    pub energies: Map<EnergyRecord>,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct BalanceRecord {
    pub loads: [f64; 6],
    pub reactions: [f64; 6],
    pub relative: f64,
    pub satisfied: bool,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct RelativeRecord {
    pub relative: f64,
    pub satisfied: bool,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct EnergyRecord {
    pub external: f64,
    pub strain: f64,
    pub relative: f64,
    pub satisfied: bool,
}

#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct IndependentRecord {
    pub member: String,
    pub case: String,
    pub method: String,
    pub differences: Map<f64>,
    pub satisfied: bool,
}
