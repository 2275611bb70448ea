//! `cargo task serve`: the release page on this machine.

use crate::server::Server;
use crate::setup;
use crate::trouble::Trouble;
use crate::{page, places, say};
use std::io;
use std::net::{Ipv4Addr, TcpListener};
use std::process::ExitCode;

/// The usual port. Books belong to the address they were typed at, so it stays
/// the same from run to run and is never changed silently.
const PORT: u16 = 4790;

/// Sets up, builds and serves; `--port N` takes another port.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    let port = port(arguments)?;
    // Before anything that takes minutes.
    TcpListener::bind((Ipv4Addr::LOCALHOST, port)).map_err(|error| not_served(port, &error))?;
    let kit = setup::for_page()?;
    page::build(&kit)?;
    let server = Server::start(&places::dist(), port).map_err(|error| not_served(port, &error))?;
    say::step(&format!("Serving on {} (Ctrl-C stops it)", server.url()));
    server.wait();
    Ok(ExitCode::SUCCESS)
}

fn not_served(port: u16, error: &io::Error) -> Trouble {
    if error.kind() == io::ErrorKind::AddrInUse {
        Trouble::new(
            format!("Port {port} is taken: another `cargo task serve` may be running."),
            "Use or stop that one, or give `--port N`. Books are kept for each address \
                 apart: another port shows another shelf.",
        )
    } else {
        Trouble::new(
            format!("Could not serve on port {port}: {error}."),
            "Give another port: `cargo task serve --port N`.",
        )
    }
}

fn port(arguments: &[String]) -> Result<u16, Trouble> {
    match arguments {
        [] => Ok(PORT),
        [flag, number] if flag == "--port" => number.parse().map_err(|_| {
            Trouble::new(
                format!("{number:?} is no port."),
                "Give a whole number from 1 to 65535, or 0 for any free one.",
            )
        }),
        _ => Err(Trouble::new(
            format!("Cannot make sense of {arguments:?}."),
            "`cargo task serve` or `cargo task serve --port N`.",
        )),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn words(text: &str) -> Vec<String> {
        text.split_whitespace().map(str::to_owned).collect()
    }

    #[test]
    fn the_port_is_read_or_refused() {
        assert_eq!(port(&[]), Ok(PORT));
        assert_eq!(port(&words("--port 8123")), Ok(8123));
        assert!(port(&words("--port 70000")).is_err());
        assert!(port(&words("--prot 8123")).is_err());
    }

    #[test]
    fn a_port_that_is_taken_is_said_before_anything_is_built() {
        let taken = TcpListener::bind((Ipv4Addr::LOCALHOST, 0)).unwrap();
        let port = taken.local_addr().unwrap().port().to_string();
        let trouble = run(&["--port".to_owned(), port.clone()]).unwrap_err();
        let said = trouble.to_string();
        assert!(said.contains(&format!("Port {port} is taken")), "{said}");
        assert!(said.contains("--port N"), "{said}");
    }
}
