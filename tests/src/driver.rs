//! ChromeDriver as a child process on a port of its own choice.

use std::io::{BufRead, BufReader};
use std::path::Path;
use std::process::{Child, Command, Stdio};

use anyhow::{Context, Result};

/// A running driver; it ends when dropped.
#[derive(Debug)]
pub(crate) struct Driver {
    child: Child,
    port: u16,
}

impl Driver {
    pub(crate) fn start(program: &Path) -> Result<Self> {
        let mut child = Command::new(program)
            .arg("--port=0")
            .stdin(Stdio::null())
            .stdout(Stdio::piped())
            .stderr(Stdio::null())
            .spawn()
            .with_context(|| format!("{} cannot be started", program.display()))?;
        let output = child.stdout.take().context("ChromeDriver has no output")?;
        let mut lines = BufReader::new(output).lines();
        // "ChromeDriver was started successfully on port 41329."
        let port = lines.by_ref().map_while(Result::ok).find_map(|line| {
            line.rsplit_once("successfully on port ")
                .and_then(|(_, number)| number.trim_end_matches('.').parse().ok())
        });
        // Whoever stops reading lets the driver hang on its next line.
        std::thread::spawn(move || lines.for_each(drop));
        if let Some(port) = port {
            return Ok(Self { child, port });
        }
        let _ = child.kill();
        let _ = child.wait();
        anyhow::bail!("{} named no port", program.display())
    }

    pub(crate) fn url(&self) -> String {
        format!("http://localhost:{}", self.port)
    }
}

impl Drop for Driver {
    fn drop(&mut self) {
        let _ = self.child.kill();
        let _ = self.child.wait();
    }
}
