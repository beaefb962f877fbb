//! `cargo xtask test`: every check, in the order of how soon each can fail.

use std::path::{Path, PathBuf};
use std::process::{Command, ExitCode};
use std::time::Instant;

use anyhow::{Context, Result, bail};

use crate::tally::Tally;
use crate::target::{self, Route};
use crate::{page, place, run, size, tools};

type Check = fn(&mut Run) -> Result<()>;

struct Stage {
    name: &'static str,
    what: &'static str,
    check: Check,
}

const STAGES: [Stage; 11] = [
    Stage { name: "format", what: "rustfmt leaves every file as it is", check: format },
    Stage { name: "house", what: "the repository's own rules, and xtask's tests", check: house },
    Stage { name: "clippy", what: "clippy finds nothing in any crate, natively", check: clippy },
    Stage {
        name: "clippy-web",
        what: "clippy finds nothing in the page, for WebAssembly",
        check: clippy_web,
    },
    Stage { name: "core", what: "unit, property and documentation tests of the core", check: core },
    Stage {
        name: "reference",
        what: "the core against published tables and golden answers",
        check: reference,
    },
    Stage { name: "bare", what: "the core builds where there is no operating system", check: bare },
    Stage { name: "web", what: "tests of the page's state and words, natively", check: web },
    Stage { name: "browser", what: "tests of the page's parts in headless Chromium", check: browser },
    Stage { name: "e2e", what: "the release page, driven in Chromium as a person would", check: e2e },
    Stage { name: "size", what: "what a first load weighs, a report", check: weigh },
];

/// What the stages of one run share.
#[derive(Default)]
struct Run {
    tally: Tally,
    /// The release page, once a stage has needed it.
    page: Option<PathBuf>,
}

impl Run {
    fn page(&mut self) -> Result<PathBuf> {
        match &self.page {
            Some(folder) => Ok(folder.clone()),
            None => Ok(self.page.insert(page::build()?).clone()),
        }
    }

    fn tests(&mut self, command: &mut Command) -> Result<()> {
        run::run_tests(command, &mut self.tally)
    }
}

pub(crate) fn test(arguments: &[String]) -> Result<ExitCode> {
    if arguments.iter().any(|word| word == "--list") {
        for stage in &STAGES {
            println!("{:<11} {}", stage.name, stage.what);
        }
        return Ok(ExitCode::SUCCESS);
    }
    if let Some(other) = arguments.iter().find(|word| STAGES.iter().all(|stage| stage.name != **word)) {
        bail!("there is no stage `{other}`; `cargo xtask test --list` names them");
    }
    let start = Instant::now();
    let mut run = Run::default();
    let mut times = Vec::new();
    let mut stopped = None;
    for stage in
        STAGES.iter().filter(|stage| arguments.is_empty() || arguments.iter().any(|name| name == stage.name))
    {
        println!("\n== {}: {}", stage.name, stage.what);
        let began = Instant::now();
        let outcome = (stage.check)(&mut run);
        times.push(format!("{} {:.1} s", stage.name, began.elapsed().as_secs_f64()));
        println!("== {} took {:.1} s", stage.name, began.elapsed().as_secs_f64());
        if let Err(stop) = outcome {
            // A check that is no test runner (a formatter, a compiler) has still failed one thing.
            run.tally.failed = run.tally.failed.max(1);
            stopped = Some(stop.context(format!("stage `{}` failed", stage.name)));
            break;
        }
    }
    println!("\n{}; {:.1} s in all", times.join(", "), start.elapsed().as_secs_f64());
    if let Some(stop) = &stopped {
        println!("{stop:#}");
    }
    let Tally { passed, failed, ignored } = run.tally;
    let word = if stopped.is_none() { "ok" } else { "FAILED" };
    println!(
        "test result: {word}. {passed} passed; {failed} failed; {ignored} ignored; all runners together"
    );
    println!("{passed} passed, {failed} failed");
    Ok(if stopped.is_none() { ExitCode::SUCCESS } else { ExitCode::FAILURE })
}

fn cargo(arguments: &[&str]) -> Command {
    let mut command = run::command("cargo");
    command.args(arguments);
    command
}

fn format(_: &mut Run) -> Result<()> {
    component("rustfmt", "fmt")?;
    run::run(&mut cargo(&["fmt", "--all", "--check"]))
}

fn house(run: &mut Run) -> Result<()> {
    run.tests(&mut cargo(&["test", "--quiet", "--no-fail-fast", "-p", "xtask"]))
}

fn clippy(_: &mut Run) -> Result<()> {
    component("clippy", "clippy")?;
    run::run(&mut cargo(&["clippy", "--quiet", "--workspace", "--all-targets", "--", "-D", "warnings"]))
}

fn clippy_web(_: &mut Run) -> Result<()> {
    let route = target::ensure(target::WASM)?;
    if route == Route::Debian {
        println!(
            "  Debian's compiler comes without clippy: the page was checked natively in the stage before"
        );
        return Ok(());
    }
    let arguments = ["clippy", "--quiet", "-p", "lampladder-web", "--all-targets", "--target", target::WASM];
    run::run(route.cargo(target::WASM).args(arguments).args(["--", "-D", "warnings"]))
}

/// Rustup's minimal profile leaves formatter and linter out.
fn component(name: &str, subcommand: &str) -> Result<()> {
    if run::ask(cargo(&[subcommand, "--version"]).env("RUSTUP_AUTO_INSTALL", "0")).is_some() {
        return Ok(());
    }
    println!("set-up: rustup component add {name}");
    run::run(run::command("rustup").args(["component", "add", name]))
        .with_context(|| format!("missing: {name}. Install it for the compiler on PATH"))
}

fn core(run: &mut Run) -> Result<()> {
    run.tests(&mut cargo(&["test", "--quiet", "--no-fail-fast", "-p", "lampladder-core"]))
}

fn reference(run: &mut Run) -> Result<()> {
    let mut command = cargo(&["test", "--quiet", "--no-fail-fast", "-p", "lampladder-tests", "--lib"]);
    for name in test_files()?.iter().filter(|name| !name.starts_with("e2e")) {
        command.args(["--test", name]);
    }
    run.tests(&mut command)
}

/// The names of the files in tests/tests.
fn test_files() -> Result<Vec<String>> {
    place::rust_files("tests/tests")
}

fn bare(_: &mut Run) -> Result<()> {
    let route = target::ensure(target::BARE)?;
    run::run(route.cargo(target::BARE).args([
        "build",
        "--quiet",
        "-p",
        "lampladder-core",
        "--target",
        target::BARE,
    ]))
}

fn web(run: &mut Run) -> Result<()> {
    run.tests(&mut cargo(&["test", "--quiet", "-p", "lampladder-web", "--lib", "--test", "*"]))
}

fn browser(run: &mut Run) -> Result<()> {
    let runner = tools::bindgen("wasm-bindgen-test-runner")?;
    let browser = tools::Browser::ensure()?;
    let mut command = target::ensure(target::WASM)?.cargo(target::WASM);
    browser.apply(&mut command);
    command
        .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_RUNNER", runner)
        // Names and lines of source make these files ten times as large, and wasm-bindgen that much slower.
        .env("CARGO_PROFILE_TEST_DEBUG", "0")
        .env("CARGO_PROFILE_DEV_DEBUG", "0")
        // Not --quiet: cargo hands it on to the runner, which does not know it. The unit tests of the page have run
        // natively in the stage before; here are the files of web/tests.
        .args(["test", "--no-fail-fast", "-p", "lampladder-web", "--target", target::WASM, "--test", "*"]);
    run.tests(&mut command)
}

/// Gives a command what the end-to-end tests need to know.
pub(crate) fn browser_tests(command: &mut Command, page: &Path) -> Result<()> {
    tools::Browser::ensure()?.apply(command);
    command.env("LAMPLADDER_DIST", page).env("LAMPLADDER_AXE", tools::axe()?);
    Ok(())
}

fn e2e(run: &mut Run) -> Result<()> {
    let mut command = cargo(&["test", "--quiet", "--no-fail-fast", "-p", "lampladder-tests"]);
    browser_tests(&mut command, &run.page()?)?;
    for name in test_files()?.iter().filter(|name| name.starts_with("e2e")) {
        command.args(["--test", name]);
    }
    // Each test has a browser of its own; more than two at a time only wait for each other on a small machine.
    run.tests(command.args(["--", "--test-threads=2"]))
}

fn weigh(run: &mut Run) -> Result<()> {
    // A report: what is over the budget is said, and `cargo xtask size` fails on it. It hides no other failure here.
    let over = size::report(&run.page()?)?;
    if over > 0 {
        println!("OVER THE BUDGET by {over} bytes gzipped");
    }
    Ok(())
}
