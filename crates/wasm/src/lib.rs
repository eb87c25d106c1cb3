//! The page's door to the core: convert and delegate, decide nothing.
//!
//! Small values cross as plain objects, long columns as one packed `Float64Array`. Whatever is wrong becomes
//! one kind of JavaScript `Error`, whose `detail` names each key, value and rule. What is valid is decided in
//! `scenario`, never here: the conversion lets NaN and unknown fields through.

pub mod study;

use std::collections::BTreeMap;

use figures::{Figure, FigureOptions};
use js_sys::{Error, Float64Array, Object, Reflect};
use plotters_canvas::CanvasBackend;
use scenario::link::{self, LinkError};
use scenario::report::{Columns, Report};
use serde::{Serialize, de::DeserializeOwned};
use wasm_bindgen::prelude::*;
use web_sys::HtmlCanvasElement;

/// Panics reach the console with their message before the instance dies.
#[wasm_bindgen(start)]
pub fn start() {
    console_error_panic_hook::set_once();
}

/// What a scenario text says, without solving it.
#[derive(Serialize)]
struct Checked {
    /// Whether the text decodes, solved here or not.
    decoded: bool,
    /// Canonical text; null when anything is wrong.
    link: Option<String>,
    /// Every key with its value: of the text where it decodes, else of the default scenario.
    entries: Vec<(&'static str, String)>,
    /// Everything that is wrong, in the order of the text.
    errors: Vec<LinkError>,
}

/// Reads a scenario text: canonical link, every key's value, everything that is wrong with it.
///
/// # Errors
/// Only when the conversion to JavaScript fails.
#[wasm_bindgen]
pub fn check_link(text: &str) -> Result<JsValue, Error> {
    let checked = match link::decode(text) {
        Ok(scenario) => {
            let errors = scenario::refused::refused(&scenario);
            Checked {
                decoded: true,
                link: errors.is_empty().then(|| link::encode(&scenario)),
                entries: link::entries(&scenario),
                errors,
            }
        }
        Err(errors) => {
            Checked { decoded: false, link: None, entries: link::entries(&Default::default()), errors }
        }
    };
    to_js(&checked)
}

/// Solves the scenario of a link: `{report, columns}`, columns packed in the order of [`column_names`].
///
/// # Errors
/// Wrong or refused input: `detail` is `{kind: "input", errors: [{key, value, rule}]}`.
#[wasm_bindgen]
pub fn solve(link: &str) -> Result<JsValue, Error> {
    let answer =
        link::decode(link).and_then(|scenario| scenario::run::run(&scenario)).map_err(input_error)?;
    let solved = Object::new();
    set(&solved, "report", &to_js(&answer.report)?)?;
    set(&solved, "columns", &Float64Array::from(answer.columns.packed().as_slice()))?;
    Ok(solved.into())
}

/// Runs the published checks: name, source, mark, unit, expected, found, tolerance, passed.
///
/// # Errors
/// Only when the conversion to JavaScript fails.
#[wasm_bindgen]
pub fn published_checks() -> Result<JsValue, Error> {
    to_js(&scenario::checks::published_checks())
}

/// Names of the packed columns, in their order.
#[wasm_bindgen]
pub fn column_names() -> Vec<String> {
    Columns::NAMES.iter().map(ToString::to_string).collect()
}

/// Every key of the scenario link with label, unit, range, default and help.
///
/// # Errors
/// Only when the conversion to JavaScript fails.
#[wasm_bindgen]
pub fn link_keys() -> Result<JsValue, Error> {
    to_js(scenario::keys::KEYS)
}

/// Name and version of the core and the constants it uses.
///
/// # Errors
/// Only when the conversion to JavaScript fails.
#[wasm_bindgen]
pub fn program() -> Result<JsValue, Error> {
    to_js(&scenario::run::program())
}

/// Canonical link of the default scenario.
#[wasm_bindgen]
pub fn default_link() -> String {
    link::encode(&Default::default())
}

/// Built-in examples: name, link, what they show.
///
/// # Errors
/// Only when the conversion to JavaScript fails.
#[wasm_bindgen]
pub fn examples() -> Result<JsValue, Error> {
    to_js(scenario::examples::EXAMPLES)
}

/// Colours that the figures use, by the names of the page's style sheet: `light` or `dark`.
///
/// # Errors
/// Any other name.
#[wasm_bindgen]
pub fn theme_tokens(name: &str) -> Result<JsValue, Error> {
    let tokens = figures::tokens(name).ok_or_else(|| Error::new(&format!("no look is called {name}")))?;
    to_js(&tokens.into_iter().collect::<BTreeMap<_, _>>())
}

/// The figures of one report, drawn on canvases of the page.
#[wasm_bindgen]
pub struct Figures {
    report: Report,
    columns: Columns,
}

#[wasm_bindgen]
impl Figures {
    /// Takes a report and its packed columns as [`solve`] gave them.
    ///
    /// # Errors
    /// A report of another shape, or columns of unequal length.
    #[wasm_bindgen(constructor)]
    pub fn new(report: JsValue, columns: &[f64]) -> Result<Figures, Error> {
        let columns = Columns::from_packed(columns).map_err(plain_error)?;
        Ok(Figures { report: from_js(report)?, columns })
    }

    /// Draws a figure to fill the canvas and returns where its panels are, in CSS pixels.
    ///
    /// # Errors
    /// A name or options that do not exist, or a canvas that cannot be drawn on.
    pub fn draw(&self, canvas: HtmlCanvasElement, name: &str, options: JsValue) -> Result<JsValue, Error> {
        let options: FigureOptions = from_js(options)?;
        let figure = figures::layout(name, &self.report, &self.columns, &options).map_err(plain_error)?;
        paint(&figure, options.scale, canvas)?;
        to_js(&figure.map)
    }

    /// What a reader of the figure would see, in words.
    ///
    /// # Errors
    /// A name that does not exist.
    pub fn describe(&self, name: &str) -> Result<String, Error> {
        figures::describe(name, &self.report, &self.columns).map_err(plain_error)
    }
}

fn paint(figure: &Figure, scale: f64, canvas: HtmlCanvasElement) -> Result<(), Error> {
    // Setting the size also clears what was drawn before.
    canvas.set_width((figure.width * scale).round() as u32);
    canvas.set_height((figure.height * scale).round() as u32);
    let mut backend = CanvasBackend::with_canvas_object(canvas)
        .ok_or_else(|| Error::new("this canvas cannot be drawn on"))?;
    figures::paint(figure, scale, &mut backend).map_err(plain_error)
}

/// The one shape of failure that the page handles: a real `Error` with every problem in `detail`.
fn input_error(errors: Vec<LinkError>) -> Error {
    let text = errors.iter().map(ToString::to_string).collect::<Vec<_>>().join("; ");
    let error = Error::new(&text);
    let detail = Object::new();
    let filled = to_js(&errors).and_then(|list| {
        set(&detail, "kind", &"input".into())?;
        set(&detail, "errors", &list)?;
        set(&error, "detail", &detail)
    });
    filled.err().unwrap_or(error)
}

fn plain_error(error: impl std::fmt::Display) -> Error {
    Error::new(&error.to_string())
}

fn set(object: &JsValue, key: &str, value: &JsValue) -> Result<(), Error> {
    Reflect::set(object, &key.into(), value).map(|_| ()).map_err(|_| Error::new(key))
}

/// Missing values become null, maps become plain objects.
fn to_js<T: Serialize + ?Sized>(value: &T) -> Result<JsValue, Error> {
    value.serialize(&serde_wasm_bindgen::Serializer::json_compatible()).map_err(plain_error)
}

fn from_js<T: DeserializeOwned>(value: JsValue) -> Result<T, Error> {
    serde_wasm_bindgen::from_value(value).map_err(plain_error)
}
