//! Shows the built page on this machine: a server that knows the files of `dist` and answers nobody else.

use std::fs;
use std::io::{BufRead as _, BufReader, Read as _, Write as _};
use std::net::{Ipv4Addr, TcpListener, TcpStream};
use std::path::Path;
use std::thread;
use std::time::Duration;

use super::machine::{During, Outcome};

/// The port that is tried first, so that the address stays the same from day to day.
const USUAL_PORT: u16 = 8337;

/// What is served: the path, the file, and what kind of file it is.
const FILES: [(&str, &str, &str); 5] = [
    ("/", "chordwright.html", "text/html; charset=utf-8"),
    ("/chordwright.html", "chordwright.html", "text/html; charset=utf-8"),
    ("/module/chordwright.js", "module/chordwright.js", "text/javascript; charset=utf-8"),
    ("/module/chordwright_bg.wasm", "module/chordwright_bg.wasm", "application/wasm"),
    ("/module/chordwright.d.ts", "module/chordwright.d.ts", "text/plain; charset=utf-8"),
];

/// A request is read up to here and no further.
const LONGEST_REQUEST: u64 = 16 * 1024;

/// How long a browser may take to send its request.
const PATIENCE: Duration = Duration::from_secs(5);

/// Serves the files of `dist` until the program is stopped.
pub(crate) fn run(dist: &Path, port: Option<u16>) -> Outcome<()> {
    let listener = listen(port)?;
    let address = listener.local_addr().during("the server has no address")?;
    println!("serving it at http://{address}/ (stop with Ctrl-C)");
    for stream in listener.incoming().flatten() {
        let dist = dist.to_path_buf();
        // A browser that goes away in the middle is no concern of the others.
        thread::spawn(move || answer(stream, &dist).ok());
    }
    Ok(())
}

fn listen(port: Option<u16>) -> Outcome<TcpListener> {
    let bind = |port| TcpListener::bind((Ipv4Addr::LOCALHOST, port));
    match port {
        Some(port) => bind(port).during(format!("port {port} cannot be used")),
        None => bind(USUAL_PORT).or_else(|_| bind(0)).during("no port can be used"),
    }
}

fn answer(mut stream: TcpStream, dist: &Path) -> std::io::Result<()> {
    stream.set_read_timeout(Some(PATIENCE))?;
    let request = first_line(&stream)?;
    let mut words = request.split_whitespace();
    let (method, target) = (words.next().unwrap_or_default(), words.next().unwrap_or_default());
    let path = target.split(['?', '#']).next().unwrap_or_default();
    let known = FILES.iter().find(|(served, ..)| *served == path);
    let found = known.and_then(|(_, file, kind)| Some((fs::read(dist.join(file)).ok()?, *kind)));
    let (status, (body, kind)) = match (method, found) {
        ("GET" | "HEAD", Some(found)) => ("200 OK", found),
        ("GET" | "HEAD", None) => ("404 Not Found", (b"There is no such page here.\n".to_vec(), "text/plain")),
        _ => ("405 Method Not Allowed", (b"This page is only read.\n".to_vec(), "text/plain")),
    };
    let length = body.len();
    write!(
        stream,
        "HTTP/1.1 {status}\r\nContent-Type: {kind}\r\nContent-Length: {length}\r\nCache-Control: no-store\r\n\
         X-Content-Type-Options: nosniff\r\nConnection: close\r\n\r\n"
    )?;
    if method == "HEAD" { Ok(()) } else { stream.write_all(&body) }
}

/// Reads a request to the end of its head and gives its first line.
fn first_line(stream: &TcpStream) -> std::io::Result<String> {
    let mut lines = BufReader::new(stream.take(LONGEST_REQUEST)).lines();
    let first = lines.next().transpose()?.unwrap_or_default();
    while lines.next().transpose()?.is_some_and(|line| !line.is_empty()) {}
    Ok(first)
}
