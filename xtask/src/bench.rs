//! `cargo xtask bench`: how long the solver takes, and how long a person waits after a keystroke.

use anyhow::{Result, bail};

use crate::checks::browser_tests;
use crate::{oracle, page, place, run};

/// The bench that is none of cargo's: it times the page.
const TYPING: &str = "typing";

pub(crate) fn bench(arguments: &[String]) -> Result<()> {
    let native = place::rust_files("tests/benches")?;
    if let Some(other) = arguments.iter().find(|name| *name != TYPING && !native.contains(name)) {
        bail!("there is no bench `{other}`; there are: {}, {TYPING}", native.join(", "));
    }
    let wanted = |name: &str| arguments.is_empty() || arguments.iter().any(|given| given == name);
    for name in native.iter().filter(|name| wanted(name)) {
        println!("== {name}, native");
        let mut command = run::command("cargo");
        // A bench may set the time of a scipy script beside ours; the script runs where it can.
        match oracle::python() {
            Ok(python) => {
                command.env("LAMPLADDER_PYTHON", python);
            }
            Err(stop) => println!("  without Python: {stop:#}"),
        }
        run::run(command.args(["bench", "--quiet", "-p", "lampladder-tests", "--bench", name]))?;
    }
    if wanted(TYPING) {
        println!("== typing to new result, in Chromium with the CPU throttled 6 times");
        let folder = page::build()?;
        let mut command = run::command("cargo");
        browser_tests(&mut command, &folder)?;
        run::run(command.args(["run", "--quiet", "-p", "lampladder-tests", "--example", "typing"]))?;
    }
    Ok(())
}
