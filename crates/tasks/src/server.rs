//! A small static server for the built page, on this machine only.

use std::io::{self, BufRead, BufReader, Read, Write};
use std::net::{Ipv4Addr, SocketAddr, TcpListener, TcpStream};
use std::path::{Component, Path, PathBuf};
use std::sync::Arc;
use std::sync::atomic::{AtomicBool, Ordering};
use std::thread::{self, JoinHandle};
use std::time::Duration;

/// A request line and its headers may not be longer than this.
const LONGEST_HEAD: u64 = 16 * 1024;
/// How long a client may keep a connection without a word.
const PATIENCE: Duration = Duration::from_secs(20);

/// A running server; it ends when dropped, and the port is free again.
#[derive(Debug)]
pub struct Server {
    address: SocketAddr,
    stopping: Arc<AtomicBool>,
    thread: Option<JoinHandle<()>>,
}

impl Server {
    /// Serves the files below `folder` on 127.0.0.1.
    ///
    /// Port 0 takes any free one. Only GET and HEAD are answered, and only files
    /// below `folder`.
    ///
    /// # Errors
    /// When the folder cannot be read or the port is taken.
    pub fn start(folder: &Path, port: u16) -> io::Result<Self> {
        let folder = folder.canonicalize()?;
        let listener = TcpListener::bind((Ipv4Addr::LOCALHOST, port))?;
        let address = listener.local_addr()?;
        let stopping = Arc::new(AtomicBool::new(false));
        let stop = Arc::clone(&stopping);
        let thread = thread::spawn(move || {
            for connection in listener.incoming() {
                if stop.load(Ordering::SeqCst) {
                    break;
                }
                let Ok(connection) = connection else { continue };
                let folder = folder.clone();
                // A client that breaks off concerns nobody else.
                thread::spawn(move || answer(connection, &folder));
            }
        });
        Ok(Self {
            address,
            stopping,
            thread: Some(thread),
        })
    }

    /// The page's address, with a slash at its end.
    #[must_use]
    pub fn url(&self) -> String {
        format!("http://{}/", self.address)
    }

    /// The port it listens on.
    #[must_use]
    pub fn port(&self) -> u16 {
        self.address.port()
    }

    /// Serves until the process ends.
    pub fn wait(mut self) {
        if let Some(thread) = self.thread.take() {
            let _ = thread.join();
        }
    }
}

impl Drop for Server {
    fn drop(&mut self) {
        self.stopping.store(true, Ordering::SeqCst);
        if let Some(thread) = self.thread.take() {
            // Wakes the listener, which then sees that it is to stop.
            let _ = TcpStream::connect(self.address);
            let _ = thread.join();
        }
    }
}

fn answer(mut connection: TcpStream, folder: &Path) -> io::Result<()> {
    connection.set_read_timeout(Some(PATIENCE))?;
    connection.set_write_timeout(Some(PATIENCE))?;
    let mut reader = BufReader::new(connection.try_clone()?.take(LONGEST_HEAD));
    let mut request = String::new();
    reader.read_line(&mut request)?;
    let mut header = String::new();
    while reader.read_line(&mut header)? > 2 {
        header.clear();
    }
    let mut words = request.split_whitespace();
    let (method, target) = (words.next().unwrap_or(""), words.next().unwrap_or(""));
    let head_only = method == "HEAD";
    if !head_only && method != "GET" {
        return reply(
            &mut connection,
            "405 Method Not Allowed",
            "text/plain",
            b"",
            false,
        );
    }
    let found = file_for(folder, target).and_then(|path| {
        let contents = std::fs::read(&path).ok()?;
        Some((media_type(&path), contents))
    });
    match found {
        Some((media, contents)) => reply(&mut connection, "200 OK", media, &contents, head_only),
        None => reply(
            &mut connection,
            "404 Not Found",
            "text/plain; charset=utf-8",
            b"not found",
            head_only,
        ),
    }
}

fn reply(
    connection: &mut TcpStream,
    status: &str,
    media: &str,
    contents: &[u8],
    head_only: bool,
) -> io::Result<()> {
    write!(
        connection,
        "HTTP/1.1 {status}\r\nContent-Type: {media}\r\nContent-Length: {}\r\n\
         Cache-Control: no-cache\r\nX-Content-Type-Options: nosniff\r\nConnection: close\r\n\r\n",
        contents.len()
    )?;
    if !head_only {
        connection.write_all(contents)?;
    }
    connection.flush()
}

/// The file that a request names, if it lies below `folder`.
fn file_for(folder: &Path, target: &str) -> Option<PathBuf> {
    let path = target.split(['?', '#']).next()?.strip_prefix('/')?;
    let path = if path.is_empty() { "index.html" } else { path };
    // Names of the built page are plain: nothing to decode, and nothing climbs out.
    if path.contains(['%', '\\', '\0']) {
        return None;
    }
    let path = Path::new(path);
    if !path
        .components()
        .all(|part| matches!(part, Component::Normal(_)))
    {
        return None;
    }
    let file = folder.join(path).canonicalize().ok()?;
    (file.starts_with(folder) && file.is_file()).then_some(file)
}

fn media_type(path: &Path) -> &'static str {
    match path.extension().and_then(|extension| extension.to_str()) {
        Some("html") => "text/html; charset=utf-8",
        Some("js") => "text/javascript; charset=utf-8",
        Some("css") => "text/css; charset=utf-8",
        Some("wasm") => "application/wasm",
        Some("json") => "application/json",
        Some("webmanifest") => "application/manifest+json",
        Some("svg") => "image/svg+xml",
        Some("png") => "image/png",
        Some("txt") => "text/plain; charset=utf-8",
        _ => "application/octet-stream",
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn ask(port: u16, request: &str) -> String {
        let mut connection = TcpStream::connect((Ipv4Addr::LOCALHOST, port)).unwrap();
        connection.write_all(request.as_bytes()).unwrap();
        let mut reply = String::new();
        connection.read_to_string(&mut reply).unwrap();
        reply
    }

    #[test]
    fn serves_the_folder_and_nothing_else() {
        let outer = std::env::temp_dir().join(format!("fallwright-server-{}", std::process::id()));
        let folder = outer.join("page");
        std::fs::create_dir_all(folder.join("styles")).unwrap();
        std::fs::write(outer.join("secret.txt"), "secret").unwrap();
        std::fs::write(folder.join("index.html"), "<p>here").unwrap();
        std::fs::write(folder.join("styles/a.css"), "p{}").unwrap();
        std::fs::write(folder.join("a.wasm"), "wasm").unwrap();
        let server = Server::start(&folder, 0).unwrap();
        let port = server.port();
        let get = |path: &str| ask(port, &format!("GET {path} HTTP/1.1\r\nHost: a\r\n\r\n"));

        let index = get("/?query");
        assert!(
            index.starts_with("HTTP/1.1 200 OK\r\nContent-Type: text/html"),
            "{index}"
        );
        assert!(index.ends_with("\r\n\r\n<p>here"));
        assert!(get("/styles/a.css").contains("text/css"));
        assert!(get("/a.wasm").contains("application/wasm"));
        for bad in [
            "/../secret.txt",
            "/%2e%2e/secret.txt",
            "//secret.txt",
            "/styles",
            "/none",
            "x",
        ] {
            let reply = get(bad);
            assert!(reply.starts_with("HTTP/1.1 404"), "{bad}: {reply}");
        }
        assert!(ask(port, "POST / HTTP/1.1\r\n\r\n").starts_with("HTTP/1.1 405"));
        assert!(ask(port, "HEAD / HTTP/1.1\r\n\r\n").ends_with("\r\n\r\n"));

        drop(server);
        assert!(TcpStream::connect((Ipv4Addr::LOCALHOST, port)).is_err());
        // The port can be taken again at once, as a restart in the walk does.
        drop(Server::start(&folder, port).unwrap());
        std::fs::remove_dir_all(outer).unwrap();
    }
}
