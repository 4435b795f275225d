//! Sparse elimination of the rigidity matrix modulo a prime.
//!
//! Not the matrix R itself is eliminated but G = Rᵀ D R with scattered weights D: symmetric, with a pattern that is known from
//! the members alone. Over the rationals G has the rank of R, and a pivot is zero only with its whole row. So an elimination without any exchange of rows
//! gives G = L P Lᵀ, and each zero pivot is a *free* column: one way to move.
//!
//! # What it proves
//!
//! rank G modulo p <= rank R modulo p <= rank R. So a full rank is proved. A zero pivot proves nothing by itself: its motion
//! has to be lifted and verified (see [`super::lift`]). When a pivot is zero and its row is not, the weights were unlucky,
//! and others have to be taken.
//!
//! Entries are kept in blocks of two by two, one for each pair of joints.

use super::matrix::{Matrix, NOWHERE, Row};
use super::order::{Neighbours, order};
use crate::exact::modular::{Field, Scatter};
use crate::exact::order as sorting;

/// Entries (blocks) of L beyond which the elimination is not begun: about 240 MB.
const MOST_BLOCKS: usize = 12_000_000;

/// Where the entries of L are: the same for any places of the joints.
#[derive(Debug)]
pub(crate) struct Pattern {
    /// The place of each column pair in the order of elimination.
    pub(crate) position: Vec<u32>,
    /// The column pair at each place.
    pub(crate) order: Vec<u32>,
    /// The pairs of G left of the diagonal, row by row, by position.
    starts: Vec<u32>,
    left: Vec<u32>,
    /// The elimination tree.
    parent: Vec<u32>,
    /// Where each column of L starts.
    columns: Vec<usize>,
}

/// The work of an elimination is beyond the bound.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct TooMuch;

/// The elimination came upon a zero pivot whose row is not zero.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Unlucky;

/// A block: the entries (x,x), (x,y), (y,x), (y,y) of two rows and two columns.
type Block = [u64; 4];
/// The same, kept short.
type Short = [u32; 4];

/// The eliminated matrix.
#[derive(Debug)]
pub(crate) struct Factor<'m> {
    pub(crate) field: Field,
    pattern: &'m Pattern,
    rows_of_columns: Vec<u32>,
    blocks: Vec<Short>,
    /// Of each joint the entry of L between its own two columns.
    inner: Vec<u64>,
    /// Reciprocals of the pivots; 0 where the column is free.
    reciprocal: Vec<[u64; 2]>,
    /// The weights of the rows.
    pub(crate) weights: Vec<u64>,
    /// The residues of the rows.
    pub(crate) residues: Vec<[u64; 2]>,
    /// The free columns, by position in the order of elimination, twice and plus 1 for y.
    pub(crate) free: Vec<usize>,
}

impl Pattern {
    /// Finds the order of elimination and where entries arise.
    ///
    /// # Errors
    ///
    /// [`TooMuch`] when more blocks or more products of blocks arise than allowed.
    pub(crate) fn new(matrix: &Matrix, place: &[[i64; 2]], most_work: usize) -> Result<Pattern, TooMuch> {
        let count = matrix.joints.len();
        let neighbours = neighbours(count, &matrix.rows);
        let order = order(&neighbours, place);
        let mut position = vec![0; count];
        order.iter().enumerate().for_each(|(at, &pair)| position[pair as usize] = at as u32);
        let (mut starts, mut left) = (vec![0], Vec::new());
        for (at, &pair) in order.iter().enumerate() {
            left.extend(neighbours[pair as usize].iter().map(|&n| position[n as usize]).filter(|&n| (n as usize) < at));
            starts.push(left.len() as u32);
        }
        let parent = tree(&starts, &left);
        let mut pattern = Pattern { position, order, starts, left, parent, columns: Vec::new() };
        pattern.columns = pattern.count_columns(most_work)?;
        Ok(pattern)
    }

    fn left(&self, row: usize) -> &[u32] {
        &self.left[self.starts[row] as usize..self.starts[row + 1] as usize]
    }

    fn count_columns(&self, most_work: usize) -> Result<Vec<usize>, TooMuch> {
        let count = self.order.len();
        let mut reach = Reach::new(count);
        let mut size = vec![0usize; count];
        let (mut blocks, mut work) = (0usize, 0usize);
        for row in 0..count {
            for &column in reach.of(self, row) {
                size[column as usize] += 1;
                work = work.saturating_add(size[column as usize]);
                blocks += 1;
            }
            if blocks > MOST_BLOCKS || work > most_work {
                return Err(TooMuch);
            }
        }
        let mut starts = vec![0];
        for (column, size) in size.iter().enumerate() {
            starts.push(starts[column] + size);
        }
        Ok(starts)
    }
}

/// Which columns a row of L reaches: its own entries and their ancestors in the elimination tree.
struct Reach {
    mark: Vec<u32>,
    path: Vec<u32>,
    found: Vec<u32>,
}

impl Reach {
    fn new(count: usize) -> Reach {
        Reach { mark: vec![u32::MAX; count], path: Vec::new(), found: Vec::new() }
    }

    /// The columns in an order in which each comes before those that depend on it.
    fn of(&mut self, pattern: &Pattern, row: usize) -> &[u32] {
        self.found.clear();
        let stamp = row as u32;
        self.mark[row] = stamp;
        for &start in pattern.left(row) {
            let mut column = start;
            self.path.clear();
            while self.mark[column as usize] != stamp {
                self.mark[column as usize] = stamp;
                self.path.push(column);
                column = pattern.parent[column as usize];
            }
            // A later path never ends in a column of an earlier one: it goes before.
            self.found.extend(self.path.iter().rev());
        }
        self.found.reverse();
        &self.found
    }
}

fn neighbours(count: usize, rows: &[Row]) -> Neighbours {
    let mut neighbours: Neighbours = vec![Vec::new(); count];
    for row in rows.iter().filter(|row| row.at[1] != NOWHERE && row.at[0] != row.at[1]) {
        neighbours[row.at[0] as usize].push(row.at[1]);
        neighbours[row.at[1] as usize].push(row.at[0]);
    }
    for list in &mut neighbours {
        sorting::sort(list);
        list.dedup();
    }
    neighbours
}

/// The elimination tree, with path compression (Liu 1986).
fn tree(starts: &[u32], left: &[u32]) -> Vec<u32> {
    let count = starts.len() - 1;
    let mut parent = vec![u32::MAX; count];
    let mut ancestor = vec![u32::MAX; count];
    for row in 0..count {
        for &start in &left[starts[row] as usize..starts[row + 1] as usize] {
            let mut column = start as usize;
            while ancestor[column] != u32::MAX && ancestor[column] != row as u32 {
                let next = ancestor[column] as usize;
                ancestor[column] = row as u32;
                column = next;
            }
            if ancestor[column] == u32::MAX {
                ancestor[column] = row as u32;
                parent[column] = row as u32;
            }
        }
    }
    parent
}

impl<'m> Factor<'m> {
    /// Eliminates G modulo the prime of the field, with these residues for the rows.
    ///
    /// # Errors
    ///
    /// [`Unlucky`] when the weights do not suit.
    pub(crate) fn new(
        matrix: &Matrix,
        pattern: &'m Pattern,
        field: Field,
        residues: Vec<[u64; 2]>,
        seed: u64,
    ) -> Result<Factor<'m>, Unlucky> {
        let mut scatter = Scatter::new(seed);
        let weights: Vec<u64> = matrix.rows.iter().map(|_| scatter.residue(field)).collect();
        let count = pattern.order.len();
        let total = pattern.columns.last().copied().unwrap_or(0);
        let factor = Factor {
            field,
            pattern,
            rows_of_columns: vec![0; total],
            blocks: vec![[0; 4]; total],
            inner: vec![0; count],
            reciprocal: vec![[0; 2]; count],
            weights,
            residues,
            free: Vec::new(),
        };
        factor.eliminated(matrix)
    }

    fn eliminated(mut self, matrix: &Matrix) -> Result<Factor<'m>, Unlucky> {
        let (gram, diagonal) = self.gram(matrix);
        let count = self.pattern.order.len();
        let mut filled: Vec<usize> = self.pattern.columns.clone();
        let mut work: Vec<Block> = vec![[0; 4]; count];
        let mut reach = Reach::new(count);
        for (row, mut pivot) in diagonal.into_iter().enumerate() {
            let entries = self.pattern.starts[row] as usize..self.pattern.starts[row + 1] as usize;
            for entry in entries {
                work[self.pattern.left[entry] as usize] = gram[entry];
            }
            for &column in reach.of(self.pattern, row) {
                self.eliminate(row, column as usize, &mut filled, &mut work, &mut pivot)?;
            }
            self.finish_pivot(row, pivot)?;
        }
        Ok(self)
    }

    /// The blocks of G left of the diagonal, as in the pattern, and those on it.
    fn gram(&self, matrix: &Matrix) -> (Vec<Block>, Vec<Block>) {
        let (field, pattern) = (self.field, self.pattern);
        let mut gram = vec![[0; 4]; pattern.left.len()];
        let mut diagonal = vec![[0; 4]; pattern.order.len()];
        for (index, row) in matrix.rows.iter().enumerate() {
            let [x, y] = self.residues[index];
            if row.at[0] == row.at[1] || (x == 0 && y == 0) {
                continue;
            }
            let (wx, wy) = (field.times(self.weights[index], x), field.times(self.weights[index], y));
            let block = [field.times(wx, x), field.times(wx, y), field.times(wy, x), field.times(wy, y)];
            let places = row.at.iter().filter(|&&at| at != NOWHERE).map(|&at| pattern.position[at as usize] as usize);
            let places: Vec<usize> = places.collect();
            for &place in &places {
                add(field, &mut diagonal[place], block);
            }
            if let [a, b] = places[..] {
                let (low, high) = (a.min(b) as u32, a.max(b));
                let start = pattern.starts[high] as usize;
                if let Some(at) = pattern.left(high).iter().position(|&column| column == low) {
                    add(field, &mut gram[start + at], block.map(|entry| field.minus(entry)));
                }
            }
        }
        (gram, diagonal)
    }

    /// Eliminates one column from a row: keeps the block of L, and takes its share from the blocks that depend on it.
    fn eliminate(
        &mut self,
        row: usize,
        column: usize,
        filled: &mut [usize],
        work: &mut [Block],
        pivot: &mut Block,
    ) -> Result<(), Unlucky> {
        let field = self.field;
        let mut taken = std::mem::take(&mut work[column]).map(|entry| field.reduce(entry));
        let inner = self.inner[column];
        for r in [0, 2] {
            // The y column of this joint depends on its x column.
            taken[r + 1] = field.plus(taken[r + 1], field.minus(field.times(taken[r], inner)));
        }
        let [rx, ry] = self.reciprocal[column];
        if (rx == 0 && (taken[0] != 0 || taken[2] != 0)) || (ry == 0 && (taken[1] != 0 || taken[3] != 0)) {
            return Err(Unlucky);
        }
        let kept = [
            field.times(taken[0], rx),
            field.times(taken[1], ry),
            field.times(taken[2], rx),
            field.times(taken[3], ry),
        ];
        let less = taken.map(|entry| field.minus(entry));
        let first = self.pattern.columns[column];
        for at in first..filled[column] {
            let l = self.blocks[at].map(u64::from);
            let block = &mut work[self.rows_of_columns[at] as usize];
            // block[r][c] -= taken[r][x] l[c][x] + taken[r][y] l[c][y]
            block[0] += field.fold(less[0] * l[0]) + field.fold(less[1] * l[1]);
            block[1] += field.fold(less[0] * l[2]) + field.fold(less[1] * l[3]);
            block[2] += field.fold(less[2] * l[0]) + field.fold(less[3] * l[1]);
            block[3] += field.fold(less[2] * l[2]) + field.fold(less[3] * l[3]);
        }
        pivot[0] += field.fold(less[0] * kept[0]) + field.fold(less[1] * kept[1]);
        pivot[2] += field.fold(less[2] * kept[0]) + field.fold(less[3] * kept[1]);
        pivot[3] += field.fold(less[2] * kept[2]) + field.fold(less[3] * kept[3]);
        let at = filled[column];
        self.rows_of_columns[at] = row as u32;
        self.blocks[at] = kept.map(|entry| entry as u32);
        filled[column] += 1;
        Ok(())
    }

    fn finish_pivot(&mut self, row: usize, pivot: Block) -> Result<(), Unlucky> {
        let field = self.field;
        let [xx, _, yx, yy] = pivot.map(|entry| field.reduce(entry));
        if xx == 0 && yx != 0 {
            return Err(Unlucky);
        }
        let rx = field.reciprocal(xx);
        self.inner[row] = field.times(yx, rx);
        let yy = field.plus(yy, field.minus(field.times(yx, self.inner[row])));
        self.reciprocal[row] = [rx, field.reciprocal(yy)];
        self.free
            .extend([xx == 0, yy == 0].into_iter().enumerate().filter(|(_, is)| *is).map(|(axis, _)| 2 * row + axis));
        Ok(())
    }

    /// The rank that was found: at most the true rank.
    pub(crate) fn rank(&self) -> usize {
        2 * self.pattern.order.len() - self.free.len()
    }

    /// How many blocks a solution goes through.
    pub(crate) fn size(&self) -> usize {
        self.blocks.len() + self.pattern.order.len()
    }

    /// The solution of G x = b with zeros in the free columns; by column pair.
    pub(crate) fn solve(&self, b: &[[u64; 2]]) -> Vec<[u64; 2]> {
        let field = self.field;
        let mut x: Vec<[u64; 2]> = self.pattern.order.iter().map(|&pair| b[pair as usize]).collect();
        for column in 0..x.len() {
            let [rx, ry] = self.reciprocal[column];
            let [vx, mut vy] = x[column].map(|entry| field.reduce(entry));
            let vx = if rx == 0 { 0 } else { vx };
            vy = field.plus(vy, field.minus(field.times(vx, self.inner[column])));
            let vy = if ry == 0 { 0 } else { vy };
            let (lx, ly) = (field.minus(vx), field.minus(vy));
            for at in self.pattern.columns[column]..self.pattern.columns[column + 1] {
                let l = self.blocks[at].map(u64::from);
                let entry = &mut x[self.rows_of_columns[at] as usize];
                entry[0] += field.fold(lx * l[0]) + field.fold(ly * l[1]);
                entry[1] += field.fold(lx * l[2]) + field.fold(ly * l[3]);
            }
            x[column] = [field.times(vx, rx), field.times(vy, ry)];
        }
        self.back(&mut x);
        self.by_pair(x)
    }

    /// The motion of a free column: 1 there, 0 in the other free columns; by column pair.
    pub(crate) fn motion(&self, free: usize) -> Vec<[u64; 2]> {
        let mut x = vec![[0; 2]; self.pattern.order.len()];
        x[free / 2][free % 2] = 1;
        self.back(&mut x);
        self.by_pair(x)
    }

    /// Solves with Lᵀ. Entries of L in free columns are zero, so what stands there stays.
    fn back(&self, x: &mut [[u64; 2]]) {
        let field = self.field;
        for column in (0..x.len()).rev() {
            let mut sum = [0u64; 2];
            for at in self.pattern.columns[column]..self.pattern.columns[column + 1] {
                let l = self.blocks[at].map(u64::from);
                let [vx, vy] = x[self.rows_of_columns[at] as usize];
                sum[0] += field.fold(l[0] * vx) + field.fold(l[2] * vy);
                sum[1] += field.fold(l[1] * vx) + field.fold(l[3] * vy);
            }
            let [sx, sy] = sum.map(|entry| field.minus(field.reduce(entry)));
            let y = field.plus(x[column][1], sy);
            let x_part = field.plus(x[column][0], sx);
            x[column] = [field.plus(x_part, field.minus(field.times(self.inner[column], y))), y];
        }
    }

    fn by_pair(&self, x: Vec<[u64; 2]>) -> Vec<[u64; 2]> {
        self.pattern.position.iter().map(|&place| x[place as usize]).collect()
    }
}

fn add(field: Field, block: &mut Block, more: Block) {
    for (entry, more) in block.iter_mut().zip(more) {
        *entry = field.plus(*entry, more);
    }
}
