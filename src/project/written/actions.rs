//! Load cases, loads and combinations as written.

use schemars::JsonSchema;
use serde::Deserialize;

use super::words::{Axis, Dominated, Expansion};
use crate::model::{Direction, Duration, Nature, Per, Purpose, SpanLoading};
use crate::project::text::{Located, Map, Text, Word};

/// One load case.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct LoadCase {
    /// What acts.
    pub title: Text,
    /// Nature of the action.
    pub nature: Word<Nature>,
    /// Category of the loaded area, e.g. `E`.
    pub category: Option<Text>,
    /// ψ0, ψ1 and ψ2 where they are not those of the category.
    pub psi: Option<[Text; 3]>,
    /// Load duration class, for timber.
    pub duration: Option<Word<Duration>>,
    /// Each span may be loaded or not: `true` for every choice of spans, or a simplified set of arrangements.
    #[serde(default)]
    #[schemars(schema_with = "crate::project::keys::by_span")]
    pub by_span: Option<Word<SpanLoading>>,
    /// At most one case of this name acts at a time.
    pub one_of: Option<Text>,
    /// Acts only when all of these act.
    #[serde(default)]
    pub together_with: Vec<Text>,
    /// Acts in the opposite sense too, one at a time.
    pub reverses: Option<bool>,
    /// Permanent actions of one group are favourable or unfavourable together; left out: all of one source.
    pub source_group: Option<Text>,
    /// Where the actions come from.
    pub source: Option<Text>,
    /// Weight of the members themselves: `true`, or the members that count.
    pub self_weight: Option<SelfWeight>,
    /// What acts, load by load.
    #[serde(default)]
    pub loads: Vec<Located<Load>>,
}

/// Whose weight acts.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(rename = "$kind")]
#[schemars(rename = "SelfWeight", untagged)]
pub enum SelfWeight {
    /// Of all members, or of none.
    Word(bool),
    /// Of these members.
    List(Vec<Text>),
}

/// One load: one deciding key (`uniform`, `varying`, `area`, `build_up`, `point`, `point_moment`,
/// `reaction_of`, `force` and `moment`, `displaced`, `warming`, `lack_of_fit`), what it acts on, and where.
/// Downward unless a direction is given.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Load {
    /// The member it acts on.
    pub member: Option<Text>,
    /// Several members that it acts on, each in full.
    #[schemars(length(min = 1))]
    pub members: Option<Vec<Text>>,
    /// The node it acts on.
    pub node: Option<Text>,
    /// Span of the member, counted from 1; `at`, `from` and `to` then run along the span.
    pub span: Option<Text>,
    /// Force per length.
    pub uniform: Option<Text>,
    /// Force per length at the beginning and at the end, linear between.
    pub varying: Option<[Text; 2]>,
    /// Force per area; needs a width.
    pub area: Option<Text>,
    /// Name of a build-up; needs a width.
    pub build_up: Option<Text>,
    /// Force at a point.
    pub point: Option<Text>,
    /// Moment at a point, right hand about the global axis `about`.
    pub point_moment: Option<Text>,
    /// Supported node of another structure whose reaction in this case acts here, turned round.
    pub reaction_of: Option<Text>,
    /// Force on a node along global axes.
    pub force: Option<Components>,
    /// Moment on a node, right hand about global axes.
    pub moment: Option<Components>,
    /// Movement of the ground under a support.
    pub displaced: Option<Movement>,
    /// Warming of the member.
    pub warming: Option<Warming>,
    /// Made too long by so much.
    pub lack_of_fit: Option<Text>,
    /// Tributary width.
    pub width: Option<Text>,
    /// Position.
    pub at: Option<Text>,
    /// Where it begins.
    pub from: Option<Text>,
    /// Where it ends.
    pub to: Option<Text>,
    /// Spacing of repeated reactions.
    pub every: Option<Text>,
    /// Direction in which it acts.
    pub direction: Option<Word<Direction>>,
    /// Axis of a point moment.
    pub about: Option<Word<Axis>>,
    /// What a line load counts per.
    pub per: Option<Word<Per>>,
    /// Where the value comes from.
    pub source: Option<Text>,
}

/// Components along, or about, the global axes.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
#[schemars(extend("minProperties" = 1))]
pub struct Components {
    /// Along or about X.
    #[serde(rename = "X")]
    pub x: Option<Text>,
    /// Along or about Y.
    #[serde(rename = "Y")]
    pub y: Option<Text>,
    /// Along or about Z.
    #[serde(rename = "Z")]
    pub z: Option<Text>,
}

impl Components {
    /// X, Y, Z.
    #[must_use]
    pub fn parts(&self) -> [Option<&Text>; 3] {
        [&self.x, &self.y, &self.z].map(Option::as_ref)
    }
}

/// Movement along, and rotation about, the axes of a support.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
#[schemars(extend("minProperties" = 1))]
pub struct Movement {
    /// Along X.
    #[serde(rename = "X")]
    pub x: Option<Text>,
    /// Along Y.
    #[serde(rename = "Y")]
    pub y: Option<Text>,
    /// Along Z.
    #[serde(rename = "Z")]
    pub z: Option<Text>,
    /// About X.
    #[serde(rename = "RX")]
    pub rx: Option<Text>,
    /// About Y.
    #[serde(rename = "RY")]
    pub ry: Option<Text>,
    /// About Z.
    #[serde(rename = "RZ")]
    pub rz: Option<Text>,
}

impl Movement {
    /// X, Y, Z, RX, RY, RZ.
    #[must_use]
    pub fn parts(&self) -> [Option<&Text>; 6] {
        [&self.x, &self.y, &self.z, &self.rx, &self.ry, &self.rz].map(Option::as_ref)
    }
}

/// Warming: `uniform`, or `top` and `bottom`.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Warming {
    /// Of the whole section.
    pub uniform: Option<Text>,
    /// Of the +z face.
    pub top: Option<Text>,
    /// Of the -z face.
    pub bottom: Option<Text>,
}

/// Combinations of load cases.
#[derive(Clone, Debug, Default, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Combinations {
    /// Combinations generated by rules.
    #[serde(default)]
    pub rules: Vec<Located<Rule>>,
    /// Combinations written out.
    #[serde(default)]
    pub written: Vec<Located<Combination>>,
}

/// A rule that generates combinations: one of the catalogue, or one of the project with rows of its own.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Rule {
    /// Id of a rule of the catalogue, or the title of a rule of the project.
    pub rule: Text,
    /// What its combinations are for; left out: as usual for the rule.
    pub purpose: Option<Word<Purpose>>,
    /// Set of annex values; left out: the recommended ones.
    pub annex: Option<Text>,
    /// Values that differ, by name.
    #[serde(default)]
    #[serde(rename = "with")]
    pub values: Map<Text>,
    /// Which combinations are made of the rule; left out: as usual for it.
    pub expansion: Option<Word<Expansion>>,
    /// Whether combinations that can never govern are kept.
    pub dominated: Option<Word<Dominated>>,
    /// Rows of a rule of the project.
    pub rows: Option<Vec<Text>>,
    /// Where a rule of the project comes from.
    pub source: Option<Text>,
}

/// A combination written out.
#[derive(Clone, Debug, Deserialize, JsonSchema)]
#[serde(deny_unknown_fields)]
pub struct Combination {
    /// What it is called.
    pub title: Text,
    /// What it is for.
    pub purpose: Word<Purpose>,
    /// Load cases with their factors.
    #[schemars(extend("minProperties" = 1))]
    pub factors: Map<Text>,
    /// Where the factors come from.
    pub source: Option<Text>,
}
