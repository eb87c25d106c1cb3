//! The logarithmic spiral flown at a constant cone angle, in closed form.
//!
//! R. H. Bacon (1959), H. S. London (1960), T. C. Tsu, *ARS Journal* 29 (1959) 422-427; McInnes, *Solar Sailing*
//! (1999), section 4.3. The spiral neither starts nor ends on a circle: its time is no flight time between orbits
//! and can be shorter than the fastest one. It is here as a check of propagation.

use numerics::root::{Bracket, find_root};

use crate::force;

/// A logarithmic spiral. Canonical units, radians.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Spiral {
    /// Lightness number.
    pub lightness: f64,
    /// Cosine of the cone angle.
    pub cos_cone: f64,
    /// Sine of the signed cone angle (positive spirals out).
    pub sin_cone: f64,
    /// Angle of the velocity above the transverse direction.
    pub flight_path_angle: f64,
}

impl Spiral {
    /// The spiral of a sail of this lightness number at the signed cone angle `cone` (radians).
    ///
    /// Solves sin g cos g / (2 - sin^2 g) = beta cos^2(a) sin(a) / (1 - beta cos^3(a)) for the shallow root g.
    /// `None` where there is none: too strong a push, or none across.
    pub fn new(lightness: f64, cone: f64) -> Option<Spiral> {
        let push = force::ideal(cone.cos(), cone.sin());
        let wanted = lightness * push.transverse / (1.0 - lightness * push.radial);
        // The left side is odd in g, 0 at 0 and largest at tan^2(g) = 2, where it is 1/sqrt 8.
        let steepest = 2f64.sqrt().atan();
        let gap = |g: f64| g.sin() * g.cos() / (2.0 - g.sin() * g.sin()) - wanted.abs();
        if wanted == 0.0 || !wanted.is_finite() || gap(steepest) <= 0.0 {
            return None;
        }
        let bracket = Bracket { low: 0.0, high: steepest, at_low: gap(0.0), at_high: gap(steepest) };
        let angle = find_root(gap, bracket, 1e-15).copysign(wanted);
        Some(Spiral { lightness, cos_cone: cone.cos(), sin_cone: cone.sin(), flight_path_angle: angle })
    }

    /// Radial and transverse speed at distance `r`.
    pub fn speeds(&self, r: f64) -> (f64, f64) {
        let (sin, cos) = self.flight_path_angle.sin_cos();
        let inward = 1.0 - self.lightness * force::ideal(self.cos_cone, self.sin_cone).radial;
        let speed = (2.0 * inward / (2.0 - sin * sin) / r).sqrt();
        (speed * sin, speed * cos)
    }

    /// Time from distance `from` to distance `to`, positive when the spiral goes that way.
    ///
    /// t = (1/3) (r1^1.5 - r0^1.5) sqrt(2 / (beta tan(g) cos^2(a) sin(a))).
    pub fn time(&self, from: f64, to: f64) -> f64 {
        let transverse = force::ideal(self.cos_cone, self.sin_cone).transverse;
        let rate = (2.0 / (self.lightness * self.flight_path_angle.tan() * transverse)).sqrt();
        (to.powf(1.5) - from.powf(1.5)) * rate.copysign(self.sin_cone) / 3.0
    }
}
