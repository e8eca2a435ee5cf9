//! Unsymmetrical bending and shear deformation against published formulas.

use spanfolio::model::Effect;
use spanfolio::section::Properties;

use super::build::*;

fn cantilever(section: Properties, length: f64, force: [f64; 3]) -> Solved {
    space()
        .section(section)
        .node("A", [0.0; 3])
        .node("B", [length, 0.0, 0.0])
        .support("A", FIXED)
        .member("B1", &["A", "B"])
        .case(vec![on_node(1, force, [0.0; 3])])
        .solve()
}

/// Tip deflection of a cantilever with a skew section: along the principal axes P_u L³/3EI_v and so
/// on, put together again (Timoshenko, Strength of Materials, Part I, unsymmetrical bending; from
/// memory).
#[test]
fn a_skew_section_deflects_along_its_principal_axes() {
    let section = Properties { i_y: 5e-5, i_z: 2e-5, i_yz: -1.7e-5, ..properties() };
    let (i_u, i_v, angle) = section.principal();
    let tip = cantilever(section, 2.5, [0.0, 300.0, -900.0]);
    let (c, s) = (libm::cos(angle), libm::sin(angle));
    // Principal axis u is local y turned by the angle about +x (y towards z); bending about u moves along v.
    let (along_u, along_v) = (300.0 * c - 900.0 * s, -300.0 * s - 900.0 * c);
    let third = 2.5_f64 * 2.5 * 2.5 / (3.0 * E);
    let (moves_u, moves_v) = (along_u * third / i_v, along_v * third / i_u);
    close(tip.before(0, Effect::V, 2.5), moves_u * c - moves_v * s, 0.0);
    close(tip.before(0, Effect::W, 2.5), moves_u * s + moves_v * c, 0.0);
    // Statics do not ask for the section.
    close(tip.after(0, Effect::My, 0.0), -900.0 * 2.5, 0.0);
    close(tip.after(0, Effect::Mz, 0.0), 300.0 * 2.5, 0.0);
}

/// P L³/3EI + P L/GA_s, rotation of the section P L²/2EI (Timoshenko beam; Cowper 1966, from memory).
#[test]
fn shear_deformation_adds_to_the_deflection_but_not_to_the_rotation() {
    let section = Properties { a_sz: Some(1.5e-3), a_sy: Some(2e-3), ..properties() };
    let tip = cantilever(section, 1.2, [0.0, 0.0, -4e4]);
    let bending = 4e4 * 1.2 * 1.2 * 1.2 / (3.0 * EI);
    let shear = 4e4 * 1.2 / (G * 1.5e-3);
    close(tip.displacement("B")[2], -bending - shear, 0.0);
    close(tip.displacement("B")[4], 4e4 * 1.44 / (2.0 * EI), 0.0);
    assert!(shear > 0.1 * bending);
}

/// Fixed at both ends: the stiffness 12EI/L³/(1+Φ), Φ = 12EI/GA_sL² (Przemieniecki, Theory of Matrix
/// Structural Analysis, 5.6; from memory).
#[test]
fn shear_deformation_softens_a_beam_held_at_both_ends() {
    let section = Properties { a_sz: Some(1.5e-3), ..properties() };
    let length = 1.6;
    let mut guided = FIXED;
    guided[2] = spanfolio::model::Freedom::Free;
    let beam = space()
        .section(section)
        .node("A", [0.0; 3])
        .node("B", [length, 0.0, 0.0])
        .support("A", FIXED)
        .support("B", guided)
        .member("B1", &["A", "B"])
        .case(vec![on_node(1, [0.0, 0.0, -1e4], [0.0; 3])])
        .solve();
    let phi = 12.0 * EI / (G * 1.5e-3 * length * length);
    let expected = -1e4 * length * length * length * (1.0 + phi) / (12.0 * EI);
    close(beam.displacement("B")[2], expected, 0.0);
    close(beam.after(0, Effect::My, 0.0), -1e4 * length / 2.0, 0.0);
}
