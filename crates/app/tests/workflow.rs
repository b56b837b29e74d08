//! The whole job once: open, decide on a statement, take back, save, reopen, sign, export.

mod support;
#[path = "support/window.rs"]
mod window_harness;

use app::App;
use app::command::Command;
use app::view_state::{Dialog, View};
use egui::accesskit::Role;
use egui_kittest::Harness;
use egui_kittest::kittest::Queryable;
use record::session::findings::Status;

fn window(app: App) -> Harness<'static, App> {
    window_harness::open(app, [1920.0, 1080.0])
}

fn first_status(h: &Harness<'_, App>) -> Status {
    h.state().derived.findings()[0].status
}

/// Presses the button of `label` for the first statement of the sheet.
fn press(h: &mut Harness<'_, App>, label: &str) {
    let id = h.state().derived.findings()[0].id.clone();
    let author = format!("{label}:{id}");
    h.get_by(|n| n.author_id() == Some(author.as_str())).click();
    h.run();
}

fn type_into(h: &mut Harness<'_, App>, label: &str, text: &str) {
    h.get_by_role_and_label(Role::TextInput, label).focus();
    h.run();
    h.key_press_modifiers(egui::Modifiers::COMMAND, egui::Key::A);
    h.get_by_role_and_label(Role::TextInput, label).type_text(text);
    h.run();
}

#[test]
fn accepting_a_statement_is_one_step_that_can_be_taken_back() {
    let mut h = window(App::on_demo());
    assert_eq!(first_status(&h), Status::Draft);
    press(&mut h, "Accept");
    assert_eq!(first_status(&h), Status::Accepted);
    h.get_by_label("Undo").click();
    h.run();
    assert_eq!(first_status(&h), Status::Draft);
}

#[test]
fn a_statement_edited_saved_and_reopened_reads_as_the_reader_wrote_it() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("kittiwake.rampcrest.json");
    let mut h = window(App::on_demo());
    press(&mut h, "Edit…");
    let question = app::panels::statements::question(h.state().derived.findings()[0].section);
    h.get_by_role_and_label(Role::MultilineTextInput, question).focus();
    h.run();
    h.key_press_modifiers(egui::Modifiers::COMMAND, egui::Key::A);
    let mine = "Read and told to the ward.";
    h.get_by_role_and_label(Role::MultilineTextInput, question).type_text(mine);
    h.run();
    h.get_by_label("Accept this text").click();
    h.run();
    assert_eq!(h.state().derived.findings()[0].text, mine);
    assert_eq!(first_status(&h), Status::Accepted);

    assert!(!h.state().document.saved());
    h.key_press_modifiers(egui::Modifiers::COMMAND, egui::Key::S);
    h.run();
    type_into(&mut h, "Path of the session", path.to_str().expect("text"));
    h.get_by_label("Save").click();
    h.run();
    assert!(h.state().document.saved(), "{:?}", h.state().view.status);

    let mut again = window(App::on_demo());
    again.key_press_modifiers(egui::Modifiers::COMMAND, egui::Key::O);
    again.run();
    type_into(&mut again, "Path of the file", path.to_str().expect("text"));
    again.get_by_label("Open").click();
    again.run();
    assert_eq!(again.state().derived.findings()[0].text, mine);
    assert!(again.state().document.path().is_some());
}

#[test]
fn signing_lists_what_is_missing_asks_once_and_locks() {
    let folder = tempfile::tempdir().expect("a folder");
    let page = folder.path().join("page.html");
    let mut h = window(App::on_demo());
    h.get_by_label("Sign…").click();
    h.run();
    assert!(h.query_by_label_contains("statements not decided").is_some());
    type_into(&mut h, "Name", "A. Reader (invented)");
    h.get_by_label("Sign although this is missing").click();
    h.run();
    h.get_by_label("Sign and lock").click();
    h.run();
    assert!(h.state().document.signed(), "{:?}", h.state().view.status);
    let revision = h.state().document.revision();
    h.key_press(egui::Key::O);
    h.run();
    assert_eq!(h.state().document.revision(), revision, "a signed session takes no edit");

    h.get_by_label("Export page…").click();
    h.run();
    type_into(&mut h, "Path of the page", page.to_str().expect("text"));
    h.get_by_label("Export").click();
    h.run();
    let html = std::fs::read_to_string(&page).expect("the page was written");
    assert!(html.contains("A. Reader (invented)"));
}

#[test]
fn a_refused_file_says_what_and_leaves_the_open_test_alone() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("empty.csv");
    std::fs::write(&path, b"").expect("written");
    let mut h = window(App::on_demo());
    let revision = h.state().document.revision();
    h.get_by_label("Open file…").click();
    h.run();
    type_into(&mut h, "Path of the file", path.to_str().expect("text"));
    h.get_by_label("Open").click();
    h.run();
    assert!(h.state().view.status.as_deref().is_some_and(|s| s.contains("empty.csv")));
    assert_eq!(h.state().document.revision(), revision);
    assert_eq!(h.state().document.label(), "Kittiwake");
}

#[test]
fn every_view_and_dialog_draws_in_both_widths_with_names_for_all_it_holds() {
    for size in [[1280.0, 800.0], [1920.0, 1080.0]] {
        let mut h = window(App::on_demo());
        h.set_size(size.into());
        for view in View::TABS.into_iter().chain([View::Findings]) {
            h.state_mut().view.view = view;
            h.run();
        }
        for dialog in [Dialog::Open, Dialog::Save, Dialog::Export, Dialog::Facts, Dialog::Sign]
            .into_iter()
            .chain([Dialog::Keys, Dialog::Event, Dialog::Inputs])
        {
            h.state_mut().view.dialog = Some(dialog.clone());
            h.run();
            assert_eq!(h.state().view.dialog, Some(dialog));
        }
        assert!(Command::Zoom(None).key_text().is_some());
    }
}
