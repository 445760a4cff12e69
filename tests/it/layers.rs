//! The layers: who may use whom, read from the sources themselves. A new arrow changes the table first.

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

/// A layer, the layers that it may use, and the outside crates that only some may use.
struct Layer {
    name: &'static str,
    uses: &'static [&'static str],
    crates: &'static [&'static str],
}

/// From the ground up: no layer uses one that stands below it in this list, except those above it that it names.
const LAYERS: [Layer; 14] = [
    Layer { name: "base", uses: &[], crates: &["libm"] },
    Layer { name: "stats", uses: &["base"], crates: &["libm"] },
    Layer { name: "model", uses: &["base"], crates: &[] },
    Layer { name: "ingest", uses: &["base", "model"], crates: &["polars", "csv", "glob", "flate2", "zstd", "xxhash_rust"] },
    Layer { name: "kinematics", uses: &["base", "stats", "model"], crates: &["libm"] },
    Layer { name: "carry", uses: &["base", "stats", "model", "kinematics"], crates: &["libm"] },
    Layer { name: "engine", uses: &["base", "stats", "model", "kinematics", "carry"], crates: &["libm"] },
    Layer { name: "demo", uses: &["base", "model", "engine"], crates: &["polars", "csv"] },
    Layer { name: "store", uses: &["base", "model", "engine"], crates: &["polars", "csv", "xxhash_rust"] },
    Layer { name: "audit", uses: &["base", "stats", "model", "kinematics", "carry", "engine", "store"], crates: &[] },
    Layer { name: "rating", uses: &["base", "stats", "model", "store"], crates: &["libm"] },
    Layer { name: "report", uses: &["base", "stats", "model", "engine", "store", "rating"], crates: &["plotters", "minijinja"] },
    Layer {
        name: "pipeline",
        uses: &["base", "stats", "model", "ingest", "kinematics", "carry", "engine", "demo", "store", "audit", "rating", "report"],
        crates: &["rayon", "xxhash_rust"],
    },
    Layer {
        name: "cli",
        uses: &["base", "model", "ingest", "engine", "demo", "store", "rating", "report", "pipeline"],
        crates: &["clap", "indicatif"],
    },
];

/// Outside crates that are tied to layers; the rest (serde, thiserror and the like) may stand anywhere.
const TIED_CRATES: [&str; 12] =
    ["polars", "csv", "glob", "flate2", "zstd", "xxhash_rust", "plotters", "minijinja", "rayon", "clap", "indicatif", "libm"];

/// Layers that compute and never open a file, ask the time or the environment.
const PURE: [&str; 9] = ["base", "stats", "model", "kinematics", "carry", "engine", "audit", "rating", "report"];

/// The layer of a source file; none for the crate's own root files.
fn layer_of(relative: &Path) -> Option<&'static Layer> {
    let first = relative.components().next()?.as_os_str().to_str()?;
    LAYERS.iter().find(|layer| layer.name == first.trim_end_matches(".rs"))
}

fn sources(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            sources(&path, found);
        } else if path.extension().is_some_and(|e| e == "rs") {
            found.push(path);
        }
    }
}

/// The source without comments.
fn code(text: &str) -> String {
    text.lines().map(|line| line.split("//").next().unwrap_or("")).collect::<Vec<_>>().join("\n")
}

fn word_at(text: &str) -> &str {
    let end = text.find(|c: char| !(c.is_alphanumeric() || c == '_')).unwrap_or(text.len());
    &text[..end]
}

/// First path parts after every `crate::`, those of a `crate::{…}` group too.
fn crate_paths(code: &str) -> BTreeSet<String> {
    let mut names = BTreeSet::new();
    for (at, _) in code.match_indices("crate::") {
        let rest = &code[at + "crate::".len()..];
        let Some(group) = rest.strip_prefix('{') else {
            names.insert(word_at(rest).to_string());
            continue;
        };
        let (mut depth, mut expects_name) = (0, true);
        for (i, c) in group.char_indices() {
            match c {
                '{' => depth += 1,
                '}' if depth == 0 => break,
                '}' => depth -= 1,
                ',' if depth == 0 => expects_name = true,
                c if expects_name && (c.is_alphabetic() || c == '_') => {
                    names.insert(word_at(&group[i..]).to_string());
                    expects_name = false;
                }
                _ => {}
            }
        }
    }
    names.remove("");
    names
}

/// Outside crates named at the start of a path.
fn outside_crates(code: &str) -> BTreeSet<&'static str> {
    let starts_path = |before: &str| !before.ends_with(|c: char| c.is_alphanumeric() || c == '_' || c == ':');
    TIED_CRATES
        .into_iter()
        .filter(|name| {
            let path = format!("{name}::");
            code.match_indices(&path).any(|(at, _)| starts_path(&code[..at])) || code.contains(&format!("use {name};"))
        })
        .collect()
}

/// Longest chain of `super::`; one as long as the module is deep would climb out of the layer unseen.
fn longest_climb(code: &str) -> usize {
    (0..).take_while(|n| code.contains(&"super::".repeat(n + 1))).count()
}

fn depth(relative: &Path) -> usize {
    let parts = relative.components().count();
    if relative.file_name().is_some_and(|n| n == "mod.rs") { parts - 1 } else { parts }
}

fn each_source(mut check: impl FnMut(&Path, Option<&'static Layer>, &str)) -> usize {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut files = Vec::new();
    sources(&root, &mut files);
    files.sort();
    for file in &files {
        let relative = file.strip_prefix(&root).unwrap();
        check(relative, layer_of(relative), &code(&fs::read_to_string(file).unwrap()));
    }
    files.len()
}

#[test]
fn no_layer_uses_one_that_it_may_not() {
    let mut wrong = Vec::new();
    let count = each_source(|file, layer, code| {
        let Some(layer) = layer else {
            if !(file == Path::new("lib.rs") || file == Path::new("main.rs")) {
                wrong.push(format!("{}: belongs to no layer of the table", file.display()));
            }
            return;
        };
        for used in crate_paths(code) {
            if used != layer.name && !layer.uses.contains(&used.as_str()) {
                wrong.push(format!("{}: {} may not use {used}", file.display(), layer.name));
            }
        }
        for used in outside_crates(code) {
            if !layer.crates.contains(&used) {
                wrong.push(format!("{}: {} may not use the crate {used}", file.display(), layer.name));
            }
        }
        if longest_climb(code) >= depth(file) {
            wrong.push(format!("{}: climbs out of its layer by super::", file.display()));
        }
    });
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
    assert!(count > 30, "only {count} sources were read");
}

#[test]
fn the_table_has_no_circle() {
    for (i, layer) in LAYERS.iter().enumerate() {
        let below: Vec<&str> = LAYERS[..i].iter().map(|l| l.name).collect();
        assert!(layer.uses.iter().all(|used| below.contains(used)), "{} uses a layer that stands above it", layer.name);
    }
}

#[test]
fn only_the_edges_touch_files_and_the_clock() {
    let mut wrong = Vec::new();
    each_source(|file, layer, code| {
        if layer.is_some_and(|l| PURE.contains(&l.name)) {
            for word in ["std::fs", "std::env", "std::time", "File::open", "File::create", "println!", "eprintln!"] {
                if code.contains(word) {
                    wrong.push(format!("{}: {word}", file.display()));
                }
            }
        }
    });
    assert!(wrong.is_empty(), "\n{}", wrong.join("\n"));
}

#[test]
fn every_source_says_what_it_is_for_and_stays_small() {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("src");
    let mut files = Vec::new();
    sources(&root, &mut files);
    for file in files {
        let text = fs::read_to_string(&file).unwrap();
        assert!(text.starts_with("//! "), "{}: the first line says its purpose", file.display());
        assert!(text.lines().count() <= 400, "{}: past 400 lines, what wants out?", file.display());
    }
}

#[test]
fn the_reader_of_sources_sees_what_it_should() {
    // From memory: the forms that rustfmt leaves in a source.
    let source =
        "use crate::base::V2; // crate::cli\nuse crate::{model::{Play, crate_x}, stats,\n  engine as e};\nlet a = crate::store::x();";
    let names: Vec<String> = crate_paths(&code(source)).into_iter().collect();
    assert_eq!(names, ["base", "engine", "model", "stats", "store"]);
    assert_eq!(
        outside_crates("use rayon::prelude::*; let p = crate::csv::x; libm::erfc(1.0)").into_iter().collect::<Vec<_>>(),
        ["libm", "rayon"]
    );
    assert_eq!(longest_climb("use super::super::x;"), 2);
    assert_eq!((depth(Path::new("engine/mod.rs")), depth(Path::new("engine/reach.rs")), depth(Path::new("pipeline.rs"))), (1, 2, 1));
}
