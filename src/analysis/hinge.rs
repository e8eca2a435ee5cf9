//! Hinges by static condensation: the end of an element moves apart from its node in the released
//! freedoms, where only a spring (or nothing) joins the two.
//!
//! With end displacements e, node displacements n, released freedoms R with springs k and end forces
//! q = K e + h: q_R = k (n_R − e_R), so e = P n − A h_R with A = (K_RR + k)⁻¹ on R.

use nalgebra::{DMatrix, DVector};

use super::element::{Matrix12, Vector12};
use crate::model::Release;

/// A released internal force of an element: nothing holds what it lets go.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Loose {
    /// Index into the twelve end freedoms.
    pub(super) freedom: usize,
}

/// An element as its nodes see it.
#[derive(Clone, Debug)]
pub(super) struct Joined {
    pub(super) stiffness: Matrix12,
    element: Matrix12,
    /// End displacements from node displacements.
    motion: Matrix12,
    released: Vec<usize>,
    compliance: DMatrix<f64>,
}

/// Below this share of its own stiffness a pivot counts as lost; round-off leaves about 1e-16.
const LOST: f64 = 1e-11;

impl Joined {
    /// Joins an element to its nodes; `releases` for start and end.
    ///
    /// # Errors
    /// When the releases let the element itself move freely.
    pub(super) fn new(element: &Matrix12, releases: &[[Release; 6]; 2]) -> Result<Self, Loose> {
        let spring = |freedom: usize| match releases[freedom / 6][freedom % 6] {
            Release::Rigid => None,
            Release::Free => Some(0.0),
            Release::Spring(stiffness) => Some(stiffness),
        };
        let released: Vec<usize> = (0..12).filter(|k| spring(*k).is_some()).collect();
        let mut motion = Matrix12::identity();
        let mut joint = DMatrix::from_fn(released.len(), released.len(), |row, column| {
            element[(released[row], released[column])]
        });
        let springs: Vec<f64> = released.iter().map(|k| spring(*k).unwrap_or_default()).collect();
        for (row, stiffness) in springs.iter().enumerate() {
            joint[(row, row)] += stiffness;
        }
        let compliance = inverse(&joint).map_err(|row| Loose { freedom: released[row] })?;
        for (row, freedom) in released.iter().enumerate() {
            for column in 0..12 {
                let place = released.iter().position(|k| *k == column);
                motion[(*freedom, column)] = match place {
                    Some(other) => compliance[(row, other)] * springs[other],
                    None => -(0..released.len())
                        .map(|k| compliance[(row, k)] * element[(released[k], column)])
                        .sum::<f64>(),
                };
            }
        }
        let stiffness = element * motion;
        let stiffness = (stiffness + stiffness.transpose()) * 0.5;
        Ok(Self { stiffness, element: *element, motion, released, compliance })
    }

    /// Forces of the nodes on the element, from their displacements and its own held forces.
    pub(super) fn forces(&self, nodes: &Vector12, element: &Vector12) -> Vector12 {
        self.stiffness * nodes + self.held(element)
    }

    /// Forces that the nodes must give the element when they are held and its loads act.
    pub(super) fn held(&self, element: &Vector12) -> Vector12 {
        element + self.element * self.relaxed(element)
    }

    /// End displacements of the element from those of its nodes and its own held forces.
    pub(super) fn ends(&self, nodes: &Vector12, element: &Vector12) -> Vector12 {
        self.motion * nodes + self.relaxed(element)
    }

    fn relaxed(&self, held: &Vector12) -> Vector12 {
        let given =
            DVector::from_iterator(self.released.len(), self.released.iter().map(|k| held[*k]));
        let moved = &self.compliance * given;
        let mut out = Vector12::zeros();
        for (row, freedom) in self.released.iter().enumerate() {
            out[*freedom] = -moved[row];
        }
        out
    }
}

/// Inverse of a symmetric positive definite matrix, scaled to a unit diagonal first so that forces
/// and moments weigh alike; `Err` is the row whose pivot is lost.
fn inverse(matrix: &DMatrix<f64>) -> Result<DMatrix<f64>, usize> {
    let size = matrix.nrows();
    let scale: Vec<f64> = (0..size).map(|k| matrix[(k, k)].max(0.0).sqrt()).collect();
    if let Some(row) = scale.iter().position(|s| *s <= 0.0) {
        return Err(row);
    }
    let mut lower = DMatrix::from_fn(size, size, |r, c| matrix[(r, c)] / (scale[r] * scale[c]));
    for k in 0..size {
        for j in 0..k {
            let factor = lower[(k, j)];
            lower[(k, k)] -= factor * factor;
        }
        if lower[(k, k)] <= LOST {
            return Err(k);
        }
        lower[(k, k)] = lower[(k, k)].sqrt();
        for row in k + 1..size {
            for j in 0..k {
                let product = lower[(row, j)] * lower[(k, j)];
                lower[(row, k)] -= product;
            }
            lower[(row, k)] /= lower[(k, k)];
        }
    }
    let mut out = DMatrix::zeros(size, size);
    for column in 0..size {
        let mut x = vec![0.0; size];
        for row in 0..size {
            let mut value = if row == column { 1.0 } else { 0.0 };
            for j in 0..row {
                value -= lower[(row, j)] * x[j];
            }
            x[row] = value / lower[(row, row)];
        }
        for row in (0..size).rev() {
            for j in row + 1..size {
                x[row] -= lower[(j, row)] * x[j];
            }
            x[row] /= lower[(row, row)];
        }
        for row in 0..size {
            out[(row, column)] = x[row] / (scale[row] * scale[column]);
        }
    }
    Ok(out)
}
