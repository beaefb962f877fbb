//! The compilers' targets: WebAssembly for the page, and bare metal to prove that the core needs no system.
//!
//! Two routes lead to each. The ordinary one is `rustup target add`. Where that download is refused, Debian carries
//! a complete compiler with the source of the standard library, and the standard library is built from it.

use std::path::Path;
use std::process::Command;

use anyhow::{Result, bail};

use crate::{place, run};

pub(crate) const WASM: &str = "wasm32-unknown-unknown";
/// Bare metal: there is no operating system and no standard library for it, so a core that builds uses neither.
pub(crate) const BARE: &str = "x86_64-unknown-none";

const PACKAGES: [&str; 4] = ["rustc-web", "cargo-web", "rust-web-src", "lld-19"];

/// How a target is reached.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Route {
    /// The compiler on PATH has the target's standard library.
    Installed,
    /// Debian's compiler builds the standard library first.
    Debian,
}

impl Route {
    /// Prepares a command to compile for `target` this way; `cargo` is then the right cargo.
    ///
    /// Each compiler has its own target folder, or the two would rebuild each other's work.
    pub(crate) fn apply(self, command: &mut Command, target: &str) {
        if self == Self::Installed {
            return;
        }
        let path = std::env::var_os("PATH").unwrap_or_default();
        let folders = std::iter::once("/usr/bin".into()).chain(std::env::split_paths(&path));
        if let Ok(path) = std::env::join_paths(folders) {
            command.env("PATH", path);
        }
        let libraries = if target == WASM { "std,panic_abort" } else { "core,alloc" };
        command
            // Set by rustup's proxies for the compiler that is not used here.
            .env_remove("LD_LIBRARY_PATH")
            .env_remove("RUSTUP_TOOLCHAIN")
            .env("RUSTC_BOOTSTRAP", "1")
            .env("CARGO_UNSTABLE_BUILD_STD", libraries)
            .env("CARGO_UNSTABLE_BUILD_STD_FEATURES", if target == WASM { "optimize_for_size" } else { "" })
            .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_LINKER", "wasm-ld-19")
            .env("CARGO_TARGET_DIR", place::root().join("target-debian"));
    }

    /// Downloads what a build for `target` will compile: Trunk, told to fetch no tools, lets cargo fetch nothing either.
    pub(crate) fn fetch(self, target: &str) -> Result<()> {
        run::run(self.cargo(target).args(["fetch", "--quiet", "--target", target]))
    }

    /// A cargo command for this route and target.
    pub(crate) fn cargo(self, target: &str) -> Command {
        let mut command = run::command(match self {
            Self::Installed => "cargo",
            Self::Debian => "/usr/bin/cargo",
        });
        self.apply(&mut command, target);
        command
    }
}

/// Makes sure that `target` can be compiled for, and says how.
pub(crate) fn ensure(target: &str) -> Result<Route> {
    let wish = place::set("LAMPLADDER_WASM_ROUTE");
    match wish.as_deref() {
        None => ordinary_then_debian(target),
        Some("rustup") if installed(target) || add_by_rustup(target) => Ok(Route::Installed),
        Some("rustup") => bail!("`rustup target add {target}` did not work, and no other way was allowed"),
        Some("debian") => debian(target),
        Some(other) => bail!("LAMPLADDER_WASM_ROUTE is `{other}`; it can be `rustup` or `debian`"),
    }
}

fn ordinary_then_debian(target: &str) -> Result<Route> {
    if installed(target) {
        return Ok(Route::Installed);
    }
    // Where rustup was refused once, later runs shall not ask again and wait for the same answer.
    let refused = place::cache()?.join(format!("rustup-refused-{target}"));
    if !(refused.exists() && debian_is_there()) {
        if add_by_rustup(target) {
            return Ok(Route::Installed);
        }
        println!("set-up: rustup could not add {target}; trying Debian's compiler");
    }
    let route = debian(target)?;
    if !refused.exists() {
        std::fs::create_dir_all(place::cache()?)?;
        std::fs::write(refused, "Remove this file to let `cargo xtask` ask rustup again.\n")?;
    }
    Ok(route)
}

/// Whether the compiler on PATH has the target's standard library (core at least), from wherever it came.
fn installed(target: &str) -> bool {
    let Some(folder) = run::ask(run::command("rustc").args(["--print", "target-libdir", "--target", target]))
    else {
        return false;
    };
    std::fs::read_dir(folder.trim()).is_ok_and(|files| {
        files.flatten().any(|file| file.file_name().to_string_lossy().starts_with("libcore-"))
    })
}

fn add_by_rustup(target: &str) -> bool {
    println!("set-up: rustup target add {target}");
    run::command("rustup").args(["target", "add", target]).status().is_ok_and(|status| status.success())
        && installed(target)
}

fn debian_is_there() -> bool {
    let source = run::ask(Command::new("/usr/bin/rustc").args(["--print", "sysroot"]))
        .map(|sysroot| Path::new(sysroot.trim()).join("lib/rustlib/src/rust/library/core"));
    Path::new("/usr/bin/cargo").exists()
        && Path::new("/usr/bin/wasm-ld-19").exists()
        && source.is_some_and(|folder| folder.exists())
}

fn debian(target: &str) -> Result<Route> {
    if !debian_is_there() {
        println!("set-up: Debian's compiler for {target} ({})", PACKAGES.join(", "));
        install_packages(&PACKAGES)?;
        if !debian_is_there() {
            bail!("{} were installed, but hold no compiler with its library source", PACKAGES.join(", "));
        }
    }
    println!("set-up: {target} by Debian's compiler, with the standard library built from source");
    Ok(Route::Debian)
}

/// Installs Debian's packages where that is possible without asking anybody.
pub(crate) fn install_packages(packages: &[&str]) -> Result<()> {
    let list = packages.join(" ");
    let root = run::ask(Command::new("id").arg("-u")).is_some_and(|id| id.trim() == "0");
    if place::on_path("apt-get").is_none() {
        bail!(
            "missing: {list} (Debian's names). Install them, or what your system calls them, and start again"
        );
    }
    if !root {
        bail!("missing: {list}. Install them with `sudo apt-get install --no-install-recommends {list}`");
    }
    // An old list names versions that the mirror no longer has, so the list comes first.
    run::run(run::command("apt-get").args(["update", "-qq"]))?;
    run::run(
        run::command("apt-get")
            .env("DEBIAN_FRONTEND", "noninteractive")
            .args(["install", "-y", "-qq", "--no-install-recommends"])
            .args(packages),
    )
}
