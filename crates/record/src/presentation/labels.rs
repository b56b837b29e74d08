//! From stable ids to the words a reader knows.

use analysis::results::At;

/// Labels by id. The place is added unless the label names it already.
const LABELS: &[(&str, &str)] = &[
    ("vo2-peak", "Peak V̇O₂"),
    ("vo2-peak-per-kg", "Peak V̇O₂ per kg"),
    ("hr-peak", "HR at peak"),
    ("o2-pulse-at-peak", "O₂ pulse at peak V̇O₂"),
    ("o2-pulse-highest", "O₂ pulse, highest"),
    ("vt1-vo2", "VT1"),
    ("vt2-vo2", "VT2"),
    ("ve-vco2-slope-to-vt2", "V̇E/V̇CO₂ slope to VT2"),
    ("ve-vco2-slope-full", "V̇E/V̇CO₂ slope, whole ramp"),
    ("oues", "OUES"),
    ("dvo2-dwr", "ΔV̇O₂/ΔWR"),
    ("hr-reserve-used", "HR reserve used"),
    ("chronotropic-index", "Chronotropic index"),
    ("hr-recovery-1min", "HR recovery, 1 min"),
    ("breathing-reserve", "Breathing reserve"),
    ("rer-peak", "RER at peak"),
    ("effort", "Effort"),
    ("o2-pulse-course", "O₂-pulse course"),
    ("o2-pulse-late-slope", "O₂ pulse, late slope"),
    ("o2-pulse-deficit", "Difference from early line"),
    ("o2-pulse-deficit-vo2-part", "of it V̇O₂ slowing"),
    ("o2-pulse-deficit-hr-part", "of it HR acceleration"),
    ("vo2-hr-slope-ratio", "V̇O₂–HR slope, late ÷ early"),
    ("o2-pulse-detection-limit", "Shortest levelling that would be seen"),
    ("o2-pulse-early-slope", "O₂ pulse, own early line"),
    ("o2-pulse-asymptote", "O₂ pulse, value it rises towards"),
    ("o2-pulse-score", "O₂-pulse course, score"),
    ("o2-pulse-onset", "Slowing begins"),
    ("vo2-hr-slope-over-pulse", "V̇O₂–HR slope ÷ O₂ pulse, late"),
    ("fick-forward-sv-bound", "Forward stroke volume, probably not below"),
    ("fick-arterial-content", "Arterial O₂ content"),
    ("fick-sv-change", "Stroke volume, change under the assumption"),
    ("fick-extraction-change", "Extraction, change under the assumption"),
    ("fick-hr-deficit", "HR below the line to predicted peak"),
    ("fick-content-share", "O₂ pulse lost to saturation"),
    ("fick-shunt-signature", "Simultaneous end-tidal step"),
];

/// The label of `id` at `at`.
#[must_use]
pub fn label(id: &str, at: At) -> String {
    match LABELS.iter().find(|(known, _)| *known == id) {
        Some((_, label)) => (*label).to_owned(),
        None => format!("{} {}", id.replace('-', " "), at.code()),
    }
}

/// `text` without combining marks, for paper and for fonts without mark positioning: V̇ becomes V.
#[must_use]
pub fn plain(text: &str) -> String {
    text.chars().filter(|c| !('\u{300}'..='\u{36f}').contains(c)).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn paper_has_no_combining_marks() {
        assert_eq!(plain(&label("vo2-peak", At::Peak)), "Peak VO₂");
        assert_eq!(plain("V̇E/V̇CO₂, C(a−v̄)O₂"), "VE/VCO₂, C(a−v)O₂");
    }
}
