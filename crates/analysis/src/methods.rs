//! How each value was computed: one sentence and its source per method code.
//!
//! A `#` in a key stands for any number in the code (a window, a factor), and in the sentence for
//! that same number, so that the text follows the setting that was used.

/// Description of a method.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Method {
    /// Method code, numbers replaced by `#`.
    pub code: &'static str,
    /// One sentence; `#` stands for the number of the code.
    pub how: &'static str,
    /// Paper, or `common practice`, or what calibrated it.
    pub source: &'static str,
}

const SIMULATED: &str =
    "own procedure; acceptance rules and interval factors calibrated by simulation";
const PRACTICE: &str = "common practice";

macro_rules! methods {
    ($($code:literal $how:literal $source:expr;)*) => {
        /// The whole table.
        pub const TABLE: &[Method] = &[$(Method { code: $code, how: $how, source: $source }),*];
    };
}

methods! {
    "highest-#s" "Highest rolling mean over # s on a 1-s grid with the whole window inside loaded exercise; every breath counts with its duration, a ratio is mean over mean." "rolling means rather than bins: Nolte et al., Sports Med 2023";
    "highest-#s-corrected" "Highest rolling mean over # s inside loaded exercise, less the bias by which noise lifts the highest of many windows." SIMULATED;
    "same-window-as-vo#-peak" "Mean oxygen uptake divided by mean heart rate, both over the window of peak oxygen uptake." PRACTICE;
    "highest-load" "Highest work rate set during the increments." PRACTICE;
    "lowest-#s" "Lowest rolling mean over # s inside loaded exercise, ratios as mean over mean." PRACTICE;
    "lowest-noted" "Lowest single reading noted during the increments." PRACTICE;
    "window-mean" "Duration-weighted mean over a window of the phase." PRACTICE;
    "last-#s" "Duration-weighted mean of the last # s of the phase; ratios are mean over mean." PRACTICE;
    "mean-#s" "Duration-weighted mean over # s; ratios are mean over mean on the same breaths." PRACTICE;
    "nearest-reading" "The single reading nearest to the window, at most 60 s away; never interpolated." PRACTICE;
    "v-slope-hinge" "Hinge of carbon dioxide output, cleaned of the breath noise it shares with oxygen uptake, on smoothed oxygen uptake, up to VT2." "after Beaver, Wasserman and Whipp, J Appl Physiol 1986 (V-slope); acceptance rules and interval calibrated by simulation";
    "ve-petco#-hinge" "Time at which ventilation bends up on carbon dioxide output and end-tidal carbon dioxide begins to fall, found together." SIMULATED;
    "reader-mark" "Smoothed value at the time marked by the reader." PRACTICE;
    "slope-one-line" "Point at which carbon dioxide output leaves a line of slope 1 through the early increments for good; shown for comparison." "Sue, Wasserman, Moricca and Casaburi, Chest 1988";
    "eq-o#-nadir" "Lowest ventilatory equivalent for oxygen before VT2; shown for comparison." "Caiozzo et al., J Appl Physiol 1982";
    "peto#-nadir" "Lowest end-tidal oxygen before VT2; shown for comparison." PRACTICE;
    "of-peak" "Share of measured peak oxygen uptake." PRACTICE;
    "per-mass" "Divided by body mass." PRACTICE;
    "ramp-line-on-warm-up" "Time by which the line of oxygen uptake over the early increments lags behind their start, read where it meets the warm-up value." "Whipp, Davis, Torres and Wasserman, J Appl Physiol 1981";
    "ols-without-shared-noise" "Least-squares line of ventilation, cleaned of the breath noise it shares with carbon dioxide output, on smoothed carbon dioxide output, from one minute after the start of the increments." SIMULATED;
    "vo#-on-log-ve" "Least-squares line of oxygen uptake, cleaned of shared breath noise, on the decimal logarithm of ventilation." "Baba et al., J Am Coll Cardiol 1996; interval calibrated by simulation";
    "vo#-on-linear-load" "Least-squares line of oxygen uptake on the straight line of the load, from 90 s after the start of the increments." "Hansen, Sue, Oren and Wasserman, Am J Cardiol 1987; interval calibrated by simulation";
    "hr-on-linear-load" "Least-squares line of heart rate on the straight line of the load." "after Chaudhry et al., Int J Cardiol 2017; shown, never classified";
    "aha-#" "Cycles of at least 15 % of resting ventilation over at least 60 % of exercise, confirmed as periodic, on 10-s averages." "Balady et al., Circulation 2010";
    "ben-dov-#" "At least three cycles of 30 to 60 s in a row with more than 25 % of mean ventilation, on 10-s averages." "Ben-Dov et al. 1992";
    "leite-#" "At least three regular cycles in a row with a mean of at least 5 L/min, on 10-s averages." "Leite et al. 2003";
    "sun-#" "The same cycles of ventilation, with at least two more of oxygen uptake, carbon dioxide output, exchange ratio and end-tidal tensions repeating in 40 to 140 s." "Sun et al. 2010";
    "sun-#-ventilation" "At least three cycles of 40 to 140 s in a row with more than 30 % of concurrent ventilation, on 10-s averages; ventilation only." "Sun et al. 2010";
    "last-#s-less-#-to-#s" "Mean heart rate of the last 10 s of load less the mean of 55 to 65 s after it." "Cole et al., N Engl J Med 1999, with windows; interval calibrated by simulation";
    "half-of-peak" "Time from load end until the 20-s mean of oxygen uptake falls to half of its peak and stays there for 15 s." "Scrutinio et al. 1998";
    "below-peak-for-good" "Time from load end until the 20-s mean of oxygen uptake stays below its peak." "Bailey et al., JACC Heart Fail 2018";
    "highest-#s-less-peak" "Highest #-s mean in recovery less the value at peak oxygen uptake." PRACTICE;
    "predicted-hr" "Share of the reserve from resting to predicted peak heart rate that was used." PRACTICE;
    "#-less-age" "Share of the reserve from resting heart rate to 220 less age that was used; the only reference for which the limits 0.80 and 0.62 hold." "Brubaker and Kitzman, Circulation 2011";
    "mvv-measured" "Against the measured maximal voluntary ventilation." PRACTICE;
    "mvv-fev#-x-#" "Against maximal voluntary ventilation estimated from FEV₁ by a factor." PRACTICE;
    "mvv" "Against maximal voluntary ventilation, measured or estimated from FEV₁." PRACTICE;
    "with-sbp-at-peak" "With the systolic pressure read within 60 s of peak." "circulatory power: Cohen-Solal et al. 2002; ventilatory power: Forman et al. 2012";
    "wagner-#-by-age" "Peak respiratory exchange ratio of at least 1.13, 1.10 or 1.06 at 20–39, 40–59 and from 60 years." "Wagner et al. 2020";
    "wagner-#-#-less-age" "Peak heart rate of at least 96 % (under 40 years) or 99 % of 210 less age." "Wagner et al. 2020";
    "lactate-#" "Highest blood lactate of at least # mmol/L." PRACTICE;
    "last-minute-slope" "Slope of oxygen uptake in the last minute, with its uncertainty, against half of the slope before." "Niemeyer et al., Sports Med 2021";
    "three-states" "Maximal metabolic effort with a plateau or two criteria met; else stopped at a demonstrated limit; else submaximal without one." PRACTICE;
    "enghoff-with-sample" "Dead space over tidal volume from the arterial sample and mixed expired carbon dioxide; apparatus dead space included." "Enghoff's modification of Bohr";
    "sample-less-end-tidal" "Arterial less end-tidal carbon dioxide over 30 s around the sample." PRACTICE;
    "alveolar-gas-equation" "Alveolar oxygen by the full alveolar gas equation with the measured exchange ratio, less the arterial sample." "alveolar gas equation";
    "jones-#" "Dead space over tidal volume with an arterial tension estimated from end-tidal carbon dioxide and tidal volume; shown, never graded." "Jones, Robertson and Kane, J Appl Physiol 1979";
    "highest-sample" "Highest sample noted." PRACTICE;
    "tlc-less-ic" "Total lung capacity less the inspiratory capacity of the last manoeuvre of the phase." PRACTICE;
    "eelv-plus-vt" "End-expiratory lung volume plus the mean tidal volume of the 30 s before the manoeuvre." PRACTICE;
    "load-rebuilt" "Regular increments found in the work rate; the deviation is the root mean square distance of the work rate from them, once a second." PRACTICE;
    "approximate-entropy" "Approximate entropy (patterns of 2 breaths, tolerance 0.2 standard deviations) of the last 150 breaths of the increments at most, the rise over ± 45 s taken off; shown, never classified." "Pincus, Proc Natl Acad Sci USA 1991; in exercise breathing: Bansal et al., Respir Physiol Neurobiol 2018 (from memory)";
    "last-under-load-less-rest" "Last manoeuvre under load less the last at rest." PRACTICE;
    "every-set-in-range" "Against the limits of every set in whose range the person lies; low only if low by all of them." PRACTICE;
    "chosen-set" "By the predicted set chosen for this page." PRACTICE;
    "#-and-#-percent" "Share of predicted peak oxygen uptake: from 40 % within limits, below 33 % low, between them borderline." "40 %: Hansen et al. 1984; 33 %: CanCOLD study";
    "percent-of-predicted-#-#-#" "Mild below 85 %, moderate below 70 %, severe below 50 % of predicted, only where the value is low by every set in range." PRACTICE;
    "hansen-predicted-mass" "Divided by the mass predicted from height (men 0.79 H − 60.7, women 0.65 H − 42.8 kg)." "Hansen, Sue and Wasserman 1984";
    "joint-bend-score" "Oxygen uptake and heart rate in 10-s bins, fitted together on lagged load with a natural bend; the score is the log odds of a late levelling against such a bend, with the late slope and the test's own bend as covariates." "own procedure; shape after Donne et al. 2024, noise after Chabert et al. 2022, error rates by simulation";
    "a#" "Extraction closes oxygen pulse = stroke volume × extraction under the named assumption; log-normal propagation." "A1: Stringer, Hansen and Wasserman 1997; A3: Crisafulli 2007; A2: pooled slopes of output on oxygen uptake";
    "b" "Stroke volume taken as unchanged within 5 %; solves for extraction." PRACTICE;
    "cautious-inputs" "100 × oxygen pulse ÷ (0.92 × arterial content), every input at the end that lowers it." "the Fick relation";
    "hb-and-saturation" "1.34 × haemoglobin × saturation, less carboxyhaemoglobin, plus dissolved oxygen." "the content equation; 1.34 mL/g";
    "rest-to-predicted-peak" "Straight line of heart rate on oxygen uptake from measured rest to the predicted peak." PRACTICE;
    "own-earlier-test" "Straight line of heart rate on oxygen uptake through two instants of the person's own earlier test, ± 5 per minute between tests." PRACTICE;
    "ln-saturation" "Change of the logarithm of saturation from rest to the end of the increments." "the content equation";
    "simultaneous-step" "Sustained simultaneous step of end-tidal carbon dioxide, end-tidal oxygen and RER, then of saturation." "after a series of pulmonary hypertension with shunts shown by echocardiography";
    "weber-janicki-#" "Class of peak oxygen uptake per kg: A above 20, B 16 to 20, C 10 to below 16, D below 10 mL/kg/min." "Weber, Janicki et al., Circulation 1982";
    "arena-#" "Class of the ventilatory slope over all increments: I below 30, II below 36, III below 45, IV from 45." "Arena et al., Circulation 2007";
    "cole-#" "Fall of heart rate in the first minute: at most 12, or above." "Cole et al., N Engl J Med 1999";
    "esc-ers-#" "Stratum of peak oxygen uptake (15 and 11 mL/kg/min, 65 and 35 % of predicted) or of the ventilatory slope (36 and 45)." "ESC/ERS guidelines 2015";
    "lung-resection" "Band of peak oxygen uptake: 20 and 10 mL/kg/min, 75 and 35 % of predicted." "ERS/ESTS guidelines, as in PMC4283874";
    "older-three-tier" "Band at the first threshold: oxygen uptake 11 and 8 mL/kg/min, ventilatory equivalent for carbon dioxide 34." "after Older 1999; POETTS, Levett et al., Br J Anaesth 2018";
    "west-#" "Cut-offs of a multi-centre colorectal cohort: threshold 11.1 and peak 18.2 mL/kg/min, ventilatory equivalent at the threshold 30.9." "West et al., Br J Surg 2016";
    "ishlt-#" "Peak oxygen uptake of at most 14 mL/kg/min, without a beta-blocker." "ISHLT criteria 2016";
    "ishlt-#-percent" "Peak oxygen uptake of at most 50 % of predicted, below 50 years and in women." "ISHLT criteria 2016";
    "ishlt-#-slope" "Slope of ventilation on carbon dioxide output above 35, where the exchange ratio stayed below 1.05." "ISHLT criteria 2016";
    "guazzi-#" "Oscillatory breathing, and end-tidal carbon dioxide of at least 33 mmHg at rest with a rise of at least 3 mmHg in exercise." "Guazzi et al., Circulation 2012 (limits from memory)";
    "ishlt-#-beta-blocker" "Peak oxygen uptake of at most 12 mL/kg/min, on a beta-blocker." "ISHLT criteria 2016";
}

/// The method with this code, numbers in it standing for themselves.
#[must_use]
pub fn find(code: &str) -> Option<&'static Method> {
    let key = key(code);
    TABLE.iter().find(|m| m.code == key)
}

/// The sentence of a method code, its number filled in.
#[must_use]
pub fn describe(code: &str) -> Option<String> {
    let number: String =
        code.chars().skip_while(|c| !c.is_ascii_digit()).take_while(char::is_ascii_digit).collect();
    find(code).map(|m| m.how.replace('#', &number))
}

/// The code with each run of digits replaced by `#`.
fn key(code: &str) -> String {
    let mut key = String::with_capacity(code.len());
    for c in code.chars() {
        if !c.is_ascii_digit() {
            key.push(c);
        } else if !key.ends_with('#') {
            key.push('#');
        }
    }
    key
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_stand_for_themselves() {
        assert_eq!(find("highest-30s").unwrap().code, "highest-#s");
        assert!(describe("highest-20s").unwrap().contains("over 20 s"));
        assert_eq!(find("wagner-2020-210-less-age").unwrap().source, "Wagner et al. 2020");
        assert_eq!(find("no-such-method"), None);
    }

    #[test]
    fn codes_are_unique_and_sentences_end() {
        for (i, m) in TABLE.iter().enumerate() {
            assert!(TABLE[..i].iter().all(|other| other.code != m.code), "{}", m.code);
            assert!(m.how.ends_with('.') && !m.source.is_empty(), "{}", m.code);
            assert_eq!(key(m.code), m.code);
        }
    }
}
