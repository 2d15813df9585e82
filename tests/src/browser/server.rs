//! A server on this machine, for what only a page from a server does.

use std::io::{Read as _, Write as _};
use std::net::{TcpListener, TcpStream};
use std::{fs, thread};

use super::page_url;

/// The address at which the built page is served, as long as the test runs; `around.html` beside it is `around`.
///
/// # Panics
/// Where the page is not built, or the system has no port.
pub fn serve(around: &'static str) -> String {
    let page = fs::read(page_url().to_file_path().expect("a file")).expect("the page is built");
    let listener = TcpListener::bind("127.0.0.1:0").expect("a port");
    let address = listener.local_addr().expect("it has one");
    thread::spawn(move || {
        for stream in listener.incoming() {
            let Ok(mut stream) = stream else { return };
            answer(&mut stream, &page, around.as_bytes());
        }
    });
    format!("http://{address}/tools/aftercount.html")
}

fn answer(stream: &mut TcpStream, page: &[u8], around: &[u8]) {
    let mut request = [0; 4096];
    // A browser that hangs up has what it wanted.
    let length = stream.read(&mut request).unwrap_or(0);
    let asks_around = request[..length].starts_with(b"GET /tools/around.html");
    let body = if asks_around { around } else { page };
    let head = format!(
        "HTTP/1.1 200 OK\r\nContent-Type: text/html\r\nContent-Length: {}\r\nConnection: close\r\n\r\n",
        body.len()
    );
    let _ = stream
        .write_all(head.as_bytes())
        .and_then(|()| stream.write_all(body));
}
