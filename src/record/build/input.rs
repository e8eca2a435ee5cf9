//! The resolved input as the Record holds it.

use super::loads;
use super::steps::usual_unit;
use crate::analysis::{Governing, SelfCheck, Solution};
use crate::model::{
    Draw, EFFECTS, Frame, Freedom, HeldAlong, Member, Model, MomentSide, Paper, Release, Structure,
    Support,
};
use crate::quantity::{Quantity, STANDARD_GRAVITY};
use crate::record::{
    AnalysisRecord, AxialOnlyRecord, FreedomRecord, FreedomWord, HeldRecord, HingeRecord,
    LayerRecord, Map, MaterialRecord, MemberRecord, ModelRecord, NodeRecord, PackageRecord,
    SectionRecord, SpanRecord, StructureRecord, SupportRecord, UnitsRecord, ValueRecord,
};

/// Projects with more members than this draw only the governing ones unless they say otherwise.
const ALL_UP_TO: usize = 200;

pub(super) fn model(
    model: &Model,
    solution: &Solution,
    governing: &Governing,
    self_check: &SelfCheck,
) -> ModelRecord {
    ModelRecord {
        materials: materials(model),
        sections: sections(model),
        structures: model
            .structures
            .iter()
            .map(|structure| (structure.name.clone(), self::structure(model, structure)))
            .collect(),
        solve_order: model.solve_order.iter().map(|id| model[*id].name.clone()).collect(),
        units: UnitsRecord {
            system: model.units.system,
            significant: model.significant,
            units: model
                .units
                .iter()
                .map(|(kind, unit)| (kind.name().to_owned(), (unit.label.clone(), unit.factor)))
                .collect(),
        },
        analysis: AnalysisRecord {
            order: model.analysis.order.clone(),
            imperfections: model.analysis.imperfections.clone(),
            shear_deformation: model.shear_deformation,
            gravity: STANDARD_GRAVITY,
        },
        package: package(model, governing),
        values: model
            .values
            .iter()
            .map(|value| {
                let record = ValueRecord {
                    value: value.value,
                    unit: usual_unit(
                        &model.units,
                        Quantity { value: value.value, dimension: value.dimension },
                    ),
                    written: value.written.clone(),
                    source: value.source.clone(),
                };
                (value.name.clone(), record)
            })
            .collect(),
        build_ups: model
            .build_ups
            .iter()
            .map(|build_up| {
                let layers = build_up.layers.iter().map(|layer| LayerRecord {
                    layer: layer.title.clone(),
                    load: layer.load,
                    source: layer.source.clone(),
                });
                (build_up.name.clone(), layers.collect())
            })
            .collect(),
        cases: loads::cases(model, solution, self_check),
    }
}

fn materials(model: &Model) -> Map<MaterialRecord> {
    model
        .materials
        .iter()
        .map(|material| {
            let record = MaterialRecord {
                title: material.title.clone(),
                family: material.family.clone(),
                e: material.e,
                g: material.g,
                density: material.density,
                expansion: material.expansion,
                strengths: material
                    .strengths
                    .iter()
                    .map(|(symbol, (value, kind))| {
                        (symbol.clone(), (*value, kind.name().to_owned()))
                    })
                    .collect(),
                service_class: material.service_class.clone(),
                source: material.source.clone(),
            };
            (material.name.clone(), record)
        })
        .collect()
}

fn sections(model: &Model) -> Map<SectionRecord> {
    model
        .sections
        .iter()
        .map(|section| {
            let properties = &section.properties;
            let record = SectionRecord {
                title: section.title.clone(),
                properties: properties
                    .by_symbol()
                    .into_iter()
                    .map(|(symbol, _, value)| (symbol.to_owned(), value))
                    .collect(),
                dimensions: properties.dimensions.clone(),
                outline: properties.outline.clone(),
                methods: properties.methods.texts().map(str::to_owned).collect(),
                source: section.source.clone(),
            };
            (section.name.clone(), record)
        })
        .collect()
}

fn structure(model: &Model, structure: &Structure) -> StructureRecord {
    StructureRecord {
        frame: match structure.frame {
            Frame::Plane => "plane",
            Frame::Space => "space",
        }
        .to_owned(),
        nodes: structure
            .nodes
            .iter()
            .map(|id| {
                let node = &model[*id];
                let record =
                    NodeRecord { at: node.at, support: node.support.as_ref().map(support) };
                (node.name.clone(), record)
            })
            .collect(),
        members: structure
            .members
            .iter()
            .map(|id| (model[*id].name.clone(), member(model, &model[*id])))
            .collect(),
    }
}

fn support(support: &Support) -> SupportRecord {
    SupportRecord {
        kind: support.kind.clone(),
        freedoms: support.freedoms.map(|freedom| match freedom {
            Freedom::Free => FreedomRecord::Word(FreedomWord::Free),
            Freedom::Fixed => FreedomRecord::Word(FreedomWord::Fixed),
            Freedom::Spring(stiffness) => FreedomRecord::Spring(stiffness),
        }),
        axes: support.axes,
        turned: support.turned.clone(),
        uplift_anchored: support.uplift_anchored,
    }
}

fn member(model: &Model, member: &Member) -> MemberRecord {
    let names = |ids: &[crate::model::NodeId]| -> Vec<String> {
        ids.iter().map(|id| model[*id].name.clone()).collect()
    };
    let edge = |held: &HeldAlong| match held {
        HeldAlong::NotStated => "not stated".to_owned(),
        HeldAlong::Continuous => "continuous".to_owned(),
        HeldAlong::At(nodes) => names(nodes).join(", "),
    };
    MemberRecord {
        along: names(&member.along),
        stations: member.stations.clone(),
        length: member.length,
        axes: member.axes,
        section: model[member.section].name.clone(),
        material: model[member.material].name.clone(),
        hinges: member
            .hinges
            .iter()
            .map(|hinge| HingeRecord {
                node: model[member.along[hinge.station]].name.clone(),
                x: member.stations[hinge.station],
                releases: EFFECTS
                    .iter()
                    .zip(hinge.releases)
                    .filter_map(|(effect, release)| {
                        let record = match release {
                            Release::Rigid => return None,
                            Release::Free => FreedomRecord::Word(FreedomWord::Free),
                            Release::Spring(stiffness) => FreedomRecord::Spring(stiffness),
                        };
                        Some((effect.name().to_owned(), record))
                    })
                    .collect(),
            })
            .collect(),
        spans: member
            .spans
            .iter()
            .map(|span| SpanRecord {
                nodes: span.nodes.map(|id| model[id].name.clone()),
                from: span.from,
                to: span.to,
                free: span.free,
            })
            .collect(),
        held: HeldRecord { top: edge(&member.held.top), bottom: edge(&member.held.bottom) },
        buckling_length: member.buckling_length,
        imposed_reduction: member.imposed_reduction.clone(),
        axial_only: member
            .axial_only
            .map(|only| AxialOnlyRecord { compression_accepted: only.compression_accepted }),
    }
}

fn package(model: &Model, governing: &Governing) -> PackageRecord {
    let all: Vec<String> = model.members.iter().map(|member| member.name.clone()).collect();
    let drawn = match &model.package.draw {
        Draw::Named(names) => names.clone(),
        Draw::All if all.len() <= ALL_UP_TO => all.clone(),
        Draw::All | Draw::Governing => leading(model, governing),
    };
    PackageRecord {
        left_out: all.into_iter().filter(|name| !drawn.contains(name)).collect(),
        drawn,
        moments: match model.package.moments {
            MomentSide::Tension => "tension side",
            MomentSide::Compression => "compression side",
        }
        .to_owned(),
        paper: match model.package.paper {
            Paper::A4 => "A4",
            Paper::Letter => "Letter",
        }
        .to_owned(),
        local_axes: model.package.local_axes,
    }
}

/// Members that hold the greatest size of some effect in some purpose among the members of their own
/// section, in the order of the project.
fn leading(model: &Model, governing: &Governing) -> Vec<String> {
    let mut leads = vec![false; model.members.len()];
    for section in 0..model.sections.len() {
        let of = |index: &usize| model.members[*index].section.0 == section;
        let members: Vec<usize> = (0..model.members.len()).filter(of).collect();
        let purposes = members.first().map_or(0, |first| governing.members[*first].whole.len());
        for purpose in 0..purposes {
            for effect in 0..EFFECTS.len() {
                let size = |index: usize| {
                    let extremes = &governing.members[index].whole[purpose].1[effect];
                    extremes.max.value.abs().max(extremes.min.value.abs())
                };
                let most = members.iter().map(|index| size(*index)).fold(0.0, f64::max);
                let first = members.iter().find(|index| most > 0.0 && size(**index) >= most);
                if let Some(index) = first {
                    leads[*index] = true;
                }
            }
        }
    }
    let named = model.members.iter().zip(leads).filter(|(_, leads)| *leads);
    named.map(|(member, _)| member.name.clone()).collect()
}
