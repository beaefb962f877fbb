//! The release page: built by Trunk, copied to where a host wants it.

use std::fs;
use std::path::{Path, PathBuf};

use anyhow::{Context, Result, bail};

use xtask::{files, stamp, words};

use crate::{place, run, tools};

/// Builds the release page and gives its folder.
pub(crate) fn build() -> Result<PathBuf> {
    let builders = tools::Builders::ensure()?;
    run::run(builders.trunk(true)?.args(["build", "--release", "--offline", "--skip-version-check"]))?;
    let dist = place::dist();
    if !dist.join("index.html").is_file() {
        bail!("Trunk ended well, but wrote no {}", dist.join("index.html").display());
    }
    Ok(dist)
}

/// `cargo xtask trunk …`: Trunk with our tools and compiler, for work on the page (`serve` rebuilds as you save).
pub(crate) fn trunk(arguments: &[String]) -> Result<()> {
    let release = arguments.iter().any(|word| word == "--release" || word == "--release=true");
    let mut command = tools::Builders::ensure()?.trunk(release)?;
    command.args(arguments);
    if arguments.first().is_some_and(|name| ["build", "serve", "watch"].contains(&name.as_str())) {
        command.args(["--offline", "--skip-version-check"]);
    }
    run::run(&mut command)
}

/// `cargo xtask dist [DIR]`: the page as one folder for any static host.
pub(crate) fn dist(arguments: &[String]) -> Result<()> {
    let built = match arguments {
        [] => build()?,
        [folder] if !folder.starts_with('-') => {
            let to = PathBuf::from(folder);
            refuse_foreign(&to)?;
            let built = build()?;
            if to.exists() && to.canonicalize()? == built.canonicalize()? {
                built
            } else {
                replace(&built, &to)?;
                to
            }
        }
        _ => bail!("usage: cargo xtask dist [DIR]"),
    };
    println!("{} is ready: put its contents anywhere on a static host, at any path", built.display());
    Ok(())
}

/// The folder may be new, empty, or an earlier build; anything else is somebody's and is left alone.
fn refuse_foreign(folder: &Path) -> Result<()> {
    if !folder.exists() {
        return Ok(());
    }
    let empty =
        fs::read_dir(folder).with_context(|| format!("{} is no folder", folder.display()))?.next().is_none();
    let ours = fs::read_to_string(folder.join("sw.js")).is_ok_and(|text| text.contains("Lampladder"));
    if empty || ours {
        return Ok(());
    }
    bail!("{} holds other files; name a new or empty folder", folder.display())
}

fn replace(from: &Path, to: &Path) -> Result<()> {
    if to.exists() {
        fs::remove_dir_all(to)?;
    }
    for (name, file) in files::below(from)? {
        let target = to.join(&name);
        if let Some(folder) = target.parent() {
            fs::create_dir_all(folder)?;
        }
        fs::copy(&file, &target).with_context(|| format!("{} cannot be written", target.display()))?;
    }
    Ok(())
}

/// `xtask stamp`, called by Trunk between building and publishing.
pub(crate) fn stamp(arguments: &[String]) -> Result<()> {
    let folder = match arguments {
        [] => place::set("TRUNK_STAGING_DIR")
            .context("`stamp` is called by Trunk; to use it by hand, name a folder")?,
        [folder] => folder.clone(),
        _ => bail!("usage: xtask stamp [DIR]"),
    };
    let sources = stamp::Sources::of(&place::root())?;
    // A folder named by hand is a release that was built elsewhere.
    let light = place::set("TRUNK_PROFILE").is_none_or(|profile| profile == "release");
    words::publish(Path::new(&folder), &place::root().join("web/words"))?;
    let count = stamp::finish(Path::new(&folder), &sources, light)?;
    println!("  stamped the service worker with {count} files");
    Ok(())
}
