//! The findings page: one HTML file without script, style from its own head only, drawings inline.
//!
//! The same strings as on screen: every number comes from [`crate::presentation::values`], and
//! bears its `data-id` and `data-at`.

mod facts_lines;
mod first;
mod following;
mod html;
mod model;
mod svg;

use analysis::results::Results;
use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use sha2::{Digest, Sha256};

use self::html::Html;
use self::model::Model;
use crate::presentation::wording;
use crate::session::Session;

/// The style of the page.
const STYLE: &str = include_str!("page.css");

/// Renders the page. `now` is RFC 3339; the same session and `now` give the same bytes. A signed
/// session shows its frozen values, and names those that the present engine derives differently.
#[must_use]
pub fn render(session: &Session, results: &Results, now: &str) -> String {
    let model = Model::new(session, results, now);
    let mut h = Html::new();
    h.raw("<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n");
    let hash = STANDARD.encode(Sha256::digest(STYLE.as_bytes()));
    h.raw("<meta http-equiv=\"Content-Security-Policy\" content=\"default-src 'none'; style-src 'sha256-");
    h.raw(&hash);
    h.raw("'; base-uri 'none'; form-action 'none'\">\n");
    h.raw("<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n");
    h.element("title", "", &wording::plain_text("page-title"));
    h.raw("<style>");
    h.raw(STYLE);
    h.raw("</style>\n</head>\n<body>\n");
    first::write(&mut h, &model);
    following::write(&mut h, &model);
    h.raw("</body>\n</html>\n");
    h.done()
}
