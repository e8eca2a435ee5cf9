//! The elastic shear area, V over the greatest shear stress.

use spanfolio::catalogue;
use spanfolio::section::Shape;

fn area(shape: &Shape) -> f64 {
    let properties = shape.properties().expect("a section");
    properties.elastic_shear_area().expect("an outline")
}

fn close(found: f64, expected: f64, tolerance: f64) {
    assert!((found / expected - 1.0).abs() <= tolerance, "{found} {expected}");
}

/// Greatest over mean shear stress: 3/2 in a rectangle, 4/3 in a circle, 2 in a thin ring (Timoshenko, Strength
/// of Materials, Part I; from memory).
#[test]
fn of_a_rectangle_a_circle_and_a_thin_ring() {
    close(area(&Shape::Rectangle { width: 0.075, depth: 0.22 }), 0.075 * 0.22 / 1.5, 1e-6);
    let circle = std::f64::consts::PI * 0.01;
    close(area(&Shape::Circle { diameter: 0.2 }), circle * 0.75, 1e-12);
    let ring = Shape::Tube { diameter: 1.0, thickness: 1e-4 };
    close(area(&ring), std::f64::consts::PI * 1e-4 / 2.0, 2e-4);
}

/// A welded T of plates 100 × 10 and 10 × 90 mm, by hand: centroid 50.0 mm × 900 / 1900 below the middle of the
/// flange, S of the stem below it t e²/2.
#[test]
fn of_a_welded_t() {
    let shape = Shape::T { depth: 0.1, width: 0.1, web: 0.01, flange: 0.01, root_radius: None };
    let properties = shape.properties().expect("a section");
    let below = 0.095 - 0.05 * 900.0 / 1900.0;
    close(area(&shape), properties.i_y * 0.01 / (0.01 * below * below / 2.0), 1e-6);
}

/// For a doubly symmetric section S is half the plastic modulus: I_y t_w / (W_pl,y / 2), with the printed values
/// of IPE 270 and HE 100 B (ArcelorMittal tables, from memory).
#[test]
fn of_rolled_sections() {
    let of = |name: &str| {
        let properties = catalogue::section(name).expect("a section").properties;
        (properties.elastic_shear_area().expect("an outline"), properties.a_vz.expect("an area"))
    };
    for (name, i_y, t_w, w_pl) in
        [("IPE 270", 5790e-8, 6.6e-3, 484e-6), ("HEB 100", 449.5e-8, 6e-3, 104.2e-6)]
    {
        let (elastic, plastic) = of(name);
        // Fillets of the outline are drawn by chords, which lie outside them.
        close(elastic, i_y * t_w / (w_pl / 2.0), 4e-3);
        assert!(elastic <= i_y * t_w / (w_pl / 2.0) * 1.0005, "{name}: on the safe side");
        // The area of 6.2.6(3) is for plastic resistance, and would be on the unsafe side here.
        assert!(elastic < 0.75 * plastic, "{name}: {elastic} {plastic}");
    }
}
