//! Statements on the circulation: course, pattern, explanations, the two factors.

use super::compose::{Draft, words};
use super::own_rate;
use super::rules::{self, Match};
use super::seen::{Seen, low_in};
use crate::facts::{Diagnosis, Facts};
use crate::predicted::sets::Predicts;
use crate::results::{Arg, At, Evidence, Note, Outcome, Section, Statement};
use crate::stage::Stage;
use crate::unit::Unit;

/// All statements of this section and of the information that would separate explanations.
pub(crate) fn draft(stage: &Stage<'_>) -> Vec<Statement> {
    let seen = Seen::of(stage);
    let found = rules::matches(&seen);
    let mut statements = vec![course(stage)];
    statements.extend(magnitude(stage));
    statements.extend(pattern(stage, &found));
    statements.extend(explanations(stage.facts, &found));
    statements.extend(two_factors(stage));
    statements.extend(bound(stage));
    statements.extend(rate(stage));
    statements.extend(own_rate::statement(stage));
    statements.extend(content(stage));
    statements.push(
        Draft::new(
            "circulation-caveat",
            Section::Circulation,
            Note::new("course-excludes-nothing"),
        )
        .done(),
    );
    statements.extend(separate(stage, &found));
    statements
}

/// The course with its slope, or why there is none.
fn course(stage: &Stage<'_>) -> Statement {
    let outcome = stage.results.primary("o2-pulse-course", At::Ramp);
    let slope = ("o2-pulse-late-slope", At::Ramp);
    let limit = ("o2-pulse-detection-limit", At::Ramp);
    let note = match outcome.and_then(Outcome::word) {
        None => {
            let reason = outcome.and_then(|o| o.reason.clone());
            let code = reason.as_ref().map_or("course-not-fitted", |r| r.code);
            Note::new("course-withheld").with("reason", Arg::Word(code))
        }
        Some(word) => {
            let code = match word {
                "rising" => "course-rising",
                "rising-slowed" => "course-rising-slowed",
                "flattened" => "course-flattened",
                "falling" => "course-falling",
                _ => "course-indeterminate",
            };
            Note::new(code).with("slope", Arg::Outcome(slope.0, slope.1))
        }
    };
    let draft = Draft::new("o2-pulse-course", Section::Circulation, note)
        .resting_on("o2-pulse-course", At::Ramp)
        .resting_on(slope.0, slope.1);
    let draft = match stage.results.number(limit.0, limit.1) {
        Some(_) => draft.supported_by(Evidence {
            note: Note::new("course-could-have-seen").with("limit", Arg::Outcome(limit.0, limit.1)),
            rests_on: vec![(limit.0.into(), limit.1)],
        }),
        None => draft,
    };
    with_onset(stage, draft).done()
}

fn with_onset(stage: &Stage<'_>, draft: Draft) -> Draft {
    match stage.results.course.as_ref().and_then(|c| c.onset) {
        None => draft,
        Some(onset) => draft.supported_by(Evidence {
            note: Note::new("course-onset")
                .with("time", Arg::Instant(onset.t_s))
                .with("half-width", Arg::Duration(0.5 * (onset.set_s.high - onset.set_s.low))),
            rests_on: vec![("o2-pulse-onset".into(), At::Ramp)],
        }),
    }
}

/// O₂ pulse at peak against every set in range: low only if low in all of them.
fn magnitude(stage: &Stage<'_>) -> Option<Statement> {
    let id = "o2-pulse-at-peak";
    let value = stage.results.number(id, At::Peak)?;
    let (low, all) = low_in(stage, Predicts::O2Pulse, value);
    let code = match (low, all) {
        (_, 0) => "pulse-not-compared",
        (0, _) => "pulse-within-limits",
        (low, all) if low == all => "pulse-low-in-all",
        _ => "pulse-low-in-some",
    };
    let note = Note::new(code)
        .with("value", Arg::Outcome(id, At::Peak))
        .with("low", Arg::Count(low))
        .with("sets", Arg::Count(all));
    let draft =
        Draft::new("o2-pulse-magnitude", Section::Circulation, note).resting_on(id, At::Peak);
    Some(match all {
        0 => draft.done(),
        _ => draft.resting_on("predicted-o2-pulse", At::Peak).done(),
    })
}

/// The first pattern with what speaks for and against it.
fn pattern(stage: &Stage<'_>, found: &[Match]) -> Option<Statement> {
    let first = found.first()?;
    let mut draft = Draft::new(
        "circulation-pattern",
        Section::Circulation,
        Note::new(first.rule.code).with("row", Arg::Count(usize::from(first.rule.row))),
    );
    for sign in first.rule.pattern {
        draft = draft.supported_by(sign.met());
        for (id, at) in sign.rests_on() {
            draft = draft.resting_on(id, *at);
        }
    }
    for sign in &first.met {
        draft = draft.supported_by(sign.met());
    }
    for sign in &first.against {
        draft = draft.contradicted_by(sign.met());
    }
    for sign in &first.absent {
        draft = draft.contradicted_by(sign.absent());
    }
    for sign in &first.open {
        draft = draft.open(sign.open());
    }
    for diagnosis in stage.facts.test.diagnoses.iter().flatten() {
        let note = Note::new("recorded-as-context").with("diagnosis", Arg::Word(word(*diagnosis)));
        draft = draft.supported_by(Evidence { note, rests_on: Vec::new() });
    }
    Some(draft.done())
}

/// Word of a recorded diagnosis.
fn word(diagnosis: Diagnosis) -> &'static str {
    match diagnosis {
        Diagnosis::Shunt => "right-to-left-shunt",
        Diagnosis::Fontan => "fontan-circulation",
        Diagnosis::Transplant => "transplanted-heart",
        Diagnosis::Congenital => "congenital-heart-disease",
        Diagnosis::Pregnancy => "pregnancy",
        Diagnosis::HeartFailure => "heart-failure",
        Diagnosis::PulmonaryHypertension => "pulmonary-hypertension",
        Diagnosis::Copd => "copd",
        Diagnosis::Ild => "interstitial-lung-disease",
        Diagnosis::Other => "other-diagnosis",
    }
}

/// Candidates of the two first patterns that are not recorded already.
pub(crate) fn candidates(facts: &Facts, found: &[Match]) -> Vec<&'static str> {
    let recorded = |d: Option<Diagnosis>| {
        d.is_some_and(|d| facts.test.diagnoses.as_ref().is_some_and(|list| list.contains(&d)))
    };
    let mut out = Vec::new();
    for m in found.iter().take(2) {
        for candidate in m.rule.candidates {
            if !recorded(candidate.recorded) && !out.contains(&candidate.word) {
                out.push(candidate.word);
            }
        }
    }
    out.truncate(5);
    out
}

fn explanations(facts: &Facts, found: &[Match]) -> Option<Statement> {
    let note = words("explanations", &candidates(facts, found))?;
    let mut draft = Draft::new("circulation-explanations", Section::Circulation, note);
    for sign in found.first()?.rule.pattern {
        for (id, at) in sign.rests_on() {
            draft = draft.resting_on(id, *at);
        }
    }
    Some(draft.done())
}

/// The conditional two-sided sentence, only where the course lost slope.
fn two_factors(stage: &Stage<'_>) -> Option<Statement> {
    let lost = matches!(
        stage.results.primary("o2-pulse-course", At::Ramp)?.word()?,
        "rising-slowed" | "flattened" | "falling"
    );
    let note = stage.results.fick.sentence.clone().filter(|_| lost)?;
    Some(
        Draft::new("fick-two-factors", Section::Circulation, note)
            .resting_on("fick-sv-change", At::Ramp)
            .resting_on("fick-extraction-change", At::Ramp)
            .done(),
    )
}

fn bound(stage: &Stage<'_>) -> Option<Statement> {
    let id = "fick-forward-sv-bound";
    stage.results.number(id, At::Peak)?;
    let note = Note::new("forward-stroke-volume").with("bound", Arg::Outcome(id, At::Peak));
    let mut draft =
        Draft::new("fick-forward-bound", Section::Circulation, note).resting_on(id, At::Peak);
    for assumption in stage.results.fick.bound.iter().flat_map(|b| &b.assumptions) {
        draft = draft.supported_by(Evidence {
            note: assumption.clone(),
            rests_on: vec![(id.into(), At::Peak)],
        });
    }
    Some(draft.done())
}

/// The HR deficit: what it says of the O₂ pulse, and nothing of stroke volume.
fn rate(stage: &Stage<'_>) -> Option<Statement> {
    let id = "fick-hr-deficit";
    let deficit = stage.results.number(id, At::Peak)?;
    if deficit < crate::fick::NOTABLE_RATE_DEFICIT {
        return None;
    }
    let low = Seen::of(stage).pulse_low;
    let code = if low == Some(true) { "rate-deficit" } else { "rate-deficit-pulse-not-reassuring" };
    let note = Note::new(code).with("deficit", Arg::Outcome(id, At::Peak));
    let drug = stage.facts.test.rate_slowing_drug.taken;
    let draft = Draft::new("rate-deficit", Section::Circulation, note)
        .resting_on(id, At::Peak)
        .resting_on("hr-peak", At::Peak);
    Some(match drug {
        Some(true) => draft.supported_by(super::signs::Sign::RateDrug.met()).done(),
        Some(false) => draft.done(),
        None => draft.open(super::signs::Sign::RateDrug.open()).done(),
    })
}

/// How much of a change saturation explains; always with low perfusion as another explanation.
fn content(stage: &Stage<'_>) -> Option<Statement> {
    let id = "fick-content-share";
    let share = stage.results.number(id, At::Ramp)?;
    if share > -4.0 {
        return None;
    }
    let note = Note::new("content-share").with("share", Arg::Number(-share, Unit::Percent));
    Some(
        Draft::new("content-share", Section::Circulation, note)
            .resting_on(id, At::Ramp)
            .contradicted_by(Evidence {
                note: Note::new("low-perfusion-possible"),
                rests_on: Vec::new(),
            })
            .done(),
    )
}

/// Information that would separate the two first explanations.
fn separate(stage: &Stage<'_>, found: &[Match]) -> Option<Statement> {
    let mut list: Vec<&'static str> = Vec::new();
    for m in found.iter().take(2) {
        for word in m.rule.separate {
            if !list.contains(word) {
                list.push(word);
            }
        }
    }
    if stage.facts.subject.hb.is_none() && !found.is_empty() {
        list.retain(|w| *w != "hb-at-peak");
        list.insert(0, "haemoglobin");
    }
    list.truncate(5);
    let note = words("information", &list)?;
    Some(Draft::new("separate-information", Section::Separate, note).done())
}
