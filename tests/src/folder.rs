//! A folder of our own that goes away again.

use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicU32, Ordering};

/// A new, empty folder; removed with everything in it when dropped.
#[derive(Debug)]
pub struct Folder(PathBuf);

impl Folder {
    /// Makes the folder; `purpose` is part of its name.
    ///
    /// # Errors
    /// When the system's folder for such things cannot be written to.
    pub fn new(purpose: &str) -> std::io::Result<Self> {
        static COUNT: AtomicU32 = AtomicU32::new(0);
        let number = COUNT.fetch_add(1, Ordering::Relaxed);
        let name = format!("lampladder-{purpose}-{}-{number}", std::process::id());
        let path = std::env::temp_dir().join(name);
        std::fs::create_dir_all(&path)?;
        Ok(Self(path))
    }

    /// Where it is.
    pub fn path(&self) -> &Path {
        &self.0
    }
}

impl Drop for Folder {
    fn drop(&mut self) {
        // A browser that is just ending may still write into it; what is left then lies in the system's folder.
        let _ = std::fs::remove_dir_all(&self.0);
    }
}
