//! What an analysis gives.

use super::Fields;
use crate::model::{CaseId, EFFECTS, Effect, FORCES, MemberId, NodeId, Purpose, Side, StructureId};

/// Which arithmetic solved the largest structure.
#[derive(Clone, Copy, Debug, PartialEq, Eq, serde::Serialize, serde::Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Arithmetic {
    /// Same bits on every processor.
    Portable,
    Fast,
}

/// Solved states of all nodes and members.
#[derive(Clone, Debug, PartialEq)]
pub struct Solution {
    pub arithmetic: Arithmetic,
    /// The solved states, one for each load case, in order.
    pub states: Vec<CaseId>,
    /// By [`NodeId`].
    pub nodes: Vec<NodeSolution>,
    /// By [`MemberId`].
    pub members: Vec<MemberSolution>,
    /// Every reaction handed on, in order of case and load.
    pub handed: Vec<HandedForce>,
}

/// Displacements and reactions of a node, one entry a state.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct NodeSolution {
    /// Along and about global axes, m and rad.
    pub displacement: Vec<[f64; 6]>,
    /// Of the support on the structure, along the support's own axes where it is turned, else global;
    /// N and N m. Empty where the node has no support.
    pub reaction: Vec<[f64; 6]>,
}

/// Fields along a member.
#[derive(Clone, Debug, PartialEq)]
pub struct MemberSolution {
    /// From start to end without gaps: cut at nodes and at every break of any case's load.
    pub segments: Vec<Segment>,
}

/// A stretch on which every field of every state is one polynomial.
#[derive(Clone, Debug, PartialEq)]
pub struct Segment {
    pub from: f64,
    pub to: f64,
    /// One entry a state.
    pub states: Vec<Fields>,
}

/// The force that one `reaction_of` load puts at each of its positions.
#[derive(Clone, Debug, PartialEq)]
pub struct HandedForce {
    pub case: CaseId,
    /// Index into the case's loads.
    pub load: usize,
    /// Global, N and N m, at each position.
    pub force: [f64; 3],
    pub moment: [f64; 3],
}

/// Governing values of every member, span and reaction.
#[derive(Clone, Debug, PartialEq)]
pub struct Governing {
    /// By [`MemberId`].
    pub members: Vec<GoverningMember>,
    /// Supported nodes in order, by purpose, then component (X Y Z RX RY RZ).
    pub reactions: Vec<(Purpose, NodeId, [Extremes; 6])>,
}

/// Governing values of a member and of its spans.
#[derive(Clone, Debug, PartialEq)]
pub struct GoverningMember {
    /// Only purposes that have combinations, in printing order.
    pub whole: Vec<(Purpose, [Extremes; EFFECTS.len()])>,
    /// By span.
    pub spans: Vec<Vec<(Purpose, [Extremes; EFFECTS.len()])>>,
}

/// Greatest and least value.
#[derive(Clone, Debug, PartialEq)]
pub struct Extremes {
    pub max: Extreme,
    pub min: Extreme,
}

/// A governing value.
#[derive(Clone, Debug, PartialEq)]
pub struct Extreme {
    pub value: f64,
    /// Position along the member, m; `None` for reactions.
    pub x: Option<f64>,
    /// Set where the effect jumps at `x`.
    pub side: Option<Side>,
    /// Index into the model's combinations.
    pub combination: usize,
    /// The parts that act, of cases that act by span.
    pub loaded: Vec<CaseId>,
    /// N, V_y, V_z, T, M_y, M_z there (for reactions the six components).
    pub with: [f64; FORCES],
    /// The next combination's own extreme of the same effect.
    pub next: Option<Runner>,
}

/// The runner-up.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Runner {
    pub value: f64,
    pub combination: usize,
}

/// The self-check; nothing in it is taken from the solver's own bookkeeping where another route exists.
#[derive(Clone, Debug, PartialEq)]
pub struct SelfCheck {
    pub structures: Vec<StructureCheck>,
    pub independent: Option<Independent>,
}

/// Checks of one structure.
#[derive(Clone, Debug, PartialEq)]
pub struct StructureCheck {
    pub structure: StructureId,
    pub balances: Vec<Balance>,
    pub residuals: Vec<Residual>,
    pub energies: Vec<Energy>,
}

/// Loads of a case against reactions, about the global origin.
#[derive(Clone, Debug, PartialEq)]
pub struct Balance {
    pub case: CaseId,
    /// Fx Fy Fz Mx My Mz of all loads, N and N m.
    pub loads: [f64; 6],
    pub reactions: [f64; 6],
    /// Largest component of the sum, over the scale of the forces (or moments).
    pub relative: f64,
    pub satisfied: bool,
}

/// Nodal equilibrium K u = f, recomputed.
#[derive(Clone, Debug, PartialEq)]
pub struct Residual {
    pub case: CaseId,
    pub relative: f64,
    pub satisfied: bool,
}

/// External work against strain energy, J; imposed strains and movements counted.
#[derive(Clone, Debug, PartialEq)]
pub struct Energy {
    pub case: CaseId,
    pub external: f64,
    pub strain: f64,
    pub relative: f64,
    pub satisfied: bool,
}

/// One member of the run, integrated again from its loads and end values by a numerical method.
#[derive(Clone, Debug, PartialEq)]
pub struct Independent {
    pub member: MemberId,
    pub case: CaseId,
    pub method: String,
    /// Effect, largest difference relative to the effect's scale along the member.
    pub differences: Vec<(Effect, f64)>,
    pub satisfied: bool,
}

impl SelfCheck {
    /// Every part is within its tolerance.
    #[must_use]
    pub fn satisfied(&self) -> bool {
        self.independent.as_ref().is_none_or(|check| check.satisfied)
            && self.structures.iter().all(|check| {
                check.balances.iter().all(|part| part.satisfied)
                    && check.residuals.iter().all(|part| part.satisfied)
                    && check.energies.iter().all(|part| part.satisfied)
            })
    }
}
