//! One bracketed root finder: where does a continuous function change sign?

use super::tolerance::ROOT_RELATIVE;

/// Why no root came back.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum NoRoot {
    /// The function has the same sign at both ends.
    SameSign,
    /// The function does not exist at a point the search needed.
    Undefined,
}

/// Finds the root of `f` between `a` and `b`, where `f` must change sign.
///
/// # Method
/// Brent (1973), *Algorithms for Minimization without Derivatives*, chapter 4: inverse quadratic
/// interpolation held inside a bisected bracket. Never worse than a few bisections, so the loop bound
/// of 200 is not reached for any double-precision bracket.
///
/// # Errors
/// [`NoRoot::SameSign`] without a sign change, [`NoRoot::Undefined`] where `f` returns `None` or a
/// value that is not finite.
pub fn bracketed(f: impl FnMut(f64) -> Option<f64>, a: f64, b: f64) -> Result<f64, NoRoot> {
    bracketed_to(f, a, b, ROOT_RELATIVE)
}

/// As [`bracketed`], to a relative width of one's own.
///
/// # Errors
/// As [`bracketed`].
pub fn bracketed_to(
    mut f: impl FnMut(f64) -> Option<f64>,
    a: f64,
    b: f64,
    relative: f64,
) -> Result<f64, NoRoot> {
    let mut at = |x: f64| f(x).filter(|y| y.is_finite()).ok_or(NoRoot::Undefined);
    let (mut a, mut b) = (a, b);
    let (mut fa, mut fb) = (at(a)?, at(b)?);
    if fa == 0.0 {
        return Ok(a);
    }
    if fb == 0.0 {
        return Ok(b);
    }
    if (fa < 0.0) == (fb < 0.0) {
        return Err(NoRoot::SameSign);
    }
    // c is the end of the bracket opposite b; d and e are the last two steps.
    let (mut c, mut fc) = (a, fa);
    let mut d = b - a;
    let mut e = d;
    for _ in 0..200 {
        if fc.abs() < fb.abs() {
            (a, b, c) = (b, c, b);
            (fa, fb, fc) = (fb, fc, fb);
        }
        let tolerance = relative * b.abs() + f64::MIN_POSITIVE;
        let half = 0.5 * (c - b);
        if fb == 0.0 || half.abs() <= tolerance {
            return Ok(b);
        }
        if tolerance <= e.abs() && fb.abs() < fa.abs() {
            let s = fb / fa;
            let (mut p, mut q) = if a == c {
                (2.0 * half * s, 1.0 - s)
            } else {
                let (q, r) = (fa / fc, fb / fc);
                (
                    s * (2.0 * half * q * (q - r) - (b - a) * (r - 1.0)),
                    (q - 1.0) * (r - 1.0) * (s - 1.0),
                )
            };
            if 0.0 < p {
                q = -q;
            } else {
                p = -p;
            }
            if 2.0 * p < (3.0 * half * q - (tolerance * q).abs()).min((e * q).abs()) {
                e = d;
                d = p / q;
            } else {
                d = half;
                e = half;
            }
        } else {
            d = half;
            e = half;
        }
        a = b;
        fa = fb;
        b += if tolerance < d.abs() {
            d
        } else {
            tolerance.copysign(half)
        };
        fb = at(b)?;
        if (0.0 < fb) == (0.0 < fc) {
            c = a;
            fc = fa;
            d = b - a;
            e = d;
        }
    }
    Ok(b)
}

/// Narrows the interval in which `predicate` changes from its value at `a` to another, by bisection,
/// and returns the last point on each side.
///
/// For borders that are not roots: where a limit begins to bind, a cost jumps.
pub fn border(predicate: impl FnMut(f64) -> bool, a: f64, b: f64) -> (f64, f64) {
    border_to(predicate, a, b, ROOT_RELATIVE)
}

/// As [`border`], to a relative width of one's own.
pub fn border_to(
    mut predicate: impl FnMut(f64) -> bool,
    a: f64,
    b: f64,
    relative: f64,
) -> (f64, f64) {
    let (mut a, mut b) = (a, b);
    let first = predicate(a);
    for _ in 0..200 {
        let middle = 0.5 * (a + b);
        if middle == a || middle == b || (b - a).abs() <= relative * middle.abs() {
            break;
        }
        if predicate(middle) == first {
            a = middle;
        } else {
            b = middle;
        }
    }
    (a, b)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn known_roots_and_swapped_ends() {
        // x³ = 2 and cos x = x (Dottie number 0.739085133215160641655312, a standard constant).
        for (a, b) in [(0.0, 2.0), (2.0, 0.0)] {
            let root = bracketed(|x| Some(x * x * x - 2.0), a, b).expect("bracketed");
            assert!((root - 2.0_f64.cbrt()).abs() <= 1e-15);
            let root = bracketed(|x| Some(x.cos() - x), a, b).expect("bracketed");
            assert!((root - 0.739_085_133_215_160_6).abs() <= 2e-16);
        }
    }

    #[test]
    fn flat_and_steep_functions_still_end() {
        let root = bracketed(|x| Some((x - 1.0).powi(9)), 0.0, 3.0).expect("bracketed");
        assert!((root - 1.0).abs() <= 1e-4, "{root}");
        let root = bracketed(|x| Some(1e300 * (x - 1e-12)), -1.0, 1.0).expect("bracketed");
        assert!((root - 1e-12).abs() <= 1e-27);
    }

    #[test]
    fn refuses_what_it_cannot_answer() {
        assert_eq!(
            bracketed(|x| Some(x * x + 1.0), -1.0, 1.0),
            Err(NoRoot::SameSign)
        );
        assert_eq!(bracketed(|_| None, -1.0, 1.0), Err(NoRoot::Undefined));
        assert_eq!(
            bracketed(|_| Some(f64::NAN), -1.0, 1.0),
            Err(NoRoot::Undefined)
        );
    }

    #[test]
    fn border_of_a_step() {
        let (below, above) = border(|x| x < std::f64::consts::PI, 0.0, 10.0);
        assert!(below < std::f64::consts::PI && std::f64::consts::PI <= above);
        assert!(above - below <= 1e-14);
    }
}
