//! Running other programs: said before, checked after.

use std::io::{BufRead, BufReader, Write};
use std::path::Path;
use std::process::{Command, Stdio};

use anyhow::{Context, Result, bail};

use crate::place;
use crate::tally::Tally;

/// A command in the root of the checkout, without what the outer cargo put into the environment for this program
/// (it would name the wrong package, or the wrong cargo, to the inner one).
pub(crate) fn command(program: impl AsRef<Path>) -> Command {
    let mut command = Command::new(program.as_ref());
    command.current_dir(place::root());
    for (name, _) in std::env::vars_os() {
        let text = name.to_string_lossy();
        if text == "CARGO" || text.starts_with("CARGO_PKG_") || text.starts_with("CARGO_MANIFEST_") {
            command.env_remove(&name);
        }
    }
    command
}

/// The command as a person would type it.
pub(crate) fn shown(command: &Command) -> String {
    let program =
        Path::new(command.get_program()).file_name().unwrap_or_default().to_string_lossy().into_owned();
    command.get_args().fold(program, |line, argument| line + " " + &argument.to_string_lossy())
}

/// Runs a command with its output going straight to ours.
pub(crate) fn run(command: &mut Command) -> Result<()> {
    let line = shown(command);
    println!("  $ {line}");
    let status = command.status().with_context(|| format!("`{line}` could not be started"))?;
    if !status.success() {
        bail!("`{line}` ended with {status}");
    }
    Ok(())
}

/// Runs a command and gives what it printed; `None` when it cannot be started or fails.
pub(crate) fn ask(command: &mut Command) -> Option<String> {
    let output = command.stdin(Stdio::null()).stderr(Stdio::null()).output().ok()?;
    output.status.success().then(|| String::from_utf8_lossy(&output.stdout).into_owned())
}

/// Runs a test runner, passing its output on, and adds its summaries to the tally.
///
/// A runner that ran no test, or left some out, fails: a green line must mean that something was checked.
pub(crate) fn run_tests(command: &mut Command, tally: &mut Tally) -> Result<()> {
    let line = shown(command);
    println!("  $ {line}");
    let mut child =
        command.stdout(Stdio::piped()).spawn().with_context(|| format!("`{line}` could not be started"))?;
    let mut seen = Tally::default();
    if let Some(output) = child.stdout.take() {
        let mut lines = BufReader::new(output);
        let mut bytes = Vec::new();
        while lines.read_until(b'\n', &mut bytes)? > 0 {
            std::io::stdout().write_all(&bytes)?;
            seen.read(&String::from_utf8_lossy(&bytes));
            bytes.clear();
        }
    }
    let status = child.wait()?;
    tally.add(seen);
    if !status.success() {
        bail!("`{line}` ended with {status}");
    }
    if seen.passed == 0 {
        bail!("`{line}` ran no test");
    }
    if seen.ignored > 0 {
        bail!("`{line}` left {} tests out; this repository has no ignored tests", seen.ignored);
    }
    Ok(())
}
