//! The command line: arguments, terminal, files and exit status. The only place that prints, reads or writes.

mod answers;
mod files;
mod jobs;
mod lists;

use clap::{CommandFactory, Parser, Subcommand};
use std::io::Write;
use std::path::PathBuf;
use std::sync::atomic::{AtomicBool, Ordering};

/// Exit status: done.
const DONE: u8 = 0;
/// Exit status: the job has faults, or a check failed and --strict is given.
const FAULTS: u8 = 1;
/// Exit status: usage, reading or writing failed.
const FAILED: u8 = 2;

/// Detail a one-way continuous concrete slab: bars, sheet, schedule, steel.
#[derive(Parser)]
#[command(name = "slabwright", version, arg_required_else_help = true)]
#[command(after_help = "Check every document by a competent person before use. The engineer's design and the national documents govern.")]
struct Arguments {
    #[command(subcommand)]
    verb: Verb,
}

#[derive(Subcommand)]
enum Verb {
    /// Write a commented job file that details as it stands
    New {
        /// Folder to write job.toml into
        #[arg(default_value = ".")]
        dir: PathBuf,
        /// Overwrite a file that is there
        #[arg(long)]
        force: bool,
    },
    /// Read, plan and audit jobs; write nothing
    Check {
        /// Job files; - reads standard input
        #[arg(required = true)]
        jobs: Vec<String>,
        /// Exit with 1 where a check fails
        #[arg(long)]
        strict: bool,
        /// Print as JSON
        #[arg(long)]
        json: bool,
    },
    /// Write the set of documents
    Detail {
        /// Job files; - reads standard input
        #[arg(required = true)]
        jobs: Vec<String>,
        /// Folder to write into
        #[arg(short, long, default_value = ".")]
        output: PathBuf,
        /// Only these formats (see `list formats`)
        #[arg(long, value_delimiter = ',')]
        only: Vec<String>,
        /// Exit with 1 where a check fails
        #[arg(long)]
        strict: bool,
        /// Overwrite files that this program did not make
        #[arg(long)]
        force: bool,
    },
    /// Say why a number is what it is, step by step
    Explain {
        /// Job file; - reads standard input
        job: String,
        /// Such as S1/mark:07, S1/mark:07/A, S1/span:2/B1/stop-left, S1/support:B/T1/reach-right, steel/total
        address: String,
        /// Print as JSON
        #[arg(long)]
        json: bool,
    },
    /// Work out one bar: cut length, mass, least legs, exact centre line
    Bend {
        /// Shape code
        shape: String,
        /// Bar size, mm
        size: String,
        /// Dimensions such as A=1200 B=300
        dims: Vec<String>,
        /// Print as JSON
        #[arg(long)]
        json: bool,
    },
    /// Work out anchorage and lap lengths with their factors
    Lap {
        /// Bar size, mm
        size: String,
        /// Strength class such as C32/40
        concrete: String,
        /// Least cover, mm
        #[arg(long, default_value_t = 25.0)]
        cover: f64,
        /// Spacing of the bars that lap, mm
        #[arg(long, default_value_t = 150.0)]
        spacing: f64,
        /// Share of bars lapped at one section, per cent
        #[arg(long, default_value_t = 100)]
        share: u32,
        /// Bond: good or poor
        #[arg(long, default_value = "good", value_parser = ["good", "poor"])]
        bond: String,
        /// Print as JSON
        #[arg(long)]
        json: bool,
    },
    /// List what the program knows
    List {
        /// What to list
        #[arg(value_parser = ["shapes", "rules", "formats", "checks", "sources"])]
        what: String,
        /// Print as JSON
        #[arg(long)]
        json: bool,
    },
    /// Print completions for a shell
    Completions {
        /// Shell
        shell: clap_complete::Shell,
    },
}

/// Whether results could not be written; a reader that has gone away does not count.
static UNWRITTEN: AtomicBool = AtomicBool::new(false);

/// Runs the command line and returns its exit status.
pub fn run(arguments: impl IntoIterator<Item = std::ffi::OsString>) -> u8 {
    let status = answer(arguments);
    if UNWRITTEN.load(Ordering::Relaxed) {
        talk("the results could not be written to standard output\n");
        return FAILED;
    }
    status
}

fn answer(arguments: impl IntoIterator<Item = std::ffi::OsString>) -> u8 {
    let arguments = match Arguments::try_parse_from(arguments) {
        Ok(arguments) => arguments,
        Err(fault) => {
            let status = if fault.use_stderr() { FAILED } else { DONE };
            let text = fault.render().to_string();
            if fault.use_stderr() {
                talk(&text)
            } else {
                say(&text)
            }
            return status;
        }
    };
    match arguments.verb {
        Verb::New { dir, force } => jobs::new(&dir, force),
        Verb::Check { jobs, strict, json } => jobs::check(&jobs, strict, json),
        Verb::Detail { jobs, output, only, strict, force } => jobs::detail(&jobs, &output, &only, strict, force),
        Verb::Explain { job, address, json } => answers::explain(&job, &address, json),
        Verb::Bend { shape, size, dims, json } => answers::bend(&shape, &size, &dims, json),
        Verb::Lap { size, concrete, cover, spacing, share, bond, json } => {
            answers::lap(&answers::Lap { size, concrete, cover, spacing, share, poor: bond == "poor" }, json)
        }
        Verb::List { what, json } => lists::list(&what, json),
        Verb::Completions { shell } => {
            let mut text = Vec::new();
            clap_complete::generate(shell, &mut Arguments::command(), "slabwright", &mut text);
            say(&String::from_utf8_lossy(&text));
            DONE
        }
    }
}

/// Results, to standard output.
fn say(text: &str) {
    let mut out = std::io::stdout().lock();
    if let Err(fault) = out.write_all(text.as_bytes()).and_then(|()| out.flush())
        && fault.kind() != std::io::ErrorKind::BrokenPipe
    {
        UNWRITTEN.store(true, Ordering::Relaxed);
    }
}

/// Talk, to standard error.
fn talk(text: &str) {
    let mut out = std::io::stderr().lock();
    let _ = out.write_all(text.as_bytes()).and_then(|()| out.flush());
}

/// A versioned envelope of a verb's results.
fn envelope(verb: &str, ok: bool, fields: serde_json::Value) {
    let mut object = serde_json::Map::new();
    object.insert("schema".into(), format!("slabwright/{verb}/1").into());
    object.insert("ok".into(), ok.into());
    if let serde_json::Value::Object(fields) = fields {
        object.extend(fields);
    }
    let text = serde_json::to_string_pretty(&serde_json::Value::Object(object)).unwrap_or_default();
    say(&format!("{text}\n"));
}
