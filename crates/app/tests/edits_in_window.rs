//! Answers about columns and breaths left out, in the window.

mod support;
#[path = "support/window.rs"]
mod window_harness;

use analysis::quantity::Quantity;
use analysis::results::FlagKind;
use app::App;
use app::command::Command;
use app::view_state::{Dialog, View};
use egui::accesskit::Role;
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;
use record::facts_file::FactsFile;

fn window(app: App) -> Harness<'static, App> {
    window_harness::open(app, [1920.0, 1080.0])
}

fn type_into(h: &mut Harness<'_, App>, label: &str, text: &str) {
    h.get_by_role_and_label(Role::TextInput, label).focus();
    h.run();
    h.key_press_modifiers(egui::Modifiers::COMMAND, egui::Key::A);
    h.get_by_role_and_label(Role::TextInput, label).type_text(text);
    h.run();
}

/// Ten minutes of breaths whose column "RR" could be breathing rate or systolic pressure.
fn ambiguous() -> String {
    let mut text = String::from("time [s],VO2 [mL/min],HR [bpm],RR\n");
    for i in 1..=200 {
        let t = 3 * i;
        text.push_str(&format!("{t},{},{},{}\n", 300 + 5 * i, 80 + i / 4, 80 + i / 16));
    }
    text
}

#[test]
fn an_open_question_is_answered_in_the_import_view_and_the_facts_are_kept() {
    let mut app = App::new();
    let facts = r#"{"schema":"rampcrest-facts/1","identity":{"label":"Invented"}}"#;
    let facts = FactsFile::read(facts).expect("facts");
    app.open_table(ambiguous().as_bytes(), "rr.csv", facts);
    app.view.view = View::Import;
    let mut h = window(app);
    let questions =
        |h: &Harness<'_, App>| h.state().document.session().expect("open").recipe().questions.len();
    assert_eq!(questions(&h), 1);
    assert!(!h.state().document.recording().expect("open").breaths.has(Quantity::Fr));
    let label = Command::Answer("RR".into(), "fr /min".into()).label();
    h.get_by_role_and_label(Role::Button, &label).click();
    h.run();
    assert_eq!(questions(&h), 0, "{:?}", h.state().view.status);
    let recording = h.state().document.recording().expect("open").clone();
    assert_eq!(recording.breaths.value(Quantity::Fr, 0), Some(80.0));
    assert_eq!(h.state().document.label(), "Invented");
    assert_eq!(h.state().view.view, View::Import);
    assert!(!h.state().document.saved());
}

#[test]
fn a_breath_is_left_out_with_a_reason_and_taken_back_by_undo() {
    let mut app = App::on_demo();
    app.view.view = View::Data;
    app.view.cursor_s = Some(600.0);
    let mut h = window(app);
    let left_out = |h: &Harness<'_, App>| {
        let results = h.state().derived.committed();
        results.flags.iter().filter(|f| f.kind == FlagKind::LeftOut).count()
    };
    let before = left_out(&h);
    h.get_by_role_and_label(Role::Button, &Command::Show(Dialog::Exclude(None)).label()).click();
    h.run();
    type_into(&mut h, "Reason", "swallowed");
    h.get_by_role_and_label(Role::Button, "Leave out").click();
    h.run();
    assert_eq!(left_out(&h), before + 1, "{:?}", h.state().view.status);
    assert_eq!(h.state().document.decisions().excluded.len(), 1);
    h.get_by_role_and_label(Role::Button, "Undo").click();
    h.run();
    assert_eq!(left_out(&h), before);
    assert!(h.state().document.decisions().excluded.is_empty());
}
