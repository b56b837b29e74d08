//! The robustness of the statements on the circulation, derived beside the window.

use std::sync::mpsc::{Receiver, channel};

use analysis::reasoning::robustness::{Robustness, robustness};

use crate::document::Document;

/// The last complete result, and the run under way.
#[derive(Debug, Default)]
pub struct Strip {
    /// Whether the window goes on meanwhile; a picture or a test waits instead.
    pub beside: bool,
    done: Option<(u64, Robustness)>,
    running: Option<(u64, Receiver<Robustness>)>,
}

impl Strip {
    /// Takes what has arrived and starts a run where the session has moved on.
    pub fn update(&mut self, document: &Document, ctx: &egui::Context) {
        if let Some((revision, receive)) = &self.running {
            match receive.try_recv() {
                Ok(result) => self.done = Some((*revision, result)),
                Err(std::sync::mpsc::TryRecvError::Empty) => return,
                Err(std::sync::mpsc::TryRecvError::Disconnected) => {}
            }
            self.running = None;
        }
        let revision = document.revision();
        if self.done.as_ref().is_some_and(|(of, _)| *of == revision) {
            return;
        }
        let Some(recording) = document.recording().cloned() else {
            return;
        };
        let (facts, decisions) = (document.facts().clone(), document.decisions());
        let settings = document.settings().clone();
        let run = move || robustness(&recording, &facts, &decisions, &settings);
        if !self.beside {
            self.done = Some((revision, run()));
            return;
        }
        let (send, receive) = channel();
        let ctx = ctx.clone();
        std::thread::spawn(move || {
            // The window may be gone by now; then nobody waits for the answer.
            let _ = send.send(run());
            ctx.request_repaint();
        });
        self.running = Some((revision, receive));
    }

    /// The last complete result.
    #[must_use]
    pub fn shown(&self) -> Option<&Robustness> {
        self.done.as_ref().map(|(_, result)| result)
    }

    /// Whether what is shown belongs to an earlier state of the session.
    #[must_use]
    pub fn behind(&self, document: &Document) -> bool {
        self.done.as_ref().is_some_and(|(of, _)| *of != document.revision())
    }

    /// Forgets everything, for another test.
    pub fn clear(&mut self) {
        *self = Self { beside: self.beside, ..Self::default() };
    }
}
