//! The repository's own rules, checked as ordinary tests.

use std::path::{Path, PathBuf};
use std::process::Command;

fn root() -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).parent().expect("xtask lies in the workspace").to_path_buf()
}

fn ask(program: &str, arguments: &[&str]) -> String {
    let output = Command::new(program).args(arguments).current_dir(root()).output();
    let output = output.unwrap_or_else(|error| panic!("{program} cannot be started: {error}"));
    assert!(output.status.success(), "{program} {arguments:?}: {}", String::from_utf8_lossy(&output.stderr));
    String::from_utf8_lossy(&output.stdout).into_owned()
}

/// Names and texts of the files that are, or would be, committed.
fn texts() -> Vec<(String, String)> {
    let list = ask("git", &["ls-files", "--cached", "--others", "--exclude-standard"]);
    let read = |name: &str| Some((name.to_owned(), std::fs::read_to_string(root().join(name)).ok()?));
    let texts: Vec<_> = list.lines().filter_map(read).collect();
    assert!(texts.iter().any(|(name, _)| name == "xtask/tests/house.rs"), "git lists not even this file");
    texts
}

fn modules() -> Vec<(String, String)> {
    let rust = |name: &str| Path::new(name).extension().is_some_and(|suffix| suffix == "rs");
    texts().into_iter().filter(|(name, _)| rust(name)).collect()
}

fn expect_none(offences: &[String]) {
    assert!(offences.is_empty(), "\n{}", offences.join("\n"));
}

fn metadata() -> serde_json::Value {
    serde_json::from_str(&ask("cargo", &["metadata", "--format-version", "1", "--locked"])).expect("JSON")
}

/// Dependencies under another licence that only ever run on a developer's machine: (name, licence, what for).
const NOT_SHIPPED: [(&str, &str, &str); 1] =
    [("webdriver", "MPL-2.0", "types of the protocol that drives Chromium")];

#[test]
fn every_dependency_has_a_licence_that_ours_can_live_with() {
    let metadata = metadata();
    let packages = metadata["packages"].as_array().expect("a list of packages");
    assert!(packages.len() > 10, "cargo names hardly any package");
    let excepted = |package: &serde_json::Value| {
        NOT_SHIPPED
            .iter()
            .any(|(name, licence, _)| package["name"] == *name && package["license"] == *licence)
    };
    let offences: Vec<_> = packages
        .iter()
        .filter(|package| !allowed(package["license"].as_str().unwrap_or("none")) && !excepted(package))
        .map(|package| format!("{} {}: licence {}", package["name"], package["version"], package["license"]))
        .collect();
    expect_none(&offences);
}

#[test]
fn what_only_developers_may_use_is_not_in_the_page() {
    // Without the dependencies of tests and build scripts: what is left is linked into the page.
    let shipped =
        ask("cargo", &["tree", "-p", "lampladder-web", "--edges", "normal", "--prefix", "none", "--locked"]);
    assert!(shipped.lines().any(|line| line.starts_with("yew ")), "cargo lists not even Yew");
    for (name, licence, purpose) in NOT_SHIPPED {
        let found = shipped.lines().any(|line| line.split(' ').next() == Some(name));
        assert!(!found, "{name} ({licence}) is for {purpose}, but the page depends on it");
    }
}

/// Permissive licences; whoever ships the page need only name them.
const ALLOWED: [&str; 10] = [
    "MIT",
    "Apache-2.0",
    "Apache-2.0 WITH LLVM-exception",
    "BSD-2-Clause",
    "BSD-3-Clause",
    "ISC",
    "Zlib",
    "Unicode-3.0",
    "Unlicense",
    "CC0-1.0",
];

/// Reads an SPDX expression: one allowed licence of an OR is enough, an AND needs all.
fn allowed(expression: &str) -> bool {
    let text = expression.replace('/', " OR ");
    // AND binds more tightly; parentheses, in the registry, only ever group an OR inside an AND.
    if let Some((before, rest)) = text.split_once('(')
        && let Some((inside, after)) = rest.split_once(')')
    {
        let simple = if allowed(inside) { ALLOWED[0] } else { "no" };
        return allowed(&format!("{before}{simple}{after}"));
    }
    text.split(" OR ").any(|all| all.split(" AND ").all(|one| ALLOWED.contains(&one.trim())))
}

#[test]
fn licence_expressions_are_read_as_their_standard_says() {
    for fine in ["MIT", "MIT/Apache-2.0", "GPL-3.0 OR MIT", "(MIT OR GPL-3.0) AND Unicode-3.0"] {
        assert!(allowed(fine), "{fine}");
    }
    for not in ["GPL-3.0", "MIT AND GPL-3.0", "none", "", "(GPL-3.0 OR AGPL-3.0) AND MIT"] {
        assert!(!allowed(not), "{not}");
    }
}

#[test]
fn every_module_says_what_it_is() {
    let silent = |text: &str| {
        // An inner attribute may stand first.
        let first = text.lines().find(|line| !line.trim().is_empty() && !line.starts_with("#!["));
        !first.is_some_and(|line| line.starts_with("//! "))
    };
    let offences: Vec<_> = modules()
        .iter()
        .filter(|(_, text)| silent(text))
        .map(|(name, _)| format!("{name} has no `//!` line"))
        .collect();
    expect_none(&offences);
}

#[test]
fn no_module_is_longer_than_a_person_reads() {
    const LINES: usize = 450;
    let offences: Vec<_> = modules()
        .iter()
        .map(|(name, text)| (name, text.lines().count()))
        .filter(|(_, lines)| *lines > LINES)
        .map(|(name, lines)| format!("{name} has {lines} lines, more than {LINES}"))
        .collect();
    expect_none(&offences);
}

#[test]
fn no_test_is_left_out_and_no_lint_waved_through() {
    // Put together here, so that this file does not find itself.
    let ignored = concat!("#[", "ignore");
    let allowed = concat!("#[", "allow(");
    let offences: Vec<_> = modules()
        .iter()
        .flat_map(|(name, text)| text.lines().enumerate().map(move |(index, line)| (name, index + 1, line)))
        .filter(|(_, _, line)| line.contains(ignored) || line.contains(allowed))
        .map(|(name, number, line)| format!("{name}:{number}: {}", line.trim()))
        .collect();
    expect_none(&offences);
}

#[test]
fn nothing_names_the_machine_that_it_was_written_on() {
    let folders = ["/root", "/home", "/work", "/Users", "/shared"].map(|folder| format!("{folder}/"));
    let offences: Vec<_> = texts()
        .iter()
        .filter(|(name, _)| name != "xtask/tests/house.rs")
        .flat_map(|(name, text)| text.lines().enumerate().map(move |(index, line)| (name, index + 1, line)))
        .filter(|(_, _, line)| folders.iter().any(|folder| line.contains(folder.as_str())))
        .map(|(name, number, line)| format!("{name}:{number}: {}", line.trim()))
        .collect();
    expect_none(&offences);
}
