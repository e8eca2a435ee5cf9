//! A check case → the text of a project file.
//!
//! Plane cases have y up and count anticlockwise; a project has Z up and counts right-handed about +Y,
//! which is clockwise on the drawing: hence the minus signs on moments, rotations and turned supports.

use std::fmt::Write;

use super::case::{Case, Load, Member, Restraint};

/// The load case of a case that names none.
pub(super) const ONLY: &str = "Loads";

/// The project file that says the same as the check case.
pub(super) fn project_file(case: &Case) -> String {
    let plane = case.model.kind == "plane";
    let mut out = format!(
        "format: 1\nproject:\n  title: \"{}\"\n  number: {}\n  revisions:\n    - {{mark: A, date: 2026-01-05, \
         status: for checking, note: First issue}}\n",
        case.title.replace('"', "'"),
        case.id
    );
    let mut materials = String::from("materials:\n");
    let mut sections = String::from("sections:\n");
    let mut members = String::from("members:\n");
    for (name, member) in &case.model.members {
        materials += &material(name, member);
        sections += &section(name, member);
        members += &member_line(case, name, member);
    }
    out += &materials;
    out += &sections;
    let _ = writeln!(out, "frame: {}\nnodes:", case.model.kind);
    for (name, at) in &case.model.nodes {
        let at: Vec<String> = at.iter().map(|c| format!("{c} m")).collect();
        let _ = writeln!(out, "  {name}: [{}]", at.join(", "));
    }
    out += &members;
    out += "supports:\n";
    for (node, restraints) in &case.model.supports {
        let parts: Vec<String> =
            restraints.iter().filter_map(|(key, value)| restraint(plane, key, value)).collect();
        if !parts.is_empty() {
            let _ = writeln!(out, "  {node}: {{{}}}", parts.join(", "));
        }
    }
    out += "load_cases:\n";
    if case.load_cases.is_empty() {
        out += &load_case(case, ONLY, &case.model.loads);
    }
    for (name, loads) in &case.load_cases {
        out += &load_case(case, name, loads);
    }
    out += "combinations:\n  written:\n";
    if case.combinations.is_empty() {
        let names: Vec<&str> = case.load_cases.keys().map(String::as_str).collect();
        for name in if names.is_empty() { vec![ONLY] } else { names } {
            let _ = writeln!(
                out,
                "    - {{title: {name} alone, purpose: strength, factors: {{{name}: 1}}, source: check case}}"
            );
        }
    }
    for (title, factors) in &case.combinations {
        let factors: Vec<String> = factors.iter().map(|(name, f)| format!("{name}: {f}")).collect();
        let _ = writeln!(
            out,
            "    - {{title: \"{title}\", purpose: strength, factors: {{{}}}, source: check case}}",
            factors.join(", ")
        );
    }
    out
}

fn material(name: &str, member: &Member) -> String {
    format!(
        "  mat-{name}: {{E: {} Pa, G: {} Pa, density: 1 kg/m3, expansion: {} /K}}\n",
        member.E,
        member.G.unwrap_or(member.E / 2.6),
        member.alpha.unwrap_or(1e-5),
    )
}

fn section(name: &str, member: &Member) -> String {
    // A truss bar bends nowhere; the values only have to be there.
    let i_y = member.I.or(member.Iy).unwrap_or(1e-6);
    let i_z = member.Iz.unwrap_or(i_y / 10.0);
    let mut given = format!(
        "A: {} m2, I_y: {i_y} m4, I_z: {i_z} m4, I_t: {} m4",
        member.A,
        member.J.unwrap_or(1e-7)
    );
    if let Some(area) = member.shear_area {
        let _ = write!(given, ", A_sz: {area} m2");
    }
    if let Some(depth) = member.depth {
        let _ = write!(given, ", depth: {depth} m");
    }
    format!("  sec-{name}: {{given: {{{given}}}, axes: as written}}\n")
}

fn member_line(case: &Case, name: &str, member: &Member) -> String {
    let mut out = format!(
        "  {name}: {{along: [{}, {}], section: sec-{name}, material: mat-{name}",
        member.i, member.j
    );
    let hinges: Vec<&str> = [
        member.hinge_i.then_some("start: {M_y: free}"),
        member.hinge_j.then_some("end: {M_y: free}"),
    ]
    .into_iter()
    .flatten()
    .collect();
    if !hinges.is_empty() {
        let _ = write!(out, ", hinges: {{{}}}", hinges.join(", "));
    }
    if member.truss {
        out += ", axial_only: true, compression: accepted";
    }
    if let Some(y) = member.y_axis {
        // Local z is x × y; its length does not matter.
        let (from, to) = (&case.model.nodes[&member.i], &case.model.nodes[&member.j]);
        let x = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
        let z = [0, 1, 2].map(|k: usize| {
            let (a, b) = ((k + 1) % 3, (k + 2) % 3);
            x[a] * y[b] - x[b] * y[a]
        });
        let _ = write!(out, ", z_towards: [{}, {}, {}]", z[0], z[1], z[2]);
    }
    out + "}\n"
}

fn restraint(plane: bool, key: &str, value: &Restraint) -> Option<String> {
    let freedom = match (plane, key) {
        (true, "x") | (false, "x") => "X",
        (true, "y") | (false, "z") => "Z",
        (false, "y") => "Y",
        (true, "rz") | (false, "ry") => "RY",
        (false, "rx") => "RX",
        (false, "rz") => "RZ",
        _ => "turned",
    };
    let unit = if freedom.starts_with('R') { "N m/rad" } else { "N/m" };
    match value {
        Restraint::Word(word) if word == "free" => None,
        Restraint::Word(word) => Some(format!("{freedom}: {word}")),
        Restraint::Angle(degrees) => Some(format!("turned: {} deg", -degrees)),
        Restraint::Value(map) => Some(match map.get("spring") {
            Some(stiffness) => format!("{freedom}: {stiffness} {unit}"),
            None => format!("{freedom}: fixed"),
        }),
    }
}

fn load_case(case: &Case, name: &str, loads: &[Load]) -> String {
    let plane = case.model.kind == "plane";
    let mut out = format!("  {name}:\n    title: {name}\n    nature: permanent\n    loads:\n");
    for load in loads {
        for line in load_lines(case, plane, load) {
            let _ = writeln!(out, "      - {{{line}}}");
        }
    }
    for (node, restraints) in &case.model.supports {
        for (key, value) in restraints {
            if let Restraint::Value(map) = value
                && let Some(by) = map.get("fixed")
            {
                let by = match (plane, key.as_str()) {
                    (true, "x") => format!("X: {by} m"),
                    (true, "y") => format!("Z: {by} m"),
                    _ => format!("RY: {} rad", -by),
                };
                let _ = writeln!(out, "      - {{node: {node}, displaced: {{{by}}}}}");
            }
        }
    }
    out
}

fn load_lines(case: &Case, plane: bool, load: &Load) -> Vec<String> {
    // Forces along the project's X, Y, Z and moments about them.
    let (force, moment) = if plane {
        ([load.fx, 0.0, load.fy], [0.0, -load.mz, 0.0])
    } else {
        ([load.fx, load.fy, load.fz], [load.mx, load.my, load.mz])
    };
    match load.kind.as_str() {
        "node" => {
            let force = components(force, ["X", "Y", "Z"], "N");
            let moment = components(moment, ["X", "Y", "Z"], "N m");
            let mut line =
                format!("node: {}", load.node.as_deref().expect("a node load names a node"));
            if !force.is_empty() {
                let _ = write!(line, ", force: {{{force}}}");
            }
            if !moment.is_empty() {
                let _ = write!(line, ", moment: {{{moment}}}");
            }
            vec![line]
        }
        "member_point" => {
            let member = member_of(load);
            let at = load.at.expect("a point load has a position");
            let mut lines = Vec::new();
            for (axis, value) in ["X", "Y", "Z"].into_iter().zip(force) {
                if value != 0.0 {
                    lines.push(format!(
                        "member: {member}, point: {value} N, at: {at} m, direction: +{axis}"
                    ));
                }
            }
            for (axis, value) in ["X", "Y", "Z"].into_iter().zip(moment) {
                if value != 0.0 {
                    lines.push(format!(
                        "member: {member}, point_moment: {value} N m, at: {at} m, about: {axis}"
                    ));
                }
            }
            lines
        }
        "member_distributed" => vec![distributed(case, plane, load)],
        "temperature" => {
            let (top, bottom) =
                (load.mean + load.difference / 2.0, load.mean - load.difference / 2.0);
            // Their top is the local +y face, which is the project's +z face unless x points left.
            let (top, bottom) =
                if turned_over(case, member_of(load)) { (bottom, top) } else { (top, bottom) };
            vec![if load.difference == 0.0 {
                format!("member: {}, warming: {{uniform: {} K}}", member_of(load), load.mean)
            } else {
                format!(
                    "member: {}, warming: {{top: {top} K, bottom: {bottom} K}}",
                    member_of(load)
                )
            }]
        }
        kind => panic!("no translation of a load of type {kind}"),
    }
}

fn distributed(case: &Case, plane: bool, load: &Load) -> String {
    let member = member_of(load);
    let over = plane && turned_over(case, member);
    let direction = match (plane, load.direction.as_deref().expect("a direction")) {
        (_, "global_x") => "+X",
        (true, "global_y") | (false, "global_z") => "+Z",
        (false, "global_y") => "+Y",
        (_, "local_x") => "local +x",
        (true, "local_y") if over => "local -z",
        (true, "local_y") | (false, "local_z") => "local +z",
        (false, "local_y") => "local +y",
        (_, other) => panic!("no translation of direction {other}"),
    };
    let start = load.q_start.expect("an intensity");
    let mut line = match load.q_end {
        Some(end) => format!("member: {member}, varying: [{start} N/m, {end} N/m]"),
        None => format!("member: {member}, uniform: {start} N/m"),
    };
    let _ = write!(line, ", direction: {direction}");
    for (key, position) in [("from", load.from), ("to", load.to)] {
        if let Some(x) = position {
            let _ = write!(line, ", {key}: {x} m");
        }
    }
    if load.per.as_deref() == Some("projection") {
        line += ", per: projected";
    }
    line
}

fn member_of(load: &Load) -> &str {
    load.member.as_deref().expect("a member load names a member")
}

/// The member runs to the left, so that the check case's local y points down where the project's z points up.
fn turned_over(case: &Case, member: &str) -> bool {
    let member = &case.model.members[member];
    let (from, to) = (&case.model.nodes[&member.i], &case.model.nodes[&member.j]);
    let run = to[0] - from[0];
    run < 0.0 && run.abs() > (to[1] - from[1]).abs() / 100.0
}

fn components(values: [f64; 3], names: [&str; 3], unit: &str) -> String {
    let parts: Vec<String> = names
        .into_iter()
        .zip(values)
        .filter(|(_, value)| *value != 0.0)
        .map(|(name, value)| format!("{name}: {value} {unit}"))
        .collect();
    parts.join(", ")
}
