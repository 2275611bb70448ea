//! The list of commands, and `help`.

use crate::trouble::Trouble;
use crate::{bench, evaluate, post_build, proof, say, schema, serve, size, test};
use std::process::ExitCode;

type Run = fn(&[String]) -> Result<ExitCode, Trouble>;

/// One command of `cargo task`.
pub(crate) struct Command {
    name: &'static str,
    arguments: &'static str,
    about: &'static str,
    /// What it does.
    pub(crate) run: Run,
    /// The exit code when it ends in trouble.
    pub(crate) trouble_code: u8,
}

const COMMANDS: &[Command] = &[
    Command {
        name: "serve",
        arguments: "[--port N]",
        about: "sets up what is missing, builds the release page and serves it on this machine only",
        run: serve::run,
        trouble_code: 1,
    },
    Command {
        name: "test",
        arguments: "[lint|native|wasm|browser]...",
        about: "sets up what is missing and runs every test, or the parts named",
        run: test::run,
        trouble_code: 1,
    },
    Command {
        name: "evaluate",
        arguments: "FILE",
        about: "prints the findings of a saved book as JSON; ends with 0 when all holds or is tight, \
                1 when anything fails, 3 when nothing fails but something is unsettled, \
                2 when the file cannot be read",
        run: evaluate::run,
        trouble_code: 2,
    },
    Command {
        name: "bench",
        arguments: "[native|wasm|page]...",
        about: "prints speeds beside their targets, or those named: ratios natively, ratios of the \
                browser to native, and the built page on a slow processor",
        run: bench::run,
        trouble_code: 1,
    },
    Command {
        name: "size",
        arguments: "",
        about: "prints what the built page weighs, raw and as brotli, file by file",
        run: size::run,
        trouble_code: 1,
    },
    Command {
        name: "schema",
        arguments: "",
        about: "writes the schemas of the book's file and of the report into www/",
        run: schema::run,
        trouble_code: 1,
    },
    Command {
        name: "proof",
        arguments: "[properties|crash|fuzz|mutants]...",
        about: "longer campaigns, or those named: many cases of every property; \
                killing the browser while it saves; random bytes as files, texts and books; \
                small changes to the engineering that a test must notice",
        run: proof::run,
        trouble_code: 1,
    },
    Command {
        name: "post-build",
        arguments: "",
        about: "called by trunk: writes the service worker and checks that the page keeps to itself",
        run: post_build::run,
        trouble_code: 1,
    },
    Command {
        name: "help",
        arguments: "",
        about: "lists the commands",
        run: help,
        trouble_code: 1,
    },
];

/// The command of that name.
pub(crate) fn find(name: &str) -> Option<&'static Command> {
    let name = match name {
        "-h" | "--help" => "help",
        other => other,
    };
    COMMANDS.iter().find(|command| command.name == name)
}

fn help(_: &[String]) -> Result<ExitCode, Trouble> {
    say::line("cargo task <command>\n");
    for Command {
        name,
        arguments,
        about,
        ..
    } in COMMANDS
    {
        say::line(&format!("  {:40} {about}", format!("{name} {arguments}")));
    }
    say::line(
        "\nTools are kept in the user's cache folder; FALLWRIGHT_TOOLS names another.\n\
         CHROMIUM and CHROMEDRIVER name a browser and its driver.",
    );
    Ok(ExitCode::SUCCESS)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_are_unique_and_found() {
        for command in COMMANDS {
            let found = find(command.name).unwrap();
            assert_eq!(found.about, command.about);
        }
        assert!(find("--help").is_some());
        assert!(find("nothing").is_none());
    }
}
