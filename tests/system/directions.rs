//! One direction: a crate uses only those before it.

use std::collections::BTreeMap;
use std::process::Command;

use serde_json::Value;

/// The crates in their order.
const ORDER: [&str; 16] = [
    "units",
    "molecule",
    "reagents",
    "model",
    "grid",
    "plate",
    "report",
    "store",
    "scheduler",
    "engine",
    "wire",
    "server",
    "records",
    "columnar",
    "cli",
    "calibration",
];

/// Crates that take bytes and values and give values.
const PURE: usize = 7;

/// What a pure crate has no use for: disk, network, clock, wire.
const IMPURE: [&str; 8] = [
    "sled",
    "tokio",
    "tonic",
    "prost",
    "hyper",
    "tempfile",
    "tracing-subscriber",
    "clap",
];

/// The dependencies of each crate of the workspace, those of its tests left out.
fn dependencies() -> BTreeMap<String, Vec<String>> {
    let metadata = Command::new(env!("CARGO"))
        .args([
            "metadata",
            "--no-deps",
            "--offline",
            "--format-version",
            "1",
        ])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .output()
        .expect("cargo runs");
    let metadata: Value = serde_json::from_slice(&metadata.stdout).expect("JSON");
    let name = |value: &Value| value["name"].as_str().expect("a name").to_owned();
    let packages = metadata["packages"].as_array().expect("packages");
    let of_package = |package: &Value| {
        let dependencies = package["dependencies"].as_array().expect("dependencies");
        let shipped = dependencies
            .iter()
            .filter(|dependency| dependency["kind"].is_null());
        (name(package), shipped.map(name).collect())
    };
    packages.iter().map(of_package).collect()
}

fn short(name: &str) -> Option<&str> {
    name.strip_prefix("enolattice-")
}

fn position(crate_name: &str) -> usize {
    let position = ORDER.iter().position(|known| *known == crate_name);
    position.unwrap_or_else(|| panic!("`{crate_name}` has no place in the order of the crates"))
}

#[test]
fn crates_use_only_those_before_them() {
    let dependencies = dependencies();
    for (package, uses) in &dependencies {
        let package = short(package).expect("packages carry the prefix");
        if package == "tests" {
            continue;
        }
        for used in uses.iter().filter_map(|used| short(used)) {
            assert!(
                position(used) < position(package),
                "`{package}` uses `{used}`"
            );
        }
    }
}

#[test]
fn the_pure_core_has_no_io() {
    let dependencies = dependencies();
    for package in &ORDER[..PURE] {
        let uses = dependencies
            .get(&format!("enolattice-{package}"))
            .into_iter()
            .flatten();
        for used in uses {
            assert!(
                !IMPURE.contains(&used.as_str()),
                "`{package}` uses `{used}`"
            );
        }
    }
}
