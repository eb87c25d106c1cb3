//! The spatial extremal: position, velocity and their costates under the attitude that maximises the Hamiltonian.
//!
//! With r, v, costates l_r and p (the primer vector), a = p.r, b = p.p, c = r.r,
//! H = l_r . v + Phi(a, b, c), Phi = -a c^(-3/2) + (beta/c) G(a/sqrt c, |p - r a/c|),
//! so that v' = Phi_a r + 2 Phi_b p, l_r' = -(Phi_a p + 2 Phi_c r), p' = -l_r: no angle, no singular direction.

use numerics::ode::{Flow, Mode};
use numerics::scalar::Scalar;
use sail::steering::primer::ideal_attitude;

/// Position, velocity, position costate, primer.
pub type Augmented<T> = [T; 12];

/// The flow of extremals of a sail with this lightness number.
#[derive(Clone, Copy, Debug)]
pub struct Extremal {
    /// Lightness number.
    pub lightness: f64,
}

/// Guards the transverse primer's length where the primer lies along the Sun line.
const TINY: f64 = 1e-30;

/// What the primer asks of the sail at a place.
struct Push<T> {
    /// Squared distance, its inverse root, and primer . position.
    c: T,
    inverse: T,
    a: T,
    /// Radial and transverse primer.
    radial: T,
    across: T,
    /// Force in parts of head-on: radial, transverse.
    force: [T; 2],
    /// Cosine of the cone angle.
    cos: T,
}

#[inline(always)]
fn push<T: Scalar>(y: &Augmented<T>) -> Push<T> {
    let [rx, ry, rz] = [y[0], y[1], y[2]];
    let [px, py, pz] = [y[9], y[10], y[11]];
    let c = rx * rx + ry * ry + rz * rz;
    let inverse = c.sqrt().recip();
    let a = px * rx + py * ry + pz * rz;
    let along = a * inverse * inverse;
    let (tx, ty, tz) = (px - rx * along, py - ry * along, pz - rz * along);
    let across = (tx * tx + ty * ty + tz * tz + TINY).sqrt();
    let radial = a * inverse;
    let (cos, sin) = ideal_attitude(radial, across);
    let lit = cos * cos;
    Push { c, inverse, a, radial, across, force: [lit * cos, lit * sin], cos }
}

impl Extremal {
    /// The Hamiltonian, constant along an extremal.
    pub fn hamiltonian(&self, y: &Augmented<f64>) -> f64 {
        let Push { c, inverse, a, radial, across, force, .. } = push(y);
        let gain = radial * force[0] + across * force[1];
        y[6] * y[3] + y[7] * y[4] + y[8] * y[5] - a * inverse * inverse * inverse + self.lightness / c * gain
    }

    /// Unit normal of the sail and the size of its acceleration.
    pub fn attitude<T: Scalar>(&self, y: &Augmented<T>) -> ([T; 3], T) {
        let Push { c, inverse, a, across, cos, .. } = push(y);
        let sin = (-(cos * cos) + 1.0).abs().sqrt();
        let along = a * inverse * inverse;
        let normal = std::array::from_fn(|i| y[i] * inverse * cos + (y[9 + i] - y[i] * along) / across * sin);
        (normal, cos * cos * self.lightness / c)
    }
}

impl<T: Scalar> Flow<T, 12> for Extremal {
    #[inline(always)]
    fn rates(&self, _: Mode, y: &Augmented<T>) -> Augmented<T> {
        let Push { inverse, a, radial, across, force: [outward, sideways], .. } = push(y);
        let inverse2 = inverse * inverse;
        let inverse3 = inverse2 * inverse;
        let slope = sideways / across;
        let excess = outward - slope * radial;
        let gain = radial * outward + across * sideways;
        let phi_a = excess * inverse3 * self.lightness - inverse3;
        let twice_phi_b = slope * inverse2 * self.lightness;
        let twice_phi_c = a * inverse2 * inverse3 * 3.0
            - inverse2 * inverse2 * (gain * 2.0 + radial * excess) * self.lightness;
        let mut rates = *y;
        for i in 0..3 {
            rates[i] = y[3 + i];
            rates[3 + i] = phi_a * y[i] + twice_phi_b * y[9 + i];
            rates[6 + i] = -(phi_a * y[9 + i] + twice_phi_c * y[i]);
            rates[9 + i] = -y[6 + i];
        }
        rates
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use numerics::dual::Dual;
    use proptest::prelude::*;

    /// The Hamiltonian from its definition, with the force as a vector.
    fn hamiltonian<T: Scalar>(lightness: f64, y: [T; 12]) -> T {
        let dot = |a: [T; 3], b: [T; 3]| a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
        let (r, v, l, p) = ([y[0], y[1], y[2]], [y[3], y[4], y[5]], [y[6], y[7], y[8]], [y[9], y[10], y[11]]);
        let distance = dot(r, r).sqrt();
        let up = r.map(|x| x / distance);
        let radial = dot(p, up);
        let side = [p[0] - up[0] * radial, p[1] - up[1] * radial, p[2] - up[2] * radial];
        let across = dot(side, side).sqrt();
        let (cos, sin) = ideal_attitude(radial, across);
        let normal: [T; 3] = std::array::from_fn(|i| up[i] * cos + side[i] / across * sin);
        let pull = dot(p, r) / (distance * distance * distance);
        dot(l, v) - pull + cos * cos * dot(p, normal) * lightness / (distance * distance)
    }

    proptest! {
        #[test]
        fn rates_are_the_canonical_derivatives_of_the_hamiltonian(
            y in proptest::array::uniform12(-1.0..1.0f64), lightness in 0.01..1.0f64,
        ) {
            prop_assume!(y[0] * y[0] + y[1] * y[1] + y[2] * y[2] > 0.1);
            let seeded: [Dual<12>; 12] = std::array::from_fn(|i| Dual::variable(y[i], i));
            let value = hamiltonian(lightness, seeded);
            let rates = Extremal { lightness }.rates(Mode::default(), &y);
            let shorter = Extremal { lightness }.hamiltonian(&y);
            prop_assert!((value.v - shorter).abs() < 1e-12 * (1.0 + value.v.abs()));
            for i in 0..6 {
                // Hamilton's equations; the maximising attitude drops out of the derivative. Rounding only, the
                // steepest term going as the fifth power of at most 1/0.32.
                prop_assert!((rates[i] - value.d[i + 6]).abs() < 1e-10);
                prop_assert!((rates[i + 6] + value.d[i]).abs() < 1e-10);
            }
        }
    }
}
