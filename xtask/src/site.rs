//! A server for the built page, on this machine only, at a path below the host's root.
//!
//! Connections are kept open between answers, as every static host does it. A stopped server is gone at once all the
//! same, since it answers nothing more on those that are open: the end-to-end tests stop it to prove that the page works
//! without one.

use std::fs;
use std::io::{self, BufRead, BufReader, Read, Write};
use std::net::{Ipv4Addr, SocketAddr, TcpListener, TcpStream};
use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicBool, Ordering};
use std::sync::{Arc, Mutex, PoisonError};
use std::thread::JoinHandle;
use std::time::Duration;

use flate2::Compression;
use flate2::write::GzEncoder;

/// A running server. It stops when dropped.
#[derive(Debug)]
pub struct Site {
    address: SocketAddr,
    prefix: String,
    shared: Arc<Shared>,
    listener: Option<JoinHandle<()>>,
}

#[derive(Debug)]
struct Shared {
    folder: PathBuf,
    prefix: String,
    stopped: AtomicBool,
    asked: Mutex<Vec<String>>,
}

impl Site {
    /// Serves `folder` at `prefix` (as `/` or `/some/where/`) on `port` of the loopback interface; port 0 is any free
    /// one.
    ///
    /// # Errors
    /// When the port is taken or may not be used.
    pub fn start(folder: &Path, prefix: &str, port: u16) -> io::Result<Self> {
        let listener = TcpListener::bind((Ipv4Addr::LOCALHOST, port))?;
        let address = listener.local_addr()?;
        let shared = Arc::new(Shared {
            folder: folder.to_path_buf(),
            prefix: prefix.to_owned(),
            stopped: AtomicBool::new(false),
            asked: Mutex::new(Vec::new()),
        });
        let theirs = Arc::clone(&shared);
        let thread = std::thread::spawn(move || {
            for connection in listener.incoming() {
                if theirs.stopped.load(Ordering::SeqCst) {
                    break;
                }
                let shared = Arc::clone(&theirs);
                if let Ok(stream) = connection {
                    // A browser that goes away in the middle is its own affair.
                    std::thread::spawn(move || shared.serve(&stream).ok());
                }
            }
        });
        Ok(Self { address, prefix: prefix.to_owned(), shared, listener: Some(thread) })
    }

    /// The page's address, `http://localhost:port/prefix/`.
    pub fn url(&self) -> String {
        format!("http://localhost:{}{}", self.address.port(), self.prefix)
    }

    /// The paths asked for so far, in order.
    pub fn asked(&self) -> Vec<String> {
        self.shared.asked.lock().unwrap_or_else(PoisonError::into_inner).clone()
    }

    /// Stops serving; connections are refused from here on.
    pub fn stop(&mut self) {
        if let Some(thread) = self.listener.take() {
            self.shared.stopped.store(true, Ordering::SeqCst);
            // The listener sleeps until somebody calls.
            let _ = TcpStream::connect_timeout(&self.address, Duration::from_secs(1));
            let _ = thread.join();
        }
    }

    /// Serves until the process ends.
    pub fn wait(mut self) {
        if let Some(thread) = self.listener.take() {
            let _ = thread.join();
        }
    }
}

impl Drop for Site {
    fn drop(&mut self) {
        self.stop();
    }
}

impl Shared {
    fn serve(&self, stream: &TcpStream) -> io::Result<()> {
        stream.set_read_timeout(Some(Duration::from_secs(10)))?;
        // Headers and bodies go out as they are written: waiting for more would hold them back.
        stream.set_nodelay(true)?;
        let mut reader = BufReader::new(stream.try_clone()?);
        while self.answer(&mut reader, stream)? {}
        Ok(())
    }

    /// Answers one request; whether there may be another.
    fn answer(&self, reader: &mut BufReader<TcpStream>, stream: &TcpStream) -> io::Result<bool> {
        let mut lines = reader.take(64 * 1024).lines();
        let Some(first) = lines.next().transpose()? else { return Ok(false) };
        let (mut gzip, mut last) = (false, false);
        for line in lines {
            let line = line?;
            if line.is_empty() {
                break;
            }
            let line = line.to_ascii_lowercase();
            gzip |= line.starts_with("accept-encoding:") && line.contains("gzip");
            last |= line.starts_with("connection:") && line.contains("close");
        }
        if self.stopped.load(Ordering::SeqCst) {
            return Ok(false);
        }
        let mut words = first.split(' ');
        let (method, target) = (words.next().unwrap_or_default(), words.next().unwrap_or_default());
        let path = target.split(['?', '#']).next().unwrap_or_default();
        self.asked.lock().unwrap_or_else(PoisonError::into_inner).push(path.to_owned());
        let answer = match method {
            "GET" | "HEAD" => self.find(path, gzip),
            _ => Answer::plain("405 Method Not Allowed", "only GET"),
        };
        answer.write(stream, method == "HEAD", last)?;
        Ok(!last)
    }

    fn find(&self, path: &str, gzip: bool) -> Answer {
        let nothing = || Answer::plain("404 Not Found", "there is no such file");
        let Some(name) = path.strip_prefix(&self.prefix) else { return nothing() };
        // A folder is answered by its page, as static hosts do.
        let page = format!("{name}index.html");
        let name = if name.is_empty() || name.ends_with('/') { &page } else { name };
        // No name of ours needs escapes or dots beyond its suffix; whatever climbs out of the folder has them.
        let fine =
            |part: &str| !part.is_empty() && !part.starts_with('.') && !part.contains(['\\', '%', ':']);
        if !name.split('/').all(fine) {
            return nothing();
        }
        match fs::read(self.folder.join(name)) {
            Ok(bytes) => Answer::file(name, bytes, gzip),
            Err(_) => nothing(),
        }
    }
}

struct Answer {
    status: &'static str,
    headers: String,
    body: Vec<u8>,
}

impl Answer {
    fn plain(status: &'static str, text: &str) -> Self {
        Self { status, headers: "Content-Type: text/plain\r\n".to_owned(), body: text.into() }
    }

    fn file(name: &str, bytes: Vec<u8>, gzip: bool) -> Self {
        let kind = content_type(name);
        let mut headers = format!("Content-Type: {kind}\r\nX-Content-Type-Options: nosniff\r\n");
        headers.push_str(if has_hash(name) {
            "Cache-Control: public, max-age=31536000, immutable\r\n"
        } else {
            "Cache-Control: no-cache\r\n"
        });
        let mut body = bytes;
        if gzip
            && kind != "image/png"
            && let Ok(small) = compress(&body)
        {
            headers.push_str("Content-Encoding: gzip\r\nVary: Accept-Encoding\r\n");
            body = small;
        }
        Self { status: "200 OK", headers, body }
    }

    fn write(&self, mut stream: &TcpStream, head_only: bool, last: bool) -> io::Result<()> {
        let length = self.body.len();
        let connection = if last { "close" } else { "keep-alive" };
        let mut all = format!(
            "HTTP/1.1 {}\r\n{}Content-Length: {length}\r\nConnection: {connection}\r\n\r\n",
            self.status, self.headers
        )
        .into_bytes();
        if !head_only {
            all.extend_from_slice(&self.body);
        }
        stream.write_all(&all)
    }
}

/// Gzip at its strongest, as a static host would keep it.
///
/// # Errors
/// Never in practice: it writes to memory.
pub fn compress(bytes: &[u8]) -> io::Result<Vec<u8>> {
    let mut encoder = GzEncoder::new(Vec::new(), Compression::best());
    encoder.write_all(bytes)?;
    encoder.finish()
}

/// Whether Trunk has put a hash of the contents into the name (`name-0123456789abcdef.css`); it leaves out leading
/// zeros.
fn has_hash(name: &str) -> bool {
    name.split(['-', '.', '_'])
        .any(|part| (12..=16).contains(&part.len()) && part.bytes().all(|byte| byte.is_ascii_hexdigit()))
}

fn content_type(name: &str) -> &'static str {
    match name.rsplit_once('.').map_or("", |(_, suffix)| suffix) {
        "html" => "text/html; charset=utf-8",
        "css" => "text/css; charset=utf-8",
        "js" => "text/javascript; charset=utf-8",
        "wasm" => "application/wasm",
        "json" => "application/json",
        "webmanifest" => "application/manifest+json",
        "svg" => "image/svg+xml",
        "png" => "image/png",
        "txt" => "text/plain; charset=utf-8",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use super::Site;
    use std::io::{Read, Write};
    use std::net::TcpStream;

    fn get(site: &Site, path: &str) -> String {
        let mut stream = TcpStream::connect(site.address).expect("the site answers");
        write!(stream, "GET {path} HTTP/1.1\r\nHost: localhost\r\nConnection: close\r\n\r\n").expect("sent");
        let mut answer = String::new();
        stream.read_to_string(&mut answer).expect("answered");
        answer
    }

    #[test]
    fn serves_its_folder_and_nothing_above_it_and_stops() {
        let mut site = Site::start(&crate_folder(), "/some/where/", 0).expect("a free port");
        assert!(get(&site, "/some/where/Cargo.toml?x=1").starts_with("HTTP/1.1 200 OK"));
        for path in
            ["/Cargo.toml", "/some/where/../Cargo.toml", "/some/where/..%2fCargo.toml", "/some/where//x", ""]
        {
            assert!(get(&site, path).starts_with("HTTP/1.1 404"), "{path}");
        }
        assert_eq!(site.asked().first().map(String::as_str), Some("/some/where/Cargo.toml"));
        let address = site.address;
        // A connection that is open is no way around it: one answer before, none after.
        let mut open = TcpStream::connect(address).expect("the site answers");
        let ask = b"HEAD /some/where/Cargo.toml HTTP/1.1\r\n\r\n";
        open.write_all(ask).expect("sent");
        let mut head = [0; 12];
        open.read_exact(&mut head).expect("answered");
        assert_eq!(&head, b"HTTP/1.1 200");
        site.stop();
        open.write_all(ask).expect("sent");
        let mut rest = String::new();
        open.read_to_string(&mut rest).expect("closed");
        assert_eq!(rest.matches("HTTP/1.1").count(), 0, "answered after it was stopped: {rest}");
        assert!(TcpStream::connect(address).is_err(), "a stopped site must refuse");
    }

    fn crate_folder() -> std::path::PathBuf {
        env!("CARGO_MANIFEST_DIR").into()
    }
}
