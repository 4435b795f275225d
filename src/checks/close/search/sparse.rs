//! Sparse symmetric positive matrices: ordering by minimum degree, and Cholesky factors.
//!
//! The matrices are sums of weighted squares of short rows (normal equations). The pattern is found once for a set of
//! rows; the numbers are filled in many times. Minimum degree (Tinney and Walker 1967) keeps long trusses near linear.

use crate::exact::order;
use std::collections::BTreeSet;

/// The pattern of a Cholesky factor, and where each row's products go in it.
#[derive(Clone, Debug)]
pub(crate) struct Pattern {
    size: usize,
    /// The place of each unknown in the order of elimination.
    rank: Vec<usize>,
    /// Start of each column, the diagonal first, rows ascending.
    starts: Vec<usize>,
    rows: Vec<usize>,
    /// For each row of the problem: the slots of its products, for `i` in its entries and `k <= i`.
    slots: Vec<Vec<usize>>,
}

/// A factor with numbers: `L Lᵀ` of the matrix that was filled in.
#[derive(Clone, Debug)]
pub(crate) struct Factor<'p> {
    pattern: &'p Pattern,
    numbers: Vec<f64>,
}

/// Pivots below this share of their diagonal count as none: the direction is not determined.
const LEAST_PIVOT: f64 = 1e-15;

impl Pattern {
    /// The pattern for `size` unknowns and rows that touch these unknowns (each at most once).
    ///
    /// Near linear for long trusses.
    pub(crate) fn new(size: usize, touched: &[Vec<usize>]) -> Pattern {
        let (order, columns) = eliminate(neighbours(size, touched));
        let mut rank = vec![0; size];
        for (place, &unknown) in order.iter().enumerate() {
            rank[unknown] = place;
        }
        let (mut starts, mut rows) = (vec![0], Vec::new());
        for (place, column) in columns.iter().enumerate() {
            let mut below: Vec<usize> = column.iter().map(|&unknown| rank[unknown]).collect();
            order::sort(&mut below);
            rows.push(place);
            rows.extend(below);
            starts.push(rows.len());
        }
        let mut pattern = Pattern { size, rank, starts, rows, slots: Vec::new() };
        pattern.slots = touched.iter().map(|entries| pattern.slots_of(entries)).collect();
        pattern
    }

    /// The number of unknowns.
    pub(crate) fn size(&self) -> usize {
        self.size
    }

    fn slots_of(&self, entries: &[usize]) -> Vec<usize> {
        let mut slots = Vec::with_capacity(entries.len() * (entries.len() + 1) / 2);
        for (i, a) in entries.iter().enumerate() {
            for b in &entries[..=i] {
                let (p, q) = (self.rank[*a], self.rank[*b]);
                slots.push(self.slot(p.max(q), p.min(q)));
            }
        }
        slots
    }

    fn slot(&self, row: usize, column: usize) -> usize {
        let (start, end) = (self.starts[column], self.starts[column + 1]);
        start + self.rows[start..end].binary_search(&row).unwrap_or(0)
    }

    /// An empty matrix with this pattern.
    pub(crate) fn zeros(&self) -> Vec<f64> {
        vec![0.0; self.rows.len()]
    }

    /// Adds `weight · g gᵀ`, where `g` are the row's numbers in the order of its entries.
    pub(crate) fn add_row(&self, matrix: &mut [f64], row: usize, numbers: &[f64], weight: f64) {
        let mut slots = self.slots[row].iter();
        for (i, a) in numbers.iter().enumerate() {
            for b in &numbers[..=i] {
                if let Some(slot) = slots.next() {
                    matrix[*slot] += weight * a * b;
                }
            }
        }
    }

    /// Adds to the diagonal entry of an unknown.
    pub(crate) fn add_diagonal(&self, matrix: &mut [f64], unknown: usize, number: f64) {
        matrix[self.starts[self.rank[unknown]]] += number;
    }

    /// Factors the matrix; a direction without a pivot gets a huge one, so that it does not move.
    pub(crate) fn factor(&self, mut numbers: Vec<f64>) -> Factor<'_> {
        let diagonals: Vec<f64> = self.starts[..self.size].iter().map(|&start| numbers[start]).collect();
        for (column, diagonal) in diagonals.iter().enumerate() {
            let (start, end) = (self.starts[column], self.starts[column + 1]);
            let rest = numbers[start];
            let pivot = if rest > LEAST_PIVOT * diagonal { rest.sqrt() } else { 1e60 };
            numbers[start] = pivot;
            numbers[start + 1..end].iter_mut().for_each(|n| *n /= pivot);
            self.spread_column(&mut numbers, start, end);
        }
        Factor { pattern: self, numbers }
    }

    /// Takes the products of a finished column from the columns after it.
    fn spread_column(&self, numbers: &mut [f64], start: usize, end: usize) {
        for k in start + 1..end {
            let (target, factor) = (self.rows[k], numbers[k]);
            if factor == 0.0 {
                continue;
            }
            let mut slot = self.starts[target];
            for i in k..end {
                while self.rows[slot] < self.rows[i] {
                    slot += 1;
                }
                numbers[slot] -= numbers[i] * factor;
            }
        }
    }
}

impl Factor<'_> {
    /// The logarithm of the matrix's determinant.
    pub(crate) fn log_determinant(&self) -> f64 {
        let starts = &self.pattern.starts[..self.pattern.size];
        2.0 * starts.iter().map(|&start| self.numbers[start].ln()).sum::<f64>()
    }

    /// Solves `A x = b`.
    pub(crate) fn solve(&self, b: &[f64]) -> Vec<f64> {
        let pattern = self.pattern;
        let mut x = vec![0.0; pattern.size];
        for (unknown, value) in b.iter().enumerate() {
            x[pattern.rank[unknown]] = *value;
        }
        for column in 0..pattern.size {
            let (start, end) = (pattern.starts[column], pattern.starts[column + 1]);
            x[column] /= self.numbers[start];
            let value = x[column];
            for k in start + 1..end {
                x[pattern.rows[k]] -= self.numbers[k] * value;
            }
        }
        for column in (0..pattern.size).rev() {
            let (start, end) = (pattern.starts[column], pattern.starts[column + 1]);
            let below: f64 = (start + 1..end).map(|k| self.numbers[k] * x[pattern.rows[k]]).sum();
            x[column] = (x[column] - below) / self.numbers[start];
        }
        pattern.rank.iter().map(|&place| x[place]).collect()
    }
}

fn neighbours(size: usize, touched: &[Vec<usize>]) -> Vec<BTreeSet<usize>> {
    let mut graph = vec![BTreeSet::new(); size];
    for entries in touched {
        for &a in entries {
            graph[a].extend(entries.iter().copied().filter(|&b| b != a));
        }
    }
    graph
}

/// Eliminates the unknown with the fewest neighbours first; gives the order and each one's neighbours at that time.
fn eliminate(mut graph: Vec<BTreeSet<usize>>) -> (Vec<usize>, Vec<Vec<usize>>) {
    let mut waiting: BTreeSet<(usize, usize)> = graph.iter().enumerate().map(|(i, n)| (n.len(), i)).collect();
    let (mut order, mut columns) = (Vec::new(), Vec::new());
    while let Some((_, pivot)) = waiting.pop_first() {
        let around: Vec<usize> = std::mem::take(&mut graph[pivot]).into_iter().collect();
        for &a in &around {
            waiting.remove(&(graph[a].len(), a));
            graph[a].remove(&pivot);
            graph[a].extend(around.iter().copied().filter(|&b| b != a));
            waiting.insert((graph[a].len(), a));
        }
        order.push(pivot);
        columns.push(around);
    }
    (order, columns)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_chain_with_a_closing_link_is_solved() {
        let n = 30;
        let mut touched: Vec<Vec<usize>> = (1..n).map(|i| vec![i - 1, i]).collect();
        touched.push(vec![0, n - 1]);
        let pattern = Pattern::new(n, &touched);
        let mut matrix = pattern.zeros();
        for row in 0..touched.len() {
            pattern.add_row(&mut matrix, row, &[-1.0, 1.0], 2.0);
        }
        (0..n).for_each(|i| pattern.add_diagonal(&mut matrix, i, 1.0));
        let wanted: Vec<f64> = (0..n).map(|i| (i * i % 7) as f64).collect();
        let mut b: Vec<f64> = wanted.clone();
        for entries in &touched {
            let gap = 2.0 * (wanted[entries[1]] - wanted[entries[0]]);
            b[entries[0]] -= gap;
            b[entries[1]] += gap;
        }
        let x = pattern.factor(matrix).solve(&b);
        assert!(x.iter().zip(&wanted).all(|(a, b)| (a - b).abs() < 1e-12), "{x:?}");
    }
}
