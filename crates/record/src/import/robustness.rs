//! Whatever the bytes, import answers with a recording or a problem, and repeats itself.

use proptest::prelude::*;

use super::*;

/// Either a problem in words, or a recording that its recipe repeats bit for bit.
fn holds(bytes: &[u8]) {
    match import(bytes, "any", &Answers::none(), None) {
        Err(problem) => {
            assert!(problem.code.starts_with("import-"), "{problem}");
            assert!(!problem.what.is_empty() && !problem.todo.is_empty());
        }
        Ok(read) => {
            let breaths = &read.recording.breaths;
            assert!(breaths.end_s().windows(2).all(|w| w[0] < w[1]));
            assert!(breaths.duration_s().iter().all(|d| *d > 0.0 && d.is_finite()));
            assert!(read.recording.load.t_s.windows(2).all(|w| w[0] < w[1]));
            assert!(read.recording.gaps.iter().all(|g| g.from_s < g.to_s));
            let json = serde_json::to_string(&read.recipe).unwrap();
            let recipe: Recipe = serde_json::from_str(&json).unwrap();
            assert_eq!(recording_from(bytes, &recipe).unwrap(), read.recording);
        }
    }
}

/// Cells as they come, and as they should not.
fn cell() -> impl Strategy<Value = String> {
    prop_oneof![
        6 => (-5.0..4000.0_f64).prop_map(|v| format!("{v:.3}")),
        2 => (0..4000_i32).prop_map(|v| v.to_string()),
        1 => (0..60_u32, 0..70_u32).prop_map(|(m, s)| format!("{m}:{s:02}")),
        1 => (0..900_u32, 0..999_u32).prop_map(|(a, b)| format!("{a},{b:03}")),
        1 => prop::sample::select(vec![
            "", "-", "n/a", "NaN", "inf", "1e999", "-1", "9999", "x", "\"", "#", "Max", "120/80",
            "V\u{307}O2", "\u{0}", "1.2.3", "0x10", "\u{2212}5", "99999999999999999999",
        ])
        .prop_map(str::to_owned),
    ]
}

fn header() -> impl Strategy<Value = String> {
    prop::sample::select(vec![
        "time",
        "t [s]",
        "Clock",
        "VO2",
        "VO2 [mL/min]",
        "V'O2 (L/min)",
        "VCO2 [mL/min]",
        "HR",
        "HR [/min]",
        "RR",
        "RR [ms]",
        "VE [L/min]",
        "Load",
        "power [W]",
        "BP",
        "Ttot [s]",
        "?",
        "",
        "VO2/kg",
        "SpO2 [%]",
        "VT [mL]",
    ])
    .prop_map(str::to_owned)
}

proptest! {
    #[test]
    fn any_bytes(bytes in prop::collection::vec(any::<u8>(), 0..2000)) {
        holds(&bytes);
    }

    #[test]
    fn any_text_of_a_table(text in "(time|VO2|HR|RR|[0-9;,.\\t\n: \"#/-]){0,300}") {
        holds(text.as_bytes());
    }

    #[test]
    fn any_table(
        headers in prop::collection::vec(header(), 3..7),
        separator in prop::sample::select(vec![";", ",", "\t", "|", " "]),
        step in 0.3..4.0_f64,
        rows in prop::collection::vec(prop::collection::vec(cell(), 2..7), 0..120),
    ) {
        let mut text = format!("time{separator}{}\n", headers.join(separator));
        for (i, row) in rows.iter().enumerate() {
            let t = step * i as f64;
            text += &format!("{t:.2}{separator}{}\n", row.join(separator));
        }
        holds(text.as_bytes());
    }

    #[test]
    fn a_recipe_that_does_not_fit_is_a_problem(
        first_line in any::<usize>(),
        index in 0..9_usize,
        from in any::<usize>(),
        to in any::<usize>(),
        step in -1e300..1e300_f64,
        beats in any::<bool>(),
    ) {
        let mut text = "time [s];VO2 [mL/min];HR [/min]\n".to_owned();
        for i in 0..60 {
            let x = f64::from(i);
            text += &format!("{:.1};{:.0};{:.0}\n", 3.1 * x, 400.0 + x, 80.0 + x / 4.0);
        }
        let read = import(text.as_bytes(), "", &Answers::none(), None).unwrap();
        let mut recipe = read.recipe.clone();
        recipe.first_line = first_line % 80;
        recipe.columns[index % 3].index = index;
        recipe.rows = if beats { RowsAre::Beats } else { RowsAre::Averages { step_s: step } };
        recipe.left_out.push(LeftOut::Rows { from, to, code: "x".into(), why: "x".into() });
        let other = recording_from(text.as_bytes(), &recipe);
        prop_assert!(other.is_err(), "the digest tells that this is another reading");
    }

    #[test]
    fn a_good_table_with_damage(
        cuts in prop::collection::vec((0..5000_usize, any::<u8>()), 0..6),
        end in 0..6000_usize,
    ) {
        let mut text = "time [s];VO2 [mL/min];HR [/min];RR\n".to_owned();
        for i in 0..200 {
            let x = f64::from(i);
            text += &format!("{:.1};{:.0};{:.0};{}\n", 3.0 * x, 400.0 + x, 80.0 + x / 4.0, 15);
        }
        let mut bytes = text.into_bytes();
        for (at, byte) in cuts {
            if let Some(slot) = bytes.get_mut(at) {
                *slot = byte;
            }
        }
        bytes.truncate(end.max(60));
        holds(&bytes);
    }
}
