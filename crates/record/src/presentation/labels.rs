//! From stable ids to the words a reader knows.

use analysis::quantity::Quantity;
use analysis::results::At;

use super::wording;

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
    ("fick-rate-share", "O₂ pulse due to a lower rate than in the own earlier test"),
    ("fick-pulse-at-own-rate", "O₂ pulse at the rate of the own earlier test"),
    ("fick-content-share", "O₂ pulse lost to saturation"),
    ("fick-shunt-signature", "Simultaneous end-tidal step"),
    ("predicted-vo2-peak", "Predicted peak V̇O₂"),
    ("predicted-hr-peak", "Predicted peak HR"),
    ("predicted-hr-peak-beta-blocked", "Predicted peak HR on beta-blocker"),
    ("predicted-o2-pulse", "Predicted O₂ pulse at peak"),
    ("predicted-work-rate", "Predicted peak work rate"),
    ("predicted-vt1-vo2", "Predicted V̇O₂ at VT1"),
    ("predicted-vt1-lower-limit", "Lower limit of VT1, of predicted peak V̇O₂"),
    ("predicted-ve-vco2-nadir", "Predicted V̇E/V̇CO₂ nadir"),
    ("predicted-ve-vco2-slope-to-vt2", "Predicted V̇E/V̇CO₂ slope"),
    ("predicted-oues", "Predicted OUES"),
    ("predicted-ouep", "Predicted O₂ uptake efficiency plateau"),
    ("predicted-mvv", "MVV estimated from FEV₁"),
    ("predicted-sys-bp", "Predicted systolic pressure at peak"),
    ("predicted-sys-bp-slope", "Predicted systolic pressure per W"),
    ("predicted-chronotropic-index", "Predicted chronotropic index"),
    ("predicted-dhr-dvo2", "Predicted ΔHR/ΔV̇O₂"),
    ("predicted-dvo2-dwr", "Predicted ΔV̇O₂/ΔWR"),
    ("predicted-bsa", "Body surface area"),
    ("vo2-peak-percent", "Peak V̇O₂, % of predicted"),
    ("vo2-peak-z", "Peak V̇O₂, z-score"),
    ("vo2-peak-against-predicted", "Peak V̇O₂ against predicted"),
    ("vo2-peak-severity", "Peak V̇O₂, published grade"),
    ("vo2-peak-per-predicted-mass", "Peak V̇O₂ per kg predicted mass"),
    ("hr-peak-percent", "HR at peak, % of predicted"),
    ("hr-peak-z", "HR at peak, z-score"),
    ("o2-pulse-percent", "O₂ pulse, % of predicted"),
    ("o2-pulse-z", "O₂ pulse, z-score"),
    ("o2-pulse-against-predicted", "O₂ pulse against predicted"),
    ("work-rate-percent", "Peak work rate, % of predicted"),
    ("work-rate-z", "Peak work rate, z-score"),
    ("work-rate-against-predicted", "Peak work rate against predicted"),
    ("vt1-vo2-percent-predicted", "VT1, % of predicted peak V̇O₂"),
    ("vt1-vo2-against-predicted", "VT1 against predicted"),
    ("ve-vco2-nadir-percent", "V̇E/V̇CO₂ nadir, % of predicted"),
    ("ve-vco2-nadir-against-predicted", "V̇E/V̇CO₂ nadir against predicted"),
    ("ve-vco2-slope-to-vt2-percent", "V̇E/V̇CO₂ slope, % of predicted"),
    ("oues-percent", "OUES, % of predicted"),
    ("sys-bp-z", "Systolic pressure at peak, z-score"),
    ("chronotropic-index-against-predicted", "Chronotropic index against normal"),
    ("dvo2-dwr-percent", "ΔV̇O₂/ΔWR, % of predicted"),
    ("dvo2-dwr-z", "ΔV̇O₂/ΔWR, z-score"),
    ("dvo2-dwr-against-predicted", "ΔV̇O₂/ΔWR against predicted"),
    ("class-weber", "Weber class (heart failure)"),
    ("class-ventilatory", "Ventilatory class (heart failure)"),
    ("class-hr-recovery", "HR recovery band (heart failure)"),
    ("class-ishlt-vo2", "Peak V̇O₂ band, transplant criteria"),
    ("class-ishlt-vo2-percent", "% predicted band, transplant criteria"),
    ("class-ishlt-slope", "V̇E/V̇CO₂ slope band, transplant criteria"),
    ("class-hf-oscillation", "Oscillatory breathing (heart failure)"),
    ("class-hf-petco2", "PETCO₂ at rest and in exercise (heart failure)"),
    ("class-ph-vo2", "Peak V̇O₂ stratum (pulmonary hypertension)"),
    ("class-ph-vo2-percent", "% predicted stratum (pulmonary hypertension)"),
    ("class-ph-slope", "V̇E/V̇CO₂ slope stratum (pulmonary hypertension)"),
    ("class-resection-vo2", "Peak V̇O₂ band (lung resection)"),
    ("class-resection-vo2-percent", "% predicted band (lung resection)"),
    ("class-perioperative-vt1", "VT1 band (major abdominal surgery)"),
    ("class-perioperative-ve-vco2", "V̇E/V̇CO₂ at VT1 band (major abdominal surgery)"),
    ("class-colorectal-vt1", "VT1 band (colorectal surgery)"),
    ("class-colorectal-vo2", "Peak V̇O₂ band (colorectal surgery)"),
    ("class-colorectal-ve-vco2", "V̇E/V̇CO₂ at VT1 band (colorectal surgery)"),
    ("work-rate-peak", "Peak work rate"),
    ("vco2-peak", "V̇CO₂, highest"),
    ("ve-peak", "V̇E, highest"),
    ("spo2-lowest", "SpO₂, lowest in exercise"),
    ("mean-response-time", "V̇O₂ lag behind work rate"),
    ("oscillatory-ventilation", "Oscillatory breathing"),
    ("vt1-time", "VT1, time"),
    ("vt1-state", "VT1, state"),
    ("vt1-vo2-per-kg", "VT1 per kg"),
    ("vt1-vo2-of-peak", "VT1, share of own peak V̇O₂"),
    ("vt1-work-rate", "VT1, work rate"),
    ("vt2-time", "VT2, time"),
    ("vt2-state", "VT2, state"),
    ("vt2-vo2-per-kg", "VT2 per kg"),
    ("vt2-vo2-of-peak", "VT2, share of own peak V̇O₂"),
    ("vt2-work-rate", "VT2, work rate"),
    ("ve-vco2-intercept", "V̇E/V̇CO₂ line, intercept"),
    ("ve-vco2-nadir", "V̇E/V̇CO₂, lowest"),
    ("oues-75", "OUES, first 75 % of the ramp"),
    ("oues-50", "OUES, first 50 % of the ramp"),
    ("dvo2-dwr-to-vt1", "ΔV̇O₂/ΔWR to VT1"),
    ("dvo2-dwr-after-vt1", "ΔV̇O₂/ΔWR after VT1"),
    ("dhr-dwr", "ΔHR/ΔWR"),
    ("dhr-dwr-change", "ΔHR/ΔWR, late ÷ early"),
    ("dhr-dvo2", "ΔHR/ΔV̇O₂"),
    ("vo2-half-time-recovery", "V̇O₂ half-time of recovery"),
    ("vo2-recovery-delay", "V̇O₂ recovery delay"),
    ("rer-overshoot", "RER overshoot in recovery"),
    ("breathing-reserve-absolute", "Breathing reserve, volume"),
    ("rate-pressure-product", "Rate–pressure product"),
    ("circulatory-power", "Circulatory power"),
    ("ventilatory-power", "Ventilatory power"),
    ("effort-rer", "Effort criterion, RER"),
    ("effort-hr", "Effort criterion, HR"),
    ("effort-lactate", "Effort criterion, lactate"),
    ("vo2-plateau", "V̇O₂ plateau"),
    ("lactate-highest", "Lactate, highest"),
    ("load-rise", "Rise of the load"),
    ("load-step", "Step of the load"),
    ("load-step-length", "Length of a step"),
    ("load-deviation", "Load off its protocol"),
    ("vt-irregularity", "Irregularity of VT"),
    ("ve-irregularity", "Irregularity of V̇E"),
];

/// Labels to which the place is added.
const PLACED: &[(&str, &str)] = &[
    ("work-rate", "Work rate"),
    ("vd-vt", "VD/VT"),
    ("vd-vt-estimated", "VD/VT, estimated"),
    ("pa-a-o2", "P(A–a)O₂"),
    ("pa-et-co2", "P(a–ET)CO₂"),
    ("ic-change", "Change of inspiratory capacity"),
    ("eelv", "End-expiratory lung volume"),
    ("eilv", "End-inspiratory lung volume"),
];

/// The label of `id` at `at`.
#[must_use]
pub fn label(id: &str, at: At) -> String {
    if let Some((_, label)) = LABELS.iter().find(|(known, _)| *known == id) {
        return (*label).to_owned();
    }
    let name = match PLACED.iter().find(|(known, _)| *known == id) {
        Some((_, label)) => (*label).to_owned(),
        None => Quantity::from_code(id)
            .map_or_else(|| id.replace('-', " "), |q| q.row().symbol.to_owned()),
    };
    format!("{name}, {}", wording::plain_text(&format!("at-{}", at.code())))
}

/// Whether `id` has a label of its own, or is a quantity of the engine's table.
#[must_use]
pub fn known(id: &str) -> bool {
    LABELS.iter().chain(PLACED).any(|(known, _)| *known == id) || Quantity::from_code(id).is_some()
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
