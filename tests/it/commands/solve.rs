//! `solve`

use insta::assert_snapshot;
use spanfolio::record::Record;

use super::project::{BEAM, Project};

#[test]
fn the_governing_table_of_a_beam() {
    assert_snapshot!(Project::of(BEAM).run(&["solve", "."]).shown(), @r"
    exit: 0
    --- stdout
    Porch
    P-1

    Member B1
      purpose   effect         greatest  at m  in  next       least  at m  in  next
      strength  V_z      kN          10     0  C1  C2 8          −5     2  C1  C2 −4
      strength  M_y      kN m        20     2  C1  C2 16          0     0  C1  C2 0
      strength  w        mm           0     0  C1  C2 0      −14.42  2.72  C1  C2 −11.53
      strength  theta_y  mrad     8.169     0  C1  C2 6.535  −6.535     6  C1  C2 −5.228
      strength  d_z      mm           0     0  C1  C2 0      −14.42  2.72  C1  C2 −11.53

    Reactions, support on structure (Z up)
      purpose   node         greatest  in  least  in
      strength  A     Z  kN        10  C1      8  C2
      strength  B     Z  kN         5  C1      4  C2

    Combinations
      number  combination
      C1      strength all | 1.5 Q
      C2      strength some | 1.2 Q

    Self-check
      loads against reactions, nodal equilibrium, energy and an independent integration agree

    Open items
      - This package gives effects of actions only: strength, stability and deflection of B1 are to be checked elsewhere.
    ");
}

#[test]
fn solving_writes_nothing() {
    let project = Project::of(BEAM);
    let before = project.files("");
    assert_eq!(project.run(&["solve", "."]).status, 0);
    assert_eq!(project.files(""), before);
}

#[test]
fn json_is_the_record_of_the_package() {
    let project = Project::of(BEAM);
    let json = project.run(&["solve", ".", "--json"]);
    assert!(Record::from_json(&json.out).is_ok());
    assert_eq!(project.run(&["issue", "."]).status, 0);
    assert_eq!(json.out.as_bytes(), project.get("package/record.json"));
}

#[test]
fn at_a_jump_both_sides_are_shown() {
    let shown = Project::of(BEAM).run(&["solve", ".", "--at", "B1 2 m"]);
    assert_snapshot!(shown.shown(), @r"
    exit: 0
    --- stdout
    Member B1 at 2 m
      state                          N kN  V_y kN  V_z kN  T kN m  M_y kN m  M_z kN m  u mm  v mm    w mm  theta_x mrad  theta_y mrad  theta_z mrad  d_y mm  d_z mm
      Q                      before     0       0   6.667       0     13.33         0     0     0  −8.867             0         2.178             0       0  −8.867
      Q                      after      0       0  −3.333       0     13.33         0     0     0  −8.867             0         2.178             0       0  −8.867
      strength all | 1.5 Q   before     0       0      10       0        20         0     0     0   −13.3             0         3.267             0       0   −13.3
      strength all | 1.5 Q   after      0       0      −5       0        20         0     0     0   −13.3             0         3.267             0       0   −13.3
      strength some | 1.2 Q  before     0       0       8       0        16         0     0     0  −10.64             0         2.614             0       0  −10.64
      strength some | 1.2 Q  after      0       0      −4       0        16         0     0     0  −10.64             0         2.614             0       0  −10.64
    ");
}

#[test]
fn at_a_place_off_the_member_is_refused() {
    assert_snapshot!(Project::of(BEAM).run(&["solve", ".", "--at", "B1 6.2 m"]).shown(), @r"
    exit: 2
    --- stderr
    error[off-member]: `6.2 m` is not on member `B1`, which is 6 m long
    ");
}

#[test]
fn at_an_unknown_member_is_refused() {
    assert_eq!(Project::of(BEAM).run(&["solve", ".", "--at", "B2 1 m"]).status, 2);
}

#[test]
fn an_unknown_member_names_the_nearest_one() {
    let project = Project::of(BEAM);
    project.edit("project.yaml", "{member: B1, point", "{member: B11, point");
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[unknown-member]: no member named `B11`
      --> [PROJECT]/project.yaml:21:18
       |
    21 |       - {member: B11, point: 10 kN, at: 2 m}
       |                  ^^^ not a member of this project
       |
       = help: did you mean `B1`?
    ");
}

#[test]
fn a_mechanism_names_how_it_moves() {
    let project = Project::of(BEAM);
    project.edit("project.yaml", "A: pinned", "A: {Z: fixed}");
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[mechanism]: structure `main` is not held: it can move along X
      --> [PROJECT]/project.yaml:11:8
       |
    11 | frame: plane
       |        ^^^^^
       |
       = help: add a support: a plane frame needs at least three restraints that are neither all parallel nor meet in one point
    ");
}

#[test]
fn an_inner_mechanism_names_its_node() {
    let project = Project::of(BEAM);
    project.edit("project.yaml", "A: pinned, B: {Z: fixed}", "A: pinned, C: pinned");
    project.edit("project.yaml", "B: [6 m, 0 m]}", "B: [6 m, 0 m], C: [9 m, 0 m]}");
    project.edit(
        "project.yaml",
        "  B1: {along: [A, B], section: beam, material: steel}",
        "  B1: {along: [A, B], section: beam, material: steel, hinges: {end: {M_y: free}}}\n  B2: {along: [B, C], section: beam, material: steel}",
    );
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[mechanism]: structure `main` is a mechanism: node `B` can move along Z
      --> [PROJECT]/project.yaml:12:24
       |
    12 | nodes: {A: [0 m, 0 m], B: [6 m, 0 m], C: [9 m, 0 m]}
       |                        ^ members `B1`, `B2` here
       |
       = help: take away a hinge, give it a spring, or hold the node with a support
    ");
}

#[test]
fn several_problems_are_counted() {
    let project = Project::of(BEAM);
    project.edit("project.yaml", "S275", "S27");
    project.edit("project.yaml", "IPE 200", "IPE 201");
    assert_snapshot!(project.run(&["solve", "."]).shown(), @r"
    exit: 2
    --- stderr
    error[unknown-grade]: no grade `S27` in the catalogue
     --> [PROJECT]/project.yaml:8:18
      |
    8 |   steel: {grade: S27}
      |                  ^^^
      |
      = help: did you mean `S235`?
      = help: give E, G, density and expansion in full for other materials

    error[unknown-section]: no section `IPE 201` in the catalogue
      --> [PROJECT]/project.yaml:10:21
       |
    10 |   beam: {catalogue: IPE 201}
       |                     ^^^^^^^
       |
       = help: did you mean `IPE 200`?
       = help: `spanfolio catalogue` lists the families

    2 errors
    ");
}
