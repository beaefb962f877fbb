//! `cargo xtask …`: everything that is done to this repository, in one program.
//!
//! The set-up (compilers' targets, Trunk, wasm-bindgen, wasm-opt, a browser) is part of every command that needs
//! it, so that a fresh clone needs no other step. See DEVELOPERS.md, "Commands".
#![forbid(unsafe_code)]

mod bench;
mod checks;
mod oracle;
mod page;
mod place;
mod run;
mod serve;
mod size;
mod tally;
mod target;
mod tools;

use std::process::ExitCode;

const HELP: &str = "\
cargo xtask COMMAND

  serve [--open] [--port N]   build the release page and serve it on this machine
  test [STAGE…] [--list]      run every check, or only the named stages
  bench [NAME…]               time the solvers (native) and the page (Chromium, CPU throttled 6 times)
  size                        what a first load weighs, against its budget
  dist [DIR]                  the page as one folder for any static host, under any path
  oracle                      regenerate the golden answers of tests/oracle with Python
  trunk ARGS…                 Trunk itself, with the same tools and compiler as above
  stamp                       (called by Trunk after a build) finish the built page

Environment
  LAMPLADDER_CACHE            where tools are kept, instead of ~/.cache/lampladder
  LAMPLADDER_WASM_ROUTE       rustup or debian: take this way to the WebAssembly target and no other";

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    match dispatch(&arguments) {
        Ok(code) => code,
        Err(stop) => {
            eprintln!("xtask: {stop:#}");
            ExitCode::FAILURE
        }
    }
}

fn dispatch(arguments: &[String]) -> anyhow::Result<ExitCode> {
    let (command, rest) = match arguments.split_first() {
        Some((command, rest)) => (command.as_str(), rest),
        None => ("help", arguments),
    };
    match command {
        "serve" => serve::serve(rest),
        // A failed check has been reported, and the runners' summary shall stay the last line.
        "test" => return checks::test(rest),
        "bench" => bench::bench(rest),
        "size" => size::size(rest),
        "dist" => page::dist(rest),
        "oracle" => oracle::regenerate(rest),
        "trunk" => page::trunk(rest),
        "stamp" => page::stamp(rest),
        "help" | "--help" | "-h" => {
            println!("{HELP}");
            Ok(())
        }
        other => anyhow::bail!("there is no command `{other}`\n\n{HELP}"),
    }?;
    Ok(ExitCode::SUCCESS)
}
