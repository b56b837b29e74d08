//! Whole files through the importer.

use analysis::quantity::Quantity;
use analysis::recording::RowKind;

use super::*;
use crate::provenance::Decided;

fn import(text: &str) -> Result<Imported, Problem> {
    super::import(text.as_bytes(), "table.csv", &Answers::none(), None)
}

fn with_answers(text: &str, answers: &[&str]) -> Result<Imported, Problem> {
    let mut parsed = Answers::none();
    for answer in answers {
        parsed.add(answer)?;
    }
    super::import(text.as_bytes(), "table.csv", &parsed, None)
}

/// 40 breaths, 3 s and a little each; `row` writes time (s), V̇O₂ (mL/min) and HR (/min).
fn table(head: &str, row: impl Fn(f64, f64, f64) -> String) -> String {
    let rows = (1..=40).map(|i| {
        let x = f64::from(i);
        row(3.0 * x + 0.1 * (x % 2.0), 400.0 + 10.0 * x, 80.0 + x) + "\n"
    });
    head.to_owned() + &rows.collect::<String>()
}

fn comma(x: f64) -> String {
    format!("{x}").replace('.', ",")
}

#[test]
fn header_unit_row_and_decimal_comma() {
    let text = table("Zeit;V'O2;HF;Last\ns;L/min;1/min;W\n", |t, v, h| {
        format!("{};{};{};{}", comma(t), comma(v / 1000.0), comma(h), 20)
    });
    let read = import(&text).unwrap();
    assert_eq!(read.recipe.decimal, Decimal::Comma);
    assert_eq!(read.recipe.separator, Separator::Semicolon);
    assert_eq!(read.recipe.unit_line, Some(2));
    assert!(read.columns().iter().skip(1).all(|c| c.decided == Decided::UnitRow));
    let breaths = &read.recording.breaths;
    assert_eq!(breaths.len(), 40);
    assert!((breaths.value(Quantity::Vo2, 0).unwrap() - 410.0).abs() < 1e-9);
    assert_eq!(breaths.value(Quantity::Hr, 39), Some(120.0));
    assert!((breaths.end_s()[0] - 3.1).abs() < 1e-12);
    assert_eq!(read.recording.row_kind, RowKind::Breath);
    assert_eq!(read.recording.load.at(50.0), Some(20.0));
    assert!(read.questions().is_empty() && read.issues.is_empty(), "{:?}", read.issues);
}

#[test]
fn the_recipe_repeats_the_import_and_survives_json() {
    let text = table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{t},{v},{h}"));
    let read = import(&text).unwrap();
    let json = serde_json::to_string(&read.recipe).unwrap();
    let recipe: Recipe = serde_json::from_str(&json).unwrap();
    assert_eq!(recipe, read.recipe);
    assert_eq!(recording_from(text.as_bytes(), &recipe).unwrap(), read.recording);
    let other = text.replace("410", "411");
    assert_eq!(recording_from(other.as_bytes(), &recipe).unwrap_err().code, "import-recipe");
}

#[test]
fn a_beat_wise_table_without_units_is_decided_by_its_values() {
    // Beats of 560 and 600 ms in turn; V̇O₂ in L/min held over 4 beats; steps of load.
    let mut text = "time,RR,VO2,power\n".to_owned();
    let mut t_ms = -30_000;
    for i in 0..600 {
        let rr = 560 + 40 * (i % 2);
        t_ms += rr;
        let vo2 = 0.3 + f64::from(i / 4) * 0.01;
        text += &format!("{},{rr},{vo2},{}\n", f64::from(t_ms) / 1000.0, (i / 100) * 25);
    }
    let read = import(&text).unwrap();
    let readings: Vec<String> = read.columns().iter().map(|c| c.reading.to_string()).collect();
    assert_eq!(readings, ["time s", "rr-interval ms", "vo2 L/min", "work-rate W"]);
    assert!(read.columns().iter().all(|c| matches!(c.decided, Decided::Values { .. })));
    assert_eq!(read.recording.row_kind, RowKind::Beat);
    let breaths = &read.recording.breaths;
    assert_eq!(breaths.len(), 150);
    // Two beats of 560 and two of 600 ms: 2.32 s a breath, mean interval 580 ms, 60000/580 per min.
    assert!((breaths.duration_s()[10] - 2.32).abs() < 1e-9);
    assert!((breaths.value(Quantity::Hr, 10).unwrap() - 60_000.0 / 580.0).abs() < 1e-9);
    assert!((breaths.value(Quantity::Vo2, 10).unwrap() - 400.0).abs() < 1e-9);
    assert_eq!(read.recording.load.value, [0.0, 25.0, 50.0, 75.0, 100.0, 125.0]);
}

#[test]
fn rr_without_identity_and_beside_a_rate_is_breathing() {
    let text = table("time [s],VO2 [mL/min],HR [bpm],RR\n", |t, v, h| {
        format!("{t},{v},{h},{}", 12.0 + h / 10.0)
    });
    let read = import(&text).unwrap();
    assert_eq!(read.columns()[3].reading.to_string(), "fr /min");
}

#[test]
fn what_is_open_is_asked_and_left_out_and_an_answer_closes_it() {
    let text = table("time [s],VO2 [mL/min],HR [bpm],RR\n", |t, v, h| {
        format!("{t},{v},{h},{}", 60.0 + h / 4.0)
    });
    let read = import(&text).unwrap();
    assert_eq!(
        read.questions(),
        [Question {
            column: "RR".into(),
            readings: vec!["fr /min".into(), "sys-bp mm[Hg]".into(), "leave-out".into()]
        }]
    );
    assert!(!read.recording.breaths.has(Quantity::Fr));
    let answered = with_answers(&text, &["RR=fr /min"]).unwrap();
    assert!(answered.questions().is_empty());
    assert_eq!(answered.columns()[3].decided, Decided::Answer);
    assert_eq!(answered.recording.breaths.value(Quantity::Fr, 0), Some(60.0 + 81.0 / 4.0));
    let left = with_answers(&text, &["#4=leave-out"]).unwrap();
    assert!(left.questions().is_empty() && left.columns().len() == 3);

    // The laboratory's next file has the same header: its kept answer is used.
    let profile = Profile::of(&answered.recipe, "Invented lab");
    let profile = Profile::read(&profile.write()).unwrap();
    let next =
        super::import(text.as_bytes(), "next.csv", &Answers::none(), Some(&profile)).unwrap();
    assert!(next.questions().is_empty());
    assert_eq!(next.columns()[3].decided, Decided::Profile);
    assert_eq!(next.recording, answered.recording);

    let twice = profile.write().replacen('{', "{\"name\":\"x\",", 1);
    for wrong in ["", "{}", twice.as_str(), &profile.write().replace("fr /min", "fr kPa")] {
        assert_eq!(Profile::read(wrong).unwrap_err().code, "import-profile");
    }

    assert_eq!(with_answers(&text, &["Nope=fr /min"]).unwrap_err().code, "import-answer-column");
    for wrong in ["RR", "RR=breaths", "RR=fr kPa", "=fr /min", "RR=fr"] {
        assert_eq!(with_answers(&text, &[wrong]).unwrap_err().code, "import-answer", "{wrong}");
    }
}

#[test]
fn preamble_titles_repeats_comments_and_summaries_are_left_out_visibly() {
    let mut text = "Test report;invented\nOperator;nobody\n\n".to_owned();
    text += &table("t;V'O2;HF\ns;mL/min;1/min\n", |t, v, h| format!("{t};{v};{h}"));
    let mut lines: Vec<&str> = text.lines().collect();
    lines.insert(20, "Ramp;;");
    lines.insert(21, "t;V'O2;HF");
    lines.insert(22, "s;mL/min;1/min");
    lines.insert(30, "# calibrated before");
    lines.extend(["Max;800;120", "Mean;600;100", ";;"]);
    let read = import(&lines.join("\n")).unwrap();
    assert_eq!(read.recording.breaths.len(), 40);
    let left: Vec<(usize, usize, &str)> = read
        .left_out()
        .iter()
        .map(|l| match l {
            LeftOut::Rows { from, to, code, .. } => (*from, *to, code.as_str()),
            LeftOut::Column { .. } => panic!("no column is left out"),
        })
        .collect();
    assert_eq!(
        left,
        [
            (1, 2, "preamble"),
            (21, 21, "title"),
            (22, 23, "repeated-header"),
            (31, 31, "comment"),
            // 3 lines of preamble, 2 of header, 40 rows, 4 inserted: the summary follows line 49.
            (50, 51, "summary"),
        ]
    );
}

#[test]
fn text_in_number_cells_is_missing_and_listed() {
    let text = table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| {
        let hr = if h == 90.0 { "cough".to_owned() } else { h.to_string() };
        format!("{t},{v},{hr}")
    });
    let read = import(&text).unwrap();
    assert_eq!(read.recording.breaths.value(Quantity::Hr, 9), None);
    assert_eq!(read.recording.breaths.value(Quantity::Vo2, 9), Some(500.0));
    let issue = &read.issues[0];
    assert_eq!(issue.code, "import-text-cells");
    assert!(issue.what.contains("line 11 “cough”"), "{issue}");
}

#[test]
fn zero_rate_is_missing_but_zero_load_is_not() {
    let text = table("time [s],VO2 [mL/min],HR [/min],Load [W]\n", |t, v, h| {
        format!("{t},{v},{},0", if h < 85.0 { 0.0 } else { h })
    });
    let read = import(&text).unwrap();
    assert_eq!(read.recording.breaths.value(Quantity::Hr, 0), None);
    assert_eq!(read.recording.load.at(60.0), Some(0.0));
    assert_eq!(read.issues[0].code, "import-stand-in");
}

#[test]
fn one_of_uptake_and_rate_is_enough_and_none_is_refused() {
    let text = table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{t},{v},{h}"));
    let without = |name: &str| text.replace(name, "unheard of");
    assert!(!import(&without("VO2 [mL/min]")).unwrap().recording.has(Quantity::Vo2));
    assert!(!import(&without("HR [/min]")).unwrap().recording.has(Quantity::Hr));
    let neither = table("time [s],VE [L/min],VT [L]\n", |t, v, _| format!("{t},{},1.2", v / 20.0));
    assert_eq!(import(&neither).unwrap_err().code, "import-no-vo2-no-hr");
}

#[test]
fn a_few_rows_that_go_back_are_left_out_and_a_restart_is_refused() {
    let text = table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{t},{v},{h}"));
    let mut lines: Vec<&str> = text.lines().collect();
    lines.swap(10, 11);
    let read = import(&lines.join("\n")).unwrap();
    assert_eq!(read.recording.breaths.len(), 39);
    assert!(read.issues.iter().any(|i| i.code == "import-rows-back" && i.where_ == "line 12"));
    let restarted = format!("{text}{}", text.lines().skip(1).collect::<Vec<_>>().join("\n"));
    let problem = import(&restarted).unwrap_err();
    assert_eq!(problem.code, "import-time-back");
    assert!(problem.where_.contains("line 42"), "{problem}");
}

#[test]
fn what_is_no_test_is_refused_by_name() {
    let short: String =
        table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{},{v},{h}", t / 3.0));
    for (text, code) in [
        ("", "import-empty"),
        ("\u{feff}", "import-empty"),
        ("time [s],VO2 [mL/min],HR [/min]\n", "import-no-rows"),
        ("time [s],VO2 [mL/min],HR [/min]\nWarm-up\n", "import-no-time"),
        ("1,2,3\n4,5,6\n", "import-no-header"),
        ("Dear colleague, thank you.\nYours\n", "import-no-header"),
        ("VO2 [mL/min],VE [L/min],HR [/min]\n1000,30,100\n", "import-no-time"),
        (&short, "import-too-short"),
    ] {
        let problem = import(text).unwrap_err();
        assert_eq!(problem.code, code, "{text}");
        assert!(problem.where_.contains("table.csv") && !problem.todo.is_empty());
    }
}

#[test]
fn averages_are_recognised_by_their_constant_step() {
    let text = table("time [m:ss],VO2 [mL/min],HR [/min]\n", |t, v, h| {
        let s = (t / 3.0).floor() * 10.0;
        format!("{}:{:02},{v},{h}", (s / 60.0).floor(), s % 60.0)
    });
    let read = import(&text).unwrap();
    assert_eq!(read.recording.row_kind, RowKind::Averaged { step_s: 10.0 });
    assert!(read.issues.iter().any(|i| i.code == "import-averaged"));
}

#[test]
fn a_stated_unit_that_the_values_contradict_is_asked() {
    let text =
        table("time [s],VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{t},{},{h}", v / 1000.0));
    let read = import(&text).unwrap();
    assert_eq!(read.questions()[0].readings, ["vo2 mL/min", "vo2 L/min", "leave-out"]);
    assert!(!read.recording.has(Quantity::Vo2));
}

#[test]
fn uptake_per_mass_and_as_stated_are_told_apart_by_unit() {
    let text = table("time [s],VO2 [mL/min],VO2 [mL/min/kg],HR [/min]\n", |t, v, h| {
        format!("{t},{v},{},{h}", v / 80.0)
    });
    let read = import(&text).unwrap();
    assert_eq!(read.recording.breaths.value(Quantity::Vo2, 0), Some(410.0));
    assert!(matches!(&read.left_out()[0],
        LeftOut::Column { index: 2, code, .. } if code == "per-mass"));
}

#[test]
fn two_different_columns_for_one_quantity_are_asked_and_equal_ones_are_one() {
    let two = |factor: f64| {
        table("time [s],VO2 [mL/min],V'O2 [L/min],HR [/min]\n", |t, v, h| {
            format!("{t},{v},{},{h}", v / 1000.0 * factor)
        })
    };
    let same = import(&two(1.0)).unwrap();
    assert!(same.questions().is_empty() && same.recording.has(Quantity::Vo2));
    let other = import(&two(1.2)).unwrap();
    assert_eq!(other.questions().len(), 2);
    assert!(!other.recording.has(Quantity::Vo2));
}

#[test]
fn ambiguous_thousands_are_decided_by_plausibility_or_refused() {
    // `1,410` in L/min is 1.410; 1410 L/min is not plausible.
    let litres =
        table("t [s];VO2 [L/min];HR [/min]\n", |t, v, h| format!("{};1,{};{h}", t.floor(), v));
    let read = import(&litres).unwrap();
    assert_eq!(read.recipe.decimal, Decimal::Comma);
    assert!((read.recording.breaths.value(Quantity::Vo2, 0).unwrap() - 1410.0).abs() < 1e-9);
    // The same text in mL/min is thousands: 1.4 mL/min is not plausible.
    let millilitres = litres.replace("[L/min]", "[mL/min]");
    let read = import(&millilitres).unwrap();
    assert_eq!(read.recipe.decimal, Decimal::Point);
    assert_eq!(read.recording.breaths.value(Quantity::Vo2, 0), Some(1410.0));
}

#[test]
fn pressure_pairs_and_times_of_day_are_read() {
    let text = table("Clock;VO2 [mL/min];HR [/min];BP\n", |t, v, h| {
        let s = 86_390.0 + t.floor();
        let (h24, m, s) = ((s / 3600.0).floor() % 24.0, (s / 60.0).floor() % 60.0, s % 60.0);
        format!("{h24}:{m:02}:{s:02};{v};{h};{}", if h < 81.5 { "120/80" } else { "" })
    });
    let read = import(&text).unwrap();
    let breaths = &read.recording.breaths;
    assert_eq!(read.recipe.time, TimeForm::TimeOfDay);
    assert_eq!((breaths.end_s()[0], breaths.end_s()[39]), (0.0, 117.0));
    assert_eq!(breaths.value(Quantity::SysBp, 0), Some(120.0));
    assert_eq!(breaths.value(Quantity::DiaBp, 0), Some(80.0));
    assert_eq!(breaths.value(Quantity::DiaBp, 1), None);
}

#[test]
fn a_known_unit_of_another_quantity_means_another_quantity_and_an_unknown_one_is_asked() {
    let text = table("time [s],VO2 [mL/min],P [mmHg],Load [kpm/min]\n", |t, v, h| {
        format!("{t},{v},{h},{h}")
    });
    let read = import(&text).unwrap();
    assert!(matches!(&read.left_out()[0],
        LeftOut::Column { index: 2, code, .. } if code == "unit-does-not-fit"));
    assert_eq!(read.questions()[0].column, "Load [kpm/min]");
    assert!(!read.recording.has(Quantity::WorkRate));
}

#[test]
fn a_time_of_unknown_name_or_unit_is_told_by_an_answer() {
    let named = table("when,VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{t},{v},{h}"));
    assert_eq!(import(&named).unwrap_err().code, "import-no-header");
    let told = with_answers(&named, &["when=time s"]).unwrap();
    assert_eq!(told.columns()[0].decided, Decided::Answer);
    // 1, 2, 3 … 40 may be seconds or minutes.
    let bare =
        table("time,VO2 [mL/min],HR [/min]\n", |t, v, h| format!("{},{v},{h}", (t / 3.0).floor()));
    let problem = import(&bare).unwrap_err();
    assert_eq!(problem.code, "import-no-time");
    assert!(problem.what.contains("s or min"), "{problem}");
    let told = with_answers(&bare, &["time=time min"]).unwrap();
    assert_eq!(told.recording.breaths.end_s()[1], 120.0);
}
