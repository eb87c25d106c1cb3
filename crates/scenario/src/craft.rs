//! The craft's numbers: what follows from the ones given.

use orbits::units;
use sail::loading;

use crate::report::Craft;
use crate::schema::{CraftInput, Scenario};

/// Head-on force over that of an ideal mirror; the only film solved is the ideal one.
const IDEAL_EFFICIENCY: f64 = 1.0;

/// Everything that follows from the craft as given.
pub(crate) fn craft(scenario: &Scenario) -> Craft {
    let efficiency = IDEAL_EFFICIENCY;
    match scenario.craft {
        CraftInput::AreaMass { area_m2, mass_kg } => {
            let ac_mm_s2 = loading::acceleration_mm_s2(area_m2, mass_kg, efficiency);
            Craft {
                ac_mm_s2,
                lightness: units::lightness(ac_mm_s2),
                efficiency,
                loading_g_m2: Some(loading::loading_g_m2(area_m2, mass_kg)),
                area_m2: Some(area_m2),
                side_m: Some(loading::side_m(area_m2)),
                mass_kg: Some(mass_kg),
                delivered_kg: scenario.assembly_g_m2.map(|assembly| mass_kg - assembly * area_m2 / 1e3),
            }
        }
        CraftInput::Acceleration { ac_mm_s2 } => Craft {
            ac_mm_s2,
            lightness: units::lightness(ac_mm_s2),
            efficiency,
            loading_g_m2: Some(loading::critical_loading_g_m2() * efficiency / units::lightness(ac_mm_s2)),
            area_m2: None,
            side_m: None,
            mass_kg: None,
            delivered_kg: None,
        },
    }
}
