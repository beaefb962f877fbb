//! The compilers' targets: WebAssembly for the page, and bare metal to prove that the core needs no system.
//!
//! Two routes lead to each. The ordinary one is `rustup target add`. Where that download is refused, Debian carries
//! a complete compiler with the source of the standard library, and the standard library is built from it.
//!
//! The release page is lighter by a tenth with a standard library that is built for it: for size, and with panics
//! that stop at once instead of putting together a message that nobody would see. Its source comes by
//! `rustup component add rust-src`; without it the page does the same, and weighs more.

use std::path::Path;
use std::process::Command;

use anyhow::{Result, bail};

use crate::{place, run};

pub(crate) const WASM: &str = "wasm32-unknown-unknown";
/// Bare metal: there is no operating system and no standard library for it, so a core that builds uses neither.
pub(crate) const BARE: &str = "x86_64-unknown-none";

const DEBIAN_RUSTC: &str = "/usr/bin/rustc";
const PACKAGES: [&str; 4] = ["rustc-web", "cargo-web", "rust-web-src", "lld-19"];

/// What the compiler is told for the release page. Only a standard library from source can obey.
const STOP_AT_ONCE: &str = "-Zunstable-options -Cpanic=immediate-abort";

/// How a target is reached.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Route {
    /// The compiler on PATH has the target's standard library.
    Installed,
    /// Debian's compiler builds the standard library first.
    Debian,
}

/// The standard library that a build is linked with.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Library {
    /// As the route has it, with panics that tell what happened.
    Usual,
    /// Built for the release page.
    Small,
}

impl Route {
    /// Prepares a command to compile for `target` this way; `cargo` is then the right cargo.
    ///
    /// Each compiler has its own target folder, or the two would rebuild each other's work.
    pub(crate) fn apply(self, command: &mut Command, target: &str, library: Library) {
        if self == Self::Debian {
            let path = std::env::var_os("PATH").unwrap_or_default();
            let folders = std::iter::once("/usr/bin".into()).chain(std::env::split_paths(&path));
            if let Ok(path) = std::env::join_paths(folders) {
                command.env("PATH", path);
            }
            command
                // Set by rustup's proxies for the compiler that is not used here.
                .env_remove("LD_LIBRARY_PATH")
                .env_remove("RUSTUP_TOOLCHAIN")
                .env("CARGO_TARGET_WASM32_UNKNOWN_UNKNOWN_LINKER", "wasm-ld-19")
                .env("CARGO_TARGET_DIR", place::root().join("target-debian"));
        }
        if self == Self::Debian || library == Library::Small {
            command
                .env("RUSTC_BOOTSTRAP", "1")
                .env(
                    "CARGO_UNSTABLE_BUILD_STD",
                    if target == WASM { "std,panic_abort" } else { "core,alloc" },
                )
                .env(
                    "CARGO_UNSTABLE_BUILD_STD_FEATURES",
                    if target == WASM { "optimize_for_size" } else { "" },
                );
        }
        if library == Library::Small {
            let flags = std::env::var("RUSTFLAGS").unwrap_or_default();
            command.env("RUSTFLAGS", format!("{flags} {STOP_AT_ONCE}").trim());
            if self == Self::Installed {
                // A folder of its own: other builds would see another environment there, and start anew.
                command.env("CARGO_TARGET_DIR", place::root().join("target").join("page"));
            }
        }
    }

    /// The lightest standard library that this route can give the release page; fetches its source if need be.
    pub(crate) fn lightest(self) -> Library {
        let rustc = match self {
            Self::Installed => "rustc",
            Self::Debian => DEBIAN_RUSTC,
        };
        // Compilers before 1.92 know no such panics.
        let obeys = run::ask(
            run::command(rustc)
                .env("RUSTC_BOOTSTRAP", "1")
                .args(STOP_AT_ONCE.split(' '))
                .args(["--print", "cfg"]),
        );
        if obeys.is_none() {
            println!("set-up: this compiler is too old to build the page with the small standard library");
            return Library::Usual;
        }
        if !has_source(rustc) {
            println!("set-up: rustup component add rust-src");
            let added = run::command("rustup").args(["component", "add", "rust-src"]).status();
            if !(added.is_ok_and(|status| status.success()) && has_source(rustc)) {
                println!(
                    "set-up: no source of the standard library; the page will be a tenth heavier without"
                );
                return Library::Usual;
            }
        }
        Library::Small
    }

    /// Downloads what a build for `target` will compile: Trunk, told to fetch no tools, lets cargo fetch nothing either.
    /// That is more than what `target` names alone, for a standard library from source has needs of its own.
    pub(crate) fn fetch(self, target: &str, library: Library) -> Result<()> {
        let mut cargo = self.cargo(target);
        self.apply(&mut cargo, target, library);
        run::run(cargo.args(["fetch", "--quiet"]))
    }

    /// A cargo command for this route and target.
    pub(crate) fn cargo(self, target: &str) -> Command {
        let mut command = run::command(match self {
            Self::Installed => "cargo",
            Self::Debian => "/usr/bin/cargo",
        });
        self.apply(&mut command, target, Library::Usual);
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
    Path::new("/usr/bin/cargo").exists()
        && Path::new("/usr/bin/wasm-ld-19").exists()
        && has_source(DEBIAN_RUSTC)
}

/// Whether the source of a compiler's standard library is where cargo looks for it.
fn has_source(rustc: &str) -> bool {
    run::ask(run::command(rustc).args(["--print", "sysroot"]))
        .is_some_and(|sysroot| Path::new(sysroot.trim()).join("lib/rustlib/src/rust/library/core").exists())
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
