//! The Jacobian's storage as diffsol's `Matrix`.
//!
//! diffsol forms three matrices: the identity (there is no mass matrix), the
//! Jacobian J, and I − c J, which the Newton iteration solves with. The first is
//! a plain diagonal, the others are [`Blocks`]. A fourth form holds whole columns
//! for the derivatives with respect to parameters.
//!
//! diffsol's trait also serves mass matrices with algebraic unknowns, which this
//! project does without; those methods are never called.

use diffsol::{Matrix, MatrixCommon, NalgebraContext, NalgebraVec, Scale, Vector};
use diffsol_la::{LaError, MatrixSparsity, MatrixSparsityRef};
use std::iter::empty;
use std::ops::Mul;

use crate::discretise::blocks::{Blocks, Coupling, Shape};

type Index = <NalgebraVec<f64> as Vector>::Index;

const ONLY_WITH_MASS: &str = "only mass matrices with algebraic unknowns need this";

/// The matrices diffsol handles for this project.
#[derive(Clone, Debug)]
pub enum BlockTridiagonal {
    /// diffsol's identity, all entries of its diagonal.
    Diagonal(Vec<f64>),
    /// Whole columns, `n_rows` values each: derivatives with respect to parameters.
    Columns {
        /// Length of the state vector.
        n_rows: usize,
        /// One column after the other.
        values: Vec<f64>,
    },
    /// A Jacobian, or the matrix of an implicit step.
    Blocks(Blocks),
}

impl BlockTridiagonal {
    /// The blocks to write a Jacobian into.
    ///
    /// diffsol makes the Jacobian from the pattern given to it, so this is
    /// `Some` wherever a pattern was given.
    pub fn as_blocks_mut(&mut self) -> Option<&mut Blocks> {
        match self {
            Self::Blocks(blocks) => Some(blocks),
            Self::Diagonal(_) | Self::Columns { .. } => None,
        }
    }

    /// The blocks of a Jacobian or of the matrix of an implicit step.
    pub fn as_blocks(&self) -> Option<&Blocks> {
        match self {
            Self::Blocks(blocks) => Some(blocks),
            Self::Diagonal(_) | Self::Columns { .. } => None,
        }
    }
}

/// Sparsity pattern of the Jacobian: its shape says it all.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Pattern(pub Shape);

/// [`Pattern`] where diffsol wants a reference.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct PatternRef(pub Shape);

impl MatrixSparsity<BlockTridiagonal> for Pattern {
    fn nrows(&self) -> usize {
        self.0.n_states()
    }
    fn ncols(&self) -> usize {
        self.0.n_states()
    }
    fn is_sparse() -> bool {
        true
    }
    fn try_from_indices(_: usize, _: usize, _: Vec<(usize, usize)>) -> Result<Self, LaError> {
        Err(LaError::Other(ONLY_WITH_MASS.into()))
    }
    fn indices(&self) -> Vec<(usize, usize)> {
        Vec::new()
    }
    /// The pattern of the other: the first is always the identity's, which all blocks contain.
    fn union(self, other: PatternRef) -> Result<Self, LaError> {
        Ok(Self(other.0))
    }
    fn new_diagonal(n: usize) -> Self {
        Self(Shape { n_tubes: n, n_vars: 1, n_tail: 0, coupling: Coupling::Diagonal })
    }
    fn as_ref(&self) -> PatternRef {
        PatternRef(self.0)
    }
    fn get_index(&self, _: &[(usize, usize)], _: NalgebraContext) -> Index {
        unreachable!("{ONLY_WITH_MASS}")
    }
}

impl MatrixSparsityRef<'_, BlockTridiagonal> for PatternRef {
    fn nrows(&self) -> usize {
        self.0.n_states()
    }
    fn ncols(&self) -> usize {
        self.0.n_states()
    }
    fn is_sparse() -> bool {
        true
    }
    fn indices(&self) -> Vec<(usize, usize)> {
        Vec::new()
    }
    fn to_owned(&self) -> Pattern {
        Pattern(self.0)
    }
    fn split(&self, _: &Index) -> [(Pattern, Index); 4] {
        unreachable!("{ONLY_WITH_MASS}")
    }
}

impl MatrixCommon for BlockTridiagonal {
    type V = NalgebraVec<f64>;
    type T = f64;
    type C = NalgebraContext;
    type Inner = Self;

    fn nrows(&self) -> usize {
        match self {
            Self::Diagonal(diagonal) => diagonal.len(),
            Self::Columns { n_rows, .. } => *n_rows,
            Self::Blocks(blocks) => blocks.shape().n_states(),
        }
    }
    fn ncols(&self) -> usize {
        match self {
            Self::Columns { n_rows, values } => values.len().checked_div(*n_rows).unwrap_or(0),
            Self::Diagonal(_) | Self::Blocks(_) => self.nrows(),
        }
    }
    fn inner(&self) -> &Self {
        self
    }
}

impl Mul<Scale<f64>> for BlockTridiagonal {
    type Output = Self;
    fn mul(self, _: Scale<f64>) -> Self {
        unreachable!("{ONLY_WITH_MASS}")
    }
}

impl Mul<Scale<f64>> for &BlockTridiagonal {
    type Output = BlockTridiagonal;
    fn mul(self, _: Scale<f64>) -> BlockTridiagonal {
        unreachable!("{ONLY_WITH_MASS}")
    }
}

impl Matrix for BlockTridiagonal {
    type Sparsity = Pattern;
    type SparsityRef<'a> = PatternRef;

    /// Blocks when there is a pattern, whole columns otherwise.
    fn new_from_sparsity(n_rows: usize, n_columns: usize, pattern: Option<Pattern>, _: NalgebraContext) -> Self {
        match pattern {
            Some(Pattern(shape)) => Self::Blocks(Blocks::zeros(shape)),
            None => Self::Columns { n_rows, values: vec![0.0; n_rows * n_columns] },
        }
    }
    fn zeros(n_rows: usize, n_columns: usize, context: NalgebraContext) -> Self {
        Self::new_from_sparsity(n_rows, n_columns, None, context)
    }
    fn from_diagonal(v: &NalgebraVec<f64>) -> Self {
        Self::Diagonal(v.batch_as_slice(0).to_vec())
    }
    /// `self = I + beta · jacobian`; `identity` is the one diffsol made by [`Self::from_diagonal`].
    fn scale_add_and_assign(&mut self, identity: &Self, beta: f64, jacobian: &Self) {
        match (self, identity, jacobian) {
            (Self::Blocks(matrix), Self::Diagonal(_), Self::Blocks(jacobian)) => {
                matrix.assign_identity_plus(beta, jacobian);
            }
            _ => unreachable!("{ONLY_WITH_MASS}"),
        }
    }
    fn set_column(&mut self, column: usize, v: &NalgebraVec<f64>) {
        match self {
            Self::Columns { n_rows, values } => {
                values[column * *n_rows..][..*n_rows].copy_from_slice(v.batch_as_slice(0));
            }
            Self::Diagonal(_) | Self::Blocks(_) => unreachable!("only parameters set columns"),
        }
    }
    /// Lane `j` of `v` grows by column `j`.
    fn add_columns_to_batched_vector(&self, v: &mut NalgebraVec<f64>) {
        match self {
            Self::Columns { n_rows, values } => {
                for (lane, column) in values.chunks_exact((*n_rows).max(1)).enumerate() {
                    let lane = v.batch_as_mut_slice(lane).iter_mut();
                    lane.zip(column).for_each(|(v, column)| *v += column);
                }
            }
            Self::Diagonal(_) | Self::Blocks(_) => unreachable!("only parameters add columns"),
        }
    }
    fn copy_from(&mut self, other: &Self) {
        self.clone_from(other);
    }
    fn is_sparse() -> bool {
        true
    }
    fn sparsity(&self) -> Option<PatternRef> {
        self.as_blocks().map(|blocks| PatternRef(blocks.shape()))
    }
    fn inner_mut(&mut self) -> &mut Self {
        self
    }
    fn context(&self) -> &NalgebraContext {
        unreachable!("{ONLY_WITH_MASS}")
    }
    fn partition_indices_by_zero_diagonal(&self) -> (Index, Index) {
        unreachable!("{ONLY_WITH_MASS}")
    }
    fn gemv(&self, _: f64, _: &NalgebraVec<f64>, _: f64, _: &mut NalgebraVec<f64>) {
        unreachable!("{ONLY_WITH_MASS}")
    }
    fn add_column_to_vector(&self, _: usize, _: &mut NalgebraVec<f64>) {
        unreachable!("{ONLY_WITH_MASS}")
    }
    fn set_data_with_indices(&mut self, _: &Index, _: &Index, _: &NalgebraVec<f64>) {
        unreachable!("{ONLY_WITH_MASS}")
    }
    fn gather(&mut self, _: &Self, _: &Index) {
        unreachable!("{ONLY_WITH_MASS}")
    }
    fn triplet_iter(&self) -> (impl Iterator<Item = (usize, usize)> + '_, impl Iterator<Item = f64> + '_) {
        (empty(), empty())
    }
    fn try_from_triplets(
        _: usize,
        _: usize,
        _: Vec<(usize, usize)>,
        _: Vec<f64>,
        _: NalgebraContext,
    ) -> Result<Self, LaError> {
        Err(LaError::Other(ONLY_WITH_MASS.into()))
    }
}

#[cfg(test)]
mod tests {
    use super::super::block_thomas::BlockThomas;
    use super::*;
    use diffsol::*;
    use diffsol_la::LinearSolver;

    type V = NalgebraVec<f64>;

    #[test]
    fn matrix_of_a_step_is_identity_plus_scaled_jacobian_in_every_entry() {
        for coupling in [Coupling::Diagonal, Coupling::Full] {
            let shape = Shape { n_tubes: 2, n_vars: 2, n_tail: 2, coupling };
            let context = NalgebraContext::default();
            let identity = BlockTridiagonal::from_diagonal(&V::from_element(6, 1.0, context));
            let pattern = Pattern::new_diagonal(6).union(Pattern(shape).as_ref()).unwrap();
            let mut jacobian = BlockTridiagonal::new_from_sparsity(6, 6, Some(pattern), context);
            let mut matrix = jacobian.clone();
            assert_eq!((matrix.nrows(), matrix.ncols()), (6, 6));
            // left over from an earlier Jacobian
            matrix.as_blocks_mut().unwrap().tail_row_mut(0).fill(7.0);
            let blocks = jacobian.as_blocks_mut().unwrap();
            blocks.diagonal_block_mut(1).copy_from_slice(&[1.0, 2.0, 3.0, 4.0]);
            blocks.upper_mut(0).fill(5.0);
            blocks.lower_mut(1).fill(6.0);
            blocks.tail_tube_mut(1, 1).fill(8.0);
            matrix.scale_add_and_assign(&identity, -0.25, &jacobian);
            for k in 0..6 {
                let (mut unit, mut of_matrix, mut of_jacobian) = ([0.0; 6], [0.0; 6], [0.0; 6]);
                unit[k] = 1.0;
                matrix.as_blocks().unwrap().multiply(&unit, &mut of_matrix);
                jacobian.as_blocks().unwrap().multiply(&unit, &mut of_jacobian);
                let expected: [f64; 6] = std::array::from_fn(|r| unit[r] - 0.25 * of_jacobian[r]);
                assert_eq!(of_matrix, expected);
            }
        }
    }

    #[test]
    fn parameter_columns_are_added_lane_by_lane() {
        let context = NalgebraContext::default();
        let mut columns = BlockTridiagonal::new_from_sparsity(2, 3, None, context);
        columns.set_column(1, &V::from_vec(vec![2.0, 3.0], context));
        let mut lanes = V::from_element(2, 1.0, NalgebraContext::with_nbatch(3));
        columns.add_columns_to_batched_vector(&mut lanes);
        let lanes = [0, 1, 2].map(|lane| lanes.batch_as_slice(lane).to_vec());
        assert_eq!(lanes, [[1.0, 1.0], [3.0, 4.0], [1.0, 1.0]]);
        assert_eq!((columns.nrows(), columns.ncols()), (2, 3));
    }

    /// Diffusion between tubes of unlike area, and reactions from variable c to r at a
    /// given rate, which together keep Σ area · mass · amount.
    fn keeping_sums(
        shape: Shape,
        area: fn(usize) -> f64,
        mass: fn(usize) -> f64,
        rate: fn(usize, usize) -> f64,
    ) -> Blocks {
        let (n, mut j) = (shape.n_vars, Blocks::zeros(shape));
        for i in 0..shape.n_tubes {
            let block = j.diagonal_block_mut(i);
            for (r, c) in (0..n * n).map(|k| (k % n, k / n)).filter(|(r, c)| r != c) {
                block[c * n + r] += rate(r, c) / mass(r);
                block[c * (n + 1)] -= rate(r, c) / mass(c);
            }
        }
        for f in 1..shape.n_tubes {
            for k in 0..shape.n_coupling_values() {
                let full = shape.coupling == Coupling::Full;
                let (r, c) = if full { (k % n, k / n) } else { (k, k) };
                let flow = if r == c { MIXING } else { 1.0 / (1 + k) as f64 };
                let (outside, inside) = (flow / area(f), flow / area(f - 1));
                j.lower_mut(f)[k] = outside;
                j.upper_mut(f - 1)[k] = inside;
                j.diagonal_block_mut(f)[c * n + r] -= outside;
                j.diagonal_block_mut(f - 1)[c * n + r] -= inside;
            }
        }
        j
    }

    #[test]
    fn weighted_sums_that_the_jacobian_keeps_are_kept_by_the_solve() {
        let area = |i: usize| 1.0 + (i as f64).sin().abs();
        let mass = |k: usize| 2.5f64.powi(k as i32 % 5 - 2);
        let rate = |r, c| 5.0 + (3 * r + 5 * c) as f64 % 7.0;
        for k in 0..4 * 2 * 14 {
            let coupling = [Coupling::Diagonal, Coupling::Full][k % 2];
            let (n_tubes, n_vars) = ([1, 2, 3, 40][k / 2 % 4], 1 + k / 8);
            let shape = Shape { n_tubes, n_vars, n_tail: 0, coupling };
            let mut m = Blocks::zeros(shape);
            m.assign_identity_plus(-0.7, &keeping_sums(shape, area, mass, rate));
            let b = (0..shape.n_states()).map(|k| 1.0 + 0.5 * (k as f64).sin());
            let b = V::from_vec(b.collect(), NalgebraContext::default());
            let total = |v: &V| -> f64 {
                let weight = |k: usize| area(k / n_vars) * mass(k % n_vars);
                (0..).zip(v.batch_as_slice(0)).map(|(k, v)| weight(k) * v).sum()
            };
            let drift = total(&BlockThomas::from(m).solve(&b).unwrap()) / total(&b) - 1.0;
            assert!(drift.abs() < 1e-13, "{shape:?}: {drift}");
        }
    }

    const N: usize = 20;
    const MIXING: f64 = 20.0;
    const RATE: f64 = 1.5;

    /// dy/dz = J y: in tubes of one area a becomes b, both diffuse, the tail counts what became.
    struct Decay(Blocks, NalgebraContext);

    /// a₀ + 100, which never vanishes, and b₀ − 1, which does.
    struct Limits<'a>(&'a Decay);

    /// The solution, whose deviation from the mean is the slowest mode of diffusion.
    fn exact(z: f64) -> Vec<f64> {
        let (left, angle) = ((-RATE * z).exp(), std::f64::consts::PI / N as f64);
        let fade = (-2.0 * MIXING * (1.0 - angle.cos()) * z).exp();
        let sum = |i: usize| 2.0 + fade * (angle * (i as f64 + 0.5)).cos();
        let tubes = (0..N).flat_map(|i| [left * sum(i), (1.0 - left) * sum(i)]);
        tubes.chain([2.0 * N as f64 * (1.0 - left)]).collect()
    }

    impl Op for Decay {
        type T = f64;
        type V = V;
        type M = BlockTridiagonal;
        type C = NalgebraContext;
        fn context(&self) -> &NalgebraContext {
            &self.1
        }
        fn nstates(&self) -> usize {
            self.0.shape().n_states()
        }
        fn nout(&self) -> usize {
            self.nstates()
        }
        fn nparams(&self) -> usize {
            0
        }
    }

    impl NonLinearOp for Decay {
        fn call_inplace(&self, y: &V, _z: f64, dy_dz: &mut V) {
            self.0.multiply(y.batch_as_slice(0), dy_dz.batch_as_mut_slice(0));
        }
    }

    impl NonLinearOpJacobian for Decay {
        fn jac_mul_inplace(&self, _y: &V, z: f64, v: &V, out: &mut V) {
            NonLinearOp::call_inplace(self, v, z, out);
        }
        fn jacobian_inplace(&self, _y: &V, _z: f64, j: &mut BlockTridiagonal) {
            *j = BlockTridiagonal::Blocks(self.0.clone());
        }
        fn jacobian_sparsity(&self) -> Option<Pattern> {
            Some(Pattern(self.0.shape()))
        }
    }

    /// The state at the inlet.
    impl ConstantOp for Decay {
        fn call_inplace(&self, z: f64, y: &mut V) {
            y.batch_as_mut_slice(0).copy_from_slice(&exact(z));
        }
    }

    impl Op for Limits<'_> {
        type T = f64;
        type V = V;
        type M = BlockTridiagonal;
        type C = NalgebraContext;
        fn context(&self) -> &NalgebraContext {
            &self.0.1
        }
        fn nstates(&self) -> usize {
            self.0.nstates()
        }
        fn nout(&self) -> usize {
            2
        }
        fn nparams(&self) -> usize {
            0
        }
    }

    impl NonLinearOp for Limits<'_> {
        fn call_inplace(&self, y: &V, _z: f64, margins: &mut V) {
            let y = y.batch_as_slice(0);
            margins.batch_as_mut_slice(0).copy_from_slice(&[y[0] + 100.0, y[1] - 1.0]);
        }
    }

    type Absent<'a> = ParameterisedOp<'a, UnitCallable<BlockTridiagonal>>;

    impl<'a> OdeEquationsRef<'a> for Decay {
        type Rhs = &'a Self;
        type Init = &'a Self;
        type Root = Limits<'a>;
        type Mass = Absent<'a>;
        type Out = Absent<'a>;
        type Reset = Absent<'a>;
    }

    impl OdeEquations for Decay {
        fn rhs(&self) -> &Self {
            self
        }
        fn init(&self) -> &Self {
            self
        }
        fn root(&self) -> Option<Limits<'_>> {
            Some(Limits(self))
        }
        fn mass(&self) -> Option<Absent<'_>> {
            None
        }
        fn set_params(&mut self, _: &V) {}
        fn get_params(&self, _: &mut V) {}
    }

    #[test]
    fn diffsol_follows_a_decaying_mode_finds_its_limit_and_keeps_the_sums() {
        let shape = Shape { n_tubes: N, n_vars: 2, n_tail: 1, coupling: Coupling::Diagonal };
        let rate = |r, c| if (r, c) == (1, 0) { RATE } else { 0.0 };
        let mut j = keeping_sums(shape, |_| 1.0, |_| 1.0, rate);
        (0..N).for_each(|i| j.tail_tube_mut(0, i)[0] = RATE);
        let builder = OdeBuilder::<BlockTridiagonal>::new().rtol(1e-8).atol([1e-10]).h0(1e-4);
        let decay = Decay(j, NalgebraContext::default());
        let mut problem = builder.build_from_eqn(decay).unwrap();
        problem.ode_options.update_rhs_jacobian_after_steps = 20;
        problem.ode_options.update_jacobian_after_steps = 10;
        problem.ode_options.max_timestep_growth = Some(5.0);
        problem.ode_options.min_timestep_growth = Some(1.3);
        let mut solver = problem.bdf::<BlockThomas>().unwrap();
        solver.set_stop_time(1.0).unwrap();
        let mut crossings = Vec::new();
        loop {
            match solver.step().unwrap() {
                OdeSolverStopReason::InternalTimestep => {}
                OdeSolverStopReason::RootFound(z, limit) => crossings.push((z, limit)),
                OdeSolverStopReason::TstopReached => break,
            }
        }
        let y = solver.state().y.batch_as_slice(0);
        for (y, exact) in y.iter().zip(exact(1.0)) {
            assert!((y - exact).abs() < 1e-6, "{y} is not {exact}");
        }
        let [a, b] = [0, 1].map(|k| y[k..2 * N].iter().step_by(2).sum::<f64>());
        let fed = 2.0 * N as f64;
        assert!((a + b - fed).abs() < 1e-12 * fed && (b - y[2 * N]).abs() < 1e-12 * fed);
        assert!(matches!(crossings[..], [(z, 1)] if (exact(z)[1] - 1.0).abs() < 1e-6));
    }
}
