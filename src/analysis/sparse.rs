//! The sparse symmetric solver: one factorisation for all load cases.
//!
//! The matrix is scaled to a unit diagonal, so that forces and moments weigh alike in every test of
//! definiteness. Up to [`PORTABLE_LIMIT`] freedoms the simplicial kernel runs, whose last bits do not
//! depend on the processor's vector units.

use faer::dyn_stack::{MemBuffer, MemStack, StackReq};
use faer::linalg::cholesky::llt::factor::LltRegularization;
use faer::sparse::linalg::SupernodalThreshold;
use faer::sparse::linalg::amd;
use faer::sparse::linalg::cholesky::{
    CholeskySymbolicParams, LltRef, SymbolicCholesky, SymmetricOrdering,
    factorize_symbolic_cholesky,
};
use faer::sparse::{SparseColMat, Triplet};
use faer::{Conj, MatMut, Par, Side};

use super::Arithmetic;

/// Freedoms up to which the portable path is taken.
pub(super) const PORTABLE_LIMIT: usize = 3000;

/// Least eigenvalue of the scaled matrix that still counts as stiffness. Round-off of a mechanism
/// leaves less than 1e-14; a sound frame of a few thousand freedoms has more than 1e-11.
const LEAST: f64 = 1e-13;

/// Added to the scaled diagonal where the way in which a mechanism moves is looked for.
const SHIFT: f64 = 1e-7;

/// A factorised stiffness matrix.
#[derive(Debug)]
pub(super) struct Factor {
    symbolic: SymbolicCholesky<usize>,
    values: Vec<f64>,
    /// 1/√diagonal.
    scale: Vec<f64>,
    pub(super) arithmetic: Arithmetic,
}

/// Why there is no factor.
#[derive(Debug)]
pub(super) enum Singular {
    /// A mechanism: how it moves, unscaled freedoms.
    Mechanism(Vec<f64>),
    /// Too large, or numbers that are not finite.
    Unusable,
}

/// Entries of the upper triangle (row ≤ column), diagonal included; duplicates add up. In the given
/// order the symbolic analysis reads the upper triangle only, whatever side it is told.
pub(super) type Entries = Vec<Triplet<usize, usize, f64>>;

impl Factor {
    /// Factorises the symmetric matrix of these entries.
    ///
    /// # Errors
    /// When it is not positive definite beyond doubt.
    pub(super) fn new(size: usize, entries: &Entries) -> Result<Self, Singular> {
        let mut diagonal = vec![0.0; size];
        for entry in entries.iter().filter(|entry| entry.row == entry.col) {
            diagonal[entry.row] += entry.val;
        }
        if !entries.iter().all(|entry| entry.val.is_finite()) {
            return Err(Singular::Unusable);
        }
        if let Some(loose) = diagonal.iter().position(|d| *d <= 0.0) {
            let mut mode = vec![0.0; size];
            mode[loose] = 1.0;
            return Err(Singular::Mechanism(mode));
        }
        let scale: Vec<f64> = diagonal.iter().map(|d| 1.0 / d.sqrt()).collect();
        let scaled = |shift: f64| -> Entries {
            let scaled = |entry: &Triplet<usize, usize, f64>| {
                Triplet::new(entry.row, entry.col, entry.val * scale[entry.row] * scale[entry.col])
            };
            let shifts = (0..size).filter(|_| shift > 0.0).map(|k| Triplet::new(k, k, shift));
            entries.iter().map(scaled).chain(shifts).collect()
        };
        let arithmetic =
            if size <= PORTABLE_LIMIT { Arithmetic::Portable } else { Arithmetic::Fast };
        if let Some((symbolic, values)) = factorise(size, &scaled(0.0), arithmetic) {
            let factor = Self { symbolic, values, scale: scale.clone(), arithmetic };
            if factor.least_eigenvalue() > LEAST {
                return Ok(factor);
            }
        }
        let shifted = scaled(SHIFT);
        Err(mechanism(size, &shifted, scale))
    }

    /// Solves for all columns in place; column-major.
    pub(super) fn solve(&self, columns: &mut [f64]) {
        let size = self.scale.len();
        for column in columns.chunks_mut(size) {
            for (value, scale) in column.iter_mut().zip(&self.scale) {
                *value *= scale;
            }
        }
        self.solve_scaled(columns);
        for column in columns.chunks_mut(size) {
            for (value, scale) in column.iter_mut().zip(&self.scale) {
                *value *= scale;
            }
        }
    }

    fn solve_scaled(&self, columns: &mut [f64]) {
        let size = self.scale.len();
        let count = columns.len() / size;
        let mut memory =
            MemBuffer::new(self.symbolic.solve_in_place_scratch::<f64>(count, Par::Seq));
        LltRef::<'_, usize, f64>::new(&self.symbolic, &self.values).solve_in_place_with_conj(
            Conj::No,
            MatMut::from_column_major_slice_mut(columns, size, count),
            Par::Seq,
            MemStack::new(&mut memory),
        );
    }

    /// Estimate of the least eigenvalue of the scaled matrix by inverse iteration.
    fn least_eigenvalue(&self) -> f64 {
        let mut vector = start_vector(self.scale.len());
        let mut growth = 0.0;
        for _ in 0..4 {
            self.solve_scaled(&mut vector);
            growth = normalise(&mut vector);
            if !growth.is_finite() {
                return 0.0;
            }
        }
        1.0 / growth
    }
}

/// The order in which to number the nodes of a graph so that the factor stays sparse.
/// `edges` join node indices. Falls back on the given order where none can be found.
pub(super) fn node_order(count: usize, edges: &[[usize; 2]]) -> Vec<usize> {
    let mut entries: Entries = (0..count).map(|k| Triplet::new(k, k, 1.0)).collect();
    entries.extend(edges.iter().map(|[a, b]| Triplet::new(*a.min(b), *a.max(b), 1.0)));
    let given = || (0..count).collect();
    let Ok(graph) = SparseColMat::try_new_from_triplets(count, count, &entries) else {
        return given();
    };
    let nonzeros = graph.compute_nnz();
    let mut memory = MemBuffer::new(amd::order_scratch::<usize>(count, nonzeros));
    let (mut order, mut inverse) = (vec![0; count], vec![0; count]);
    match amd::order(
        &mut order,
        &mut inverse,
        graph.symbolic(),
        amd::Control::default(),
        MemStack::new(&mut memory),
    ) {
        Ok(_) => order,
        Err(_) => given(),
    }
}

fn factorise(
    size: usize,
    entries: &Entries,
    arithmetic: Arithmetic,
) -> Option<(SymbolicCholesky<usize>, Vec<f64>)> {
    let matrix = SparseColMat::try_new_from_triplets(size, size, entries).ok()?;
    let threshold = match arithmetic {
        Arithmetic::Portable => SupernodalThreshold::FORCE_SIMPLICIAL,
        Arithmetic::Fast => SupernodalThreshold::AUTO,
    };
    let symbolic = factorize_symbolic_cholesky(
        matrix.symbolic(),
        Side::Upper,
        SymmetricOrdering::Identity,
        CholeskySymbolicParams {
            supernodal_flop_ratio_threshold: threshold,
            ..CholeskySymbolicParams::default()
        },
    )
    .ok()?;
    let mut values = vec![0.0; symbolic.len_val()];
    let scratch: StackReq =
        symbolic.factorize_numeric_llt_scratch::<f64>(Par::Seq, faer::Spec::default());
    let mut memory = MemBuffer::new(scratch);
    symbolic
        .factorize_numeric_llt(
            &mut values,
            matrix.as_ref(),
            Side::Upper,
            LltRegularization::default(),
            Par::Seq,
            MemStack::new(&mut memory),
            faer::Spec::default(),
        )
        .ok()?;
    Some((symbolic, values))
}

/// How a singular matrix moves: inverse iteration on the shifted matrix.
fn mechanism(size: usize, shifted: &Entries, scale: Vec<f64>) -> Singular {
    let Some((symbolic, values)) = factorise(size, shifted, Arithmetic::Portable) else {
        return Singular::Unusable;
    };
    let factor = Factor { symbolic, values, scale, arithmetic: Arithmetic::Portable };
    let mut vector = start_vector(size);
    for _ in 0..8 {
        factor.solve_scaled(&mut vector);
        if !normalise(&mut vector).is_finite() {
            return Singular::Unusable;
        }
    }
    Singular::Mechanism(vector.iter().zip(&factor.scale).map(|(v, s)| v * s).collect())
}

/// A fixed vector with no symmetry, so that it leans on every mode.
fn start_vector(size: usize) -> Vec<f64> {
    let mut state = 1_u32;
    let mut vector: Vec<f64> = (0..size)
        .map(|_| {
            state = state.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
            f64::from(state >> 8) / f64::from(1_u32 << 24) + 0.1
        })
        .collect();
    normalise(&mut vector);
    vector
}

fn normalise(vector: &mut [f64]) -> f64 {
    let length = vector.iter().map(|v| v * v).sum::<f64>().sqrt();
    if length > 0.0 {
        for value in vector {
            *value /= length;
        }
    }
    length
}
