//! A cone angle that never changes: the craft spirals.

/// Cosine and sine of a signed cone angle given in degrees.
pub fn attitude(cone_deg: f64) -> (f64, f64) {
    let cone = cone_deg.to_radians();
    (cone.cos(), cone.sin())
}

/// The cone angle of the largest transverse force, deg: 35.264, signed towards the target (positive outward).
pub fn default_cone_deg(outward: bool) -> f64 {
    let cone = std::f64::consts::FRAC_1_SQRT_2.atan().to_degrees();
    if outward { cone } else { -cone }
}
