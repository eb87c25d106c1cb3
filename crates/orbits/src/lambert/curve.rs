//! Flight time as a function of Izzo's variable x, and its roots.

use std::f64::consts::PI;

/// The curve of scaled flight time over x, for one shape of triangle and one number of revolutions.
#[derive(Clone, Copy)]
pub(super) struct Curve {
    /// Izzo's lambda, -1 to 1: negative for angles at the centre beyond 180 degrees.
    pub(super) lambda: f64,
    /// 1 - lambda^2: chord over semiperimeter, which keeps its digits for short arcs.
    pub(super) shortfall: f64,
    /// Whole revolutions.
    pub(super) revolutions: u32,
}

/// Closer to the parabola (in 1 - x^2) the series of Battin replaces the closed form, which loses digits there.
const SERIES_BELOW: f64 = 0.3;

/// Closer to the parabola the derivatives lose too many digits: the slope at the parabola serves instead.
const SLOPE_BELOW: f64 = 1e-3;

/// Relative error that rounding leaves in a flight time: no step can do better.
const ROUNDING: f64 = 16.0 * f64::EPSILON;

/// Steps after which a root stops: bisection alone needs fewer.
const STEPS_MAX: u32 = 80;

impl Curve {
    /// Izzo's y: sqrt(1 - lambda^2 (1 - x^2)).
    pub(super) fn y(&self, x: f64) -> f64 {
        (self.shortfall + (self.lambda * x).powi(2)).sqrt()
    }

    /// y - lambda x without cancellation.
    fn eta(&self, x: f64, y: f64) -> f64 {
        let lambda_x = self.lambda * x;
        if lambda_x > 0.0 { self.shortfall / (y + lambda_x) } else { y - lambda_x }
    }

    /// lambda y - x without cancellation.
    fn lambda_y_less_x(&self, x: f64, y: f64) -> f64 {
        let lambda_y = self.lambda * y;
        if lambda_y * x > 0.0 {
            let lambda2 = self.lambda * self.lambda;
            self.shortfall * (lambda2 - x * x * (1.0 + lambda2)) / (lambda_y + x)
        } else {
            lambda_y - x
        }
    }

    /// 1 - lambda without cancellation.
    fn one_less_lambda(&self) -> f64 {
        if self.lambda > 0.0 { self.shortfall / (1.0 + self.lambda) } else { 1.0 - self.lambda }
    }

    /// 1 - lambda^3.
    fn one_less_lambda3(&self) -> f64 {
        self.one_less_lambda() * (1.0 + self.lambda * (1.0 + self.lambda))
    }

    /// 1 - lambda^5.
    fn one_less_lambda5(&self) -> f64 {
        let l = self.lambda;
        self.one_less_lambda() * (1.0 + l * (1.0 + l * (1.0 + l * (1.0 + l))))
    }

    /// Scaled flight time (Izzo eq. 18; near the parabola eq. 20).
    pub(super) fn time(&self, x: f64) -> f64 {
        let y = self.y(x);
        let eta = self.eta(x, y);
        let e = (1.0 - x) * (1.0 + x);
        let turns = f64::from(self.revolutions) * PI;
        if x > 0.0 && e.abs() < SERIES_BELOW {
            let s = 0.5 * (self.one_less_lambda() - x * eta);
            let single = 0.5 * (eta.powi(3) * (4.0 / 3.0) * hypergeometric(s) + 4.0 * self.lambda * eta);
            return if self.revolutions == 0 { single } else { single + turns / (e * e.sqrt()) };
        }
        let root = e.abs().sqrt();
        let sine = eta * root;
        let psi = if e > 0.0 { sine.atan2(x * y + self.lambda * e) + turns } else { sine.asinh() };
        (psi / root + self.lambda_y_less_x(x, y)) / e
    }

    /// First three derivatives of the flight time (Izzo eq. 22).
    fn derivatives(&self, x: f64, time: f64) -> [f64; 3] {
        let e = (1.0 - x) * (1.0 + x);
        if self.revolutions == 0 && x > 0.0 && e.abs() < SLOPE_BELOW {
            return [-0.4 * self.one_less_lambda5(), 0.0, 0.0];
        }
        let y = self.y(x);
        let (l2, l3) = (self.lambda.powi(2), self.lambda.powi(3));
        let first = (3.0 * time * x - 2.0 + 2.0 * l3 * x / y) / e;
        let second = (3.0 * time + 5.0 * x * first + 2.0 * self.shortfall * l3 / y.powi(3)) / e;
        let third = (7.0 * x * second + 8.0 * first - 6.0 * self.shortfall * l2 * l3 * x / y.powi(5)) / e;
        [first, second, third]
    }

    /// The x of less than one revolution, and the steps taken.
    pub(super) fn single_root(&self, time: f64) -> (f64, u32) {
        // Flight time falls from infinity at x = -1 to zero at x = infinity. First guesses: Izzo eq. 30.
        let time0 = self.shortfall.sqrt().atan2(self.lambda) + self.lambda * self.shortfall.sqrt();
        let time1 = 2.0 / 3.0 * self.one_less_lambda3();
        let guess = if time >= time0 {
            (time0 / time).powf(2.0 / 3.0) - 1.0
        } else if time < time1 {
            2.5 * time1 * (time1 - time) / (time * self.one_less_lambda5()) + 1.0
        } else {
            (time0 / time).powf((time1 / time0).log2()) - 1.0
        };
        self.root(time, guess, -1.0, f64::INFINITY, 1.0)
    }

    /// Both x of this many revolutions (at least one), and the steps taken; `None` when the time is too short.
    pub(super) fn two_roots(&self, time: f64) -> Option<[(f64, u32); 2]> {
        let turns = f64::from(self.revolutions) * PI;
        if time < turns {
            return None;
        }
        let lowest = self.lowest();
        if time < self.time(lowest) {
            return None;
        }
        // First guesses: Izzo eq. 31.
        let guess = |ratio: f64| {
            let power = ratio.powf(2.0 / 3.0);
            (power - 1.0) / (power + 1.0)
        };
        let left = guess((turns + PI) / (8.0 * time));
        let right = guess(8.0 * time / turns);
        Some([self.root(time, left, -1.0, lowest, 1.0), self.root(time, right, lowest, 1.0, -1.0)])
    }

    /// The x of shortest flight time: the root of its derivative, by Halley's steps within a bracket.
    fn lowest(&self) -> f64 {
        let (mut low, mut high) = (-1.0, 1.0);
        let mut x: f64 = 0.0;
        for _ in 0..STEPS_MAX {
            let [first, second, third] = self.derivatives(x, self.time(x));
            if first < 0.0 {
                low = x;
            } else {
                high = x;
            }
            let halley = x - 2.0 * first * second / (2.0 * second * second - first * third);
            if (halley - x).abs() <= 4.0 * f64::EPSILON {
                break;
            }
            x = if halley > low && halley < high { halley } else { 0.5 * (low + high) };
        }
        x
    }

    /// The x between `low` and `high` with this flight time, by Householder's steps (Izzo eq. 25) within the
    /// bracket. `falling`: 1 where flight time falls with x, -1 where it grows.
    fn root(&self, time: f64, guess: f64, mut low: f64, mut high: f64, falling: f64) -> (f64, u32) {
        let middle = |low: f64, high: f64| {
            if high.is_finite() { 0.5 * (low + high) } else { 2.0 * low.max(1.0) }
        };
        let inside = |x: f64, low: f64, high: f64| {
            if x > low && x < high { x } else { middle(low, high) }
        };
        let mut x = inside(guess, low, high);
        for step in 1..=STEPS_MAX {
            let found = self.time(x);
            let excess = found - time;
            if excess.abs() <= ROUNDING * time {
                return (x, step);
            }
            if falling * excess > 0.0 {
                low = x;
            } else {
                high = x;
            }
            let [first, second, third] = self.derivatives(x, found);
            let slope2 = first * first;
            let householder = x - excess * (slope2 - 0.5 * excess * second)
                / (first * (slope2 - excess * second) + third * excess * excess / 6.0);
            // Before the bracket is asked: x is one of its ends by now, and a settled step lands on it.
            if (householder - x).abs() <= 2.0 * f64::EPSILON * (1.0 + x.abs()) {
                return (householder, step);
            }
            x = inside(householder, low, high);
        }
        (x, STEPS_MAX)
    }
}

/// Gauss's hypergeometric function 2F1(3, 1; 5/2; z) by its series; |z| is at most 0.3 where it is used.
fn hypergeometric(z: f64) -> f64 {
    let (mut sum, mut term) = (1.0, 1.0);
    let mut k = 0.0;
    while f64::abs(term) > 0.1 * f64::EPSILON && k < 100.0 {
        term *= (3.0 + k) / (2.5 + k) * z;
        sum += term;
        k += 1.0;
    }
    sum
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    fn curve(lambda: f64, revolutions: u32) -> Curve {
        Curve { lambda, shortfall: (1.0 - lambda) * (1.0 + lambda), revolutions }
    }

    #[test]
    fn special_times_are_those_of_the_paper() {
        // Izzo (2015) eqs 19 and 21, exact: T(0) = acos l + l sqrt(1 - l^2) + M pi, T(1) = 2/3 (1 - l^3).
        for lambda in [-0.9, -0.3, 0.0, 0.5, 0.99] {
            let time0 = f64::acos(lambda) + lambda * (1.0 - lambda * lambda).sqrt();
            assert!((curve(lambda, 0).time(0.0) - time0).abs() < 1e-15 * 4.0);
            assert!((curve(lambda, 3).time(0.0) - time0 - 3.0 * PI).abs() < 1e-14);
            let time1 = 2.0 / 3.0 * (1.0 - lambda.powi(3));
            assert!((curve(lambda, 0).time(1.0) - time1).abs() < 1e-15 * 4.0);
        }
    }

    #[test]
    fn series_and_closed_form_join() {
        // Two independent expressions of one time; the step over 2e-13 in x itself is a few times that.
        for lambda in [-0.99, -0.5, 0.0, 0.5, 0.99] {
            for sign in [-1.0, 1.0] {
                let edge = f64::sqrt(1.0 + sign * SERIES_BELOW);
                let (near, far) = (edge - sign * 1e-13, edge + sign * 1e-13);
                let c = curve(lambda, 0);
                let step = (c.time(near) - c.time(far)).abs() / c.time(edge);
                assert!(step < 1e-12, "lambda {lambda}: {step}");
            }
        }
    }

    proptest! {
        #[test]
        fn derivatives_are_those_of_the_flight_time(
            lambda in -0.95f64..0.95,
            (x, revolutions) in prop_oneof![(-0.8f64..0.85, 0u32..4), (1.15f64..3.0, Just(0))],
        ) {
            let c = curve(lambda, revolutions);
            let h = 1e-3;
            let at = |k: f64| c.time(x + k * h);
            let [first, second, third] = c.derivatives(x, at(0.0));
            // Central differences err by h^2 times higher derivatives, which grow towards x = -1 and 1.
            let scale = 1.0 + third.abs() * 30.0;
            prop_assert!(((at(1.0) - at(-1.0)) / (2.0 * h) - first).abs() < 1e-5 * scale);
            prop_assert!(((at(1.0) - 2.0 * at(0.0) + at(-1.0)) / (h * h) - second).abs() < 1e-4 * scale);
            let third_difference = (at(2.0) - 2.0 * at(1.0) + 2.0 * at(-1.0) - at(-2.0)) / (2.0 * h.powi(3));
            prop_assert!((third_difference - third).abs() < 1e-2 * scale);
        }
    }
}
