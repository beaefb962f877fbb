//! `cargo xtask bench`: how long the solver takes, and how long a person waits after a keystroke.

use anyhow::{Result, bail};

use crate::checks::browser_tests;
use crate::{oracle, page, place, run, tools};

/// The benches that are none of cargo's: they time the page.
const OF_THE_PAGE: [(&str, &str); 5] = [
    ("typing", "typing to new result, in Chromium with the CPU throttled 6 times"),
    ("lighthouse", "Lighthouse's judgement, and a second visit without a network, times 6"),
    ("seen", "a diagnosis, in a worker of Chromium, times 6"),
    ("rungs", "a ladder from twelve lamps, in a worker of Chromium, times 6"),
    ("replay", "the first seconds worked out and replayed, in Chromium with the CPU throttled 6 times"),
];

pub(crate) fn bench(arguments: &[String]) -> Result<()> {
    let native = place::rust_files("tests/benches")?;
    let of_the_page = |name: &str| OF_THE_PAGE.iter().any(|(known, _)| *known == name);
    if let Some(other) = arguments.iter().find(|name| !of_the_page(name) && !native.contains(name)) {
        let known: Vec<&str> =
            native.iter().map(String::as_str).chain(OF_THE_PAGE.map(|(name, _)| name)).collect();
        bail!("there is no bench `{other}`; there are: {}", known.join(", "));
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
    let mut folder = None;
    for (name, what) in OF_THE_PAGE.into_iter().filter(|(name, _)| wanted(name)) {
        println!("== {name}: {what}");
        let folder = match &folder {
            Some(folder) => folder,
            None => folder.insert(page::build()?),
        };
        let mut command = run::command("cargo");
        browser_tests(&mut command, folder)?;
        if name == "lighthouse" {
            command
                .env("LAMPLADDER_LIGHTHOUSE", tools::lighthouse()?)
                .env("CHROME_PATH", tools::Browser::ensure()?.chromium);
        }
        run::run(command.args(["run", "--quiet", "-p", "lampladder-tests", "--example", name]))?;
    }
    Ok(())
}
