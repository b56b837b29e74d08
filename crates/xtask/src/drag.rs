//! A boundary under the mouse in a real window.

use std::path::Path;
use std::time::Duration;

use crate::display::{Display, Result};
use crate::program;

/// Steps from one end of a swing to the other.
const STEPS: usize = 30;

/// A boundary held with the mouse button.
pub struct Drag {
    at: [i32; 2],
    /// Pixels per step, more than a breath.
    step: i32,
    /// A row of pixels that its line crosses.
    row: [u16; 4],
}

impl Drag {
    /// Takes the start of the ramp of `session` in the Time course view of a window that fills
    /// `display`, with `scale` pixels per point.
    ///
    /// # Errors
    /// The handle is not found, or the display does not answer.
    pub fn grip(display: &Display, binary: &Path, session: &Path, scale: u16) -> Result<Self> {
        let size = display.size().map(|side| side / scale);
        let centre = program::centre_of(binary, session, size, "Ramp start").ok_or("no handle")?;
        let [x, y] = centre.map(|c| (c * f64::from(scale)) as i32);
        let step = 4 * i32::from(scale);
        let width = u16::try_from(step * (STEPS as i32 + 10))?;
        let left = u16::try_from(x - 4 * step)?;
        let row = [left, u16::try_from(y - 60 * i32::from(scale))?, width, 1];
        display.point(x, y)?;
        std::thread::sleep(Duration::from_millis(300));
        display.button(true)?;
        std::thread::sleep(Duration::from_millis(300));
        Ok(Self { at: [x, y], step, row })
    }

    /// Moves to and fro `moves` times, `pause` after each pixel; returns the time from each move
    /// until its line stood elsewhere, so that every move is a frame.
    ///
    /// # Errors
    /// A move does not show, or the display does not answer.
    pub fn times(&self, display: &Display, moves: usize, pause: Duration) -> Result<Vec<Duration>> {
        let mut shown = display.pixels(self.row)?;
        let mut times = Vec::with_capacity(moves);
        for n in 0..moves {
            let phase = n % (2 * STEPS);
            let swing = phase.min(2 * STEPS - phase) as i32 + 1 + i32::from(phase >= STEPS);
            display.point(self.at[0] + swing * self.step, self.at[1])?;
            let change = display.change(self.row, &shown)?;
            let (now, time) = change.ok_or_else(|| format!("move {n} does not show"))?;
            shown = now;
            times.push(time);
            std::thread::sleep(pause);
        }
        Ok(times)
    }

    /// Lets go.
    ///
    /// # Errors
    /// The display does not answer.
    pub fn release(&self, display: &Display) -> Result<()> {
        display.button(false)
    }
}
