//! `cargo xtask bench`: how long the solver takes, and how long a person waits after a keystroke.

use anyhow::{Result, bail};

use crate::checks::browser_tests;
use crate::{oracle, page, run};

pub(crate) fn bench(arguments: &[String]) -> Result<()> {
    let known = ["solver", "typing"];
    if let Some(other) = arguments.iter().find(|name| !known.contains(&name.as_str())) {
        bail!("there is no bench `{other}`; there are: {}", known.join(", "));
    }
    let wanted = |name: &str| arguments.is_empty() || arguments.iter().any(|given| given == name);
    if wanted("solver") {
        println!("== solver, native");
        let mut command = run::command("cargo");
        // The table of the bench names the time of a scipy script beside ours; the script runs where it can.
        match oracle::python() {
            Ok(python) => {
                command.env("LAMPLADDER_PYTHON", python);
            }
            Err(stop) => println!("  without Python: {stop:#}"),
        }
        run::run(command.args(["bench", "-p", "lampladder-tests", "--bench", "solver"]))?;
    }
    if wanted("typing") {
        println!("== typing to new result, in Chromium with the CPU throttled 6 times");
        let folder = page::build()?;
        let mut command = run::command("cargo");
        browser_tests(&mut command, &folder)?;
        run::run(command.args(["run", "--quiet", "-p", "lampladder-tests", "--example", "typing"]))?;
    }
    Ok(())
}
