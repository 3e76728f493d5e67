//! The algebra of moving along constraints: shortest steps onto them, descent in their null space, curvature by BFGS.

/// Variables in natural scales: open element, lead, duration, yaw, line of apsides, attitude, rate times the burn time.
pub(super) type Variables = [f64; ALL];
pub(super) const ALL: usize = 7;
/// Which of them is made small.
pub(super) const DURATION: usize = 2;

/// Curvature of the Lagrangian by the active variables.
pub(super) type Curvature = [[f64; ALL]; ALL];

/// A Jacobian: one row for each miss, one column for each active variable.
pub(super) type Rows = [[f64; ALL]; 4];

/// Scalar product.
pub(super) fn dot(a: &Variables, b: &Variables) -> f64 {
    a.iter().zip(b).map(|(x, y)| x * y).sum()
}

/// An orthonormal basis: the first vectors span the rows of a Jacobian, the others its null space.
pub(super) struct Basis {
    pub(super) q: [Variables; ALL],
    /// Row k of the Jacobian is Σ_j r[j][k] q[j], j ≤ k.
    r: [[f64; 4]; 4],
    rank: usize,
    n: usize,
}

impl Basis {
    /// Gram–Schmidt, each vector made orthogonal twice. `None` where the rows depend on each other.
    pub(super) fn new(rows: &Rows, rank: usize, n: usize) -> Option<Self> {
        let mut basis = Self {
            q: [[0.0; ALL]; ALL],
            r: [[0.0; 4]; 4],
            rank,
            n,
        };
        for (k, row) in rows.iter().enumerate().take(rank) {
            let mut vector = *row;
            let length = dot(&vector, &vector).sqrt();
            for _ in 0..2 {
                for j in 0..k {
                    let share = dot(&vector, &basis.q[j]);
                    basis.r[j][k] += share;
                    subtract(&mut vector, &basis.q[j], share);
                }
            }
            let rest = dot(&vector, &vector).sqrt();
            if !(1e-12 * length < rest && rest.is_finite()) {
                return None;
            }
            basis.r[k][k] = rest;
            basis.q[k] = vector.map(|x| x / rest);
        }
        for k in rank..n {
            // The unit vector that the basis so far covers least.
            let covered = |i: usize| (0..k).map(|j| basis.q[j][i].powi(2)).sum::<f64>();
            let i = (0..n).min_by(|&a, &b| covered(a).total_cmp(&covered(b)))?;
            let mut vector = [0.0; ALL];
            vector[i] = 1.0;
            for _ in 0..2 {
                for j in 0..k {
                    let share = dot(&vector, &basis.q[j]);
                    subtract(&mut vector, &basis.q[j], share);
                }
            }
            let rest = dot(&vector, &vector).sqrt();
            basis.q[k] = vector.map(|x| x / rest);
        }
        Some(basis)
    }

    /// The shortest step that cancels the misses to first order.
    pub(super) fn shortest(&self, miss: &[f64; 4]) -> Variables {
        let mut y = [0.0; 4];
        let mut step = [0.0; ALL];
        for k in 0..self.rank {
            let rest: f64 = (0..k).map(|j| self.r[j][k] * y[j]).sum();
            y[k] = (-miss[k] - rest) / self.r[k][k];
            subtract(&mut step, &self.q[k], -y[k]);
        }
        step
    }

    /// Multipliers λ of the misses for the burn time: Jᵀ λ = its gradient, on the row space.
    fn multipliers(&self) -> [f64; 4] {
        let mut multipliers = [0.0; 4];
        for k in (0..self.rank).rev() {
            let rest: f64 = (k + 1..self.rank)
                .map(|j| self.r[k][j] * multipliers[j])
                .sum();
            multipliers[k] = (self.q[k][DURATION] - rest) / self.r[k][k];
        }
        multipliers
    }

    /// Change of the Lagrangian's gradient from one Jacobian to another, with this point's multipliers.
    pub(super) fn lagrangian_change(&self, from: &Rows, to: &Rows) -> Variables {
        let multipliers = self.multipliers();
        std::array::from_fn(|column| {
            -(0..self.rank)
                .map(|k| multipliers[k] * (to[k][column] - from[k][column]))
                .sum::<f64>()
        })
    }

    /// The step in the null space that shortens the burn most, by the curvature; and what it gains, in units of the duration.
    pub(super) fn descent(&self, curvature: &Curvature) -> (Variables, f64) {
        let free = self.n - self.rank;
        let mut small = [[0.0; 4]; 4];
        let mut slopes = [0.0; 4];
        let mut largest = 1e-9_f64;
        for a in 0..free {
            let bent: Variables =
                std::array::from_fn(|i| dot(&curvature[i], &self.q[self.rank + a]));
            for (b, row) in small.iter_mut().enumerate().take(free) {
                row[a] = dot(&bent, &self.q[self.rank + b]);
            }
            slopes[a] = self.q[self.rank + a][DURATION];
            largest = largest.max(small[a][a].abs());
        }
        let mut shift = 0.0;
        for _ in 0..14 {
            let mut shifted = small;
            for (a, row) in shifted.iter_mut().enumerate().take(free) {
                row[a] += shift;
            }
            if let Some(part) = positive_solve(&shifted, &slopes, free) {
                let mut step = [0.0; ALL];
                for (a, part) in part.iter().enumerate().take(free) {
                    subtract(&mut step, &self.q[self.rank + a], *part);
                }
                let gain = 0.5 * (0..free).map(|a| slopes[a] * part[a]).sum::<f64>();
                return (step, gain);
            }
            shift = if shift == 0.0 {
                1e-3 * largest
            } else {
                4.0 * shift
            };
        }
        ([0.0; ALL], 0.0)
    }
}

fn subtract(from: &mut Variables, vector: &Variables, share: f64) {
    for (value, x) in from.iter_mut().zip(vector) {
        *value -= share * x;
    }
}

/// Solves a symmetric system by Cholesky; `None` where it is not positive.
fn positive_solve(matrix: &[[f64; 4]; 4], right: &[f64; 4], n: usize) -> Option<[f64; 4]> {
    let mut l = [[0.0; 4]; 4];
    for i in 0..n {
        for j in 0..=i {
            let rest = matrix[i][j] - (0..j).map(|k| l[i][k] * l[j][k]).sum::<f64>();
            if i == j {
                if rest <= 0.0 || rest.is_nan() {
                    return None;
                }
                l[i][i] = rest.sqrt();
            } else {
                l[i][j] = rest / l[j][j];
            }
        }
    }
    let mut x = *right;
    for i in 0..n {
        let rest: f64 = (0..i).map(|k| l[i][k] * x[k]).sum();
        x[i] = (x[i] - rest) / l[i][i];
    }
    for i in (0..n).rev() {
        let rest: f64 = (i + 1..n).map(|k| l[k][i] * x[k]).sum();
        x[i] = (x[i] - rest) / l[i][i];
    }
    Some(x)
}

/// BFGS update of the curvature, left out where it would spoil it.
pub(super) fn updated(curvature: &Curvature, step: &Variables, change: &Variables) -> Curvature {
    let along = dot(change, step);
    let bent: Variables = std::array::from_fn(|k| dot(&curvature[k], step));
    let old = dot(&bent, step);
    if along <= 0.0 || old <= 0.0 {
        return *curvature;
    }
    std::array::from_fn(|k| {
        std::array::from_fn(|j| {
            curvature[k][j] + change[k] * change[j] / along - bent[k] * bent[j] / old
        })
    })
}
