//! Films: what the front and back of a sail do with light and heat.

/// The six optical coefficients of a film, each 0 to 1.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Optics {
    /// Share of light reflected by the front.
    pub reflectance: f64,
    /// Share of the reflected light that leaves as from a mirror.
    pub specularity: f64,
    /// Emissivity of the front.
    pub emissivity_front: f64,
    /// Emissivity of the back.
    pub emissivity_back: f64,
    /// Non-Lambertian coefficient of the front.
    pub lambert_front: f64,
    /// Non-Lambertian coefficient of the back.
    pub lambert_back: f64,
}

/// Aluminised front on a chromium back.
///
/// Source: J. L. Wright, *Space Sailing* (1992), appendix A; C. R. McInnes, *Solar Sailing* (1999), table 2.1
/// (from memory, high confidence).
pub const ALUMINISED: Optics = Optics {
    reflectance: 0.88,
    specularity: 0.94,
    emissivity_front: 0.05,
    emissivity_back: 0.55,
    lambert_front: 0.79,
    lambert_back: 0.55,
};
