//! `cargo xtask oracle`: the golden answers, computed afresh by the independent Python scripts.

use std::path::PathBuf;

use anyhow::{Context, Result, bail};

use crate::{place, run};

pub(crate) fn regenerate(arguments: &[String]) -> Result<()> {
    let python = python()?;
    let folder = place::root().join("tests/oracle");
    let mut scripts: Vec<PathBuf> = std::fs::read_dir(&folder)
        .with_context(|| format!("{} cannot be read", folder.display()))?
        .filter_map(|entry| Some(entry.ok()?.path()))
        .filter(|path| path.extension().is_some_and(|suffix| suffix == "py"))
        // With names given, only those scripts.
        .filter(|path| {
            arguments.is_empty() || arguments.iter().any(|name| path.file_stem() == Some(name.as_ref()))
        })
        .collect();
    scripts.sort();
    if scripts.is_empty() {
        bail!("tests/oracle has no such script");
    }
    for script in scripts {
        run::run(run::command(&python).arg(script))?;
    }
    println!("done; `git diff --stat tests` shows what changed");
    Ok(())
}

/// Python with the packages of tests/oracle/requirements.txt, in a folder of the cache named by their versions.
pub(crate) fn python() -> Result<PathBuf> {
    let list = place::root().join("tests/oracle/requirements.txt");
    let wanted =
        std::fs::read_to_string(&list).with_context(|| format!("{} cannot be read", list.display()))?;
    let packages: Vec<&str> = wanted.lines().map(str::trim).filter(|line| line.contains("==")).collect();
    if packages.is_empty() {
        bail!("{} pins no package", list.display());
    }
    let folder = place::cache()?.join(format!("python-{}", packages.join("-").replace("==", "-")));
    let python = folder.join("bin").join("python");
    let ready = folder.join("ready");
    if ready.is_file() && python.exists() {
        return Ok(python);
    }
    println!("set-up: Python with {} by pip", packages.join(", "));
    let system = place::on_path("python3").context("missing: python3. Install Python 3.11 or newer")?;
    run::run(run::command(system).args(["-m", "venv", "--clear"]).arg(&folder))
        .context("missing: Python's venv module (Debian's python3-venv)")?;
    run::run(run::command(&python).args(["-m", "pip", "install", "--quiet", "--requirement"]).arg(&list))?;
    std::fs::write(ready, wanted)?;
    Ok(python)
}
