//! Published classes: facts with their source, shown only where the indication matches. They are
//! statistics of groups; nothing here says fit or unfit, and the local pathway decides.

mod bands;
mod heart_failure;

use super::express::submaximal;
use crate::note::{Arg, Note};
use crate::results::{At, Interval, Kind, Outcome};
use crate::stage::Stage;

pub use bands::{Band, Class, ISHLT, ISHLT_BLOCKED, ISHLT_PERCENT, ISHLT_SLOPE, TABLE};

/// Derives the classes of the stated indication; effort, predictions and slopes must be known.
pub(super) fn derive(stage: &mut Stage<'_>) {
    let Some(indication) = stage.facts.test.indication else { return };
    let outcomes: Vec<Outcome> = TABLE
        .iter()
        .filter(|class| class.indication == indication)
        .filter_map(|class| for_operation(stage, class))
        .chain(heart_failure::derive(stage, indication))
        .collect();
    for outcome in outcomes {
        stage.push(outcome);
    }
}

/// Bands of an operation stand under that operation only; without one stated they say what is
/// missing.
fn for_operation(stage: &Stage<'_>, class: &Class) -> Option<Outcome> {
    match (class.operation, stage.facts.test.operation) {
        (Some(of), Some(planned)) if of != planned => None,
        (Some(_), None) => {
            let why = Note::missing_fact("operation");
            let absent = Outcome::absent(class.id, class.at, class.method, why);
            Some(absent.of_kind(Kind::Class))
        }
        _ => Some(outcome(stage, class)),
    }
}

fn outcome(stage: &Stage<'_>, class: &Class) -> Outcome {
    let absent = |why| Outcome::absent(class.id, class.at, class.method, why).of_kind(Kind::Class);
    let Some(deciding) = stage.results.primary(class.deciding, class.deciding_at) else {
        return absent(Note::new("not-derived"));
    };
    let Some(value) = deciding.number() else {
        return absent(deciding.reason.clone().unwrap_or_else(|| Note::new("not-derived")));
    };
    if class.needs_effort && submaximal(stage) {
        return absent(Note::new("not-graded-submaximal"));
    }
    let band = class.band(value);
    let mut outcome = Outcome::reading(class.id, class.at, class.method, band.word);
    outcome.kind = Kind::Class;
    // Both intervals of the deciding value; its unit stands with it in the doubt below.
    outcome.recording = deciding.recording;
    outcome.repeat = deciding.repeat;
    outcome.basis = deciding.basis.clone();
    outcome.doubts.push(
        Note::new("class-decided-by")
            .with("value", Arg::Outcome(class.deciding, class.deciding_at))
            .with("source", Arg::Name(class.source.into())),
    );
    let interval = deciding.repeat.or(deciding.recording);
    outcome.doubts.extend(interval.and_then(|i| straddle(class, band, i)));
    if class.needs_effort
        && stage.results.primary("effort", At::Test).is_none_or(|e| e.word().is_none())
    {
        outcome.doubts.push(Note::new("class-effort-unknown"));
    }
    outcome.doubts.extend(class.caveat.map(Note::new));
    outcome.doubts.push(Note::new("class-local-pathway-decides"));
    outcome
}

/// The doubt when the interval reaches into another band.
fn straddle(class: &Class, band: &Band, interval: Interval) -> Option<Note> {
    let low = class.band(interval.low);
    let high = class.band(interval.high);
    (low.word != band.word || high.word != band.word).then(|| {
        Note::new("class-straddles")
            .with("low", Arg::Word(low.text))
            .with("high", Arg::Word(high.text))
    })
}
