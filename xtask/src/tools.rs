//! The tools beside the compiler, each at one version: used from PATH if it is that version, else from the cache,
//! else installed into the cache through its registry's ordinary client.

use std::path::{Path, PathBuf};
use std::process::Command;

use anyhow::{Context, Result, bail};

use crate::{place, run, target};

const TRUNK: &str = "0.21.14";
const BINARYEN: &str = "132.0.0";
const AXE: &str = "4.14.1";
/// Version 13 wants a newer Node.js than Debian has.
const LIGHTHOUSE: &str = "12.8.2";

/// What builds the page: the folders to put first on PATH.
pub(crate) struct Builders {
    trunk: PathBuf,
    folders: Vec<PathBuf>,
}

impl Builders {
    pub(crate) fn ensure() -> Result<Self> {
        let trunk = crate_tool("trunk", "trunk", TRUNK)?;
        let folders = [trunk.clone(), bindgen("wasm-bindgen")?, wasm_opt()?]
            .iter()
            .filter_map(|program| program.parent().map(Path::to_path_buf))
            .collect();
        Ok(Self { trunk, folders })
    }

    /// Trunk with its helpers on PATH, told to fetch none of them itself, and this very program for its hook.
    ///
    /// A release build gets the small standard library; any other tells what a panic was about.
    pub(crate) fn trunk(&self, release: bool) -> Result<Command> {
        let route = target::ensure(target::WASM)?;
        let library = if release { route.lightest() } else { target::Library::Usual };
        route.fetch(target::WASM, library)?;
        let mut command = run::command(&self.trunk);
        route.apply(&mut command, target::WASM, library);
        let outer = command
            .get_envs()
            .find_map(|(name, value)| (name == "PATH").then(|| value.map(ToOwned::to_owned)).flatten())
            .or_else(|| std::env::var_os("PATH"))
            .unwrap_or_default();
        let own = std::env::current_exe()?;
        let folders = own.parent().map(Path::to_path_buf).into_iter().chain(self.folders.iter().cloned());
        // Debian's route has put /usr/bin first; it must stay before rustup's cargo, and comes after these folders,
        // which hold no cargo.
        let path = std::env::join_paths(folders.chain(std::env::split_paths(&outer)))?;
        // Trunk's own stack is of no use to anybody here, and hides the compiler's message.
        command.env("PATH", path).env("RUST_BACKTRACE", "0");
        // Trunk reads NO_COLOR as a boolean and refuses the usual value 1.
        command.env_remove("NO_COLOR");
        Ok(command)
    }
}

/// wasm-bindgen, or its test runner, at the very version in Cargo.lock: the two halves speak a private format.
pub(crate) fn bindgen(program: &str) -> Result<PathBuf> {
    crate_tool("wasm-bindgen-cli", program, &locked_version("wasm-bindgen")?)
}

/// The version of a package in Cargo.lock.
fn locked_version(package: &str) -> Result<String> {
    let lock =
        std::fs::read_to_string(place::root().join("Cargo.lock")).context("Cargo.lock cannot be read")?;
    let heading = format!("name = \"{package}\"");
    let mut lines = lock.lines().skip_while(|line| *line != heading);
    lines
        .nth(1)
        .and_then(|line| line.strip_prefix("version = \"")?.strip_suffix('"'))
        .map(ToOwned::to_owned)
        .with_context(|| format!("Cargo.lock names no version of {package}"))
}

/// Whether a program says that it has this version (`trunk 0.21.14`, `wasm-opt version 132 (…)`).
fn has_version(program: &Path, version: &str) -> bool {
    run::ask(run::command(program).arg("--version"))
        .is_some_and(|said| said.split_whitespace().any(|word| word == version))
}

/// A program from a crate, by `cargo install`.
fn crate_tool(package: &str, program: &str, version: &str) -> Result<PathBuf> {
    if let Some(found) = place::on_path(program).filter(|found| has_version(found, version)) {
        return Ok(found);
    }
    let folder = place::cache()?.join(format!("{package}-{version}"));
    let file = folder.join("bin").join(program);
    if file.is_file() {
        return Ok(file);
    }
    println!("set-up: {package} {version} by cargo install (some minutes, once)");
    let mut install = run::command("cargo");
    // An unoptimised build takes a third of the time and does the same job; the default features would only add
    // the downloads and updates that are not wanted here.
    install
        .env("CARGO_PROFILE_DEV_DEBUG", "0")
        .env_remove("CARGO_TARGET_DIR")
        .args(["install", package, "--version", version, "--debug", "--force", "--root"])
        .arg(&folder);
    if package == "trunk" {
        install.args(["--locked", "--no-default-features"]);
    }
    run::run(&mut install)
        .with_context(|| format!("missing: {package} {version}. Install it by hand, on PATH"))?;
    if !file.is_file() {
        bail!("cargo installed {package}, but there is no {program} in it");
    }
    Ok(file)
}

/// A package of npm in the cache; gives its folder.
fn npm_package(package: &str, version: &str) -> Result<PathBuf> {
    let folder = place::cache()?.join(format!("{package}-{version}"));
    let inside = folder.join("node_modules").join(package);
    if inside.join("package.json").is_file() {
        return Ok(inside);
    }
    if place::on_path("npm").is_none() {
        bail!("missing: npm, to install {package} {version}. Install Node.js with npm");
    }
    println!("set-up: {package} {version} by npm");
    std::fs::create_dir_all(&folder)?;
    let wanted = format!("{package}@{version}");
    run::run(
        run::command("npm")
            .args(["install", "--no-save", "--no-audit", "--no-fund", "--ignore-scripts", "--prefix"])
            .arg(&folder)
            .arg(wanted),
    )?;
    Ok(inside)
}

fn wasm_opt() -> Result<PathBuf> {
    let (major, _) = BINARYEN.split_once('.').unwrap_or((BINARYEN, ""));
    if let Some(found) = place::on_path("wasm-opt").filter(|found| has_version(found, major)) {
        return Ok(found);
    }
    // Trunk looks for the program by name, so it is the link in .bin that counts.
    let inside = npm_package("binaryen", BINARYEN)?;
    let file = inside.join("..").join(".bin").join("wasm-opt");
    if !has_version(&file, major) {
        bail!(
            "missing: wasm-opt {major}. npm installed {}, but it does not run (is `node` on PATH?)",
            file.display()
        );
    }
    Ok(file)
}

/// The accessibility checker that the end-to-end tests put into the page.
pub(crate) fn axe() -> Result<PathBuf> {
    Ok(npm_package("axe-core", AXE)?.join("axe.min.js"))
}

/// Lighthouse's own program, for `node`.
pub(crate) fn lighthouse() -> Result<PathBuf> {
    Ok(npm_package("lighthouse", LIGHTHOUSE)?.join("cli").join("index.js"))
}

/// A browser and its driver.
pub(crate) struct Browser {
    pub(crate) chromium: PathBuf,
    pub(crate) driver: PathBuf,
}

impl Browser {
    pub(crate) fn ensure() -> Result<Self> {
        if let Some(found) = Self::find() {
            return Ok(found);
        }
        println!("set-up: Chromium and ChromeDriver");
        target::install_packages(&["chromium", "chromium-driver"])?;
        Self::find().context("missing: Chromium or chromedriver, on PATH or named by CHROME and CHROMEDRIVER")
    }

    fn find() -> Option<Self> {
        let chromium = place::set("CHROME").map(PathBuf::from).or_else(|| {
            ["chromium", "chromium-browser", "google-chrome", "google-chrome-stable", "chrome"]
                .iter()
                .find_map(|name| place::on_path(name))
        })?;
        let driver =
            place::set("CHROMEDRIVER").map(PathBuf::from).or_else(|| place::on_path("chromedriver"))?;
        Some(Self { chromium, driver })
    }

    /// Tells the tests where the browser is.
    pub(crate) fn apply(&self, command: &mut Command) {
        command.env("CHROME", &self.chromium).env("CHROMEDRIVER", &self.driver);
    }
}
