//! Roots of one function of one variable, kept inside a bracket.

/// Two points where a function has opposite signs.
#[derive(Clone, Copy, Debug)]
pub struct Bracket {
    /// Lower end.
    pub low: f64,
    /// Upper end.
    pub high: f64,
    /// Function at the lower end.
    pub at_low: f64,
    /// Function at the upper end.
    pub at_high: f64,
}

/// A root of `f` inside `bracket`, to within `width` of its argument.
///
/// Method: R. P. Brent's safeguard idea with inverse quadratic steps as published by I. Chandrupatla,
/// *Advances in Engineering Software* 28 (1997) 145-149.
pub fn find_root(mut f: impl FnMut(f64) -> f64, bracket: Bracket, width: f64) -> f64 {
    let (mut a, mut fa) = (bracket.high, bracket.at_high);
    let (mut b, mut fb) = (bracket.low, bracket.at_low);
    let (mut c, mut fc);
    let mut t = 0.5;
    for _ in 0..200 {
        let x = a + t * (b - a);
        let fx = f(x);
        if fx == 0.0 {
            return x;
        }
        if (fx > 0.0) == (fa > 0.0) {
            (c, fc) = (a, fa);
        } else {
            (c, fc, b, fb) = (b, fb, a, fa);
        }
        (a, fa) = (x, fx);
        let best = if fa.abs() < fb.abs() { a } else { b };
        let tolerance = 2.0 * f64::EPSILON * best.abs() + 0.5 * width;
        let limit = tolerance / (b - a).abs();
        if limit > 0.5 {
            return best;
        }
        let xi = (a - b) / (c - b);
        let phi = (fa - fb) / (fc - fb);
        t = if phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
            fa / (fb - fa) * fc / (fb - fc) + (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
        } else {
            0.5
        };
        t = t.clamp(limit, 1.0 - limit);
    }
    a
}

#[cfg(test)]
mod tests {
    use super::*;

    #[track_caller]
    fn check_root(f: impl Fn(f64) -> f64, low: f64, high: f64, expected: f64) {
        let bracket = Bracket { low, high, at_low: f(low), at_high: f(high) };
        let mut calls = 0;
        let root = find_root(
            |x| {
                calls += 1;
                f(x)
            },
            bracket,
            1e-14,
        );
        assert!((root - expected).abs() < 2e-14 * (1.0 + expected.abs()), "{root} against {expected}");
        assert!(calls < 60, "{calls} calls");
    }

    #[test]
    fn planted_roots_are_found() {
        check_root(|x| x * x - 2.0, 0.0, 2.0, 2f64.sqrt());
        check_root(|x| x.cos(), 0.0, 3.0, std::f64::consts::FRAC_PI_2);
        check_root(|x| (x - 0.3).powi(3), 0.0, 1.0, 0.3);
        check_root(|x| if x < 0.7 { -1.0 } else { 5.0 }, 0.0, 1.0, 0.7);
    }
}
