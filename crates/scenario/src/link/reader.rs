//! From the pairs of a link to a scenario, collecting everything that is wrong on the way.

use orbits::constants::{AU_KM, J2000_JD_TDB};
use orbits::planets::Planet;

use super::{LinkError, text, value};
use crate::date::Date;
use crate::keys::{self, KeyInfo};
use crate::schema::{Ageing, Baseline, CraftInput, Film, OrbitInput, Place, Scenario, StudyKeys, Word};

/// The scenario that a bare link stands for.
///
/// # Errors
/// Every error, in the order of the link; for a link of another version just that one.
pub(super) fn read(link: &str) -> Result<Scenario, Vec<LinkError>> {
    let mut reader = Reader::open(link);
    reader.version()?;
    let scenario = reader.scenario();
    let mut errors = reader.errors;
    if errors.is_empty() {
        return Ok(scenario);
    }
    errors.sort_by_key(|(position, _)| *position);
    Err(errors.into_iter().map(|(_, error)| error).collect())
}

/// A pair of the link whose key is known.
struct Given {
    position: usize,
    info: &'static KeyInfo,
    /// `None` where its escapes are broken, which has been reported already.
    value: Option<String>,
}

/// Collects the scenario key by key, and every error with its position.
struct Reader {
    given: Vec<Given>,
    errors: Vec<(usize, LinkError)>,
}

impl Reader {
    /// Splits the link and reports broken escapes, unknown keys and repeated keys.
    fn open(link: &str) -> Self {
        let mut reader = Reader { given: Vec::new(), errors: Vec::new() };
        for (position, (raw_key, raw_value)) in text::pairs(link).enumerate() {
            let key = match text::unescape(raw_key) {
                Ok(key) => key,
                Err(rule) => {
                    reader.errors.push((position, LinkError::new(raw_key, raw_value, rule)));
                    continue;
                }
            };
            let unescaped = text::unescape(raw_value);
            let shown_value = unescaped.as_deref().unwrap_or(raw_value);
            let Some(info) = keys::find(&key) else {
                let rule = "is not a key of this link version: correct or remove it";
                reader.errors.push((position, LinkError::new(&key, shown_value, rule)));
                continue;
            };
            if reader.find(info.key).is_some() {
                let rule = "is given more than once: keep one";
                reader.errors.push((position, LinkError::new(&key, shown_value, rule)));
                continue;
            }
            if let Err(rule) = unescaped {
                reader.errors.push((position, LinkError::new(&key, raw_value, rule)));
            }
            reader.given.push(Given { position, info, value: unescaped.ok() });
        }
        reader
    }

    fn find(&self, key: &str) -> Option<&Given> {
        self.given.iter().find(|given| given.info.key == key)
    }

    /// Reports a rule that a given key breaks, unless something is wrong with it already.
    fn reject(&mut self, key: &str, rule: impl Into<String>) {
        if let Some(given) = self.find(key)
            && self.errors.iter().all(|(position, _)| *position != given.position)
        {
            let error = LinkError::new(key, given.value.as_deref().unwrap_or(""), rule);
            self.errors.push((given.position, error));
        }
    }

    /// The key's value, if it is given and readable; what is wrong with it is reported.
    fn read<T>(
        &mut self,
        key: &str,
        parse: impl FnOnce(&'static KeyInfo, &str) -> Result<T, String>,
    ) -> Option<T> {
        let given = self.find(key)?;
        match parse(given.info, given.value.as_deref()?) {
            Ok(value) => Some(value),
            Err(rule) => {
                self.reject(key, rule);
                None
            }
        }
    }

    fn number(&mut self, key: &str) -> Option<f64> {
        self.read(key, value::in_range)
    }

    fn word<W: Word>(&mut self, key: &str) -> Option<W> {
        self.read(key, |info, text| W::from_word(text).ok_or_else(|| info.must_be()))
    }

    /// Links of another version are not read further: their keys may mean something else.
    fn version(&self) -> Result<(), Vec<LinkError>> {
        let Some(value) = self.find("v").and_then(|given| given.value.as_deref()) else { return Ok(()) };
        if value == "1" {
            return Ok(());
        }
        let future = value.bytes().all(|byte| byte.is_ascii_digit())
            && !matches!(value.trim_start_matches('0'), "" | "1");
        let rule = if future {
            "is a link of a future version: open it with a newer copy of this program"
        } else {
            "must be 1, the version of this link format"
        };
        Err(vec![LinkError::new("v", value, rule)])
    }

    fn scenario(&mut self) -> Scenario {
        let default = Scenario::default();
        let from = self.place("from", "from_orbit", default.from);
        let to = self.place("to", "to_orbit", default.to);
        Scenario {
            title: self.read("title", |_, text| value::title(text)),
            craft: self.craft(default.craft),
            film: self.film(),
            cone_max_deg: self.number("cone_max_deg").unwrap_or(default.cone_max_deg),
            temp_max_k: self.number("temp_max_k"),
            ageing: self.ageing(),
            control: self.number("control").unwrap_or(default.control),
            from,
            to,
            geometry: self.word("geometry").unwrap_or(default.geometry),
            depart: self.read("depart", |_, text| Date::parse(text)),
            vinf_km_s: self.number("vinf_km_s").unwrap_or(default.vinf_km_s),
            vinf_arrive_km_s: self.number("vinf_arrive_km_s").unwrap_or(default.vinf_arrive_km_s),
            arrive: self.word("arrive").unwrap_or(default.arrive),
            steer: self.word("steer").unwrap_or(default.steer),
            cone_deg: self.number("cone_deg"),
            baseline: Baseline {
                isp_s: self.number("isp_s").unwrap_or(default.baseline.isp_s),
                park_km: self.read("park_km", value::in_range_or_none).unwrap_or(default.baseline.park_km),
                capture_km: self
                    .read("capture_km", value::in_range_or_none)
                    .unwrap_or(default.baseline.capture_km),
                stage_dry: self.number("stage_dry").unwrap_or(default.baseline.stage_dry),
            },
            deadline_d: self.number("deadline_d"),
            assembly_g_m2: self.number("assembly_g_m2"),
            bus_kg: self.number("bus_kg"),
            segments: self.read("segments", value::whole),
            study: self.study(default.study),
        }
    }

    fn study(&mut self, default: StudyKeys) -> StudyKeys {
        let range = |unit, min, max| {
            move |info: &'static KeyInfo, text: &str| {
                value::range(info, text, &value::Place { name: unit, min, max })
            }
        };
        StudyKeys {
            span: self.read("span", value::span).unwrap_or(default.span),
            step_d: self.read("step_d", value::whole).unwrap_or(default.step_d),
            ac_range: self
                .read("ac_range", range("each acceleration", 0.01, 20.0))
                .unwrap_or(default.ac_range),
            area_range: self.read("area_range", range("each area", 1e-3, 1e9)),
        }
    }

    /// Area with mass, or acceleration alone.
    fn craft(&mut self, default: CraftInput) -> CraftInput {
        let (area_m2, mass_kg) = (self.number("area_m2"), self.number("mass_kg"));
        let ac_mm_s2 = self.number("ac_mm_s2");
        let is_given = |key| self.find(key).is_some();
        let (has_area, has_mass) = (is_given("area_m2"), is_given("mass_kg"));
        if is_given("ac_mm_s2") {
            if has_area || has_mass {
                let rule =
                    "is given beside area_m2 or mass_kg: give either the acceleration or area and mass";
                self.reject("ac_mm_s2", rule);
            }
            return ac_mm_s2.map_or(default, |ac_mm_s2| CraftInput::Acceleration { ac_mm_s2 });
        }
        if has_area && !has_mass {
            self.reject("area_m2", "is given without mass_kg: give both");
        }
        if has_mass && !has_area {
            self.reject("mass_kg", "is given without area_m2: give both");
        }
        match (area_m2, mass_kg) {
            (Some(area_m2), Some(mass_kg)) => CraftInput::AreaMass { area_m2, mass_kg },
            _ => default,
        }
    }

    fn film(&mut self) -> Film {
        const UNIT: fn(&'static str) -> value::Place = |name| value::Place { name, min: 0.0, max: 1.0 };
        let places = ["r", "s", "ef", "eb", "bf", "bb"].map(UNIT);
        let optics = self.read("optics", |info, text| value::list(info, text, &places, 6));
        let word = self.read("film", |info, text| {
            if info.words.contains(&text) { Ok(text.to_owned()) } else { Err(info.must_be()) }
        });
        let film_is_unreadable = word.is_none() && self.find("film").is_some();
        let named = match word.as_deref() {
            None | Some("ideal") => Film::Ideal,
            Some("aluminised") => Film::Aluminised,
            Some("aluminised2") => Film::Aluminised2,
            Some(_) => {
                if self.find("optics").is_none() {
                    self.reject("film", "needs optics=r,s,ef,eb,bf,bb: six numbers, each 0 to 1");
                }
                let values = optics.and_then(|values| <[f64; 6]>::try_from(values).ok());
                return values.map_or(Film::Ideal, Film::Optics);
            }
        };
        if !film_is_unreadable {
            self.reject("optics", "has a meaning only with film=optics: add that, or leave the key out");
        }
        named
    }

    fn ageing(&mut self) -> Option<Ageing> {
        let places = [
            value::Place { name: "degradation factor", min: 0.0, max: 5.0 },
            value::Place { name: "half-life dose", min: 0.01, max: 1000.0 },
        ];
        let values = self.read("ageing", |info, text| value::list(info, text, &places, 2))?;
        let [factor, half_life_y] = values[..] else { return None };
        Some(Ageing { factor, half_life_y })
    }

    fn place(&mut self, key: &str, orbit_key: &str, default: Place) -> Place {
        let orbit = self.read(orbit_key, orbit);
        let word = self.read(key, |info, text| {
            if info.words.contains(&text) { Ok(text.to_owned()) } else { Err(info.must_be()) }
        });
        if word.as_deref() == Some("orbit") {
            if self.find(orbit_key).is_none() {
                self.reject(key, format!("needs {orbit_key}=a_au,... : the elements of that orbit"));
            }
            return orbit.map_or(default, Place::Orbit);
        }
        let is_unreadable = word.is_none() && self.find(key).is_some();
        if !is_unreadable {
            self.reject(
                orbit_key,
                format!("has a meaning only with {key}=orbit: add that, or leave the key out"),
            );
        }
        word.and_then(|word| Planet::from_key(&word)).map_or(default, Place::Planet)
    }
}

/// The Sun's radius in au: no orbit may dip into it. Source: IAU 2015 Resolution B3, 695 700 km.
const SUN_RADIUS_AU: f64 = 695_700.0 / AU_KM;

/// Reads orbit elements; trailing values may be left out.
fn orbit(info: &KeyInfo, text: &str) -> Result<OrbitInput, String> {
    let angle = |name| value::Place { name, min: -360.0, max: 360.0 };
    let places = [
        value::Place { name: "a_au", min: 0.2, max: 40.0 },
        value::Place { name: "e", min: 0.0, max: 0.99 },
        value::Place { name: "i_deg", min: 0.0, max: 180.0 },
        angle("node_deg"),
        angle("arg_peri_deg"),
        angle("mean_anomaly_deg"),
        // Wide enough for any catalogue, narrow enough to catch a modified Julian date or a year.
        value::Place {
            name: "epoch_jd_tdb (a full Julian date such as 2451545)",
            min: 2_300_000.0,
            max: 2_600_000.0,
        },
    ];
    let given = value::list(info, text, &places, 1)?;
    let mut values = [0.0, 0.0, 0.0, 0.0, 0.0, 0.0, J2000_JD_TDB];
    values[..given.len()].copy_from_slice(&given);
    let orbit = OrbitInput::from_values(values);
    if orbit.a_au * (1.0 - orbit.e) <= SUN_RADIUS_AU {
        return Err("dips into the Sun: perihelion a(1 - e) must be more than 0.00465 au".to_owned());
    }
    Ok(orbit)
}
