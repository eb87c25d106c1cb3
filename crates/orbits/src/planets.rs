//! The eight planets: names, orbits as data with rates, gravity and size.

/// A planet. `Earth` is the Earth-Moon barycentre where its orbit is meant, and the Earth itself where a parking
/// orbit is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Planet {
    /// Mercury.
    Mercury,
    /// Venus.
    Venus,
    /// Earth-Moon barycentre; the Earth for parking orbits.
    Earth,
    /// Mars.
    Mars,
    /// Jupiter.
    Jupiter,
    /// Saturn.
    Saturn,
    /// Uranus.
    Uranus,
    /// Neptune.
    Neptune,
}

/// Mean elements at J2000 or their rates; mean ecliptic and equinox of J2000.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MeanElements {
    /// Semi-major axis, au (rate: au per Julian century).
    pub semi_major_axis_au: f64,
    /// Eccentricity (rate: per century).
    pub eccentricity: f64,
    /// Inclination to the ecliptic, deg (rate: deg per century).
    pub inclination_deg: f64,
    /// Mean longitude, deg (rate: deg per century).
    pub mean_longitude_deg: f64,
    /// Longitude of perihelion, node + argument, deg (rate: deg per century).
    pub perihelion_longitude_deg: f64,
    /// Longitude of the ascending node, deg (rate: deg per century).
    pub node_deg: f64,
}

impl MeanElements {
    const fn row(row: [f64; 6]) -> Self {
        Self {
            semi_major_axis_au: row[0],
            eccentricity: row[1],
            inclination_deg: row[2],
            mean_longitude_deg: row[3],
            perihelion_longitude_deg: row[4],
            node_deg: row[5],
        }
    }
}

/// What is known of one planet.
struct Facts {
    planet: Planet,
    key: &'static str,
    name: &'static str,
    gm_km3_s2: f64,
    equatorial_radius_km: f64,
    at_j2000: MeanElements,
    per_century: MeanElements,
}

/// Columns of both element rows: a, e, I, L, longitude of perihelion, node.
///
/// Elements: E. M. Standish, JPL, "Keplerian Elements for Approximate Positions of the Major Planets", table 1,
/// valid 1800-2050; published.
/// Gravity: planet without its moons, NAIF kernel `gm_de440.tpc` (JPL DE440, Park et al., Astron. J. 161 (2021)
/// 105) rounded to about nine digits; published, read as quoted by others.
/// Radii: equatorial, IAU WGCCRE 2015 (Archinal et al., Celest. Mech. Dyn. Astron. 130 (2018) 22); those of Mars
/// and the giants published, read as quoted in NAIF kernels; those of Mercury, Venus and the Earth from memory.
const TABLE: [Facts; 8] = [
    Facts {
        planet: Planet::Mercury,
        key: "mercury",
        name: "Mercury",
        gm_km3_s2: 22_031.868_55,
        equatorial_radius_km: 2_440.53,
        at_j2000: MeanElements::row([
            0.387_099_27,
            0.205_635_93,
            7.004_979_02,
            252.250_323_50,
            77.457_796_28,
            48.330_765_93,
        ]),
        per_century: MeanElements::row([
            0.000_000_37,
            0.000_019_06,
            -0.005_947_49,
            149_472.674_111_75,
            0.160_476_89,
            -0.125_340_81,
        ]),
    },
    Facts {
        planet: Planet::Venus,
        key: "venus",
        name: "Venus",
        gm_km3_s2: 324_858.592,
        equatorial_radius_km: 6_051.8,
        at_j2000: MeanElements::row([
            0.723_335_66,
            0.006_776_72,
            3.394_676_05,
            181.979_099_50,
            131.602_467_18,
            76.679_842_55,
        ]),
        per_century: MeanElements::row([
            0.000_003_90,
            -0.000_041_07,
            -0.000_788_90,
            58_517.815_387_29,
            0.002_683_29,
            -0.277_694_18,
        ]),
    },
    Facts {
        planet: Planet::Earth,
        key: "earth",
        name: "Earth",
        gm_km3_s2: 398_600.435_5,
        equatorial_radius_km: 6_378.136_6,
        at_j2000: MeanElements::row([
            1.000_002_61,
            0.016_711_23,
            -0.000_015_31,
            100.464_571_66,
            102.937_681_93,
            0.0,
        ]),
        per_century: MeanElements::row([
            0.000_005_62,
            -0.000_043_92,
            -0.012_946_68,
            35_999.372_449_81,
            0.323_273_64,
            0.0,
        ]),
    },
    Facts {
        planet: Planet::Mars,
        key: "mars",
        name: "Mars",
        gm_km3_s2: 42_828.373_62,
        equatorial_radius_km: 3_396.19,
        at_j2000: MeanElements::row([
            1.523_710_34,
            0.093_394_10,
            1.849_691_42,
            -4.553_432_05,
            -23.943_629_59,
            49.559_538_91,
        ]),
        per_century: MeanElements::row([
            0.000_018_47,
            0.000_078_82,
            -0.008_131_31,
            19_140.302_684_99,
            0.444_410_88,
            -0.292_573_43,
        ]),
    },
    Facts {
        planet: Planet::Jupiter,
        key: "jupiter",
        name: "Jupiter",
        gm_km3_s2: 126_686_531.9,
        equatorial_radius_km: 71_492.0,
        at_j2000: MeanElements::row([
            5.202_887_00,
            0.048_386_24,
            1.304_396_95,
            34.396_440_51,
            14.728_479_83,
            100.473_909_09,
        ]),
        per_century: MeanElements::row([
            -0.000_116_07,
            -0.000_132_53,
            -0.001_837_14,
            3_034.746_127_75,
            0.212_526_68,
            0.204_691_06,
        ]),
    },
    Facts {
        planet: Planet::Saturn,
        key: "saturn",
        name: "Saturn",
        gm_km3_s2: 37_931_206.2,
        equatorial_radius_km: 60_268.0,
        at_j2000: MeanElements::row([
            9.536_675_94,
            0.053_861_79,
            2.485_991_87,
            49.954_244_23,
            92.598_878_31,
            113.662_424_48,
        ]),
        per_century: MeanElements::row([
            -0.001_250_60,
            -0.000_509_91,
            0.001_936_09,
            1_222.493_622_01,
            -0.418_972_16,
            -0.288_677_94,
        ]),
    },
    Facts {
        planet: Planet::Uranus,
        key: "uranus",
        name: "Uranus",
        gm_km3_s2: 5_793_951.26,
        equatorial_radius_km: 25_559.0,
        at_j2000: MeanElements::row([
            19.189_164_64,
            0.047_257_44,
            0.772_637_83,
            313.238_104_51,
            170.954_276_30,
            74.016_925_03,
        ]),
        per_century: MeanElements::row([
            -0.001_961_76,
            -0.000_043_97,
            -0.002_429_39,
            428.482_027_85,
            0.408_052_81,
            0.042_405_89,
        ]),
    },
    Facts {
        planet: Planet::Neptune,
        key: "neptune",
        name: "Neptune",
        gm_km3_s2: 6_835_103.15,
        equatorial_radius_km: 24_764.0,
        at_j2000: MeanElements::row([
            30.069_922_76,
            0.008_590_48,
            1.770_043_47,
            -55.120_029_69,
            44.964_762_27,
            131.784_225_74,
        ]),
        per_century: MeanElements::row([
            0.000_262_91,
            0.000_051_05,
            0.000_353_72,
            218.459_453_25,
            -0.322_414_64,
            -0.005_086_64,
        ]),
    },
];

impl Planet {
    /// All planets, from the Sun outwards.
    pub const ALL: [Planet; 8] = [
        Planet::Mercury,
        Planet::Venus,
        Planet::Earth,
        Planet::Mars,
        Planet::Jupiter,
        Planet::Saturn,
        Planet::Uranus,
        Planet::Neptune,
    ];

    fn facts(self) -> &'static Facts {
        // The table stands in the order of the enum; a test holds that.
        &TABLE[self as usize]
    }

    /// The lower-case word for links: `mars`.
    pub fn key(self) -> &'static str {
        self.facts().key
    }

    /// The planet with this key.
    pub fn from_key(key: &str) -> Option<Planet> {
        TABLE.iter().find(|facts| facts.key == key).map(|facts| facts.planet)
    }

    /// The name for people: `Mars`.
    pub fn name(self) -> &'static str {
        self.facts().name
    }

    /// Gravitational parameter of the planet without its moons, km^3/s^2.
    pub fn gm_km3_s2(self) -> f64 {
        self.facts().gm_km3_s2
    }

    /// Equatorial radius, km (giants: at 1 bar).
    pub fn equatorial_radius_km(self) -> f64 {
        self.facts().equatorial_radius_km
    }

    /// Mean elements at J2000.
    pub fn elements_at_j2000(self) -> MeanElements {
        self.facts().at_j2000
    }

    /// Rates of the mean elements per Julian century of TDB.
    pub fn element_rates(self) -> MeanElements {
        self.facts().per_century
    }

    /// Semi-major axis at J2000, au.
    pub fn semi_major_axis_au(self) -> f64 {
        self.facts().at_j2000.semi_major_axis_au
    }

    /// Radius of the circle that stands for the planet's orbit in coplanar geometry, au: its semi-major axis, the
    /// Earth's exactly 1.
    ///
    /// # Example
    /// ```
    /// use orbits::planets::Planet;
    /// assert_eq!(Planet::Earth.circle_radius_au(), 1.0);
    /// assert_eq!(Planet::Mars.circle_radius_au(), 1.52371034);
    /// ```
    pub fn circle_radius_au(self) -> f64 {
        if self == Planet::Earth { 1.0 } else { self.semi_major_axis_au() }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::constants::{JULIAN_CENTURY_D, SUN_GM_KM3_S2};
    use crate::units::TIME_UNIT_D;

    #[test]
    fn table_stands_in_the_order_of_the_enum() {
        for planet in Planet::ALL {
            assert_eq!(planet.facts().planet, planet);
            assert_eq!(Planet::from_key(planet.key()), Some(planet));
        }
        assert_eq!(Planet::from_key("Mars"), None);
        assert_eq!(Planet::from_key(""), None);
    }

    #[test]
    fn mean_motions_follow_keplers_third_law() {
        // n = sqrt(GM (1 + m) / a^3) against the tabulated rate of mean longitude: a wrong digit in either column
        // would show. Perihelia move and the outer planets' rows absorb long perturbations: 2e-5 inside, 1e-3
        // outside.
        for planet in Planet::ALL {
            let mass_ratio = planet.gm_km3_s2() / SUN_GM_KM3_S2;
            let a = planet.semi_major_axis_au();
            let per_day = ((1.0 + mass_ratio) / a.powi(3)).sqrt() / TIME_UNIT_D;
            let expected_deg = per_day.to_degrees() * JULIAN_CENTURY_D;
            let tolerance = if a < 2.0 { 2e-5 } else { 1e-3 };
            let found_deg = planet.element_rates().mean_longitude_deg;
            assert!((found_deg / expected_deg - 1.0).abs() < tolerance, "{}", planet.name());
        }
    }

    #[test]
    fn surface_gravity_is_the_familiar_one() {
        // Common practice, no source: 3.7, 8.9, 9.8, 3.7, 24.8, 10.4, 8.9, 11.1 m/s^2; two digits, so 3 %.
        let expected = [3.7, 8.87, 9.80, 3.71, 24.8, 10.4, 8.87, 11.15];
        for (planet, g) in Planet::ALL.into_iter().zip(expected) {
            let found = planet.gm_km3_s2() / planet.equatorial_radius_km().powi(2) * 1e3;
            assert!((found / g - 1.0).abs() < 0.03, "{} {found}", planet.name());
        }
    }
}
