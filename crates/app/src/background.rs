//! What runs beside the window: the desktop's file dialog.

use std::path::PathBuf;
use std::sync::mpsc::{Receiver, TryRecvError, channel};
use std::time::{Duration, Instant};

/// A faster answer than any person gives means that there is no dialog.
const TOO_FAST: Duration = Duration::from_millis(150);

/// What became of a file dialog.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Picked {
    /// A file was chosen.
    File(PathBuf),
    /// Nothing was chosen.
    Cancelled,
    /// The desktop offers no dialog.
    NoDialog,
}

/// The dialog under way, if any.
#[derive(Debug, Default)]
pub struct Background {
    picking: Option<(Instant, Receiver<Option<PathBuf>>)>,
}

impl Background {
    /// Asks the desktop for a file; the window goes on meanwhile.
    pub fn pick(&mut self, ctx: &egui::Context) {
        if self.picking.is_some() {
            return;
        }
        let (send, receive) = channel();
        let ctx = ctx.clone();
        std::thread::spawn(move || {
            let file = rfd::FileDialog::new().set_title("Open").pick_file();
            // The window may be gone by now; then nobody waits for the answer.
            let _ = send.send(file);
            ctx.request_repaint();
        });
        self.picking = Some((Instant::now(), receive));
    }

    /// The answer, once it is there.
    pub fn poll(&mut self) -> Option<Picked> {
        let (since, receive) = self.picking.as_ref()?;
        let answer = match receive.try_recv() {
            Ok(Some(path)) => Picked::File(path),
            Ok(None) if since.elapsed() < TOO_FAST => Picked::NoDialog,
            Ok(None) => Picked::Cancelled,
            Err(TryRecvError::Empty) => return None,
            Err(TryRecvError::Disconnected) => Picked::NoDialog,
        };
        self.picking = None;
        Some(answer)
    }
}
