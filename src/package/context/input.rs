//! The resolved input for templates.

use serde::Serialize;

use super::{FigureRef, Quantity};
use crate::figures::Figure;
use crate::quantity::{Kind, Printer, System};
use crate::record::{MemberRecord, Record, StructureRecord, property_kind, release_kind};

#[derive(Serialize)]
pub(super) struct Settings<'r> {
    order: &'r str,
    imperfections: &'r str,
    shear_deformation: bool,
    gravity: f64,
    /// Side on which moments are drawn.
    moments: &'r str,
    us: bool,
    arithmetic: &'static str,
    left_out: &'r [String],
    several_structures: bool,
}

pub(super) fn settings(record: &Record) -> Settings<'_> {
    Settings {
        order: &record.model.analysis.order,
        imperfections: &record.model.analysis.imperfections,
        shear_deformation: record.model.analysis.shear_deformation,
        gravity: record.model.analysis.gravity,
        moments: &record.model.package.moments,
        us: record.model.units.system == System::Us,
        arithmetic: match record.arithmetic {
            crate::analysis::Arithmetic::Portable => "portable",
            crate::analysis::Arithmetic::Fast => "fast",
        },
        left_out: &record.model.package.left_out,
        several_structures: record.model.structures.len() > 1,
    }
}

#[derive(Serialize)]
pub(super) struct UnitRow<'r> {
    what: String,
    unit: &'r str,
}

pub(super) fn units(record: &Record) -> Vec<UnitRow<'_>> {
    record
        .model
        .units
        .units
        .iter()
        .filter_map(|(name, (unit, _))| {
            let kind = Kind::from_name(name)?;
            Some(UnitRow { what: kind.name().replace('_', " "), unit })
        })
        .filter(|row| !row.unit.is_empty())
        .collect()
}

#[derive(Serialize)]
pub(super) struct ValueRow<'r> {
    name: &'r str,
    written: &'r str,
    source: Option<&'r str>,
}

pub(super) fn values(record: &Record) -> Vec<ValueRow<'_>> {
    record
        .model
        .values
        .iter()
        .map(|(name, value)| ValueRow {
            name,
            written: &value.written,
            source: value.source.as_deref(),
        })
        .collect()
}

/// A symbol with its value.
#[derive(Serialize)]
struct Symbol<'r> {
    symbol: &'r str,
    value: Quantity,
}

#[derive(Serialize)]
pub(super) struct MaterialRow<'r> {
    name: &'r str,
    title: &'r str,
    e: Quantity,
    g: Quantity,
    density: Quantity,
    expansion: Quantity,
    strengths: Vec<Symbol<'r>>,
    service_class: Option<&'r str>,
    source: &'r str,
}

pub(super) fn materials(record: &Record) -> Vec<MaterialRow<'_>> {
    record
        .model
        .materials
        .iter()
        .map(|(name, material)| MaterialRow {
            name,
            title: &material.title,
            e: Quantity::new(Kind::Modulus, material.e),
            g: Quantity::new(Kind::Modulus, material.g),
            density: Quantity::new(Kind::MassDensity, material.density),
            expansion: Quantity::new(Kind::Expansion, material.expansion),
            strengths: material
                .strengths
                .iter()
                .filter_map(|(symbol, (value, kind))| {
                    Some(Symbol { symbol, value: Quantity::new(Kind::from_name(kind)?, *value) })
                })
                .collect(),
            service_class: material.service_class.as_deref(),
            source: &material.source,
        })
        .collect()
}

#[derive(Serialize)]
pub(super) struct SectionRow<'r> {
    name: &'r str,
    title: &'r str,
    members: Vec<&'r str>,
    properties: Vec<Symbol<'r>>,
    dimensions: Vec<Symbol<'r>>,
    methods: &'r [String],
    source: &'r str,
}

pub(super) fn sections(record: &Record) -> Vec<SectionRow<'_>> {
    record
        .model
        .sections
        .iter()
        .map(|(name, section)| SectionRow {
            name,
            title: &section.title,
            members: members(record)
                .filter(|(_, member)| member.section == *name)
                .map(|(member, _)| member)
                .collect(),
            properties: section
                .properties
                .iter()
                .map(|(symbol, value)| Symbol {
                    symbol,
                    value: Quantity::new(property_kind(symbol), *value),
                })
                .collect(),
            dimensions: section
                .dimensions
                .iter()
                .map(|(symbol, value)| Symbol {
                    symbol,
                    value: Quantity::new(Kind::SectionLength, *value),
                })
                .collect(),
            methods: &section.methods,
            source: &section.source,
        })
        .collect()
}

fn members(record: &Record) -> impl Iterator<Item = (&str, &MemberRecord)> {
    record.model.structures.values().flat_map(|structure| {
        structure.members.iter().map(|(name, member)| (name.as_str(), member))
    })
}

#[derive(Serialize)]
pub(super) struct StructureView<'r> {
    name: &'r str,
    frame: &'r str,
    nodes: Vec<NodeRow<'r>>,
    supports: Vec<SupportRow<'r>>,
    members: Vec<MemberRow<'r>>,
    hinges: Vec<HingeRow<'r>>,
    restraint: Vec<RestraintRow<'r>>,
    /// Drawings of the model.
    figures: Vec<FigureRef<'r>>,
    /// Drawings of effects on the whole frame.
    results: Vec<FigureRef<'r>>,
}

#[derive(Serialize)]
struct NodeRow<'r> {
    name: &'r str,
    at: [Quantity; 3],
}

#[derive(Serialize)]
struct SupportRow<'r> {
    node: &'r str,
    kind: &'r str,
    /// `fixed`, `free` or a stiffness, for X Y Z RX RY RZ.
    freedoms: [String; 6],
    turned: Option<&'r str>,
    uplift: &'static str,
}

#[derive(Serialize)]
struct MemberRow<'r> {
    name: &'r str,
    along: String,
    length: Quantity,
    section: &'r str,
    material: &'r str,
    /// Local y and z as global directions.
    y: String,
    z: String,
    spans: String,
    axial_only: bool,
    /// Factor on imposed loads with its source.
    reduction: Option<(String, &'r str)>,
}

#[derive(Serialize)]
struct HingeRow<'r> {
    member: &'r str,
    node: &'r str,
    at: Quantity,
    releases: String,
}

#[derive(Serialize)]
struct RestraintRow<'r> {
    member: &'r str,
    top: &'r str,
    bottom: &'r str,
    about_y: Option<Quantity>,
    about_z: Option<Quantity>,
}

pub(super) fn structures<'r>(record: &'r Record, drawings: &'r [Figure]) -> Vec<StructureView<'r>> {
    let printer = record.model.units.printer();
    record
        .model
        .structures
        .iter()
        .map(|(name, structure)| StructureView {
            name,
            frame: &structure.frame,
            nodes: nodes(structure),
            supports: supports(structure, &printer),
            members: structure.members.iter().map(|(name, member)| row(name, member)).collect(),
            hinges: hinges(structure, &printer),
            restraint: restraint(structure),
            figures: of_whole(drawings, name, false),
            results: of_whole(drawings, name, true),
        })
        .collect()
}

/// Drawings of a structure as a whole: its model, or its effects.
fn of_whole<'r>(drawings: &'r [Figure], structure: &str, effects: bool) -> Vec<FigureRef<'r>> {
    drawings
        .iter()
        .filter(|figure| {
            figure.structure.as_deref() == Some(structure)
                && figure.case.is_none()
                && figure.member.is_none()
                && figure.purpose.is_some() == effects
        })
        .map(FigureRef::from)
        .collect()
}

fn nodes(structure: &StructureRecord) -> Vec<NodeRow<'_>> {
    structure
        .nodes
        .iter()
        .map(|(name, node)| NodeRow { name, at: node.at.map(|c| Quantity::new(Kind::Length, c)) })
        .collect()
}

fn supports<'r>(structure: &'r StructureRecord, printer: &Printer) -> Vec<SupportRow<'r>> {
    structure
        .nodes
        .iter()
        .filter_map(|(name, node)| {
            let support = node.support.as_ref()?;
            Some(SupportRow {
                node: name,
                kind: &support.kind,
                freedoms: support.words(printer),
                turned: support.turned.as_deref(),
                uplift: if support.uplift_anchored { "anchored" } else { "" },
            })
        })
        .collect()
}

fn row<'r>(name: &'r str, member: &'r MemberRecord) -> MemberRow<'r> {
    let spans: Vec<String> = member
        .spans
        .iter()
        .enumerate()
        .map(|(index, span)| format!("{}: {}–{}", index + 1, span.nodes[0], span.nodes[1]))
        .collect();
    MemberRow {
        name,
        along: member.along.join(", "),
        length: Quantity::new(Kind::Length, member.length),
        section: &member.section,
        material: &member.material,
        y: direction(member.axes[1]),
        z: direction(member.axes[2]),
        spans: spans.join("; "),
        axial_only: member.axial_only.is_some(),
        reduction: member
            .imposed_reduction
            .as_ref()
            .map(|(factor, source)| (crate::quantity::print(*factor, 4), source.as_str())),
    }
}

/// A unit vector in words: `+X`, `-Z`, or its components.
fn direction(vector: [f64; 3]) -> String {
    for (axis, name) in ["X", "Y", "Z"].into_iter().enumerate() {
        if (vector[axis].abs() - 1.0).abs() < 1e-9 {
            return format!("{}{name}", if vector[axis] < 0.0 { "−" } else { "+" });
        }
    }
    let parts = vector.map(|c| crate::quantity::print(c, 3));
    format!("({})", parts.join(", "))
}

fn hinges<'r>(structure: &'r StructureRecord, printer: &Printer) -> Vec<HingeRow<'r>> {
    let mut out = Vec::new();
    for (name, member) in &structure.members {
        for hinge in &member.hinges {
            let releases: Vec<String> = hinge
                .releases
                .iter()
                .map(|(force, freedom)| {
                    format!("{force} {}", freedom.words(release_kind(force), printer))
                })
                .collect();
            out.push(HingeRow {
                member: name,
                node: &hinge.node,
                at: Quantity::new(Kind::Length, hinge.x),
                releases: releases.join(", "),
            });
        }
    }
    out
}

fn restraint(structure: &StructureRecord) -> Vec<RestraintRow<'_>> {
    let stated = |member: &MemberRecord| {
        member.held.top != "not stated"
            || member.held.bottom != "not stated"
            || member.buckling_length.iter().any(Option::is_some)
    };
    structure
        .members
        .iter()
        .filter(|(_, member)| stated(member))
        .map(|(name, member)| {
            let [about_y, about_z] =
                member.buckling_length.map(|l| l.map(|l| Quantity::new(Kind::Length, l)));
            RestraintRow {
                member: name,
                top: &member.held.top,
                bottom: &member.held.bottom,
                about_y,
                about_z,
            }
        })
        .collect()
}
