//! `cargo xtask oracle`: the golden answers, computed afresh by the independent Python scripts.

use std::path::PathBuf;

use anyhow::{Context, Result, bail};

use crate::{place, run};

/// Pinned, so that a golden file changes only when somebody wants it to.
const PACKAGES: [&str; 3] = ["numpy==2.4.6", "scipy==1.17.1", "uncertainties==3.2.3"];

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

/// Python with its packages, in a folder of the cache named by their versions.
pub(crate) fn python() -> Result<PathBuf> {
    let name = format!("python-{}", PACKAGES.join("-").replace("==", "-"));
    let folder = place::cache()?.join(name);
    let python = folder.join("bin").join("python");
    let ready = folder.join("ready");
    if ready.is_file() && python.exists() {
        return Ok(python);
    }
    println!("set-up: Python with {} by pip", PACKAGES.join(", "));
    let system = place::on_path("python3").context("missing: python3. Install Python 3.11 or newer")?;
    run::run(run::command(system).args(["-m", "venv", "--clear"]).arg(&folder))
        .context("missing: Python's venv module (Debian's python3-venv)")?;
    run::run(run::command(&python).args(["-m", "pip", "install", "--quiet"]).args(PACKAGES))?;
    std::fs::write(ready, PACKAGES.join("\n"))?;
    Ok(python)
}
