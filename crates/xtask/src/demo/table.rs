//! The breath table as a laboratory system would export it.

use std::fmt::Write as _;

use analysis::model::demo::Case;
use analysis::quantity::Quantity;
use analysis::recording::Recording;

use super::NOTICE;

/// How a table is written.
struct Layout {
    separator: char,
    decimal: char,
    /// Gas flows in L/min and tensions in kPa instead of mL/min and mmHg.
    litres_and_kpa: bool,
}

/// One exported column.
struct Exported {
    quantity: Quantity,
    name: &'static str,
    unit: &'static str,
    factor: f64,
    decimals: usize,
}

/// mmHg per kPa: 760 / 101.325.
const MMHG_PER_KPA: f64 = 760.0 / 101.325;

fn columns(litres_and_kpa: bool) -> Vec<Exported> {
    let (flow, flow_factor, flow_decimals) =
        if litres_and_kpa { ("L/min", 0.001, 3) } else { ("mL/min", 1.0, 0) };
    let (tension, tension_factor, tension_decimals) =
        if litres_and_kpa { ("kPa", 1.0 / MMHG_PER_KPA, 2) } else { ("mmHg", 1.0, 1) };
    let row = |quantity, name, unit, factor, decimals| Exported {
        quantity,
        name,
        unit,
        factor,
        decimals,
    };
    vec![
        row(Quantity::WorkRate, "Load", "W", 1.0, 0),
        row(Quantity::Vo2, "VO2", flow, flow_factor, flow_decimals),
        row(Quantity::Vco2, "VCO2", flow, flow_factor, flow_decimals),
        row(Quantity::Ve, "VE", "L/min", 1.0, 1),
        row(Quantity::Vt, "VT", "L", 1.0, 2),
        row(Quantity::Fr, "fR", "1/min", 1.0, 1),
        row(Quantity::Hr, "HR", "1/min", 1.0, 0),
        row(Quantity::Peto2, "PETO2", tension, tension_factor, tension_decimals),
        row(Quantity::Petco2, "PETCO2", tension, tension_factor, tension_decimals),
        row(Quantity::Spo2, "SpO2", "%", 1.0, 0),
    ]
}

/// The table of `case`: notice, header row, unit row, one row per breath.
#[must_use]
pub fn text(case: &Case, recording: &Recording) -> String {
    let layout = if case.name == "curlew" {
        Layout { separator: ';', decimal: ',', litres_and_kpa: true }
    } else {
        Layout { separator: ',', decimal: '.', litres_and_kpa: false }
    };
    let columns = columns(layout.litres_and_kpa);
    let mut out = format!("{NOTICE}\n");
    let line = |cells: Vec<String>| {
        let separator = layout.separator.to_string();
        format!("{}\n", cells.join(&separator))
    };
    let header = std::iter::once("Time").chain(columns.iter().map(|c| c.name));
    out.push_str(&line(header.map(String::from).collect()));
    let units = std::iter::once("s").chain(columns.iter().map(|c| c.unit));
    out.push_str(&line(units.map(String::from).collect()));
    let breaths = &recording.breaths;
    for (i, end) in breaths.end_s().iter().enumerate() {
        let mut cells = vec![number(*end, 2, layout.decimal)];
        for c in &columns {
            let value = breaths.value(c.quantity, i);
            cells
                .push(value.map_or_else(String::new, |v| {
                    number(v * c.factor, c.decimals, layout.decimal)
                }));
        }
        out.push_str(&line(cells));
    }
    out
}

fn number(value: f64, decimals: usize, point: char) -> String {
    let mut text = String::new();
    let _ = write!(text, "{value:.decimals$}");
    if point == '.' { text } else { text.replace('.', &point.to_string()) }
}
