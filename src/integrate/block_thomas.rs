//! The linear solver of the implicit steps: block elimination over the stream tubes.
//!
//! (I − c J) x = b is eliminated from the innermost and the outermost tube
//! towards the tube in the middle and substituted back. Two independent chains let
//! blocks be inverted in pairs, a quarter quicker, and solve a sixth quicker than
//! one chain (6 variables). The integrals follow from the tubes' solution. Each call
//! chooses once among kernels compiled for 1 to 12 variables, and a plain one for more.

use std::cell::RefCell;

use diffsol::{NalgebraContext, NalgebraVec, VectorCommon};
use diffsol_la::{LaError, LinearOp, LinearSolver};

use super::matrix::BlockTridiagonal;
use crate::discretise::blocks::{Block, Blocks, Coupling, Shape, add_product, invert_block, invert_pair};

/// Factorises I − c J once, then solves with it many times.
///
/// A right-hand side may have several lanes (sensitivities), each solved alike.
/// A singular block is reported by the next solve, upon which diffsol shortens the step.
#[derive(Default)]
pub struct BlockThomas {
    matrix: Option<BlockTridiagonal>,
    factors: Factors,
}

impl LinearSolver<BlockTridiagonal> for BlockThomas {
    fn set_sparsity<C>(&mut self, op: &C)
    where
        C: LinearOp<V = NalgebraVec<f64>, T = f64, M = BlockTridiagonal, C = NalgebraContext>,
    {
        let pattern = op.sparsity();
        self.factors = pattern.map_or_else(Factors::default, |p| Factors::new(p.0));
        self.matrix = pattern.map(|p| BlockTridiagonal::Blocks(Blocks::zeros(p.0)));
    }

    fn set_linearisation<C>(&mut self, op: &C)
    where
        C: LinearOp<V = NalgebraVec<f64>, T = f64, M = BlockTridiagonal, C = NalgebraContext>,
    {
        self.factors.regular = false;
        if let Some(matrix) = self.matrix.as_mut() {
            op.matrix_inplace(matrix);
            if let Some(blocks) = matrix.as_blocks_mut() {
                blocks.cut_ends();
                self.factors.factorise(blocks);
            }
        }
    }

    fn solve_in_place(&self, b: &mut NalgebraVec<f64>) -> Result<(), LaError> {
        match self.matrix.as_ref().and_then(BlockTridiagonal::as_blocks) {
            Some(blocks) if self.factors.regular && b.inner().nrows() == blocks.shape().n_states() => {
                for lane in 0..b.inner().ncols() {
                    self.factors.solve(blocks, b.batch_as_mut_slice(lane));
                }
                Ok(())
            }
            _ => Err(LaError::Other("singular implicit step".into())),
        }
    }

    fn solve_transpose_in_place(&self, _: &mut NalgebraVec<f64>) -> Result<(), LaError> {
        Err(LaError::Other("no adjoint problem is solved".into()))
    }
}

/// Factorises a matrix at hand, for a solve outside diffsol.
impl From<Blocks> for BlockThomas {
    fn from(mut blocks: Blocks) -> Self {
        let mut factors = Factors::new(blocks.shape());
        blocks.cut_ends();
        factors.factorise(&blocks);
        let matrix = Some(BlockTridiagonal::Blocks(blocks));
        Self { matrix, factors }
    }
}

/// What elimination leaves behind, block by block as in [`Blocks`].
#[derive(Default)]
struct Factors {
    /// Inverse of each tube's block after elimination of the tubes further out.
    inverse: Vec<f64>,
    /// That inverse times the coupling to the next tube in the order of elimination.
    gain: Vec<f64>,
    regular: bool,
    /// Room for one inversion; the solve of large blocks needs it too, hence the cell.
    work: RefCell<Vec<f64>>,
    swaps: Vec<usize>,
}

/// Picks the kernel compiled for the number of variables.
macro_rules! for_size {
    ($n_vars:expr, $n:ident => $fixed:expr, $any:expr) => {
        for_size!(@ $n_vars, $n, $fixed, $any, 1 2 3 4 5 6 7 8 9 10 11 12)
    };
    (@ $n_vars:expr, $n:ident, $fixed:expr, $any:expr, $($size:literal)*) => {
        match $n_vars {
            $($size => { const $n: usize = $size; $fixed })*
            _ => $any,
        }
    };
}

impl Factors {
    fn new(shape: Shape) -> Self {
        let size = shape.n_tube_states() * shape.n_vars;
        Self {
            inverse: vec![0.0; size],
            gain: vec![0.0; size],
            regular: false,
            work: RefCell::new(vec![0.0; 4 * shape.n_vars]),
            swaps: vec![0; shape.n_vars],
        }
    }

    fn factorise(&mut self, m: &Blocks) {
        let shape = m.shape();
        self.regular = for_size!(shape.n_vars, N => match shape.coupling {
            Coupling::Diagonal => self.factorise_fixed::<N, [f64; N]>(m),
            Coupling::Full => self.factorise_fixed::<N, Block<N>>(m),
        }, self.factorise_any(m));
    }

    fn solve(&self, m: &Blocks, x: &mut [f64]) {
        let shape = m.shape();
        let (tubes, tail) = x.split_at_mut(shape.n_tube_states());
        for_size!(shape.n_vars, N => match shape.coupling {
            Coupling::Diagonal => self.solve_fixed::<N, [f64; N]>(m, tubes),
            Coupling::Full => self.solve_fixed::<N, Block<N>>(m, tubes),
        }, self.solve_any(m, tubes));
        for (row, x) in tail.iter_mut().enumerate() {
            let (start, values) = m.tail_row(row);
            *x -= dot(values, &tubes[start..]);
        }
    }

    fn factorise_fixed<const N: usize, C: CouplingBlock<N>>(&mut self, m: &Blocks) -> bool {
        let (lower, upper) = (C::view(m.lower_values()), C::view(m.upper_values()));
        let diagonal = blocks(m.diagonal_values());
        let inverse = blocks_mut::<N>(&mut self.inverse);
        let gain = blocks_mut(&mut self.gain);
        let n_tubes = diagonal.len();
        let middle = n_tubes / 2;
        let mut regular = true;
        for step in 0..middle {
            let (near, far) = (step, n_tubes - 1 - step);
            let mut pair = [diagonal[near], diagonal[far]];
            if step > 0 {
                lower[near].subtract_product(&gain[near - 1], &mut pair[0]);
                upper[far].subtract_product(&gain[far + 1], &mut pair[1]);
            }
            if far == middle {
                pair[1] = pair[0]; // its turn comes last, with both neighbours eliminated
            }
            regular &= invert_pair(&mut pair);
            inverse[near] = pair[0];
            upper[near].after(&pair[0], &mut gain[near]);
            if far != middle {
                inverse[far] = pair[1];
                lower[far].after(&pair[1], &mut gain[far]);
            }
        }
        if middle < n_tubes {
            let mut block = diagonal[middle];
            if middle > 0 {
                lower[middle].subtract_product(&gain[middle - 1], &mut block);
            }
            if middle + 1 < n_tubes {
                upper[middle].subtract_product(&gain[middle + 1], &mut block);
            }
            let mut pair = [block; 2];
            regular &= invert_pair(&mut pair);
            inverse[middle] = pair[0];
        }
        regular
    }

    fn solve_fixed<const N: usize, C: CouplingBlock<N>>(&self, m: &Blocks, x: &mut [f64]) {
        let (lower, upper) = (C::view(m.lower_values()), C::view(m.upper_values()));
        let (inverse, gain) = (blocks::<N>(&self.inverse), blocks::<N>(&self.gain));
        let x = x.as_chunks_mut::<N>().0;
        let n_tubes = x.len();
        let middle = n_tubes / 2;
        if n_tubes == 0 {
            return;
        }
        // coupling out of the duct is zero, so both chains may start from zero
        let (mut inner, mut outer) = ([0.0; N], [0.0; N]);
        for step in 0..middle {
            let i = step;
            inner = product(&inverse[i], &difference(&x[i], &lower[i].times(&inner)));
            x[i] = inner;
            let i = n_tubes - 1 - step;
            if i > middle {
                outer = product(&inverse[i], &difference(&x[i], &upper[i].times(&outer)));
                x[i] = outer;
            }
        }
        let rest = difference(&x[middle], &lower[middle].times(&inner));
        let rest = difference(&rest, &upper[middle].times(&outer));
        inner = product(&inverse[middle], &rest);
        outer = inner;
        x[middle] = inner;
        for step in (0..middle).rev() {
            inner = difference(&x[step], &product(&gain[step], &inner));
            x[step] = inner;
            let i = n_tubes - 1 - step;
            if i > middle {
                outer = difference(&x[i], &product(&gain[i], &outer));
                x[i] = outer;
            }
        }
    }

    /// Any number of variables, from the innermost tube outwards.
    fn factorise_any(&mut self, m: &Blocks) -> bool {
        let (n, n_off) = (m.shape().n_vars, m.shape().n_coupling_values());
        let mut regular = true;
        for i in 0..m.shape().n_tubes {
            let here = i * n * n..(i + 1) * n * n;
            let block = &mut self.inverse[here.clone()];
            block.copy_from_slice(&m.diagonal_values()[here.clone()]);
            let (before, gain) = self.gain.split_at_mut(here.start);
            if i > 0 {
                let lower = &m.lower_values()[i * n_off..];
                let before = before[(i - 1) * n * n..].chunks_exact(n.max(1));
                for (column, before) in block.chunks_exact_mut(n.max(1)).zip(before) {
                    add_product(column, -1.0, m.shape().coupling, lower, before);
                }
            }
            regular &= invert_block(n, block, self.work.get_mut(), &mut self.swaps);
            gain[..n * n].fill(0.0);
            let upper = &m.upper_values()[i * n_off..];
            for (c, gain) in gain[..n * n].chunks_exact_mut(n.max(1)).enumerate() {
                let (block, upper) = match m.shape().coupling {
                    Coupling::Diagonal => (&block[c * n..], &upper[c..=c]),
                    Coupling::Full => (&*block, &upper[c * n..(c + 1) * n]),
                };
                add_product(gain, 1.0, Coupling::Full, block, upper);
            }
        }
        regular
    }

    fn solve_any(&self, m: &Blocks, x: &mut [f64]) {
        let (n, n_off) = (m.shape().n_vars, m.shape().n_coupling_values());
        let mut work = self.work.borrow_mut();
        let rest = &mut work[..n];
        for i in 0..m.shape().n_tubes {
            let (before, here) = x.split_at_mut(i * n);
            let here = &mut here[..n];
            if i > 0 {
                let lower = &m.lower_values()[i * n_off..];
                add_product(here, -1.0, m.shape().coupling, lower, &before[(i - 1) * n..]);
            }
            rest.copy_from_slice(here);
            here.fill(0.0);
            add_product(here, 1.0, Coupling::Full, &self.inverse[i * n * n..], rest);
        }
        for i in (1..m.shape().n_tubes).rev() {
            let (here, after) = x.split_at_mut(i * n);
            let gain = &self.gain[(i - 1) * n * n..];
            add_product(&mut here[(i - 1) * n..], -1.0, Coupling::Full, gain, &after[..n]);
        }
    }
}

fn blocks<const N: usize>(values: &[f64]) -> &[Block<N>] {
    values.as_chunks().0.as_chunks().0
}

fn blocks_mut<const N: usize>(values: &mut [f64]) -> &mut [Block<N>] {
    values.as_chunks_mut().0.as_chunks_mut().0
}

/// A block between neighbouring tubes.
trait CouplingBlock<const N: usize>: Sized {
    fn view(values: &[f64]) -> &[Self];
    fn times(&self, x: &[f64; N]) -> [f64; N];
    /// `gain = inverse · self`
    fn after(&self, inverse: &Block<N>, gain: &mut Block<N>);
    /// `block -= self · gain`
    fn subtract_product(&self, gain: &Block<N>, block: &mut Block<N>);
}

impl<const N: usize> CouplingBlock<N> for [f64; N] {
    fn view(values: &[f64]) -> &[Self] {
        values.as_chunks().0
    }
    #[inline(always)]
    fn times(&self, x: &[f64; N]) -> [f64; N] {
        std::array::from_fn(|r| self[r] * x[r])
    }
    #[inline(always)]
    fn after(&self, inverse: &Block<N>, gain: &mut Block<N>) {
        for c in 0..N {
            for r in 0..N {
                gain[c][r] = inverse[c][r] * self[c];
            }
        }
    }
    #[inline(always)]
    fn subtract_product(&self, gain: &Block<N>, block: &mut Block<N>) {
        for c in 0..N {
            for r in 0..N {
                block[c][r] -= self[r] * gain[c][r];
            }
        }
    }
}

impl<const N: usize> CouplingBlock<N> for Block<N> {
    fn view(values: &[f64]) -> &[Self] {
        blocks(values)
    }
    #[inline(always)]
    fn times(&self, x: &[f64; N]) -> [f64; N] {
        product(self, x)
    }
    #[inline(always)]
    fn after(&self, inverse: &Block<N>, gain: &mut Block<N>) {
        for (gain, column) in gain.iter_mut().zip(self) {
            *gain = product(inverse, column);
        }
    }
    #[inline(always)]
    fn subtract_product(&self, gain: &Block<N>, block: &mut Block<N>) {
        for (column, gain) in block.iter_mut().zip(gain) {
            *column = difference(column, &product(self, gain));
        }
    }
}

#[inline(always)]
fn difference<const N: usize>(a: &[f64; N], b: &[f64; N]) -> [f64; N] {
    std::array::from_fn(|r| a[r] - b[r])
}

/// Two sums run side by side: the chain of additions is what the solve waits for.
#[inline(always)]
fn product<const N: usize>(block: &Block<N>, x: &[f64; N]) -> [f64; N] {
    let (mut even, mut odd) = ([0.0; N], [0.0; N]);
    for c in 0..N {
        let sum = if c % 2 == 0 { &mut even } else { &mut odd };
        for r in 0..N {
            sum[r] += block[c][r] * x[c];
        }
    }
    std::array::from_fn(|r| even[r] + odd[r])
}

/// Over the length of `a`, in four sums side by side.
fn dot(a: &[f64], b: &[f64]) -> f64 {
    let ((a, a_rest), (b, b_rest)) = (a.as_chunks::<4>(), b[..a.len()].as_chunks::<4>());
    let mut sums = [0.0; 4];
    for (a, b) in a.iter().zip(b) {
        sums = std::array::from_fn(|k| sums[k] + a[k] * b[k]);
    }
    let rest: f64 = a_rest.iter().zip(b_rest).map(|(a, b)| a * b).sum();
    rest + (sums[0] + sums[1]) + (sums[2] + sums[3])
}

#[cfg(test)]
mod tests {
    use super::*;
    use diffsol::Vector;
    use nalgebra::{DMatrix, DVector};

    /// Solves for `b`, and for twice of it in a second lane.
    fn solution(m: &Blocks, b: &DVector<f64>) -> Result<DVector<f64>, LaError> {
        let both = [b.as_slice(), (2.0 * b).as_slice()].concat();
        let mut x = NalgebraVec::from_vec(both, NalgebraContext::with_nbatch(2));
        BlockThomas::from(m.clone()).solve_in_place(&mut x)?;
        let [x, twice] = [0, 1].map(|lane| DVector::from_column_slice(x.batch_as_slice(lane)));
        assert_eq!(2.0 * &x, twice);
        Ok(x)
    }

    fn dense_solution(m: &Blocks, b: &DVector<f64>) -> DVector<f64> {
        let mut dense = DMatrix::identity(b.len(), b.len());
        for mut column in dense.column_iter_mut() {
            let unit = column.clone_owned();
            m.multiply(unit.as_slice(), column.as_mut_slice());
        }
        dense.lu().solve(b).expect("test matrices are regular")
    }

    /// Units of the variables: powers of two, up to 2^±spread.
    fn units(shape: Shape, spread: i32) -> DVector<f64> {
        let power = |k: usize| (7 * k as i32) % (2 * spread + 1) - spread;
        DVector::from_fn(shape.n_states(), |k, _| 2f64.powi(power(k % shape.n_vars)))
    }

    /// Chance entries and a dominant diagonal, with the right-hand side, both in those units.
    fn system(shape: Shape, spread: i32) -> (Blocks, DVector<f64>) {
        let (n, units) = (shape.n_vars, units(shape, spread));
        let chance = |k: usize| (k as f64 * k as f64 * 0.7).sin();
        let (mut m, mut j) = (Blocks::zeros(shape), Blocks::zeros(shape));
        let parts: [fn(&mut Blocks, usize) -> &mut [f64]; 3] =
            [Blocks::lower_mut, Blocks::diagonal_block_mut, Blocks::upper_mut];
        for place in 0..3 * shape.n_tubes {
            let block = parts[place % 3](&mut j, place / 3);
            let full = block.len() == n * n;
            for (k, v) in block.iter_mut().enumerate() {
                let ratio = if full { units[k % n] / units[k / n] } else { 1.0 };
                *v = chance(1 + k + place * n) * ratio;
            }
        }
        for i in 0..shape.n_tubes {
            let block = j.diagonal_block_mut(i).iter_mut();
            block.step_by(n + 1).for_each(|v| *v += 3.0 * n as f64);
            for row in 0..shape.n_tail {
                j.tail_tube_mut(row, i)[0] = 0.1 * chance(i + 2) * units[row % n] / units[0];
            }
        }
        m.assign_identity_plus(1.0, &j);
        m.lower_mut(0).fill(f64::NAN); // leads out of the duct, so it must not matter
        let b = DVector::from_fn(shape.n_states(), |k, _| (1.0 + k as f64).sin());
        (m, b.component_mul(&units))
    }

    fn shapes() -> impl Iterator<Item = Shape> {
        (0..2 * 4 * 14).map(|k| Shape {
            n_tubes: [1, 2, 3, 40][k / 2 % 4],
            n_vars: 1 + k / 8,
            n_tail: k / 8 % 3,
            coupling: [Coupling::Diagonal, Coupling::Full][k % 2],
        })
    }

    #[test]
    fn solutions_agree_with_dense_elimination() {
        for (shape, spread) in shapes().flat_map(|shape| [(shape, 0), (shape, 10)]) {
            let (m, b) = system(shape, spread);
            let error = solution(&m, &b).unwrap() - dense_solution(&m, &b);
            let error = error.component_div(&units(shape, spread)).amax();
            // 1e-15 alike, but dense elimination loses digits where units are a million apart
            assert!(error < if spread == 0 { 1e-13 } else { 1e-11 }, "{shape:?}: {error}");
        }
    }

    #[test]
    fn units_do_not_change_one_bit_up_to_12_variables() {
        for shape in shapes().filter(|shape| shape.n_vars <= 12) {
            let [(plain, b), (scaled, b_scaled)] = [0, 10].map(|spread| system(shape, spread));
            let x = solution(&plain, &b).unwrap();
            let x_scaled = solution(&scaled, &b_scaled).unwrap();
            assert_eq!(x_scaled, x.component_mul(&units(shape, 10)));
        }
    }

    #[test]
    fn zeros_on_the_diagonal_are_pivoted() {
        for shape in shapes().filter(|shape| shape.n_vars > 1) {
            let ((mut m, b), n) = (system(shape, 0), shape.n_vars);
            for i in 0..shape.n_tubes {
                let block = m.diagonal_block_mut(i);
                block.rotate_left(n); // columns move by one
                block.iter_mut().step_by(n + 1).for_each(|v| *v = 0.0);
            }
            let error = (solution(&m, &b).unwrap() - dense_solution(&m, &b)).amax();
            assert!(error < 1e-12, "{shape:?}: {error}");
        }
    }

    #[test]
    fn the_middle_tube_may_owe_its_inverse_to_its_neighbours() {
        let diagonal = |shape: &Shape| shape.coupling == Coupling::Diagonal;
        for shape in shapes().filter(diagonal).filter(|shape| shape.n_tubes == 2) {
            let (mut m, b) = system(shape, 0);
            m.diagonal_block_mut(1).fill(0.0);
            let error = (solution(&m, &b).unwrap() - dense_solution(&m, &b)).amax();
            assert!(error < 1e-6, "{shape:?}: {error}");
        }
    }

    #[test]
    fn singular_and_undefined_blocks_are_reported() {
        for shape in shapes() {
            for entry in [0.0, f64::NAN, f64::INFINITY] {
                let (mut m, b) = system(shape, 0);
                // tube 0 is eliminated first, so its row of zeros stays one
                let block = m.diagonal_block_mut(0).iter_mut();
                block.step_by(shape.n_vars).for_each(|v| *v = entry);
                assert!(solution(&m, &b).is_err(), "{shape:?}, {entry}");
            }
        }
    }

    #[test]
    fn rounding_does_not_hide_a_singular_block() {
        let block = [[0.1, 0.2, 0.3], [0.4, 0.5, 0.6], [0.7, 0.8, 0.9]];
        assert!(!invert_pair(&mut [block, block]));
    }
}
