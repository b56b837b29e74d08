//! What the engine returns: a plain tree in the reader's vocabulary.
//!
//! Every value is an [`Outcome`]: a value with its intervals and its basis, or the reason why not.

use std::borrow::Cow;
use std::collections::BTreeMap;

use crate::breaths::Column;
use crate::decisions::Phase;
pub use crate::note::{Arg, At, Note};
use crate::quantity::Quantity;
use crate::unit::Unit;

/// Level of every interval.
pub const LEVEL: f64 = 0.90;

/// Text that is mostly known at compile time.
pub type Text = Cow<'static, str>;

/// What an outcome is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// A number with a unit.
    Quantity,
    /// A word such as `rising`.
    Reading,
    /// A published class such as `B`.
    Class,
}

/// The value itself.
#[derive(Clone, Debug, PartialEq)]
pub enum Value {
    /// A finite number.
    Number(f64),
    /// A stable code word.
    Word(Text),
}

/// An interval, low ≤ high, in the unit of its outcome. Of a prediction it holds the limits of
/// normal; an end that is not published is infinite.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub struct Interval {
    /// Lower end.
    pub low: f64,
    /// Upper end.
    pub high: f64,
}

impl Interval {
    /// `centre` ± `half` (the sign of `half` does not matter).
    #[must_use]
    pub fn around(centre: f64, half: f64) -> Self {
        Self { low: centre - half.abs(), high: centre + half.abs() }
    }
}

/// How a value came about.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Basis {
    /// Window used, s, the file's own time.
    pub window_s: Option<(f64, f64)>,
    /// Breaths used.
    pub breaths: usize,
}

/// One result.
#[derive(Clone, Debug, PartialEq)]
pub struct Outcome {
    /// Stable kebab-case id, e.g. `vo2-peak`.
    pub id: Text,
    /// Where it belongs.
    pub at: At,
    /// Method code, e.g. `rolling-30s`; (id, at, method) is unique.
    pub method: Text,
    /// What it is.
    pub kind: Kind,
    /// Exactly one outcome per (id, at) is primary.
    pub primary: bool,
    /// Unit of a quantity; `None` for words.
    pub unit: Option<Unit>,
    /// The value; `None` exactly when `reason` is set.
    pub value: Option<Value>,
    /// *This recording* at [`LEVEL`].
    pub recording: Option<Interval>,
    /// *If repeated* at [`LEVEL`].
    pub repeat: Option<Interval>,
    /// Basis.
    pub basis: Basis,
    /// Doubts.
    pub doubts: Vec<Note>,
    /// Why there is no value.
    pub reason: Option<Note>,
}

impl Outcome {
    /// A primary quantity with `value` in `unit`.
    #[must_use]
    pub fn quantity(
        id: impl Into<Text>,
        at: At,
        method: impl Into<Text>,
        unit: Unit,
        value: f64,
    ) -> Self {
        let mut outcome = Self::absent(id, at, method, Note::new("not-finite"));
        outcome.unit = Some(unit);
        if value.is_finite() {
            outcome.value = Some(Value::Number(value));
            outcome.reason = None;
        }
        outcome
    }

    /// A primary reading.
    #[must_use]
    pub fn reading(
        id: impl Into<Text>,
        at: At,
        method: impl Into<Text>,
        word: impl Into<Text>,
    ) -> Self {
        let mut outcome = Self::absent(id, at, method, Note::new("not-finite"));
        outcome.kind = Kind::Reading;
        outcome.value = Some(Value::Word(word.into()));
        outcome.reason = None;
        outcome
    }

    /// A primary quantity that cannot be given, with the reason. Use [`Outcome::of_kind`] and
    /// [`Outcome::in_unit`] to complete it.
    #[must_use]
    pub fn absent(id: impl Into<Text>, at: At, method: impl Into<Text>, reason: Note) -> Self {
        Self {
            id: id.into(),
            at,
            method: method.into(),
            kind: Kind::Quantity,
            primary: true,
            unit: None,
            value: None,
            recording: None,
            repeat: None,
            basis: Basis::default(),
            doubts: Vec::new(),
            reason: Some(reason),
        }
    }

    /// The same as a `kind`.
    #[must_use]
    pub fn of_kind(mut self, kind: Kind) -> Self {
        self.kind = kind;
        self
    }

    /// The same in `unit`.
    #[must_use]
    pub fn in_unit(mut self, unit: Unit) -> Self {
        self.unit = Some(unit);
        self
    }

    /// The same as an alternative beside the primary one.
    #[must_use]
    pub fn alternative(mut self) -> Self {
        self.primary = false;
        self
    }

    /// The same with its *this recording* interval.
    #[must_use]
    pub fn recorded_within(mut self, interval: Option<Interval>) -> Self {
        self.recording = interval.filter(|i| i.low.is_finite() && i.high.is_finite());
        self
    }

    /// The same with its *if repeated* interval; without one the doubt `no-published-repeatability`.
    #[must_use]
    pub fn repeated_within(mut self, interval: Option<Interval>) -> Self {
        self.repeat = interval.filter(|i| i.low.is_finite() && i.high.is_finite());
        if self.repeat.is_none() && self.value.is_some() {
            self.doubts.push(Note::new("no-published-repeatability"));
        }
        self
    }

    /// The same with its basis.
    #[must_use]
    pub fn based_on(mut self, window_s: (f64, f64), breaths: usize) -> Self {
        self.basis = Basis { window_s: Some(window_s), breaths };
        self
    }

    /// The same with one more doubt.
    #[must_use]
    pub fn doubting(mut self, doubt: Note) -> Self {
        self.doubts.push(doubt);
        self
    }

    /// The number, if it is one.
    #[must_use]
    pub fn number(&self) -> Option<f64> {
        match self.value {
            Some(Value::Number(x)) => Some(x),
            _ => None,
        }
    }

    /// The word, if it is one.
    #[must_use]
    pub fn word(&self) -> Option<&str> {
        match &self.value {
            Some(Value::Word(w)) => Some(w),
            _ => None,
        }
    }
}

/// Who set a boundary or mark.
#[derive(Clone, Debug, PartialEq)]
pub enum Origin {
    /// The engine, with its reason.
    Proposed(Note),
    /// The reader.
    Reader,
}

/// One phase as used.
#[derive(Clone, Debug, PartialEq)]
pub struct PhaseSpan {
    /// Which.
    pub phase: Phase,
    /// Start, s.
    pub from_s: f64,
    /// End, s.
    pub to_s: f64,
    /// Who set its start.
    pub origin: Origin,
}

/// How the load rose.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum LoadShape {
    /// Linear rise, W/min.
    Ramp(f64),
    /// Regular steps: rise of a step, W, and its length, s.
    Steps {
        /// W per step.
        step_w: f64,
        /// Length, s.
        length_s: f64,
    },
    /// Constant load.
    Constant,
    /// Not recognised as one of these.
    Other,
    /// No work rate in the file.
    Unknown,
}

/// The phases of the test, in order and without gaps; a phase that is absent has no span.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Phases {
    /// The spans.
    pub spans: Vec<PhaseSpan>,
    /// How the load rose in the ramp.
    pub load_shape: Option<LoadShape>,
}

impl Phases {
    /// The span of `phase`, if the test has it.
    #[must_use]
    pub fn span(&self, phase: Phase) -> Option<&PhaseSpan> {
        self.spans.iter().find(|s| s.phase == phase)
    }

    /// Start and end of `phase`, s.
    #[must_use]
    pub fn window(&self, phase: Phase) -> Option<(f64, f64)> {
        self.span(phase).map(|s| (s.from_s, s.to_s))
    }

    /// Start of the increments and load end, s.
    #[must_use]
    pub fn ramp(&self) -> Option<(f64, f64)> {
        self.window(Phase::Ramp)
    }
}

/// Averaged columns on a common grid, for charts and the value strip; ratios are mean over mean.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Series {
    /// Grid, s, rising.
    pub t_s: Vec<f64>,
    /// One column per quantity, derived ratios included.
    pub columns: BTreeMap<Quantity, Column>,
}

/// Why a breath is marked.
#[derive(Clone, Debug, PartialEq)]
pub enum FlagKind {
    /// Left out by the reader.
    LeftOut,
    /// Errant: merged with the next ones.
    Merged,
    /// Part of a manoeuvre: kept out of averages, not errant.
    Manoeuvre,
}

/// A marked breath of the recording.
#[derive(Clone, Debug, PartialEq)]
pub struct BreathFlag {
    /// Index in the recording.
    pub breath: usize,
    /// Why.
    pub kind: FlagKind,
    /// The reason in words.
    pub note: Note,
}

/// The question under which a statement stands; also the order on the sheet.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Section {
    /// Safety.
    Safety,
    /// Was the test good, the effort sufficient?
    Effort,
    /// What is the aerobic capacity?
    Capacity,
    /// Do output and extraction keep growing?
    Circulation,
    /// Is breathing the limit, is it efficient, does the lung pass gas?
    Breathing,
    /// Information that would separate the explanations.
    Separate,
}

impl Section {
    /// Stable code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            Section::Safety => "safety",
            Section::Effort => "effort",
            Section::Capacity => "capacity",
            Section::Circulation => "circulation",
            Section::Breathing => "breathing",
            Section::Separate => "separate",
        }
    }
}

/// One piece of evidence, tied to the outcomes it rests on.
#[derive(Clone, Debug, PartialEq)]
pub struct Evidence {
    /// Message and arguments.
    pub note: Note,
    /// Outcomes it rests on.
    pub rests_on: Vec<(Text, At)>,
}

/// A drafted statement. Its text is made in the catalogue.
#[derive(Clone, Debug, PartialEq)]
pub struct Statement {
    /// Stable id, e.g. `effort-state`.
    pub id: &'static str,
    /// Section.
    pub section: Section,
    /// Message and arguments.
    pub note: Note,
    /// Outcomes under it: it is out of date when a rounded value of one changes.
    pub rests_on: Vec<(Text, At)>,
    /// Evidence for.
    pub supports: Vec<Evidence>,
    /// Evidence against.
    pub contradicts: Vec<Evidence>,
    /// Not measured, would matter.
    pub open: Vec<Evidence>,
}

/// Everything derived.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Results {
    /// Phases as used.
    pub phases: Phases,
    /// The outcomes.
    pub outcomes: Vec<Outcome>,
    /// Doubts about the test as a whole.
    pub doubts: Vec<Note>,
    /// Plausibility findings.
    pub quality: Vec<crate::quality::Finding>,
    /// Averaged series for charts.
    pub series: Series,
    /// Marked breaths.
    pub flags: Vec<BreathFlag>,
    /// Chart data of the thresholds.
    pub thresholds: crate::thresholds::ThresholdDetail,
    /// Chart data of the slopes.
    pub slopes: crate::slopes::SlopeDetail,
    /// Chart data of the O₂-pulse course, where one could be fitted.
    pub course: Option<crate::o2_pulse::CourseDetail>,
    /// Chart data of the Fick reasoning.
    pub fick: crate::fick::FickDetail,
    /// The model of a normal response, where it can be drawn.
    pub overlay: crate::predicted::overlay::OverlayOutcome,
    /// Drafted statements.
    pub statements: Vec<Statement>,
}

impl Results {
    /// The primary outcome (id, at).
    #[must_use]
    pub fn primary(&self, id: &str, at: At) -> Option<&Outcome> {
        self.outcomes.iter().find(|o| o.primary && o.id == id && o.at == at)
    }

    /// The number of the primary outcome (id, at).
    #[must_use]
    pub fn number(&self, id: &str, at: At) -> Option<f64> {
        self.primary(id, at).and_then(Outcome::number)
    }
}
