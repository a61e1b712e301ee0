//! Storage of the Jacobian of one section: block tridiagonal over the stream
//! tubes, bordered below by integrals that feed nothing back.
//!
//! A stream tube exchanges heat and matter with its two neighbours only, so a
//! row of the Jacobian has three small blocks. The duct's geometry is frozen in
//! it (faces and areas are taken as given), which keeps the blocks between
//! neighbours diagonal unless diffusion itself couples the variables. This file
//! knows storage, products and the inverse of one block; the elimination over all is `integrate/block_thomas.rs`.

use std::ops::Range;

/// Largest growth of a later diagonal entry that elimination in the given order may cause.
///
/// 0.1 is the usual threshold on a pivot; here it bounds products a_rk a_kr against
/// a_kk a_rr, which no choice of units for the variables changes.
const GROWTH_LIMIT: f64 = 10.0;

/// A pivot this small beside its original entry is mostly rounding, so it is sought again.
const CANCELLED: f64 = 1e-12;

/// A block of a size known to the compiler, column by column.
pub type Block<const N: usize> = [[f64; N]; N];

/// How neighbouring stream tubes are coupled.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Coupling {
    /// Each variable with itself only: the blocks between tubes are diagonal.
    Diagonal,
    /// Every variable with every other, as with unlike diffusivities: full blocks.
    Full,
}

/// Sizes of the state vector and of its Jacobian.
///
/// The state vector is tube-major: the `n_vars` variables of tube 0, those of
/// tube 1, and so on outwards, then `n_tail` integrals.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Shape {
    /// Number of stream tubes.
    pub n_tubes: usize,
    /// Variables of one stream tube.
    pub n_vars: usize,
    /// Integrals along the duct, such as the heat through the wall.
    pub n_tail: usize,
    /// Form of the blocks between neighbouring tubes.
    pub coupling: Coupling,
}

impl Shape {
    /// Unknowns of all stream tubes together, without the integrals.
    pub fn n_tube_states(&self) -> usize {
        self.n_tubes * self.n_vars
    }

    /// Length of the state vector.
    pub fn n_states(&self) -> usize {
        self.n_tube_states() + self.n_tail
    }

    /// Values in one block between neighbours: `n_vars`, or its square.
    pub fn n_coupling_values(&self) -> usize {
        match self.coupling {
            Coupling::Diagonal => self.n_vars,
            Coupling::Full => self.n_vars * self.n_vars,
        }
    }
}

/// A block tridiagonal matrix with integral rows below it.
///
/// ```text
/// ┌ D₀ U₀            ┐
/// │ L₁ D₁ U₁         │     L, D, U: n_vars × n_vars
/// │    L₂ D₂ ·       │     T: one row per integral over all tube variables,
/// │       ·  ·       │        unused until written to
/// └ T            d·1 ┘     d: 0 in a Jacobian, 1 in identity + β Jacobian
/// ```
///
/// Blocks are column-major: the derivative of variable `row` with respect to
/// variable `column` stands at `[column * n_vars + row]`. A diagonal coupling
/// block holds its `n_vars` diagonal entries only.
#[derive(Clone, Debug, PartialEq)]
pub struct Blocks {
    shape: Shape,
    lower: Vec<f64>,
    diagonal: Vec<f64>,
    upper: Vec<f64>,
    /// `n_tail` rows of `n_tube_states` values.
    tail: Vec<f64>,
    /// The part of each tail row that may differ from zero; values outside it are zero.
    tail_used: Vec<Range<usize>>,
    /// d in the sketch above.
    tail_diagonal: f64,
}

impl Blocks {
    /// The zero matrix of a shape.
    pub fn zeros(shape: Shape) -> Self {
        let n_off = shape.n_tubes * shape.n_coupling_values();
        Self {
            shape,
            lower: vec![0.0; n_off],
            diagonal: vec![0.0; shape.n_tube_states() * shape.n_vars],
            upper: vec![0.0; n_off],
            tail: vec![0.0; shape.n_tail * shape.n_tube_states()],
            tail_used: vec![0..0; shape.n_tail],
            tail_diagonal: 0.0,
        }
    }

    /// Sizes of the matrix.
    pub fn shape(&self) -> Shape {
        self.shape
    }

    /// Sets every entry to zero and forgets which tail rows were written to.
    pub fn clear(&mut self) {
        for values in [&mut self.lower, &mut self.diagonal, &mut self.upper] {
            values.fill(0.0);
        }
        for row in 0..self.shape.n_tail {
            self.clear_tail_row(row);
        }
        self.tail_diagonal = 0.0;
    }

    /// Derivatives of tube `i` with respect to itself: `n_vars²` values, column-major.
    pub fn diagonal_block_mut(&mut self, i: usize) -> &mut [f64] {
        let size = self.shape.n_vars * self.shape.n_vars;
        &mut self.diagonal[i * size..(i + 1) * size]
    }

    /// Derivatives of tube `i` with respect to tube `i − 1`: `n_vars` values, or
    /// `n_vars²` column-major when the coupling is full. Ignored for tube 0.
    pub fn lower_mut(&mut self, i: usize) -> &mut [f64] {
        let size = self.shape.n_coupling_values();
        &mut self.lower[i * size..(i + 1) * size]
    }

    /// Derivatives of tube `i` with respect to tube `i + 1`, stored like
    /// [`Self::lower_mut`]. Ignored for the last tube.
    pub fn upper_mut(&mut self, i: usize) -> &mut [f64] {
        let size = self.shape.n_coupling_values();
        &mut self.upper[i * size..(i + 1) * size]
    }

    /// Derivatives of integral `row` with respect to all tube variables.
    ///
    /// Counts the whole row as used; an integral over few tubes is cheaper
    /// through [`Self::tail_tube_mut`].
    pub fn tail_row_mut(&mut self, row: usize) -> &mut [f64] {
        let width = self.shape.n_tube_states();
        self.tail_used[row] = 0..width;
        &mut self.tail[row * width..(row + 1) * width]
    }

    /// Derivatives of integral `row` with respect to the `n_vars` variables of tube `i`.
    pub fn tail_tube_mut(&mut self, row: usize, i: usize) -> &mut [f64] {
        let (width, n_vars) = (self.shape.n_tube_states(), self.shape.n_vars);
        let (start, end) = (i * n_vars, (i + 1) * n_vars);
        let used = &mut self.tail_used[row];
        *used = if used.start == used.end { start..end } else { used.start.min(start)..used.end.max(end) };
        &mut self.tail[row * width..(row + 1) * width][start..end]
    }

    /// Sets the derivatives of integral `row` to zero, after which the row costs nothing.
    pub fn clear_tail_row(&mut self, row: usize) {
        let width = self.shape.n_tube_states();
        let used = std::mem::replace(&mut self.tail_used[row], 0..0);
        self.tail[row * width..(row + 1) * width][used].fill(0.0);
    }

    /// All diagonal blocks one after the other.
    pub fn diagonal_values(&self) -> &[f64] {
        &self.diagonal
    }

    /// All blocks towards the tube below, tube 0's (without meaning) included.
    pub fn lower_values(&self) -> &[f64] {
        &self.lower
    }

    /// All blocks towards the tube above, the last tube's (without meaning) included.
    pub fn upper_values(&self) -> &[f64] {
        &self.upper
    }

    /// The used part of tail row `row` and the offset in the state vector at which it starts.
    pub fn tail_row(&self, row: usize) -> (usize, &[f64]) {
        let width = self.shape.n_tube_states();
        let used = self.tail_used[row].clone();
        (used.start, &self.tail[row * width..(row + 1) * width][used])
    }

    /// Sets to zero the two coupling blocks that lead out of the duct, so that an
    /// elimination may run over all tubes alike.
    pub fn cut_ends(&mut self) {
        if let Some(last) = self.shape.n_tubes.checked_sub(1) {
            self.lower_mut(0).fill(0.0);
            self.upper_mut(last).fill(0.0);
        }
    }

    /// `self = I + beta · jacobian`, the matrix of an implicit step.
    ///
    /// Both have the same shape; a step from another shape would be a mistake of
    /// the caller, and the common part is formed.
    pub fn assign_identity_plus(&mut self, beta: f64, jacobian: &Self) {
        debug_assert_eq!(self.shape, jacobian.shape, "one pattern serves both matrices");
        scale_into(&mut self.lower, beta, &jacobian.lower);
        scale_into(&mut self.diagonal, beta, &jacobian.diagonal);
        scale_into(&mut self.upper, beta, &jacobian.upper);
        let n_vars = self.shape.n_vars.max(1);
        for block in self.diagonal.chunks_exact_mut(n_vars * n_vars) {
            block.iter_mut().step_by(n_vars + 1).for_each(|entry| *entry += 1.0);
        }
        for row in 0..self.shape.n_tail {
            if self.tail_used[row] != jacobian.tail_used[row] {
                self.clear_tail_row(row);
                self.tail_used[row] = jacobian.tail_used[row].clone();
            }
            let (start, values) = jacobian.tail_row(row);
            let row_start = row * self.shape.n_tube_states() + start;
            scale_into(&mut self.tail[row_start..row_start + values.len()], beta, values);
        }
        self.tail_diagonal = 1.0 + beta * jacobian.tail_diagonal;
    }

    /// `out = self · v`, both of length `n_states`.
    pub fn multiply(&self, v: &[f64], out: &mut [f64]) {
        let Shape { n_tubes, n_vars, coupling, .. } = self.shape;
        let (n_square, n_off) = (n_vars * n_vars, self.shape.n_coupling_values());
        let tubes = self.shape.n_tube_states();
        out[..tubes].fill(0.0);
        for i in 0..n_tubes {
            let variables = |i: usize| &v[i * n_vars..(i + 1) * n_vars];
            let out = &mut out[i * n_vars..(i + 1) * n_vars];
            if i > 0 {
                let lower = &self.lower[i * n_off..(i + 1) * n_off];
                add_product(out, 1.0, coupling, lower, variables(i - 1));
            }
            let diagonal = &self.diagonal[i * n_square..(i + 1) * n_square];
            add_product(out, 1.0, Coupling::Full, diagonal, variables(i));
            if i + 1 < n_tubes {
                let upper = &self.upper[i * n_off..(i + 1) * n_off];
                add_product(out, 1.0, coupling, upper, variables(i + 1));
            }
        }
        for row in 0..self.shape.n_tail {
            let (start, values) = self.tail_row(row);
            let sum: f64 = values.iter().zip(&v[start..]).map(|(t, v)| t * v).sum();
            out[tubes + row] = sum + self.tail_diagonal * v[tubes + row];
        }
    }
}

fn scale_into(out: &mut [f64], beta: f64, values: &[f64]) {
    out.iter_mut().zip(values).for_each(|(out, value)| *out = beta * value);
}

/// `out += scale · block · x` for one block: diagonal, or full and column-major.
pub fn add_product(out: &mut [f64], scale: f64, coupling: Coupling, block: &[f64], x: &[f64]) {
    match coupling {
        Coupling::Diagonal => {
            let products = block.iter().zip(x).map(|(b, x)| b * x);
            out.iter_mut().zip(products).for_each(|(out, bx)| *out += scale * bx);
        }
        Coupling::Full => {
            for (column, x) in block.chunks_exact(out.len().max(1)).zip(x) {
                let x = scale * x;
                out.iter_mut().zip(column).for_each(|(out, b)| *out += b * x);
            }
        }
    }
}

/// Replaces two blocks by their inverses; false where one has none.
///
/// Side by side because a small elimination waits for its own results most of
/// the time, and because two of anything fill a vector register.
#[inline(always)]
pub fn invert_pair<const N: usize>(blocks: &mut [Block<N>; 2]) -> bool {
    let mut pair = [[[0.0; 2]; N]; N];
    for c in 0..N {
        for r in 0..N {
            pair[c][r] = [blocks[0][c][r], blocks[1][c][r]];
        }
    }
    if invert_in_order(&mut pair) {
        for c in 0..N {
            for r in 0..N {
                (blocks[0][c][r], blocks[1][c][r]) = (pair[c][r][0], pair[c][r][1]);
            }
        }
        return true;
    }
    let (mut work, mut swaps) = ([[0.0; N]; 4], [0; N]);
    let mut invert =
        |block: &mut Block<N>| invert_block(N, block.as_flattened_mut(), work.as_flattened_mut(), &mut swaps);
    blocks.iter_mut().all(&mut invert)
}

/// Gauss–Jordan without row swaps, which unrolls; false where swaps are called for.
///
/// Every comparison is false for a NaN, so none passes.
#[expect(clippy::needless_range_loop, reason = "two columns of one array at a time")]
#[inline(always)]
fn invert_in_order<const N: usize>(a: &mut [[[f64; 2]; N]; N]) -> bool {
    let original: [[f64; 2]; N] = std::array::from_fn(|k| a[k][k]);
    let mut good = true;
    let mut excess = [0.0; 2];
    for k in 0..N {
        let (pivot, column) = (a[k][k], a[k]);
        let reciprocal = pivot.map(f64::recip);
        for side in 0..2 {
            good &= pivot[side].abs() > CANCELLED * original[k][side].abs();
            good &= reciprocal[side].is_finite() && reciprocal[side] != 0.0;
            for r in k + 1..N {
                let growth = (column[r][side] * a[r][k][side]).abs();
                let over = growth - GROWTH_LIMIT * (pivot[side] * a[r][r][side]).abs();
                excess[side] = if over <= excess[side] { excess[side] } else { over };
            }
        }
        for c in 0..N {
            if c != k {
                let factor = times(a[c][k], reciprocal);
                for r in 0..N {
                    if r != k {
                        let less = times(column[r], factor);
                        a[c][r] = [a[c][r][0] - less[0], a[c][r][1] - less[1]];
                    }
                }
                a[c][k] = factor;
            }
        }
        for r in 0..N {
            a[k][r] = times(column[r], [-reciprocal[0], -reciprocal[1]]);
        }
        a[k][k] = reciprocal;
    }
    good && excess.iter().all(|&over| over <= 0.0)
}

#[inline(always)]
fn times(a: [f64; 2], b: [f64; 2]) -> [f64; 2] {
    [a[0] * b[0], a[1] * b[1]]
}

/// Replaces a column-major block of `n` rows by its inverse; false where it has none.
///
/// Gauss–Jordan elimination with row swaps, which are chosen as if rows and
/// columns were scaled to a largest entry of one, so that the units of the
/// variables matter little. `work` has room for `4 n` values, `swaps` for `n`;
/// what they hold is overwritten.
#[cold]
pub fn invert_block(n: usize, a: &mut [f64], work: &mut [f64], swaps: &mut [usize]) -> bool {
    let (column_scale, work) = work.split_at_mut(n);
    let (row_scale, column) = work.split_at_mut(n);
    let column = &mut column[..n];
    let largest = |values: &mut dyn Iterator<Item = f64>| values.fold(0.0, |m: f64, v| m.max(v.abs()));
    for c in 0..n {
        column_scale[c] = largest(&mut a[c * n..][..n].iter().copied()).recip();
    }
    for r in 0..n {
        let scaled = &mut (0..n).map(|c| a[c * n + r] * column_scale[c]);
        row_scale[r] = largest(scaled).recip();
    }
    let rounding = 4.0 * n as f64 * f64::EPSILON;
    let mut good = true;
    for k in 0..n {
        let size = |r: usize| (a[k * n + r] * row_scale[r]).abs();
        let p = (k + 1..n).fold(k, |p, r| if size(r) > size(p) { r } else { p });
        good &= size(p) * column_scale[k] > rounding;
        swaps[k] = p;
        if p != k {
            row_scale.swap(k, p);
            (0..n).for_each(|c| a.swap(c * n + k, c * n + p));
        }
        let reciprocal = a[k * n + k].recip();
        column.copy_from_slice(&a[k * n..][..n]);
        column[k] = 0.0;
        for (c, values) in a.chunks_exact_mut(n).enumerate() {
            if c == k {
                values.iter_mut().for_each(|v| *v *= -reciprocal);
                values[k] = reciprocal;
            } else {
                let factor = values[k] * reciprocal;
                values.iter_mut().zip(&*column).for_each(|(v, column)| *v -= column * factor);
                values[k] = factor;
            }
        }
    }
    for k in (0..n).rev() {
        if swaps[k] != k {
            (0..n).for_each(|r| a.swap(k * n + r, swaps[k] * n + r));
        }
    }
    good && a.iter().all(|v| v.is_finite())
}

#[cfg(test)]
mod tests {
    use super::*;

    fn two_tubes(coupling: Coupling) -> Blocks {
        let (n_tubes, n_vars, n_tail) = (2, 2, 2);
        let mut blocks = Blocks::zeros(Shape { n_tubes, n_vars, n_tail, coupling });
        blocks.diagonal_block_mut(0).copy_from_slice(&[1.0, 2.0, 3.0, 4.0]);
        blocks.diagonal_block_mut(1).copy_from_slice(&[5.0, 6.0, 7.0, 8.0]);
        (0..).zip(blocks.upper_mut(0)).for_each(|(k, u)| *u = f64::from(10 + k));
        (0..).zip(blocks.lower_mut(1)).for_each(|(k, l)| *l = f64::from(20 + k));
        blocks.tail_tube_mut(1, 1).copy_from_slice(&[0.5, -0.5]);
        blocks
    }

    #[test]
    fn product_reads_blocks_by_columns_and_nothing_beyond_the_duct() {
        let (v, mut out) = ([1.0, 10.0, 100.0, 1000.0, 3.0, 4.0], [f64::NAN; 6]);
        two_tubes(Coupling::Diagonal).multiply(&v, &mut out);
        assert_eq!(out, [1031.0, 11042.0, 7520.0, 8810.0, 0.0, -450.0]);
        let mut full = two_tubes(Coupling::Full);
        full.lower_mut(0).fill(f64::NAN);
        full.upper_mut(1).fill(f64::NAN);
        full.multiply(&v, &mut out);
        assert_eq!(out, [13031.0, 14142.0, 7740.0, 8851.0, 0.0, -450.0]);
        full.cut_ends();
        assert_eq!(full, two_tubes(Coupling::Full));
    }

    #[test]
    fn tail_rows_are_used_only_where_written() {
        let mut blocks = two_tubes(Coupling::Diagonal);
        assert!(blocks.tail_row(0).1.is_empty());
        assert_eq!(blocks.tail_row(1), (2, &[0.5, -0.5][..]));
        blocks.tail_tube_mut(1, 0)[1] = 2.0;
        assert_eq!(blocks.tail_row(1), (0, &[0.0, 2.0, 0.5, -0.5][..]));
        blocks.clear();
        assert_eq!(blocks, Blocks::zeros(blocks.shape()));
        assert_eq!(blocks.tail_row_mut(1), [0.0; 4]);
        assert_eq!(blocks.tail_row(1).1.len(), 4);
    }
}
