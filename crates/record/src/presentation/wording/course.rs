//! Texts of the O₂-pulse course and the Fick reasoning.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[
    // Why there is no course.
    ("withheld-rhythm-not-stated", "The course waits until the rhythm during the test is stated."),
    ("withheld-atrial-fibrillation", "Atrial fibrillation: the O₂ pulse has no readable course."),
    (
        "withheld-paced",
        "Paced rhythm: the rate does not follow demand, so the O₂ pulse has no readable course.",
    ),
    ("withheld-other-rhythm", "The rhythm is not sinus, so the O₂ pulse has no readable course."),
    ("withheld-ectopy", "Ectopy was frequent, so the O₂ pulse has no readable course."),
    ("withheld-inspired-gas", "Inspired oxygen was {fio2}, not room air."),
    ("withheld-oxygen-change", "Inspired oxygen was changed during the increments."),
    (
        "withheld-lvad",
        "With a left-ventricular assist device V̇O₂ ÷ HR does not stand for stroke volume × extraction.",
    ),
    ("withheld-fontan", "In a Fontan circulation V̇O₂ ÷ HR is not read for its course."),
    ("withheld-shunt", "With a recorded shunt V̇O₂ ÷ HR is not read for its course."),
    ("withheld-pregnancy", "In pregnancy the O₂ pulse is not read for its course."),
    (
        "withheld-oscillation",
        "Oscillatory breathing: the swings of V̇O₂ hide the course of the O₂ pulse.",
    ),
    (
        "withheld-fixed-rate",
        "HR rose by only {rise} per minute late in the test: with a fixed rate the O₂ pulse merely copies V̇O₂.",
    ),
    ("withheld-cadence", "Cadence was noted as fading within the late window."),
    ("withheld-rail-grip", "The rail was gripped within the late window."),
    ("withheld-load-fades", "The load fell or stopped rising within the late window."),
    (
        "few-late-breaths",
        "Only {count} breaths with V̇O₂ and HR in the last 3 minutes; 60 are needed.",
    ),
    (
        "course-ramp-too-short",
        "The increments lasted {duration}; a course needs at least 6 minutes.",
    ),
    ("course-too-few-breaths", "Too few breaths with both V̇O₂ and HR to fit the course."),
    ("load-not-rising", "The load did not rise over the increments."),
    ("course-not-fitted", "The course could not be fitted to these breaths."),
    (
        "detection-limit-beyond-5-min",
        "Even levelling over 5 minutes might have been missed in this test.",
    ),
    ("onset-not-timed", "The evidence for a break is not strong enough to time its onset."),
    // Doubts that stand with the course.
    ("error-rate-unknown", "Error rate unknown: {why}."),
    ("level-within-2.5", "Over the last 4 minutes the O₂ pulse was level within ±2.5 %/min."),
    (
        "low-from-start",
        "Level from early on: the slope of V̇O₂ on HR equals the O₂ pulse early and late; the error rate of this remark is unknown.",
    ),
    (
        "terminal-compatible-with-plateau",
        "Terminal: without the last 70 s the course is rising. Compatible with the plateau of a true maximum; the error rate of this remark is unknown.",
    ),
    ("vo2-fell-while-load-rose", "V̇O₂ itself fell while the load rose: check mask and flow."),
    (
        "noise-does-not-decide",
        "The noise of this recording does not let the late slope be told from level.",
    ),
    ("room-air-assumed", "Inspired gas not stated: room air assumed."),
    ("oscillation-not-checked", "Oscillatory breathing could not be checked."),
    ("arrhythmia-noted", "An arrhythmia was noted during the increments."),
    // Fick.
    ("bound-pulse", "O₂ pulse at its lower limit, {value}"),
    ("bound-calibration", "less {value} for gas calibration"),
    ("bound-hb", "haemoglobin {value}"),
    ("bound-haemoconcentration", "raised by {value} for exercise"),
    ("bound-sao2", "arterial saturation {value}"),
    ("bound-cohb", "carboxyhaemoglobin {value}"),
    ("bound-extraction", "extraction up to {value} of arterial content"),
    ("bound-hufner", "{value} mL of O₂ per gram of haemoglobin"),
    ("outside-own-test", "V̇O₂ at peak lies outside the span of the own earlier test."),
    ("no-pulse-at-peak", "There is no O₂ pulse at peak."),
    (
        "fick-cannot-be",
        "No stroke volume that can be fits this O₂ pulse: a measurement or calibration error is likely.",
    ),
    (
        "saturation-assumed",
        "Arterial saturation was assumed; the oximeter trace was not confirmed.",
    ),
    ("assumed-not-derived", "This is the assumption itself, not a result."),
    ("no-predicted-rate-line", "Needs V̇O₂ and HR at rest and their predicted values at peak."),
    ("spo2-not-confirmed", "The oximeter trace was not confirmed, so SpO₂ does not enter."),
    ("spo2-not-at-both", "Needs SpO₂ at rest and at peak."),
    (
        "shunt-published-in-pulmonary-hypertension",
        "Described in people with pulmonary arterial hypertension (Sun 2002); elsewhere its predictive value is far lower. The limits of the steps are this program's own.",
    ),
    (
        "shunt-without-desaturation",
        "The gas step came without a fall of SpO₂: pain, voluntary hyperventilation or a leak look alike.",
    ),
    (
        "factors-not-separable",
        "Stroke volume and extraction cannot be separated here: the two models of extraction do not agree that either had to fall.",
    ),
    (
        "factors-two-sided",
        "If extraction rose as in healthy people, stroke volume would have fallen by about {a1} or {a2} (two models); if extraction stopped rising at about {content}, stroke volume need not have fallen. Gas exchange alone cannot tell these apart.",
    ),
    // Words of "error rate unknown".
    ("word-age-not-stated", "age not stated"),
    ("word-under-18", "under 18 years"),
    ("word-transplanted-heart", "transplanted heart"),
    ("word-congenital-heart-disease", "congenital heart disease"),
    ("word-mode-not-stated", "ergometer not stated"),
    ("word-load-not-recorded", "load not recorded"),
    ("word-steps", "steps instead of a ramp"),
    ("word-ramp-length", "ramp shorter than 8 or longer than 15 min"),
    ("word-averaged-table", "table of averages, not of breaths"),
    // Readings.
    ("reading-rising", "rising"),
    ("reading-rising-slowed", "rising, slowed"),
    ("reading-flattened", "flattened"),
    ("reading-falling", "falling"),
    ("reading-indeterminate", "indeterminate"),
];
