//! The coplanar extremal: states and costates under the attitude that maximises the Hamiltonian.
//!
//! States r, u, v; costates l_r, l_u, l_v (the last two are the primer vector). With k = beta/r^2 and
//! G = l_u f_r + l_v f_t,
//! H = l_r u + l_u (v^2/r - 1/r^2) - l_v u v/r + k G,
//! l_r' = l_u (v^2/r^2 - 2/r^3) - l_v u v/r^2 + 2 k G/r, l_u' = -l_r + l_v v/r, l_v' = -2 l_u v/r + l_v u/r.
//! L. S. Pontryagin's principle; H. J. Kelley (1962); A. E. Bryson, *Dynamic Optimization* (1999), problem 4.5.21.

use numerics::ode::{Flow, Mode};
use numerics::scalar::Scalar;
use sail::force;
use sail::motion::polar;
use sail::steering::primer::ideal_attitude;

/// State and costate: r, u, v, l_r, l_u, l_v.
pub type Augmented<T> = [T; 6];

/// The flow of extremals of a sail with this lightness number.
#[derive(Clone, Copy, Debug)]
pub struct Extremal {
    /// Lightness number.
    pub lightness: f64,
}

/// Cosine of the cone angle and its signed sine (positive pushes forward) that maximise the Hamiltonian.
#[inline(always)]
pub fn attitude<T: Scalar>(l_u: T, l_v: T) -> (T, T) {
    let (cos, sin) = ideal_attitude(l_u, l_v.abs());
    (cos, if l_v.value() < 0.0 { -sin } else { sin })
}

impl Extremal {
    /// The Hamiltonian, constant along an extremal.
    pub fn hamiltonian(&self, &[r, u, v, l_r, l_u, l_v]: &Augmented<f64>) -> f64 {
        let (cos, sin) = attitude(l_u, l_v);
        let [dr, du, dv] = polar::rates(self.lightness, r, u, v, force::ideal(cos, sin));
        l_r * dr + l_u * du + l_v * dv
    }
}

impl<T: Scalar> Flow<T, 6> for Extremal {
    #[inline(always)]
    fn rates(&self, _: Mode, &[r, u, v, l_r, l_u, l_v]: &Augmented<T>) -> Augmented<T> {
        let (cos, sin) = attitude(l_u, l_v);
        let push = force::ideal(cos, sin);
        let inverse = r.recip();
        let pull = inverse * inverse;
        let swing = v * inverse;
        let gain = (l_u * push.radial + l_v * push.transverse) * pull * self.lightness;
        let du = v * swing - pull + pull * push.radial * self.lightness;
        let dv = pull * push.transverse * self.lightness - u * swing;
        let dl_r =
            l_u * (swing * swing - pull * inverse * 2.0) - l_v * swing * u * inverse + gain * inverse * 2.0;
        [u, du, dv, dl_r, l_v * swing - l_r, l_v * u * inverse - l_u * swing * 2.0]
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use numerics::dual::Dual;
    use proptest::prelude::*;

    /// The Hamiltonian in any scalar, written once more from its definition.
    fn hamiltonian<T: Scalar>(lightness: f64, [r, u, v, l_r, l_u, l_v]: [T; 6]) -> T {
        let (cos, sin) = attitude(l_u, l_v);
        let gain = (l_u * cos + l_v * sin) * cos * cos;
        l_r * u + l_u * (v * v / r - (r * r).recip()) - l_v * u * v / r + gain * lightness / (r * r)
    }

    proptest! {
        #[test]
        fn rates_are_the_canonical_derivatives_of_the_hamiltonian(
            r in 0.2..5.0f64, u in -0.5..0.5f64, v in 0.3..2.0f64,
            l_r in -1.0..1.0f64, l_u in -1.0..1.0f64, l_v in 0.05..1.0f64, lightness in 0.01..1.0f64,
        ) {
            let y = [r, u, v, l_r, l_u, l_v];
            let seeded: [Dual<6>; 6] = std::array::from_fn(|i| Dual::variable(y[i], i));
            let gradient = hamiltonian(lightness, seeded).d;
            let rates = Extremal { lightness }.rates(Mode::default(), &y);
            for i in 0..3 {
                // Hamilton's equations; the maximising attitude drops out of the derivative. Rounding only.
                prop_assert!((rates[i] - gradient[i + 3]).abs() < 1e-11 * (1.0 + rates[i].abs()));
                prop_assert!((rates[i + 3] + gradient[i]).abs() < 1e-11 * (1.0 + 1.0 / (r * r * r)));
            }
        }
    }
}
