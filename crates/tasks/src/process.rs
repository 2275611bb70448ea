//! Running other programs: said, timed, and stopped when they hang.

use crate::say;
use crate::tally::Tally;
use crate::trouble::Trouble;
use std::io::{BufRead, BufReader};
use std::process::{Child, Command, Stdio};
use std::sync::mpsc;
use std::thread;
use std::time::{Duration, Instant};

/// The command as one would type it.
pub(crate) fn typed(command: &Command) -> String {
    let mut words = vec![command.get_program().to_string_lossy().into_owned()];
    words.extend(command.get_args().map(|word| {
        let word = word.to_string_lossy();
        if word.is_empty() || word.contains([' ', '\'', '"']) {
            format!("{word:?}")
        } else {
            word.into_owned()
        }
    }));
    words.join(" ")
}

/// Runs a command with its output on the terminal; `next` is what to do when it fails.
pub(crate) fn run(command: &mut Command, next: &str) -> Result<(), Trouble> {
    say::note(&typed(command));
    match command.status() {
        Ok(status) if status.success() => Ok(()),
        Ok(status) => Err(Trouble::new(
            format!("`{}` ended with {status}.", typed(command)),
            next,
        )),
        Err(error) => Err(Trouble::new(
            format!("`{}` could not be started: {error}.", typed(command)),
            next,
        )),
    }
}

/// What a command prints on standard output, or nothing when it fails or is missing.
pub(crate) fn output(command: &mut Command) -> Option<String> {
    let output = command.stderr(Stdio::null()).output().ok()?;
    output
        .status
        .success()
        .then(|| String::from_utf8_lossy(&output.stdout).trim().to_owned())
}

/// Runs a test runner, shows what it prints, and counts the tests by its closing lines.
///
/// One that runs longer than `limit` is ended with everything it started.
pub(crate) fn counted(command: &mut Command, limit: Duration) -> Result<(bool, Tally), Trouble> {
    let mut tally = Tally::default();
    let good = lines(command, limit, |line| tally.read(line))?;
    Ok((good, tally))
}

/// Runs a command, shows what it prints and hands on each line; says whether it
/// ended well.
///
/// One that runs longer than `limit` is ended with everything it started.
pub(crate) fn lines(
    command: &mut Command,
    limit: Duration,
    mut each: impl FnMut(&str),
) -> Result<bool, Trouble> {
    say::note(&typed(command));
    let shown = typed(command);
    let not_started = |error: std::io::Error| {
        Trouble::new(
            format!("`{shown}` could not be started: {error}."),
            "Check that the program is installed and on the PATH.",
        )
    };
    let mut child = command
        .stdout(Stdio::piped())
        .stdin(Stdio::null())
        .spawn()
        .map_err(not_started)?;
    let (sender, lines) = mpsc::channel();
    if let Some(stdout) = child.stdout.take() {
        // Ends by itself when the last holder of the pipe has gone.
        thread::spawn(move || {
            for line in BufReader::new(stdout).split(b'\n').map_while(Result::ok) {
                if sender
                    .send(String::from_utf8_lossy(&line).into_owned())
                    .is_err()
                {
                    break;
                }
            }
        });
    }
    let deadline = Instant::now() + limit;
    loop {
        match lines.recv_timeout(deadline.saturating_duration_since(Instant::now())) {
            Ok(line) => {
                say::line(&line);
                each(&line);
            }
            Err(mpsc::RecvTimeoutError::Disconnected) => break,
            Err(mpsc::RecvTimeoutError::Timeout) => {
                end_tree(&mut child);
                return Err(Trouble::new(
                    format!(
                        "`{shown}` had not ended after {} minutes and was stopped.",
                        limit.as_secs() / 60
                    ),
                    "Run it alone to see where it waits.",
                ));
            }
        }
    }
    let status = child.wait().map_err(not_started)?;
    Ok(status.success())
}

/// Ends a child and everything below it.
fn end_tree(child: &mut Child) {
    let mut below = vec![child.id()];
    let mut next = 0;
    while let Some(&parent) = below.get(next) {
        below.extend(children_of(parent));
        next += 1;
    }
    let _ = child.kill();
    for id in below.iter().skip(1) {
        let _ = Command::new("kill")
            .args(["-KILL", &id.to_string()])
            .status();
    }
    let _ = child.wait();
}

/// The processes started by `parent`, where the system lists them under /proc.
fn children_of(parent: u32) -> Vec<u32> {
    let Ok(entries) = std::fs::read_dir("/proc") else {
        return Vec::new();
    };
    entries
        .flatten()
        .filter_map(|entry| entry.file_name().to_str()?.parse::<u32>().ok())
        .filter(|id| {
            std::fs::read_to_string(format!("/proc/{id}/stat"))
                .ok()
                .and_then(|stat| {
                    // The name stands in brackets and may hold spaces.
                    let (_, after) = stat.rsplit_once(')')?;
                    after.split_whitespace().nth(1)?.parse::<u32>().ok()
                })
                == Some(parent)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_runner_is_counted() {
        let mut command = Command::new("sh");
        command.args([
            "-c",
            "echo 'test result: ok. 3 passed; 0 failed; 1 ignored'",
        ]);
        let (good, tally) = counted(&mut command, Duration::from_secs(20)).unwrap();
        assert!(good);
        assert_eq!((tally.passed, tally.failed), (3, 0));
    }

    #[test]
    fn a_runner_that_hangs_is_ended_with_its_children() {
        let mut command = Command::new("sh");
        command.args(["-c", "sleep 600 & echo started; wait"]);
        let begun = Instant::now();
        let trouble = counted(&mut command, Duration::from_millis(500)).unwrap_err();
        assert!(trouble.to_string().contains("was stopped"));
        assert!(begun.elapsed() < Duration::from_secs(60));
    }

    #[test]
    fn a_failing_command_says_what_to_do() {
        let trouble = run(&mut Command::new("false"), "do this").unwrap_err();
        assert!(trouble.to_string().ends_with("next: do this"));
        let trouble = run(&mut Command::new("no-such-program-here"), "do that").unwrap_err();
        assert!(trouble.to_string().ends_with("next: do that"));
    }
}
