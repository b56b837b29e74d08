//! The directions of dependency, read from `cargo metadata`.

use std::collections::BTreeMap;

use cargo_metadata::{DependencyKind, MetadataCommand};

/// Project crates that each crate may name, and none else.
const ALLOWED: &[(&str, &[&str])] = &[
    ("analysis", &[]),
    ("record", &["analysis"]),
    ("raster", &[]),
    ("app", &["analysis", "record", "raster"]),
    ("xtask", &["analysis", "record"]),
    ("acceptance", &[]),
];

/// Crates that must not be named by the pure inner ones.
const FORBIDDEN: &[(&str, &[&str])] = &[
    ("analysis", &["serde", "serde_json", "egui", "eframe", "csv", "rand", "time", "rayon"]),
    ("record", &["egui", "eframe", "egui_plot", "winit"]),
    ("raster", &["eframe", "winit", "serde"]),
];

fn dependencies() -> BTreeMap<String, Vec<String>> {
    let metadata = MetadataCommand::new()
        .manifest_path(xtask::root().join("Cargo.toml"))
        .no_deps()
        .exec()
        .expect("cargo metadata");
    metadata
        .packages
        .iter()
        .map(|package| {
            let named = package
                .dependencies
                .iter()
                .filter(|d| d.kind == DependencyKind::Normal)
                .map(|d| d.name.clone())
                .collect();
            (package.name.to_string(), named)
        })
        .collect()
}

#[test]
fn inner_crates_never_name_outer_ones() {
    let dependencies = dependencies();
    let ours: Vec<&str> = ALLOWED.iter().map(|(name, _)| *name).collect();
    assert_eq!(dependencies.len(), ours.len(), "a crate is missing from this check");
    for (name, allowed) in ALLOWED {
        for named in dependencies[*name].iter().filter(|n| ours.contains(&n.as_str())) {
            assert!(allowed.contains(&named.as_str()), "{name} must not name {named}");
        }
    }
}

#[test]
fn pure_crates_stay_pure() {
    let dependencies = dependencies();
    for (name, forbidden) in FORBIDDEN {
        for named in &dependencies[*name] {
            assert!(!forbidden.contains(&named.as_str()), "{name} must not name {named}");
        }
    }
}

#[test]
fn the_design_card_libraries_are_in_use() {
    let dependencies = dependencies();
    let all: Vec<&String> = dependencies.values().flatten().collect();
    for library in ["eframe", "egui_plot", "rfd", "serde", "serde_json", "csv", "statrs"] {
        assert!(all.iter().any(|d| *d == library), "{library} is not named by any crate");
    }
}
