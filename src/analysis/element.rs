//! One straight uniform element: a member's piece between two neighbouring nodes, in local axes.
//!
//! Order of end displacements: u v w θx θy θz at the start, then at the end. Internal forces: N V_y V_z
//! T M_y M_z with the signs of the design's conventions; on the +x face the force vector is
//! (N, −V_y, −V_z) and the moment vector (T, −M_y, M_z).
//!
//! Without loads the deflected shape is the cubic of Hermite (with shear areas, Timoshenko's exact
//! element): it is written here as the integral of the governing equations
//! dM_y/dx = V_z, M = E I (w″ + α ΔT/h), w′ = −θ_y − V_z/(G A_sz), and so on (see [`advance`]), and the
//! stiffness follows from the flexibility of that integral, coupled bending (I_yz) included.

use nalgebra::{Matrix2, Matrix6, SMatrix, SVector, Vector6};

use super::Polynomial;
use crate::model::{Material, STORED, Section};

/// Twelve by twelve, start then end.
pub(super) type Matrix12 = SMatrix<f64, 12, 12>;
/// Twelve end displacements or end forces.
pub(super) type Vector12 = SVector<f64, 12>;

/// Signs that turn internal forces into the force and moment vectors on the +x face.
pub(super) const FACE: [f64; 6] = [1.0, -1.0, -1.0, 1.0, -1.0, 1.0];

/// How a cross-section answers to internal forces.
#[derive(Clone, Debug)]
pub(super) struct Flexibility {
    /// 1/(E A).
    pub(super) axial: f64,
    /// 1/(G I_t).
    pub(super) torsion: f64,
    /// (κ_y, κ_z) from (M_z, M_y), κ_y = v″ and κ_z = w″.
    pub(super) bending: Matrix2<f64>,
    /// 1/(G A_s) along y and z; 0 where shear deformation does not count.
    pub(super) shear: [f64; 2],
}

impl Flexibility {
    /// Of a section in a material. `None` where the bending stiffness is not positive definite.
    pub(super) fn new(section: &Section, material: &Material) -> Option<Self> {
        let p = &section.properties;
        let stiffness = Matrix2::new(p.i_z, p.i_yz, p.i_yz, p.i_y) * material.e;
        let shear = |area: Option<f64>| area.map_or(0.0, |a| 1.0 / (material.g * a));
        Some(Self {
            axial: 1.0 / (material.e * p.area),
            torsion: 1.0 / (material.g * p.i_t),
            bending: stiffness.try_inverse()?,
            shear: [shear(p.a_sy), shear(p.a_sz)],
        })
    }
}

/// Distributed load on one stretch, local axes: intensity at its start and its slope, N/m and N/m².
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Intensity {
    pub(super) start: [f64; 3],
    pub(super) slope: [f64; 3],
}

/// Strains imposed by warming and lack of fit.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Imposed {
    /// Axial strain.
    pub(super) axial: f64,
    /// Curvatures of the free member, v″ and w″, 1/m: −α times the temperature gradient.
    pub(super) curvature: [f64; 2],
}

/// The twelve stored effects along a stretch from their values at its start.
///
/// # Panics
/// Never: all indices are constant.
pub(super) fn advance(
    start: &[f64; STORED],
    load: &Intensity,
    imposed: &Imposed,
    flexibility: &Flexibility,
) -> [Polynomial; STORED] {
    let [n, vy, vz, t, my, mz, u, v, w, tx, ty, tz] = *start;
    let (p, dp) = (load.start, load.slope);
    let force = |value: f64, axis: usize, sign: f64| {
        [value, sign * p[axis], sign * dp[axis] / 2.0, 0.0, 0.0, 0.0]
    };
    let axial = force(n, 0, -1.0);
    let shear_y = force(vy, 1, 1.0);
    let shear_z = force(vz, 2, 1.0);
    let moment_y = integral(my, &shear_z);
    let moment_z = integral(mz, &shear_y);

    let mut strain = scaled(&axial, flexibility.axial);
    strain[0] += imposed.axial;
    let b = &flexibility.bending;
    let mut curvature_y = sum(&scaled(&moment_z, b[(0, 0)]), &scaled(&moment_y, b[(0, 1)]));
    let mut curvature_z = sum(&scaled(&moment_z, b[(1, 0)]), &scaled(&moment_y, b[(1, 1)]));
    curvature_y[0] += imposed.curvature[0];
    curvature_z[0] += imposed.curvature[1];

    let theta_y = integral(ty, &scaled(&curvature_z, -1.0));
    let theta_z = integral(tz, &curvature_y);
    let slope_v = sum(&theta_z, &scaled(&shear_y, -flexibility.shear[0]));
    let slope_w = sum(&scaled(&theta_y, -1.0), &scaled(&shear_z, -flexibility.shear[1]));
    let twist = [tx, t * flexibility.torsion, 0.0, 0.0, 0.0, 0.0];
    [
        axial,
        shear_y,
        shear_z,
        [t, 0.0, 0.0, 0.0, 0.0, 0.0],
        moment_y,
        moment_z,
        integral(u, &strain),
        integral(v, &slope_v),
        integral(w, &slope_w),
        twist,
        theta_y,
        theta_z,
    ]
}

/// Start value plus the integral; the highest coefficient that occurs is that of s⁴.
fn integral(start: f64, derivative: &Polynomial) -> Polynomial {
    let mut out = [start, 0.0, 0.0, 0.0, 0.0, 0.0];
    for k in 1..6 {
        #[expect(clippy::cast_precision_loss, reason = "k is at most 5")]
        let divisor = k as f64;
        out[k] = derivative[k - 1] / divisor;
    }
    out
}

fn scaled(polynomial: &Polynomial, factor: f64) -> Polynomial {
    polynomial.map(|c| c * factor)
}

fn sum(a: &Polynomial, b: &Polynomial) -> Polynomial {
    std::array::from_fn(|k| a[k] + b[k])
}

/// Matrices of one element between its ends, before hinges.
#[derive(Clone, Debug)]
pub(super) struct Ends {
    pub(super) stiffness: Matrix12,
    /// Forces at the start from the relative displacement of the end: inverse flexibility.
    inverse: Matrix6<f64>,
    /// Rigid motion of the end from the start.
    rigid: Matrix6<f64>,
    /// Internal forces at the end from those at the start.
    carry: Matrix6<f64>,
}

/// What the loads of one case do to an element with both ends held.
#[derive(Clone, Copy, Debug)]
pub(super) struct Particular {
    /// Displacements of the end when the start is held and free of force.
    pub(super) displacement: Vector6<f64>,
    /// Internal forces at the end, likewise.
    pub(super) force: Vector6<f64>,
}

impl Ends {
    /// Of an element of this length, m. `None` where its flexibility cannot be inverted.
    pub(super) fn new(flexibility: &Flexibility, length: f64) -> Option<Self> {
        let mut flexible = Matrix6::zeros();
        let mut carry = Matrix6::zeros();
        let mut rigid = Matrix6::zeros();
        for k in 0..6 {
            let mut start = [0.0; STORED];
            start[k] = 1.0;
            let end = end_of(&start, flexibility, length);
            for row in 0..6 {
                carry[(row, k)] = end[row];
                flexible[(row, k)] = end[6 + row];
            }
            let mut start = [0.0; STORED];
            start[6 + k] = 1.0;
            let end = end_of(&start, flexibility, length);
            for row in 0..6 {
                rigid[(row, k)] = end[6 + row];
            }
        }
        let inverse = flexible.try_inverse()?;
        let face = Matrix6::from_diagonal(&Vector6::from(FACE));
        let start_from_end = -face * inverse;
        let end_from_end = face * carry * inverse;
        let mut stiffness = Matrix12::zeros();
        stiffness.fixed_view_mut::<6, 6>(0, 0).copy_from(&(-start_from_end * rigid));
        stiffness.fixed_view_mut::<6, 6>(0, 6).copy_from(&start_from_end);
        stiffness.fixed_view_mut::<6, 6>(6, 0).copy_from(&start_from_end.transpose());
        stiffness.fixed_view_mut::<6, 6>(6, 6).copy_from(&end_from_end);
        // Symmetric by reciprocity; the halves differ by round-off only.
        let stiffness = (stiffness + stiffness.transpose()) * 0.5;
        stiffness.iter().all(|c| c.is_finite()).then_some(Self { stiffness, inverse, rigid, carry })
    }

    /// End forces (on the element) that its loads cause with both ends held.
    pub(super) fn held(&self, particular: &Particular) -> Vector12 {
        let start = self.inverse * particular.displacement;
        let end = particular.force - self.carry * start;
        let mut forces = Vector12::zeros();
        for k in 0..6 {
            forces[k] = FACE[k] * start[k];
            forces[6 + k] = FACE[k] * end[k];
        }
        forces
    }

    /// All twelve effects at the start, from the end displacements and the loads.
    pub(super) fn start(&self, ends: &Vector12, particular: &Particular) -> [f64; STORED] {
        let first: Vector6<f64> = ends.fixed_rows::<6>(0).into();
        let last: Vector6<f64> = ends.fixed_rows::<6>(6).into();
        let force = self.inverse * (last - self.rigid * first - particular.displacement);
        std::array::from_fn(|k| if k < 6 { force[k] } else { first[k - 6] })
    }
}

fn end_of(start: &[f64; STORED], flexibility: &Flexibility, length: f64) -> [f64; STORED] {
    advance(start, &Intensity::default(), &Imposed::default(), flexibility)
        .map(|polynomial| super::evaluate(&polynomial, length))
}
