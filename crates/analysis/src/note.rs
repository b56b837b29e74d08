//! Coded remarks: doubts and reasons. The engine gives a code and its arguments; the text is made
//! in one catalogue outside this crate.

use std::borrow::Cow;

use crate::quantity::Quantity;
use crate::unit::Unit;

/// A value that stands in a message.
#[derive(Clone, Debug, PartialEq)]
pub enum Arg {
    /// A number in a unit.
    Number(f64, Unit),
    /// A count.
    Count(usize),
    /// An instant of the test, shown as m:ss.
    Instant(f64),
    /// A duration, shown as m:ss.
    Duration(f64),
    /// A quantity, shown by its symbol.
    Quantity(Quantity),
    /// The value of the primary outcome (id, at), rounded where every value is rounded.
    Outcome(&'static str, At),
    /// A word of the catalogue.
    Word(&'static str),
    /// Text that is a name already (a set, a citation).
    Name(Cow<'static, str>),
}

/// Where in the test a value belongs.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum At {
    /// Rest.
    Rest,
    /// Warm-up.
    WarmUp,
    /// First ventilatory threshold.
    Vt1,
    /// Second ventilatory threshold.
    Vt2,
    /// Peak exercise.
    Peak,
    /// One minute after load end.
    Recovery1Min,
    /// The increments as a whole.
    Ramp,
    /// The test as a whole.
    Test,
}

impl At {
    /// All places.
    pub const ALL: [At; 8] =
        [At::Rest, At::WarmUp, At::Vt1, At::Vt2, At::Peak, At::Recovery1Min, At::Ramp, At::Test];

    /// Stable code.
    #[must_use]
    pub fn code(self) -> &'static str {
        match self {
            At::Rest => "rest",
            At::WarmUp => "warm-up",
            At::Vt1 => "vt1",
            At::Vt2 => "vt2",
            At::Peak => "peak",
            At::Recovery1Min => "recovery-1min",
            At::Ramp => "ramp",
            At::Test => "test",
        }
    }
}

/// A doubt about a value, or the reason why there is none.
#[derive(Clone, Debug, PartialEq)]
pub struct Note {
    /// Stable kebab-case code; the catalogue holds its text.
    pub code: &'static str,
    /// Named arguments of the text.
    pub args: Vec<(&'static str, Arg)>,
}

impl Note {
    /// A remark without arguments.
    #[must_use]
    pub fn new(code: &'static str) -> Self {
        Self { code, args: Vec::new() }
    }

    /// The same remark with one more argument.
    #[must_use]
    pub fn with(mut self, name: &'static str, arg: Arg) -> Self {
        self.args.push((name, arg));
        self
    }

    /// "The file has no … column."
    #[must_use]
    pub fn missing_channel(quantity: Quantity) -> Self {
        Self::new("channel-missing").with("channel", Arg::Quantity(quantity))
    }

    /// "… is not stated."
    #[must_use]
    pub fn missing_fact(word: &'static str) -> Self {
        Self::new("fact-missing").with("fact", Arg::Word(word))
    }
}
