//! Texts of drafted statements and their evidence.

use super::Entry;

/// Code and template.
pub const TEXTS: &[Entry] = &[
    // Safety.
    (
        "safety-may-need-action",
        "This may need action now. Use your local urgent route; do not wait for this page.",
    ),
    ("safety-none-recorded", "No event recorded; this is not the same as none."),
    ("safety-events-recorded", "Events recorded: {count}."),
    ("event-arrhythmia", "Arrhythmia noted at {time}"),
    ("event-symptom", "Symptom noted at {time}"),
    ("event-ecg", "ECG note at {time}"),
    ("event-treatment", "Treatment given at {time}"),
    ("urgent-ecg-change", "ECG change, read by a person"),
    ("urgent-stop-ischaemia", "Stopped for chest pain or ECG change"),
    ("urgent-stop-pressure", "Stopped for blood pressure"),
    ("urgent-stop-rhythm", "Stopped for a rhythm change"),
    ("urgent-treatment", "Treatment was given"),
    ("urgent-pressure-fall", "Systolic pressure at peak, {value}, was below the one at rest"),
    ("urgent-desaturation", "Confirmed saturation fell to {value}"),
    // Effort.
    ("effort-maximal-metabolic", "Maximal metabolic effort: peak RER {rer}, peak HR {hr}."),
    ("effort-stopped-at-limit", "Stopped at a demonstrated limit; peak RER {rer}, peak HR {hr}."),
    (
        "effort-submaximal-without-limit",
        "Submaximal without a demonstrated limit: peak RER {rer}, peak HR {hr}. Peak values are not graded.",
    ),
    ("effort-not-judged", "Effort cannot be judged from this recording."),
    ("criterion-rer", "RER criterion for age met"),
    ("criterion-rer-not-met", "RER criterion for age not met"),
    ("criterion-hr", "HR criterion for age met"),
    ("criterion-hr-not-met", "HR criterion for age not met"),
    ("criterion-hr-not-judged", "HR criterion for age not judged: rhythm or drug changes the rate"),
    ("criterion-lactate", "Lactate criterion met"),
    ("criterion-lactate-not-met", "Lactate criterion not met"),
    ("criterion-plateau", "V̇O₂ levelled in the last minute"),
    ("criterion-plateau-not-met", "V̇O₂ did not level in the last minute"),
    ("limit-ventilatory", "Breathing reserve {reserve}: ventilatory limit"),
    ("limit-ischaemic", "Stopped for chest pain or ECG change"),
    ("limit-blood-pressure", "Stopped for blood pressure"),
    ("limit-rhythm", "Stopped for a rhythm change"),
    ("limit-gas-exchange", "Stopped for a confirmed fall of saturation"),
    // Capacity.
    ("capacity-not-graded", "Peak V̇O₂ {vo2}; not graded, as no limit was demonstrated."),
    (
        "capacity-without-prediction",
        "Peak V̇O₂ {vo2}; no predicted set applies: the person is not stated in full, or out of range.",
    ),
    ("capacity-within-limits", "Peak V̇O₂ {vo2}, within limits in every set in range ({sets})."),
    (
        "capacity-below-limits",
        "Peak V̇O₂ {vo2}, below the lower limit in every set in range ({sets}).",
    ),
    (
        "capacity-below-in-some",
        "Peak V̇O₂ {vo2}, below the lower limit in {low} of {sets} sets in range, within limits in the others.",
    ),
    ("predicted-peak", "Predicted peak V̇O₂ {value}"),
    ("first-threshold", "VT1 at a V̇O₂ of {value}"),
    // Circulation: course and magnitude.
    ("course-rising", "O₂-pulse course: rising, late slope {slope}."),
    (
        "course-rising-slowed",
        "O₂-pulse course: rising less than expected, late slope {slope}; levelling cannot be separated from it. About 9 in 100 simulated normal ramps read so.",
    ),
    (
        "course-flattened",
        "O₂-pulse course: flattened, late slope {slope}; no longer rising as expected. About 2 in 100 simulated normal ramps read flattened or falling, and a late plateau was published in 20 to 50 % of athletes.",
    ),
    (
        "course-falling",
        "O₂-pulse course: falling, late slope {slope}. Compatible with stroke volume or extraction that no longer kept up; gas exchange alone cannot tell which.",
    ),
    (
        "course-indeterminate",
        "O₂-pulse course: indeterminate, late slope {slope}; the noise of this test does not decide.",
    ),
    ("course-withheld", "No O₂-pulse course: {reason}. Only the magnitude is read."),
    (
        "course-could-have-seen",
        "Levelling shorter than {limit} would have been missed in this test",
    ),
    ("course-onset", "Slowing began at about {time}, ± {half-width}"),
    (
        "course-excludes-nothing",
        "A normal O₂-pulse course does not exclude ischaemia or other heart disease.",
    ),
    (
        "pulse-not-compared",
        "O₂ pulse at peak {value}; no predicted set applies: the person is not stated in full, or out of range.",
    ),
    (
        "pulse-within-limits",
        "O₂ pulse at peak {value}, within limits in every set in range ({sets}).",
    ),
    ("pulse-low-in-all", "O₂ pulse at peak {value}, low in every set in range ({sets})."),
    (
        "pulse-low-in-some",
        "O₂ pulse at peak {value}, low in {low} of {sets} sets in range, within limits in the others.",
    ),
    // Circulation: patterns; each rests on the row of the claim table named.
    ("pattern-usual", "Stroke volume × extraction kept growing as it usually does."),
    (
        "pattern-low-normal-shape",
        "The O₂ pulse is low with a normal shape: its size, not its course, is limited.",
    ),
    ("pattern-level-early", "The O₂ pulse is low and level from early on."),
    (
        "pattern-both-slowed",
        "From mid-test V̇O₂ slowed while HR accelerated: compatible with stroke volume or extraction that stopped growing.",
    ),
    (
        "pattern-pulmonary-vascular",
        "The loss of slope comes with high V̇E/V̇CO₂ and low PETCO₂: compatible with a limit in the lung's circulation.",
    ),
    (
        "pattern-shunt",
        "The loss of slope comes with one abrupt step of PETCO₂, PETO₂ and RER and a fall of SpO₂: compatible with a right-to-left shunt opening.",
    ),
    (
        "pattern-desaturation",
        "The loss of slope comes with a gradual fall of SpO₂: part of it is arterial content.",
    ),
    (
        "pattern-content-ceiling",
        "The O₂ pulse is low with a normal shape and haemoglobin is low: a ceiling of arterial content.",
    ),
    (
        "pattern-cohb",
        "The O₂ pulse is low with a normal shape and carboxyhaemoglobin is raised: a ceiling of arterial content.",
    ),
    (
        "pattern-rate-limited",
        "Little of the heart-rate reserve was used: the O₂ pulse is carried by a low rate and is not reassuring.",
    ),
    (
        "pattern-rate-limited-drug",
        "Little of the heart-rate reserve was used under a rate-slowing drug: the O₂ pulse is carried by a low rate and is not reassuring.",
    ),
    (
        "pattern-ventilatory",
        "The loss of slope comes with little breathing reserve: common in airflow obstruction without ischaemia.",
    ),
    ("pattern-hr-part", "The loss of slope is mostly HR acceleration; V̇O₂ kept its slope."),
    ("pattern-vo2-part", "The loss of slope is mostly V̇O₂ slowing; HR kept its slope."),
    (
        "pattern-terminal",
        "Only the last minute lost slope: compatible with the plateau of a true maximum.",
    ),
    ("explanations-1", "Patterns of this kind occur with {a}."),
    (
        "explanations-2",
        "Patterns of this kind occur with {a} or {b}; this test cannot separate them.",
    ),
    (
        "explanations-3",
        "Patterns of this kind occur with {a}, {b} or {c}; this test cannot separate them.",
    ),
    (
        "explanations-4",
        "Patterns of this kind occur with {a}, {b}, {c} or {d}; this test cannot separate them.",
    ),
    (
        "explanations-5",
        "Patterns of this kind occur with {a}, {b}, {c}, {d} or {e}; this test cannot separate them.",
    ),
    ("recorded-as-context", "Recorded before: {diagnosis}; read the pattern against it"),
    (
        "forward-stroke-volume",
        "Forward stroke volume at peak was probably not below {bound}, every input at its cautious end.",
    ),
    (
        "rate-deficit",
        "HR at peak V̇O₂ was {deficit} below the line from rest to the predicted peak.",
    ),
    (
        "rate-deficit-pulse-not-reassuring",
        "HR at peak V̇O₂ was {deficit} below the line from rest to the predicted peak: this O₂ pulse is not reassuring.",
    ),
    (
        "rate-share",
        "Against the own earlier test {share} (ln) of O₂ pulse is due to the lower rate; at the earlier rate it would be {pulse}. How stroke volume and extraction share this is not known.",
    ),
    (
        "rate-hides-low-pulse",
        "Against the own earlier test {share} (ln) of O₂ pulse is due to the lower rate; at the earlier rate it would be {pulse}, below 80 % of predicted. The low rate may hide (mask) a low O₂ pulse.",
    ),
    (
        "rate-as-in-own-test",
        "At this V̇O₂ the heart rate is that of the own earlier test within its error; {share} (ln) of O₂ pulse is due to the rate.",
    ),
    ("content-share", "The fall of saturation alone explains about {share} of O₂ pulse."),
    ("low-perfusion-possible", "Low finger perfusion would also explain a falling SpO₂ reading"),
    ("not-measured", "Not measured: {sign}"),
    // Information that would separate explanations; never an order.
    ("information-1", "Information that would separate these explanations: {a}."),
    ("information-2", "Information that would separate these explanations: {a}; {b}."),
    ("information-3", "Information that would separate these explanations: {a}; {b}; {c}."),
    ("information-4", "Information that would separate these explanations: {a}; {b}; {c}; {d}."),
    (
        "information-5",
        "Information that would separate these explanations: {a}; {b}; {c}; {d}; {e}.",
    ),
    // Breathing.
    ("breathing-limit-shown", "Breathing reserve {reserve}: a ventilatory limit was shown."),
    ("breathing-no-limit-shown", "No ventilatory limit shown: breathing reserve {reserve}."),
    ("ventilation-inefficient", "V̇E/V̇CO₂ slope {slope}: more ventilation per CO₂ than usual."),
    ("ventilation-efficient", "V̇E/V̇CO₂ slope {slope}: not raised."),
    ("oscillation-present", "Oscillatory breathing is present by the definition used."),
    (
        "saturation-unconfirmed",
        "Lowest SpO₂ {lowest}; the trace was not confirmed and is not used.",
    ),
    ("saturation-fell", "SpO₂ fell to {lowest}, trace confirmed."),
    ("saturation-held", "SpO₂ held; lowest {lowest}, trace confirmed."),
];
