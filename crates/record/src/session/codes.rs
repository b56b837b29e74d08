//! How the engine's closed sets are written in files. The engine's own types know no file.

use analysis::decisions::{Mark, Phase};
use analysis::settings::Averaging;
use serde::{Deserialize, Serialize};

macro_rules! coded {
    ($module:ident, $type:ty, $all:expr, $doc:literal) => {
        #[doc = $doc]
        pub mod $module {
            use super::*;
            use serde::{Deserializer, Serializer, de::Error};

            /// Writes the code.
            ///
            /// # Errors
            /// Those of the serializer.
            #[allow(clippy::trivially_copy_pass_by_ref)]
            pub fn serialize<S: Serializer>(value: &$type, s: S) -> Result<S::Ok, S::Error> {
                s.serialize_str(value.code())
            }

            /// Reads the code.
            ///
            /// # Errors
            /// A code that is not in the set.
            pub fn deserialize<'de, D: Deserializer<'de>>(d: D) -> Result<$type, D::Error> {
                let code = String::deserialize(d)?;
                $all.into_iter()
                    .find(|v: &$type| v.code() == code || v.code().replace('-', "_") == code)
                    .ok_or_else(|| D::Error::custom(format!("“{code}” is not one of the codes")))
            }
        }
    };
}

coded!(phase, Phase, Phase::ALL, "A phase by its code.");
coded!(mark, Mark, [Mark::Vt1, Mark::Vt2], "A mark by its code.");

/// Way of averaging.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum AveragingMethod {
    /// Rolling mean over seconds.
    #[serde(rename = "rolling-s")]
    RollingSeconds,
    /// Rolling mean over breaths.
    #[serde(rename = "rolling-breaths")]
    RollingBreaths,
    /// Bins of seconds.
    #[serde(rename = "bin-s")]
    BinSeconds,
}

impl AveragingMethod {
    /// Method and number of `averaging`.
    #[must_use]
    pub fn of(averaging: Averaging) -> (Self, u32) {
        match averaging {
            Averaging::RollingSeconds(n) => (Self::RollingSeconds, n),
            Averaging::RollingBreaths(n) => (Self::RollingBreaths, n),
            Averaging::BinSeconds(n) => (Self::BinSeconds, n),
        }
    }

    /// The averaging of this method over `n`.
    #[must_use]
    pub fn over(self, n: u32) -> Averaging {
        match self {
            Self::RollingSeconds => Averaging::RollingSeconds(n),
            Self::RollingBreaths => Averaging::RollingBreaths(n),
            Self::BinSeconds => Averaging::BinSeconds(n),
        }
    }

    /// Whether `n` makes sense: up to two minutes, up to sixty breaths.
    #[must_use]
    pub fn allows(self, n: u32) -> bool {
        match self {
            Self::RollingSeconds | Self::BinSeconds => (1..=120).contains(&n),
            Self::RollingBreaths => (1..=60).contains(&n),
        }
    }
}
