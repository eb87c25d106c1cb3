//! Studies for the page's workers: which items there are, one of them evaluated, and what all of them say together.
//!
//! Every call opens the study anew from its link, so that a worker needs no memory and any of them may take any item.

use figures::{FigureMap, FigureOptions};
use js_sys::Error;
use scenario::link;
use scenario::study::{Item, Point, Study, StudyReport};
use serde::Serialize;
use wasm_bindgen::prelude::*;
use web_sys::HtmlCanvasElement;

use crate::{from_js, input_error, paint, plain_error, to_js};

/// What there is to do.
#[derive(Serialize)]
struct Plan {
    /// Canonical link of the study.
    link: String,
    /// Items of the first evaluation.
    items: Vec<Item>,
}

fn open(name: &str, link: &str) -> Result<Study, Error> {
    link::decode(link).and_then(|scenario| Study::open(name, &scenario)).map_err(input_error)
}

/// The items of a study (`dates` or `map`) that the link's study keys ask for: `{link, items}`.
///
/// # Errors
/// Wrong or refused input, as for `solve`.
#[wasm_bindgen]
pub fn study_items(name: &str, link: &str) -> Result<JsValue, Error> {
    let study = open(name, link)?;
    to_js(&Plan { link: study.link(), items: study.items() })
}

/// Evaluates one item: a point for each of its dates.
///
/// # Errors
/// Wrong or refused input, as for `solve`, or an item of another shape.
#[wasm_bindgen]
pub fn study_evaluate(name: &str, link: &str, item: JsValue) -> Result<JsValue, Error> {
    let item: Item = from_js(item)?;
    to_js(&open(name, link)?.evaluate(&item))
}

/// Items to evaluate again once all of the first are there; their points join the others.
///
/// # Errors
/// Wrong or refused input, as for `solve`, or points of another shape.
#[wasm_bindgen]
pub fn study_mends(name: &str, link: &str, points: JsValue) -> Result<JsValue, Error> {
    let points: Vec<Point> = from_js(points)?;
    to_js(&open(name, link)?.mends(&points))
}

/// The report of the points that are there, all or not.
///
/// # Errors
/// Wrong or refused input, as for `solve`, or points of another shape.
#[wasm_bindgen]
pub fn study_report(name: &str, link: &str, points: JsValue) -> Result<JsValue, Error> {
    let points: Vec<Point> = from_js(points)?;
    to_js(&open(name, link)?.report(&points))
}

/// What a drawn study tells the page.
#[derive(Serialize)]
struct Drawn {
    /// Where its panels are.
    #[serde(flatten)]
    map: FigureMap,
    /// What a reader would see.
    words: String,
}

/// Draws a study to fill the canvas: `{panels, words}`.
///
/// # Errors
/// A study of another shape, options that do not exist, or a canvas that cannot be drawn on.
#[wasm_bindgen]
pub fn draw_study(canvas: HtmlCanvasElement, study: JsValue, options: JsValue) -> Result<JsValue, Error> {
    let (study, options): (StudyReport, FigureOptions) = (from_js(study)?, from_js(options)?);
    let figure = figures::study(&study, &options).map_err(plain_error)?;
    paint(&figure, options.scale, canvas)?;
    to_js(&Drawn { words: figure.description, map: figure.map })
}
