//! What is shown, apart from the session: view, selection, cursor, zoom, the drag in progress.

use analysis::predicted::sets::Predicts;

use crate::chart::interact::{Drag, Geometry};

/// A view of the window, by the question it answers.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum View {
    /// What happened?
    TimeCourse,
    /// Do output and extraction keep growing?
    Circulation,
    /// Where do lactate and compensation begin?
    Thresholds,
    /// Is breathing the limit, is it efficient?
    Ventilation,
    /// Does the lung pass gas?
    GasExchange,
    /// The trade's nine-panel array.
    NinePanels,
    /// How does it settle?
    Recovery,
    /// What was noted?
    Events,
    /// What are the numbers?
    Data,
    /// What changed since?
    Comparison,
    /// What did the file mean?
    Import,
    /// What do I conclude?
    Findings,
}

impl View {
    /// All views in the order of their tabs; findings stand at the side and have no tab.
    pub const TABS: [View; 11] = [
        View::TimeCourse,
        View::Circulation,
        View::Thresholds,
        View::Ventilation,
        View::GasExchange,
        View::NinePanels,
        View::Recovery,
        View::Events,
        View::Data,
        View::Comparison,
        View::Import,
    ];

    /// Stable code of the command line.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            View::TimeCourse => "time-course",
            View::Circulation => "circulation",
            View::Thresholds => "thresholds",
            View::Ventilation => "ventilation",
            View::GasExchange => "gas-exchange",
            View::NinePanels => "nine-panels",
            View::Recovery => "recovery",
            View::Events => "events",
            View::Data => "data",
            View::Comparison => "comparison",
            View::Import => "import",
            View::Findings => "findings",
        }
    }

    /// The view with this code.
    #[must_use]
    pub fn from_code(code: &str) -> Option<Self> {
        Self::TABS.into_iter().chain([View::Findings]).find(|view| view.code() == code)
    }

    /// Its name on the tab.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            View::TimeCourse => "Time course",
            View::Circulation => "Circulation",
            View::Thresholds => "Thresholds",
            View::Ventilation => "Ventilation",
            View::GasExchange => "Gas exchange",
            View::NinePanels => "Nine panels",
            View::Recovery => "Recovery",
            View::Events => "Events",
            View::Data => "Data",
            View::Comparison => "Comparison",
            View::Import => "Import",
            View::Findings => "Findings",
        }
    }

    /// The question it answers.
    #[must_use]
    pub fn question(self) -> &'static str {
        match self {
            View::TimeCourse => "What happened?",
            View::Circulation => "Do output and extraction keep growing?",
            View::Thresholds => "Where do lactate and compensation begin?",
            View::Ventilation => "Is breathing the limit, is it efficient?",
            View::GasExchange => "Does the lung pass gas?",
            View::NinePanels => "The trade’s nine-panel array",
            View::Recovery => "How does it settle?",
            View::Events => "What was noted?",
            View::Data => "What are the numbers?",
            View::Comparison => "What changed since?",
            View::Import => "What did the file mean?",
            View::Findings => "What do I conclude?",
        }
    }
}

/// The dialog that is open.
#[derive(Clone, Debug, PartialEq)]
pub enum Dialog {
    /// Open a file.
    Open,
    /// Save the session as.
    Save,
    /// Export the page.
    Export,
    /// Facts of person and test.
    Facts,
    /// Sign.
    Sign,
    /// All keys.
    Keys,
    /// Enter a timed event at the cursor.
    Event,
    /// Leave out breaths: of this stretch, s, or of the breath at the cursor.
    Exclude(Option<(f64, f64)>),
    /// Choose predicted sets, of this quantity first.
    Sets(Predicts),
    /// Parameters of the model of a normal response.
    Overlay,
    /// The measured course among simulated ones.
    LineUp,
    /// Inputs of the stroke-volume sentence.
    Inputs,
    /// Edit a statement.
    Statement(String),
    /// Unsaved work would be lost.
    Unsaved(Box<crate::command::Command>),
}

/// State of the view; never saved, never undone.
#[derive(Clone, Debug)]
pub struct ViewState {
    /// The view shown.
    pub view: View,
    /// Time cursor, s; `None` until set.
    pub cursor_s: Option<f64>,
    /// Zoomed stretch of time, s; `None` shows all.
    pub zoom_s: Option<(f64, f64)>,
    /// The drag in progress.
    pub drag: Option<Drag>,
    /// A stretch being dragged for zooming, s.
    pub zoom_drag: Option<(f64, f64)>,
    /// Whether raw breaths are drawn.
    pub raw: bool,
    /// Whether the findings lie over the charts.
    pub wide_findings: bool,
    /// Statement or number whose breaths are selected, s.
    pub selected_s: Option<(f64, f64)>,
    /// Statement whose evidence is open.
    pub evidence_of: Option<String>,
    /// Open dialog.
    pub dialog: Option<Dialog>,
    /// What is typed in the open dialog.
    pub form: crate::dialogs::Form,
    /// One line about the last action.
    pub status: Option<String>,
    /// Where the time columns stood in the last frame.
    pub geometry: Vec<Geometry>,
}

impl Default for ViewState {
    fn default() -> Self {
        Self {
            view: View::TimeCourse,
            cursor_s: None,
            zoom_s: None,
            drag: None,
            zoom_drag: None,
            raw: true,
            wide_findings: false,
            selected_s: None,
            evidence_of: None,
            dialog: None,
            form: crate::dialogs::Form::default(),
            status: None,
            geometry: Vec::new(),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn codes_go_both_ways() {
        for view in View::TABS.into_iter().chain([View::Findings]) {
            assert_eq!(View::from_code(view.code()), Some(view));
        }
        assert_eq!(View::from_code("elsewhere"), None);
    }
}
