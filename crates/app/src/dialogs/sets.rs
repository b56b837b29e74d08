//! Choosing predicted sets: who was studied, how this person fits, what each would give.

use analysis::predicted::Prediction;
use analysis::predicted::chooser::{self, Choice};
use analysis::predicted::sets::Predicts;
use analysis::predicted::validity::{Fit, word_and_unit};
use analysis::results::Outcome;
use egui::{Align, Layout, Ui};
use record::presentation::{choices, key_table, values, wording};
use record::session::Edit;

use super::{Form, line};
use crate::command::{Command, Outbox};
use crate::context::Context;
use crate::view_state::Dialog;

/// Draws the dialog for `quantity`.
pub fn show(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox, quantity: Predicts) {
    form.begin("sets");
    ui.label(text("chooser-intro"));
    if chooser::mixes_families(cx.settings) {
        ui.label(text("chooser-families"));
    }
    quantities(ui, cx, out, quantity);
    ui.separator();
    let person = chooser::person(cx.facts, cx.recording);
    let all = chooser::choices(cx.settings, quantity, &person);
    spread(ui, cx, quantity, &all);
    let room = (ui.ctx().content_rect().height() - 330.0).clamp(120.0, 560.0);
    egui::ScrollArea::vertical().max_height(room).id_salt("sets").show(ui, |ui| {
        derived(ui, cx, out, quantity);
        for choice in &all {
            row(ui, cx, out, quantity, choice);
        }
        if all.is_empty() {
            ui.label(text("chooser-none"));
        }
    });
    ui.separator();
    let mut unlocked = cx.settings.predicted.unconfirmed;
    let unlock = egui::Checkbox::new(&mut unlocked, text("chooser-unlock"));
    if ui.add_enabled(!cx.signed, unlock).changed() {
        out.push(setting("predicted.unconfirmed", serde_json::Value::Bool(unlocked)));
    }
    add(ui, cx, form, out);
}

fn text(code: &str) -> String {
    wording::plain_text(code)
}

/// The name of a quantity on its tab.
#[must_use]
pub fn quantity_name(quantity: Predicts) -> String {
    text(&format!("set-quantity-{}", quantity.code()))
}

/// A tab for each quantity that a loaded set predicts.
fn quantities(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, now: Predicts) {
    let given = |q: &Predicts| cx.settings.sets.iter().any(|s| s.equation(*q).is_some());
    ui.horizontal_wrapped(|ui| {
        ui.spacing_mut().item_spacing = egui::vec2(4.0, 2.0);
        for quantity in Predicts::all().filter(given) {
            if ui.selectable_label(quantity == now, quantity_name(quantity)).clicked() {
                out.push(Command::Show(Dialog::Sets(quantity)));
            }
        }
    });
}

/// How far the sets in range lie apart, and what that does to the measured value.
fn spread(ui: &mut Ui, cx: &Context<'_>, quantity: Predicts, all: &[Choice<'_>]) {
    let holds = |c: &&Choice<'_>| matches!(c.fit, Some(Fit::In | Fit::Near)) && !c.locked;
    let given: Vec<f64> =
        all.iter().filter(holds).filter_map(|c| Some(c.result.as_ref().ok()?.value)).collect();
    let (Some(low), Some(high)) =
        (given.iter().copied().reduce(f64::min), given.iter().copied().reduce(f64::max))
    else {
        return;
    };
    let shown = |v: f64| values::in_unit(v, quantity.unit());
    let mut words = wording::with("chooser-spread", &[("low", shown(low)), ("high", shown(high))]);
    let measured = quantity
        .measured_id()
        .and_then(|id| cx.results.primary(id, quantity.at()))
        .and_then(Outcome::number);
    if let Some(value) = measured {
        let percent = |of: f64| values::in_unit(100.0 * value / of, analysis::unit::Unit::Percent);
        let args = [("value", shown(value)), ("from", percent(high)), ("to", percent(low))];
        words = format!("{words} {}", wording::with("chooser-spread-measured", &args));
    }
    ui.label(words);
}

/// The value that follows from the sets of V̇O₂ and HR, where it stands on the page or could.
fn derived(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, quantity: Predicts) {
    let method = |o: &&Outcome| {
        o.id == quantity.predicted_id()
            && (o.method.contains('/') || o.method.ends_with("-on-this-ramp"))
    };
    let Some(outcome) = cx.results.outcomes.iter().find(method) else { return };
    let set = key_table::set_names(&outcome.method, cx.settings);
    let name = wording::with("chooser-derived", &[("set", set)]);
    let value = outcome.number().map_or_else(String::new, |v| values::in_unit(v, quantity.unit()));
    let own = cx.settings.predicted.others.get(&quantity);
    if heading(ui, outcome.primary, own.is_some() && !cx.signed, &name, &value).clicked() {
        let mut others = cx.settings.predicted.others.clone();
        others.remove(&quantity);
        let others: std::collections::BTreeMap<&str, &String> =
            others.iter().map(|(q, id)| (q.code(), id)).collect();
        out.push(setting("predicted.others", serde_json::json!(others)));
    }
}

/// A choice with its value at the right edge.
fn heading(ui: &mut Ui, chosen: bool, enabled: bool, name: &str, value: &str) -> egui::Response {
    ui.add_space(4.0);
    let size = egui::vec2(ui.available_width(), 20.0);
    ui.allocate_ui_with_layout(size, Layout::right_to_left(Align::Center), |ui| {
        ui.label(value);
        let rest = Layout::left_to_right(Align::Center).with_main_wrap(true);
        ui.with_layout(rest, |ui| {
            ui.add_enabled(enabled || chosen, egui::RadioButton::new(chosen, name))
        })
        .inner
    })
    .inner
}

fn row(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, quantity: Predicts, choice: &Choice<'_>) {
    let set = choice.set;
    let mut name = if set.name.contains(&set.year.to_string()) {
        set.name.clone()
    } else {
        format!("{} ({})", set.name, set.year)
    };
    if choice.locked {
        name = wording::with("chooser-locked", &[("set", name)]);
    }
    let value = choice.result.as_ref().map_or_else(|_| String::new(), |p| given(quantity, p));
    let information = set.equation(quantity).is_some_and(|e| e.information_only);
    let enabled = !choice.locked && !information && !cx.signed;
    let radio = heading(ui, choice.chosen, enabled, &name, &value).on_hover_text(&set.citation);
    if radio.clicked() && !choice.chosen {
        out.push(choose(cx, quantity, choice));
    }
    ui.indent(("set", &set.id, quantity.predicted_id()), |ui| {
        ui.label(format!("{}  ·  {}", set.year, set.population));
        ui.label(fit(choice));
        if information {
            ui.label(text("chooser-information"));
        }
        if let Err(why) = choice.result.as_ref().map_err(|n| crate::words::note(n, cx.results)) {
            ui.label(why);
        }
        override_range(ui, cx, out, choice);
    });
}

/// Choosing a set of V̇O₂ takes the HR of its family along, as long as the reader mixes none.
fn choose(cx: &Context<'_>, quantity: Predicts, choice: &Choice<'_>) -> Command {
    let edit = Edit::choose_set(quantity, &choice.set.id);
    let along = chooser::hr_along(cx.settings, &choice.set.id);
    match (edit, along, quantity) {
        (Edit::SetPredicted { vo2, others, .. }, Some(hr), Predicts::Vo2Peak) => {
            Command::Edit(Edit::SetPredicted { vo2, hr: Some(hr), others })
        }
        (edit, _, Predicts::Mvv) => {
            // The reserve takes its factor from the same choice.
            let factor = chooser::mvv_factor(choice.set).map(|factor| Edit::SetSetting {
                path: "mvv_factor".to_owned(),
                value: factor.into(),
            });
            Command::Edits(std::iter::once(edit).chain(factor).collect())
        }
        (edit, ..) => Command::Edit(edit),
    }
}

fn override_range(ui: &mut Ui, cx: &Context<'_>, out: &mut Outbox, choice: &Choice<'_>) {
    if choice.fit != Some(Fit::Out) && !choice.overridden {
        return;
    }
    let mut on = choice.overridden;
    let label = wording::with("chooser-override", &[("set", choice.set.name.clone())]);
    let enabled = !choice.locked && !cx.signed;
    if ui.add_enabled(enabled, egui::Checkbox::new(&mut on, label)).changed() {
        let mut ids = cx.settings.predicted.overridden.clone();
        ids.retain(|id| *id != choice.set.id);
        if on {
            ids.push(choice.set.id.clone());
        }
        out.push(setting("predicted.overridden", serde_json::json!(ids)));
    }
}

/// The predicted value with its limits.
fn given(quantity: Predicts, p: &Prediction) -> String {
    let shown = |v: f64| values::in_unit(v, quantity.unit());
    let limits = match (p.low, p.high) {
        (Some(low), Some(high)) => {
            wording::with("chooser-limits", &[("low", shown(low)), ("high", shown(high))])
        }
        (Some(low), None) => wording::with("chooser-lower-limit", &[("low", shown(low))]),
        (None, Some(high)) => wording::with("chooser-upper-limit", &[("high", shown(high))]),
        (None, None) => text("chooser-no-limit"),
    };
    format!("{}  ·  {limits}", shown(p.value))
}

/// How the person lies against the set, in words and symbol, range by range.
fn fit(choice: &Choice<'_>) -> String {
    let code = match choice.fit {
        Some(Fit::In) => "chooser-fit-in",
        Some(Fit::Near) => "chooser-fit-near",
        Some(Fit::Flagged) => "chooser-fit-flagged",
        Some(Fit::Out) => "chooser-fit-out",
        None => "chooser-fit-unknown",
    };
    let ranges = choice.fits.iter().map(|f| {
        let (word, unit) = word_and_unit(f.range.input);
        let shown = |v: f64| match word {
            "age-years" => format!("{v:.0}"),
            _ => values::in_unit(v, unit),
        };
        let args = [
            ("input", text(&format!("word-{word}"))),
            ("value", shown(f.value)),
            ("low", shown(f.range.low)),
            ("high", shown(f.range.high)),
        ];
        wording::with("chooser-range", &args)
    });
    std::iter::once(text(code)).chain(ranges).collect::<Vec<_>>().join("  ·  ")
}

/// A laboratory's own set, read from a file and kept in the session.
fn add(ui: &mut Ui, cx: &Context<'_>, form: &mut Form, out: &mut Outbox) {
    line(ui, form, "path", &text("chooser-add"));
    let path = form.get("path").trim().to_owned();
    let button = egui::Button::new(text("chooser-add-button"));
    ui.horizontal(|ui| {
        if ui.add_enabled(!path.is_empty() && !cx.signed, button).clicked() {
            out.push(Command::AddSet(path.into()));
        }
        if let Some(status) = &cx.view.status {
            ui.label(status);
        }
    });
    for set in cx.settings.sets.iter().filter(|s| s.own.is_some()) {
        ui.label(wording::with("choice-own", &[("set", choices::set_name(&set.id, cx.settings))]));
    }
}

fn setting(path: &str, value: serde_json::Value) -> Command {
    Command::Edit(Edit::SetSetting { path: path.to_owned(), value })
}
