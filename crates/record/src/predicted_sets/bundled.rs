//! The sets that ship with the program.

use std::sync::{Arc, OnceLock};

use analysis::predicted::sets::PredictedSet;
use analysis::settings::Settings;

use super::parse::parse;

macro_rules! files {
    ($($name:literal)*) => {
        /// Name and text of each bundled file. The first set of a quantity, in this order, stands
        /// on the page where the reader has chosen none.
        pub(super) const FILES: &[(&str, &str)] = &[$((
            concat!($name, ".json"),
            include_str!(concat!("../../../../assets/predicted/", $name, ".json")),
        )),*];
    };
}

files! {
    "hansen-1984"
    "hansen-hr"
    "jones-1985"
    "tanaka-2001"
    "fox-220"
    "gellish-2007"
    "gellish-2007-rounded"
    "gellish-2007-quadratic"
    "inbar-1994"
    "hunt-2013"
    "gulati-2010"
    "sydo-2014"
    "brawner-2004"
    "hedman-2021"
    "wohlfart-2003"
    "fairbarn-1994"
    "friend-2018"
    "friend-2017"
    "blackie-1989"
    "lowlands-2021"
    "lowlands-wr-2018"
    "jones-1989"
    "ats-accp-2003"
    "wasserman-2012"
    "koch-2009"
    "cooper-1984"
    "cooper-1984-mass"
    "children-treadmill"
    "friend-o2-pulse-2020"
    "vt1-40-percent"
    "cancold-vt1"
    "sun-2002"
    "kleber-1997"
    "sun-2012"
    "hollenberg-tager-2000"
    "mvv-fev1-40"
    "mvv-fev1-35"
    "mvv-fev1-regression"
    "wilkoff-1989"
    "hr-vo2-2020"
    "vo2-wr-1987"
    "bsa-du-bois"
    "bsa-mosteller"
}

/// The bundled sets, parsed once. Every file of the program itself parses: this is tested.
#[must_use]
pub fn bundled() -> Arc<Vec<PredictedSet>> {
    static SETS: OnceLock<Arc<Vec<PredictedSet>>> = OnceLock::new();
    Arc::clone(SETS.get_or_init(|| {
        Arc::new(FILES.iter().filter_map(|(name, text)| parse(text, name).ok()).collect())
    }))
}

/// The engine's default settings with the bundled sets.
#[must_use]
pub fn default_settings() -> Settings {
    Settings { sets: bundled(), ..Settings::default() }
}
