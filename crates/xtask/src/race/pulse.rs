//! The points of O₂ pulse on time that both sides of the race fit, chosen as the baseline does.

use analysis::robust::{MAD_TO_SD, median};
use analysis::two_segments::Design;
use serde_json::Value;

/// Time in minutes and O₂ pulse in mL per beat.
pub struct Pulse {
    pub x: Vec<f64>,
    pub y: Vec<f64>,
}

impl Pulse {
    /// Rows of the ramp from its first minute on, without those that the baseline takes for
    /// outliers: a gas channel further than 4 robust SD from its running median.
    pub fn read(bytes: &[u8]) -> Option<Self> {
        let text = core::str::from_utf8(bytes).ok()?;
        let mut lines = text.lines();
        let header: Vec<&str> = lines.next()?.split(',').collect();
        let rows: Vec<Vec<&str>> = lines.map(|line| line.split(',').collect()).collect();
        let at = |name: &str| header.iter().position(|h| *h == name);
        let column = |name: &str| -> Option<Vec<f64>> {
            let at = at(name)?;
            rows.iter().map(|row| row.get(at)?.parse().ok()).collect()
        };
        let (t, vo2, hr) = (column("time_s")?, column("vo2_ml_min")?, column("hr_bpm")?);
        let gases = [vo2.clone(), column("vco2_ml_min")?, column("ve_l_min")?].map(|g| usual(&g));
        let phase = at("phase")?;
        let kept: Vec<usize> = (0..rows.len())
            .filter(|i| rows[*i].get(phase) == Some(&"ramp") && gases.iter().all(|g| g[*i]))
            .collect();
        let from = t[*kept.first()?] + 60.0;
        let kept = kept.into_iter().filter(|i| t[*i] >= from);
        let (x, y) = kept.map(|i| (t[i] / 60.0, vo2[i] / hr[i])).unzip();
        Some(Self { x, y })
    }

    /// Whether the baseline fitted the same line to the same number of points.
    pub fn agree(&self, theirs: &Value) -> Result<(), String> {
        let number = |name: &str| theirs[name].as_f64().ok_or_else(|| format!("no {name}"));
        let ours = Design::new(&self.x, super::BLOCK)
            .and_then(|d| d.fit(&self.y))
            .ok_or_else(|| String::from("no broken line"))?;
        let n = self.x.len() as f64;
        for (name, ours) in [
            ("n_fit", n),
            ("o2p_break_min", ours.knot),
            ("o2p_b1", ours.before),
            ("o2p_b2", ours.after),
        ] {
            let theirs = number(name)?;
            if (ours - theirs).abs() > 1e-6 * theirs.abs().max(1.0) {
                return Err(format!("{name}: {ours} here, {theirs} there"));
            }
        }
        Ok(())
    }
}

/// Which values lie within 4 robust SD of the running median of 11; the scale from the running
/// median of 21 distances.
fn usual(x: &[f64]) -> Vec<bool> {
    let middle = running_median(x, 5);
    let off: Vec<f64> = x.iter().zip(&middle).map(|(x, m)| (x - m).abs()).collect();
    let scale = running_median(&off, 10);
    off.iter().zip(scale).map(|(off, s)| *off <= 4.0 * s * MAD_TO_SD).collect()
}

/// Median of up to `half` neighbours on either side.
fn running_median(x: &[f64], half: usize) -> Vec<f64> {
    (0..x.len())
        .map(|i| {
            let near = &x[i.saturating_sub(half)..(i + half + 1).min(x.len())];
            median(&mut near.to_vec())
        })
        .collect()
}
