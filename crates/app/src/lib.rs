//! The window of Rampcrest, without a shell: `App::ui` draws one frame into any `egui::Ui`.

pub mod app;
pub mod background;
pub mod chart;
pub mod cli;
pub mod command;
pub mod context;
pub mod demo;
pub mod derived;
pub mod describe;
pub mod dialogs;
pub mod dispatch;
pub mod document;
pub mod headless;
pub mod opening;
pub mod panels;
pub mod picture;
pub mod preferences;
pub mod reimport;
pub mod ribbon;
pub mod robustness;
pub mod shell;
pub mod shown;
pub mod theme;
pub mod values;
pub mod view_state;
pub mod views;
pub mod widgets;
pub mod words;

pub use app::App;
