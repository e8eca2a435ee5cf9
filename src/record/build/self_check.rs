//! The self-check by name.

use crate::analysis::SelfCheck;
use crate::model::{CaseId, Model};
use crate::record::{
    BalanceRecord, EnergyRecord, IndependentRecord, RelativeRecord, SelfCheckRecord,
    StructureCheckRecord,
};

pub(super) fn self_check(model: &Model, check: &SelfCheck) -> SelfCheckRecord {
    let case = |id: CaseId| model[id].name.clone();
    SelfCheckRecord {
        satisfied: check.satisfied(),
        structures: check
            .structures
            .iter()
            .map(|check| {
                let record = StructureCheckRecord {
                    balances: check
                        .balances
                        .iter()
                        .map(|part| {
                            let record = BalanceRecord {
                                loads: part.loads,
                                reactions: part.reactions,
                                relative: part.relative,
                                satisfied: part.satisfied,
                            };
                            (case(part.case), record)
                        })
                        .collect(),
                    residuals: check
                        .residuals
                        .iter()
                        .map(|part| {
                            let record = RelativeRecord {
                                relative: part.relative,
                                satisfied: part.satisfied,
                            };
                            (case(part.case), record)
                        })
                        .collect(),
                    energies: check
                        .energies
                        .iter()
                        .map(|part| {
                            let record = EnergyRecord {
                                external: part.external,
                                strain: part.strain,
                                relative: part.relative,
                                satisfied: part.satisfied,
                            };
                            (case(part.case), record)
                        })
                        .collect(),
                };
                (model[check.structure].name.clone(), record)
            })
            .collect(),
        independent: check.independent.as_ref().map(|part| IndependentRecord {
            member: model[part.member].name.clone(),
            case: case(part.case),
            method: part.method.clone(),
            differences: part
                .differences
                .iter()
                .map(|(effect, difference)| (effect.name().to_owned(), *difference))
                .collect(),
            satisfied: part.satisfied,
        }),
        strain_energy: check
            .structures
            .iter()
            .map(|check| {
                let energies =
                    check.energies.iter().map(|part| (case(part.case), part.strain)).collect();
                (model[check.structure].name.clone(), energies)
            })
            .collect(),
    }
}
