//! Turns the message files into Rust at build time, and stops the build where
//! they are not complete; see [`catalogue`].
#![expect(
    clippy::print_stdout,
    clippy::print_stderr,
    reason = "a build script speaks to cargo and to the developer by printing"
)]

mod catalogue;
mod generate;

use std::path::Path;
use std::process::ExitCode;

/// The message files. The first is the reference: it alone says which keys
/// there are and what is filled into each.
const FILES: [&str; 2] = ["messages/en.txt", "messages/es.txt"];

fn main() -> ExitCode {
    println!("cargo::rerun-if-changed=build");
    for file in FILES {
        println!("cargo::rerun-if-changed={file}");
    }
    match build() {
        Ok(()) => ExitCode::SUCCESS,
        Err(troubles) => {
            for trouble in troubles {
                eprintln!("error: {trouble}");
            }
            ExitCode::FAILURE
        }
    }
}

fn build() -> Result<(), Vec<String>> {
    let read = |file: &str| {
        std::fs::read_to_string(file).map_err(|e| vec![format!("crates/words/{file}: {e}")])
    };
    let mut texts = Vec::new();
    for file in FILES {
        texts.push((format!("crates/words/{file}"), read(file)?));
    }
    let messages = catalogue::compile(&texts)?;
    let out = std::env::var("OUT_DIR").map_err(|e| vec![e.to_string()])?;
    std::fs::write(
        Path::new(&out).join("messages.rs"),
        generate::rust(&messages),
    )
    .map_err(|e| vec![e.to_string()])
}
