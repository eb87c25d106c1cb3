//! Sensitivities by the variational equations, derived by hand, against those of dual numbers.
//!
//! The maximised Hamiltonian is H = l_r u + l_u (v^2/r - 1/r^2) - l_v u v/r + (beta/r^2) G(l_u, l_v), where
//! G(p) = max over the cone angle of (force . p) is homogeneous of degree one: with p at the angle phi from the
//! outward Sun line, G = |p| g(phi), its gradient is the force, and its second derivatives are
//! (g + g'') / |p| times the square of the unit vector across p. Here the best cone angle is taken as
//! (phi - asin(sin(phi)/3)) / 2, which shares no line with the product's component form.

use nalgebra::{Matrix6, Vector3};
use numerics::dual::Dual;
use numerics::newton::Equations;
use numerics::ode::{Flow, Mode, Options, Termination, integrate};
use numerics::scalar::Scalar;
use optimal::coplanar::extremal::{Augmented, Extremal};
use optimal::coplanar::shooting::{Shooting, Unknowns};
use optimal::coplanar::solve::{Problem, solve};
use orbits::units;

/// Six states and costates, then the 36 entries of their derivatives by the initial ones, row by row.
type Stacked = [f64; 42];

struct Variational {
    lightness: f64,
}

/// Force along and across the Sun line, G, and the second derivatives of G (uu, uv, vv).
fn support(l_u: f64, l_v: f64) -> (f64, f64, f64, [f64; 3]) {
    let (length, phi) = (l_u.hypot(l_v), l_v.atan2(l_u));
    let lean = phi.sin() / 3.0;
    let cone = 0.5 * (phi - lean.asin());
    let cone_rate = 0.5 * (1.0 - phi.cos() / 3.0 / (1.0 - lean * lean).sqrt());
    let (sin, cos) = cone.sin_cos();
    let (radial, transverse) = (cos.powi(3), cos * cos * sin);
    // g' = -cos^2(a) sin(phi - a), hence g + g'' = a' (2 cos a sin a sin(phi - a) + cos^2 a cos(phi - a)).
    let bend = cone_rate * (2.0 * cos * sin * (phi - cone).sin() + cos * cos * (phi - cone).cos()) / length;
    let (across_u, across_v) = (-phi.sin(), phi.cos());
    let second = [bend * across_u * across_u, bend * across_u * across_v, bend * across_v * across_v];
    (radial, transverse, l_u * radial + l_v * transverse, second)
}

impl Variational {
    /// Rates of states and costates, and their Jacobian.
    fn linearised(&self, [r, u, v, l_r, l_u, l_v]: [f64; 6]) -> ([f64; 6], Matrix6<f64>) {
        let (radial, transverse, gain, [guu, guv, gvv]) = support(l_u, l_v);
        let beta = self.lightness;
        let (r2, r3, r4) = (r * r, r.powi(3), r.powi(4));
        let rates = [
            u,
            v * v / r - 1.0 / r2 + beta * radial / r2,
            -u * v / r + beta * transverse / r2,
            l_u * (v * v / r2 - 2.0 / r3) - l_v * u * v / r2 + 2.0 * beta * gain / r3,
            -l_r + l_v * v / r,
            -2.0 * l_u * v / r + l_v * u / r,
        ];
        // Mixed derivatives of H, by costate (rows) and state (columns).
        let mixed = [
            [0.0, 1.0, 0.0],
            [-v * v / r2 + 2.0 / r3 - 2.0 * beta * radial / r3, 0.0, 2.0 * v / r],
            [u * v / r2 - 2.0 * beta * transverse / r3, -v / r, -u / r],
        ];
        let by_costates =
            [[0.0; 3], [0.0, beta * guu / r2, beta * guv / r2], [0.0, beta * guv / r2, beta * gvv / r2]];
        let rr = l_u * (2.0 * v * v / r3 - 6.0 / r4) - 2.0 * l_v * u * v / r3 + 6.0 * beta * gain / r4;
        let ru = l_v * v / r2;
        let rv = -2.0 * l_u * v / r2 + l_v * u / r2;
        let by_states = [[rr, ru, rv], [ru, 0.0, -l_v / r], [rv, -l_v / r, 2.0 * l_u / r]];
        let jacobian = Matrix6::from_fn(|row, column| match (row < 3, column < 3) {
            (true, true) => mixed[row][column],
            (true, false) => by_costates[row][column - 3],
            (false, true) => -by_states[row - 3][column],
            (false, false) => -mixed[column - 3][row - 3],
        });
        (rates, jacobian)
    }
}

impl Flow<f64, 42> for Variational {
    fn rates(&self, _: Mode, y: &Stacked) -> Stacked {
        let (rates, jacobian) = self.linearised(std::array::from_fn(|i| y[i]));
        let sensitivity = Matrix6::from_fn(|row, column| y[6 + 6 * row + column]);
        let change = jacobian * sensitivity;
        std::array::from_fn(|i| if i < 6 { rates[i] } else { change[((i - 6) / 6, (i - 6) % 6)] })
    }
}

/// A flow that restarts its step where the transverse primer passes through zero. On the sunward side the force's
/// second derivative has a kink there, which no step may straddle if derivatives are wanted to the last digits.
struct Restarted<F>(F);

impl<T: Scalar, const N: usize, F: Flow<T, N>> Flow<T, N> for Restarted<F> {
    fn rates(&self, mode: Mode, y: &[T; N]) -> [T; N] {
        self.0.rates(mode, y)
    }

    fn events(&self) -> usize {
        1
    }

    fn event(&self, _: usize, y: &[T; N]) -> T {
        y[5]
    }
}

const OPTIONS: Options = Options { tolerance: 1e-13, max_steps: 80_000 };

/// End state and its derivatives by the six initial values, by hand.
fn by_hand(lightness: f64, start: Augmented<f64>, time: f64) -> (Augmented<f64>, Matrix6<f64>) {
    let unit = |i: usize| f64::from(i / 6 == i % 6);
    let stacked: Stacked = std::array::from_fn(|i| if i < 6 { start[i] } else { unit(i - 6) });
    let outcome = integrate(&Restarted(Variational { lightness }), &stacked, time, &OPTIONS);
    assert_eq!(outcome.termination, Termination::Reached);
    let end = outcome.state;
    (std::array::from_fn(|i| end[i]), Matrix6::from_fn(|row, column| end[6 + 6 * row + column]))
}

/// The same by dual numbers.
fn by_duals(lightness: f64, start: Augmented<f64>, time: f64) -> (Augmented<f64>, Matrix6<f64>) {
    let seeded: Augmented<Dual<6>> = std::array::from_fn(|i| Dual::variable(start[i], i));
    let outcome = integrate(&Restarted(Extremal { lightness }), &seeded, time, &OPTIONS);
    assert_eq!(outcome.termination, Termination::Reached);
    let end = outcome.state;
    (end.map(|y| y.v), Matrix6::from_fn(|row, column| end[row].d[column]))
}

fn solved(target_radius: f64, ac_mm_s2: f64) -> (f64, Unknowns) {
    let problem = Problem { start_radius: 1.0, target_radius, lightness: units::lightness(ac_mm_s2) };
    (problem.lightness, solve(&problem).expect("this flight is solved").unknowns)
}

/// From under half a revolution to several, outward and inward, with and without a pass of the primer through the
/// Sun line.
const FLIGHTS: [(f64, f64); 6] = [
    (1.52371034, 1.0),
    (1.52371034, 0.2),
    (0.72333566, 2.0),
    (0.38709927, 0.5),
    (5.202887, 0.5),
    (1.003, 0.1),
];

#[test]
fn hand_derived_rates_are_the_rates_of_the_product() {
    for (target, ac) in FLIGHTS {
        let (lightness, unknowns) = solved(target, ac);
        let l = unknowns.costate;
        for start in [
            [1.0, 0.0, 1.0, l.x, l.y, l.z],
            [0.8, 0.1, 1.1, -0.3, -0.6, 0.2],
            [2.0, -0.2, 0.6, 0.1, 0.4, -0.5],
        ] {
            let (rates, jacobian) = Variational { lightness }.linearised(start);
            let seeded: Augmented<Dual<6>> = std::array::from_fn(|i| Dual::variable(start[i], i));
            let product = Extremal { lightness }.rates(Mode::default(), &seeded);
            for i in 0..6 {
                // Rounding only: asin and atan2 on one side, square roots on the other.
                assert!((rates[i] - product[i].v).abs() < 1e-13, "rate {i} at {start:?}");
                for j in 0..6 {
                    let off = (jacobian[(i, j)] - product[i].d[j]).abs();
                    assert!(off < 1e-12, "derivative {i} {j} at {start:?}: {off:.1e}");
                }
            }
        }
    }
}

#[test]
fn dual_numbers_give_the_derivatives_of_the_variational_equations() {
    for (target, ac) in FLIGHTS {
        let (lightness, unknowns) = solved(target, ac);
        let l = unknowns.costate;
        let start = [1.0, 0.0, 1.0, l.x, l.y, l.z];
        let (end, hand) = by_hand(lightness, start, unknowns.time);
        let (again, dual) = by_duals(lightness, start, unknowns.time);
        let size = hand.abs().max();
        for i in 0..6 {
            assert!((end[i] - again[i]).abs() < 1e-9, "end {i} to {target} au at {ac}");
            for j in 0..6 {
                // Step control sees the derivatives on one side and not on the other; measured 4e-11 at most.
                let off = (hand[(i, j)] - dual[(i, j)]).abs() / size;
                assert!(off < 1e-9, "derivative {i} {j} to {target} au at {ac}: {off:.1e} of {size:.1e}");
            }
        }
    }
}

#[test]
fn the_shooting_jacobian_is_made_of_those_derivatives() {
    for (target, ac) in FLIGHTS {
        let (lightness, unknowns) = solved(target, ac);
        let shooting = Shooting { ratio: target, lightness, tolerance: 1e-12 };
        let (_, jacobian) = shooting.linearised(&unknowns).expect("it integrates");
        let l = unknowns.costate;
        let (end, hand) = by_hand(lightness, [1.0, 0.0, 1.0, l.x, l.y, l.z], unknowns.time);
        let (rates, _) = Variational { lightness }.linearised(end);
        // Which two directions span the plane across the costate is shooting's own choice: it shows in `moved`.
        let tilted = |step: [f64; 3]| shooting.moved(&unknowns, &step.into()).costate;
        let reach = 1e-6;
        let root = target.sqrt();
        let scale = [1.0 / target, root, root];
        let size = jacobian.abs().max();
        for row in 0..3 {
            for column in 0..2 {
                let mut step = [0.0; 3];
                step[column] = reach;
                let there = tilted(step);
                step[column] = -reach;
                let across: Vector3<f64> = (there - tilted(step)) / (2.0 * reach);
                let expected: f64 = (0..3).map(|i| hand[(row, 3 + i)] * across[i]).sum::<f64>() * scale[row];
                // Shooting does not restart at the kink, and its step control sees values only: where the flight
                // passes it, derivatives are good to 2e-5 (else to 6e-10), plenty for Newton's method.
                let off = (jacobian[(row, column)] - expected).abs() / size;
                assert!(off < 1e-4, "{row} {column} to {target} au at {ac}: {off:.1e} of {size:.1e}");
            }
            let off = (jacobian[(row, 2)] - rates[row] * scale[row]).abs() / size;
            assert!(off < 1e-8, "{row} by time, to {target} au at {ac}: {off:.1e}");
        }
    }
}
