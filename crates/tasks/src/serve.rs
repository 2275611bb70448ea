//! `cargo task serve`: the release page on this machine.

use crate::server::Server;
use crate::setup::{self, Kit};
use crate::trouble::Trouble;
use crate::{places, process, say};
use std::io;
use std::process::ExitCode;

/// The usual port. Books belong to the address they were typed at, so it stays
/// the same from run to run and is never changed silently.
const PORT: u16 = 4790;

/// Sets up, builds and serves; `--port N` takes another port.
pub(crate) fn run(arguments: &[String]) -> Result<ExitCode, Trouble> {
    let port = port(arguments)?;
    let kit = setup::for_page()?;
    build(&kit)?;
    let server = Server::start(&places::dist(), port).map_err(|error| {
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
    })?;
    say::step(&format!("Serving on {} (Ctrl-C stops it)", server.url()));
    server.wait();
    Ok(ExitCode::SUCCESS)
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

/// Builds the release page into `dist`.
pub(crate) fn build(kit: &Kit) -> Result<(), Trouble> {
    say::step("Building the release page");
    process::run(
        kit.command("trunk")
            .args(["build", "--release", "--offline", "true"])
            .current_dir(places::root()),
        "Mend what the compiler or the checks named above, then run it again.",
    )
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
}
