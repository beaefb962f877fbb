//! `cargo xtask serve`: the release page on this machine.

use anyhow::{Context, Result, bail};
use xtask::site::Site;

use crate::{page, place, run};

const USUAL_PORT: u16 = 8080;

pub(crate) fn serve(arguments: &[String]) -> Result<()> {
    let (mut open, mut port) = (false, None);
    let mut words = arguments.iter();
    while let Some(word) = words.next() {
        match word.as_str() {
            "--open" => open = true,
            "--port" => {
                let number = words.next().context("--port needs a number")?;
                port = Some(number.parse().with_context(|| format!("`{number}` is no port (1 to 65535)"))?);
            }
            other => bail!("`serve` knows --open and --port N, not `{other}`"),
        }
    }
    // The port first: nobody should wait for a build to hear that it is taken.
    let folder = place::dist();
    let site = match port {
        Some(port) => {
            Site::start(&folder, "/", port).with_context(|| format!("port {port} cannot be used"))?
        }
        // Nobody asked for the usual port in particular, so another one will do.
        None => Site::start(&folder, "/", USUAL_PORT).or_else(|_| Site::start(&folder, "/", 0))?,
    };
    page::build()?;
    println!("\nLampladder is at {}  (Ctrl-C ends it)", site.url());
    if open {
        let opener = ["xdg-open", "open", "explorer"].iter().find_map(|name| place::on_path(name));
        match opener {
            Some(opener) => run::run(run::command(opener).arg(site.url()))?,
            None => println!("no program to open a browser was found; open the address above by hand"),
        }
    }
    site.wait();
    Ok(())
}
