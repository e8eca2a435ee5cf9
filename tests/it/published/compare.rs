//! The Record of a check case against its expected values.

use spanfolio::model::{Effect, Side};
use spanfolio::record::{ExtremeRecord, MemberRecord, Record};

use super::case::{Case, Expected, Location};
use super::translate::ONLY;

/// Compares one expected value; `Err` says what differs.
pub(super) fn compare(case: &Case, record: &Record, expected: &Expected) -> Result<(), String> {
    let at = &expected.location;
    if let Some(extreme) = &at.extreme {
        return combination_extreme(record, expected, extreme == "max");
    }
    match expected.quantity.as_str() {
        "moment_max" | "moment_min" | "deflection_y_max" | "deflection_y_min" => {
            scope_extreme(case, record, expected)
        }
        _ => within(expected, value(case, record, expected)),
    }
}

fn within(expected: &Expected, computed: f64) -> Result<(), String> {
    let tolerance = match (expected.rel_tol, expected.abs_tol) {
        (Some(relative), _) => relative * expected.value.abs(),
        (None, Some(absolute)) => absolute,
        (None, None) => return Err(format!("{}: no tolerance", expected.quantity)),
    };
    if (computed - expected.value).abs() <= tolerance {
        Ok(())
    } else {
        Err(format!("{}: published {}, computed {computed}", expected.quantity, expected.value))
    }
}

fn value(case: &Case, record: &Record, expected: &Expected) -> f64 {
    let at = &expected.location;
    let state = at.load_set.as_deref().unwrap_or(ONLY);
    let plane = case.model.kind == "plane";
    let quantity = expected.quantity.as_str();
    if quantity == "strain_energy" {
        return record.self_check.strain_energy["main"][state];
    }
    if let Some(axis) = quantity.strip_prefix("sum_reaction_") {
        let component = component(plane, axis);
        return case
            .model
            .supports
            .keys()
            .map(|node| global_reaction(record, node, state)[component])
            .sum();
    }
    if let Some(axis) = quantity.strip_prefix("reaction_") {
        let node = at.node.as_deref().expect("a node");
        return sense(plane, axis) * global_reaction(record, node, state)[component(plane, axis)];
    }
    for prefix in ["displacement_", "rotation_"] {
        if let (Some(axis), Some(node)) = (quantity.strip_prefix(prefix), &at.node) {
            let axis = if prefix == "rotation_" { format!("m{axis}") } else { axis.to_owned() };
            let all = record.displacement(node, state).expect("a node");
            return sense(plane, &axis) * all[component(plane, &axis)];
        }
    }
    let name = at.member.as_deref().expect("a member");
    let member = member(record, name);
    let side = if at.side.as_deref() == Some("before") { Side::Before } else { Side::After };
    // Positions are rounded to ten digits and may lie beyond the end by as much.
    let x = at.x.expect("a position").min(member.length);
    let effect =
        |effect| record.effect(name, effect, state, x, side).expect("a position on the member");
    match quantity {
        "moment" => up(member) * effect(Effect::My),
        "shear" => up(member) * effect(Effect::Vz),
        "axial" => effect(Effect::N),
        // z = row 2 of the local axes; the plane's vertical is global Z.
        "deflection_y" => {
            member.axes[0][2] * effect(Effect::U) + member.axes[2][2] * effect(Effect::W)
        }
        // Anticlockwise is left-handed about global Y.
        "end_rotation" => -member.axes[1][1] * effect(Effect::ThetaY),
        "torque_abs" => effect(Effect::T).abs(),
        "moment_xy_plane_abs" => effect(Effect::Mz).abs(),
        "moment_xz_plane_abs" => effect(Effect::My).abs(),
        other => panic!("{}: no comparison of {other}", case.id),
    }
}

/// Moments, deflections: greatest or least over the whole model or one member, and where.
fn scope_extreme(case: &Case, record: &Record, expected: &Expected) -> Result<(), String> {
    let at = &expected.location;
    let largest = expected.quantity.ends_with("max");
    let effect = if expected.quantity.starts_with("moment") { Effect::My } else { Effect::W };
    let state = at.load_set.as_deref().unwrap_or(ONLY);
    let (name, found) = extremes(record, at, effect, largest, &format!("{state} alone"));
    within(expected, found.value)?;
    place(case, record, at, effect, name, &found, expected)
}

/// The location is meant within 0.5 % of the member's length; where the structure and its loads are
/// symmetric another place with the same value is equally right.
fn place(
    case: &Case,
    record: &Record,
    at: &Location,
    effect: Effect,
    name: &str,
    found: &Signed,
    expected: &Expected,
) -> Result<(), String> {
    let (Some(member), Some(x)) = (&at.at_member, at.at_x) else { return Ok(()) };
    let length = self::member(record, member).length;
    let near = name == member && (found.x - x).abs() <= 0.005 * length;
    let state = at.load_set.as_deref().unwrap_or(ONLY);
    let there = [Side::Before, Side::After].iter().any(|side| {
        let value =
            record.effect(member, effect, state, x, *side).expect("a position on the member");
        (up(self::member(record, member)) * value - expected.value).abs()
            <= 1e-5 * expected.value.abs()
    });
    if near || there {
        Ok(())
    } else {
        Err(format!(
            "{} of {}: at {name} {}, published {member} {x}",
            expected.quantity, case.id, found.x
        ))
    }
}

struct Signed {
    value: f64,
    x: f64,
    title: String,
}

fn extremes<'r>(
    record: &'r Record,
    at: &Location,
    effect: Effect,
    largest: bool,
    title: &str,
) -> (&'r str, Signed) {
    let scope = at.scope.as_deref().unwrap_or("all");
    let mut best: Option<(&str, Signed)> = None;
    for (name, result) in
        record.results.members.iter().filter(|(name, _)| scope == "all" || scope == *name)
    {
        let sign = up(member(record, name));
        let Some(pair) = result.governing["strength"].get(effect.name()) else { continue };
        let extreme = if largest == (sign > 0.0) { &pair.max } else { &pair.min };
        let signed = signed(record, extreme, sign);
        let better = best.as_ref().is_none_or(|(_, b)| {
            if largest { signed.value > b.value } else { signed.value < b.value }
        });
        if better {
            best = Some((name, signed));
        }
    }
    best.unwrap_or_else(|| panic!("no {} found for {title}", effect.name()))
}

fn signed(record: &Record, extreme: &ExtremeRecord, sign: f64) -> Signed {
    Signed {
        value: sign * extreme.value,
        x: extreme.x.unwrap_or_default(),
        title: record.combinations[&extreme.state].title.clone(),
    }
}

/// Family L: the extreme over the combinations, and which combination gives it.
fn combination_extreme(record: &Record, expected: &Expected, largest: bool) -> Result<(), String> {
    let at = &expected.location;
    let found = if let Some(node) = &at.node {
        let pair = &record.results.reactions["strength"][node]["Z"];
        signed(record, if largest { &pair.max } else { &pair.min }, 1.0)
    } else if let (Some(name), Some(x)) = (&at.member, at.x) {
        // At one section: every combination there, the first on a tie.
        let mut best: Option<Signed> = None;
        for (state, combination) in &record.combinations {
            let value = record
                .effect(name, Effect::My, state, x, Side::Before)
                .or_else(|| record.effect(name, Effect::My, state, x, Side::After))
                .expect("a position on the member");
            let margin = 1e-9 * expected.value.abs();
            if best.as_ref().is_none_or(|b| {
                if largest { value > b.value + margin } else { value < b.value - margin }
            }) {
                best = Some(Signed { value, x, title: combination.title.clone() });
            }
        }
        best.expect("at least one combination")
    } else {
        extremes(record, at, Effect::My, largest, "combinations").1
    };
    within(expected, found.value)?;
    match &at.governing_combination {
        Some(title) if *title != found.title => {
            Err(format!("governed by {}, published {title}", found.title))
        }
        _ => Ok(()),
    }
}

/// Position in X Y Z RX RY RZ of a component named in the data.
fn component(plane: bool, axis: &str) -> usize {
    match (plane, axis) {
        (_, "x") => 0,
        (true, "y") | (false, "z") => 2,
        (false, "y") => 1,
        (false, "mx") => 3,
        (true, "mz") | (false, "my") => 4,
        (false, "mz") => 5,
        other => panic!("no component {other:?}"),
    }
}

/// Anticlockwise moments and rotations of plane cases are left-handed about global Y.
fn sense(plane: bool, axis: &str) -> f64 {
    if plane && axis == "mz" { -1.0 } else { 1.0 }
}

/// Turned supports report along their own axes; the data want global ones.
fn global_reaction(record: &Record, node: &str, state: &str) -> [f64; 6] {
    let own = record.reaction(node, state).expect("a supported node");
    let support = record.model.structures["main"].nodes[node].support.as_ref().expect("a support");
    let mut global = [0.0; 6];
    for part in 0..2 {
        for row in 0..3 {
            for axis in 0..3 {
                global[3 * part + axis] += support.axes[row][axis] * own[3 * part + row];
            }
        }
    }
    global
}

fn member<'r>(record: &'r Record, name: &str) -> &'r MemberRecord {
    &record.model.structures["main"].members[name]
}

/// +1 where the project's local z is the data's local y (90° anticlockwise from x), −1 where it is opposite.
fn up(member: &MemberRecord) -> f64 {
    let (x, z) = (member.axes[0], member.axes[2]);
    if z[2] * x[0] - z[0] * x[2] >= 0.0 { 1.0 } else { -1.0 }
}
