//! Sparse Cholesky factorisation of a symmetric positive definite matrix, and its solves.

use faer::dyn_stack::{MemBuffer, MemStack};
use faer::linalg::cholesky::llt::factor::LltRegularization;
use faer::sparse::linalg::cholesky::{
    CholeskySymbolicParams, LltRef, SymbolicCholesky, SymmetricOrdering,
    factorize_symbolic_cholesky,
};
use faer::sparse::{SparseColMatRef, SymbolicSparseColMatRef};
use faer::{Conj, MatMut, Par, Side};
use sprs::CsMat;

use crate::solution::SolveError;

/// A factorised matrix.
#[derive(Debug)]
pub struct Factor {
    symbolic: SymbolicCholesky<usize>,
    values: Vec<f64>,
}

fn out_of_memory() -> SolveError {
    SolveError::Factor("out of memory".into())
}

impl Factor {
    /// Factorises `upper`, the upper triangle in compressed columns, unknowns in elimination order.
    ///
    /// # Errors
    /// If memory runs out or the matrix is not positive definite.
    pub fn new(upper: &CsMat<f64>) -> Result<Self, SolveError> {
        let n = upper.cols();
        let indptr = upper.indptr();
        let pattern =
            SymbolicSparseColMatRef::new_checked(n, n, indptr.raw_storage(), None, upper.indices());
        let symbolic = factorize_symbolic_cholesky(
            pattern,
            Side::Upper,
            SymmetricOrdering::Identity,
            CholeskySymbolicParams::default(),
        )
        .map_err(|_| out_of_memory())?;
        let mut values = vec![0.0; symbolic.len_val()];
        let scratch =
            symbolic.factorize_numeric_llt_scratch::<f64>(Par::Seq, faer::Spec::default());
        let mut memory = MemBuffer::try_new(scratch).map_err(|_| out_of_memory())?;
        symbolic
            .factorize_numeric_llt(
                &mut values,
                SparseColMatRef::new(pattern, upper.data()),
                Side::Upper,
                LltRegularization::default(),
                Par::Seq,
                MemStack::new(&mut memory),
                faer::Spec::default(),
            )
            .map_err(|e| {
                SolveError::Factor(format!("the matrix is not positive definite: {e:?}"))
            })?;
        Ok(Self { symbolic, values })
    }

    /// Solves for every column at once, in place.
    ///
    /// # Errors
    /// If memory runs out.
    pub fn solve(&self, columns: &mut [Vec<f64>]) -> Result<(), SolveError> {
        let (n, k) = (self.symbolic.nrows(), columns.len());
        let mut block: Vec<f64> = columns.iter().flatten().copied().collect();
        let mut memory =
            MemBuffer::try_new(self.symbolic.solve_in_place_scratch::<f64>(k, Par::Seq))
                .map_err(|_| out_of_memory())?;
        LltRef::new(&self.symbolic, &self.values).solve_in_place_with_conj(
            Conj::No,
            MatMut::from_column_major_slice_mut(&mut block, n, k),
            Par::Seq,
            MemStack::new(&mut memory),
        );
        for (column, solved) in columns.iter_mut().zip(block.chunks_exact(n.max(1))) {
            column.copy_from_slice(solved);
        }
        Ok(())
    }
}
