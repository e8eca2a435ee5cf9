//! Integrals over a cross-section from its edges, by Green's theorem.
//!
//! With ζ = z - level, the moments of the part above a level are ∫ ζⁿ dA = -∮ ζⁿ⁺¹ / (n + 1) dy over
//! the edges above it: the cut itself lies at ζ = 0 and adds nothing. Arcs are integrated in closed
//! form, so fillets are exact. Everything about z (products, other axes) comes from turning the edges.

use std::f64::consts::PI;

use super::edge::Edge;
use super::{Outline, Properties};

/// Halvings of the depth in the search for the plastic neutral axis; the plastic modulus is
/// stationary there, so the error is far below round-off.
const HALVINGS: usize = 48;

/// Moments of the part of a section above a level: ∫ dA, ∫ ζ dA, ∫ ζ² dA.
#[derive(Clone, Copy, Debug, Default)]
struct Moments {
    area: f64,
    first: f64,
    second: f64,
}

/// What a section is about one of its axes.
struct About {
    area: f64,
    centroid: f64,
    /// Second moment about the centroid.
    second: f64,
    plastic: f64,
    /// Distances from the centroid to the least and greatest coordinate.
    below: f64,
    above: f64,
}

/// Area, second moments, moduli, fibres and outline of a section with these loops, about its centroid.
pub(super) fn properties(loops: &[Vec<Edge>]) -> Properties {
    let edges: Vec<Edge> = loops.iter().flatten().copied().collect();
    let turned: Vec<Edge> = edges.iter().map(Edge::quarter_turned).collect();
    let diagonal: Vec<Edge> = edges.iter().map(Edge::eighth_turned).collect();
    let (y, z) = (about(&edges), about(&turned));
    // Along the diagonal u = (y + z)/√2: ∫ u² = (∫ y² + ∫ z²)/2 + ∫ y z.
    let product = second_moment(&diagonal) - (y.second + z.second) / 2.0;
    let outline: Outline = loops
        .iter()
        .map(|edges| {
            edges
                .iter()
                .flat_map(Edge::points)
                .map(|[a, b]| [a - z.centroid, b - y.centroid])
                .collect()
        })
        .collect();
    Properties {
        area: y.area,
        i_y: y.second,
        i_z: z.second,
        // Below this a section is symmetric and the rest is round-off.
        i_yz: if product.abs() > 1e-12 * (y.second + z.second) { product } else { 0.0 },
        w_el_y: Some(y.second / y.above.max(y.below)),
        w_el_z: Some(z.second / z.above.max(z.below)),
        w_pl_y: Some(y.plastic),
        w_pl_z: Some(z.plastic),
        z_top: Some(y.above),
        z_bottom: Some(y.below),
        y_plus: Some(z.above),
        y_minus: Some(z.below),
        outline,
        ..Properties::default()
    }
}

fn about(edges: &[Edge]) -> About {
    let (low, high) = range(edges);
    let whole = above(edges, low);
    let centroid = low + whole.first / whole.area;
    // The plastic neutral axis halves the area.
    let mut between = (low, high);
    for _ in 0..HALVINGS {
        let middle = (between.0 + between.1) / 2.0;
        if above(edges, middle).area > whole.area / 2.0 {
            between.0 = middle;
        } else {
            between.1 = middle;
        }
    }
    let neutral = (between.0 + between.1) / 2.0;
    // ∫ |ζ| dA = 2 ∫ over the part above - ∫ ζ dA.
    let plastic = 2.0 * above(edges, neutral).first - whole.area * (centroid - neutral);
    About {
        area: whole.area,
        centroid,
        second: second(&whole),
        plastic,
        below: centroid - low,
        above: high - centroid,
    }
}

/// Second moment about the centroid.
fn second_moment(edges: &[Edge]) -> f64 {
    second(&above(edges, range(edges).0))
}

fn second(whole: &Moments) -> f64 {
    whole.second - whole.first * whole.first / whole.area
}

fn range(edges: &[Edge]) -> (f64, f64) {
    edges.iter().map(Edge::range).fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), edge| {
        (low.min(edge[0]), high.max(edge[1]))
    })
}

fn above(edges: &[Edge], level: f64) -> Moments {
    let mut sum = Moments::default();
    for edge in edges {
        match *edge {
            Edge::Line(a, b) => sum.add_line(a[0], a[1] - level, b[0], b[1] - level),
            Edge::Arc { centre, radius, from, to } => {
                sum.add_arc(centre[1] - level, radius, from, to);
            }
        }
    }
    sum
}

impl Moments {
    fn add_line(&mut self, mut y1: f64, mut z1: f64, mut y2: f64, mut z2: f64) {
        if z1 <= 0.0 && z2 <= 0.0 {
            return;
        }
        if z1 < 0.0 {
            y1 -= z1 * (y2 - y1) / (z2 - z1);
            z1 = 0.0;
        } else if z2 < 0.0 {
            y2 -= z2 * (y2 - y1) / (z2 - z1);
            z2 = 0.0;
        }
        let run = y2 - y1;
        self.area -= run * (z1 + z2) / 2.0;
        self.first -= run * (z1 * z1 + z1 * z2 + z2 * z2) / 6.0;
        self.second -= run * (z1 + z2) * (z1 * z1 + z2 * z2) / 12.0;
    }

    /// An arc about a centre at height `h` above the level.
    fn add_arc(&mut self, h: f64, radius: f64, from: f64, to: f64) {
        if h >= radius {
            return self.add_piece(h, radius, from, to);
        }
        if h <= -radius {
            return;
        }
        // The arc is above the level where sin θ > -h/radius: between `rise` and π - `rise`.
        let rise = libm::asin(-h / radius);
        let (low, high) = (from.min(to), from.max(to));
        let mut turn = libm::floor((low - (PI - rise)) / (2.0 * PI)) * 2.0 * PI;
        while rise + turn < high {
            let (enter, leave) = ((rise + turn).max(low), (PI - rise + turn).min(high));
            if enter < leave {
                let (first, last) = if from < to { (enter, leave) } else { (leave, enter) };
                self.add_piece(h, radius, first, last);
            }
            turn += 2.0 * PI;
        }
    }

    /// A piece of arc wholly above the level: ζ = h + r sin θ, dy = -r sin θ dθ.
    fn add_piece(&mut self, h: f64, r: f64, from: f64, to: f64) {
        let (s1, c1, s2, c2) = (libm::sin(from), libm::cos(from), libm::sin(to), libm::cos(to));
        // ∫ sinᵏ θ dθ for k = 1 to 4.
        let one = c1 - c2;
        let two = (to - from - s2 * c2 + s1 * c1) / 2.0;
        let three = one + (c2 * c2 * c2 - c1 * c1 * c1) / 3.0;
        let four = (3.0 * two - s2 * s2 * s2 * c2 + s1 * s1 * s1 * c1) / 4.0;
        self.area += r * (h * one + r * two);
        self.first += r / 2.0 * (h * h * one + 2.0 * h * r * two + r * r * three);
        self.second += r / 3.0
            * (h * h * h * one
                + 3.0 * h * h * r * two
                + 3.0 * h * r * r * three
                + r * r * r * four);
    }
}
