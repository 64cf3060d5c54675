//! The command line: arguments to settings, files to the audit, reports to the output.

mod explain;

use std::fs::{self, File};
use std::io::{self, BufWriter, IsTerminal, Read, Write};
use std::panic;
use std::path::{Path, PathBuf};
use std::process::ExitCode;
use std::sync::mpsc;
use std::thread;

use clap::{Args, Parser, Subcommand, ValueEnum};
use tallyproof::audit::{self, is_manuscript};
use tallyproof::query::Level;
use tallyproof::report::{Audited, Entry, Json, Line, Report, Terminal, Worklist};
use tallyproof::rule::catalogue;

#[derive(Parser)]
#[command(version, about, max_term_width = 100)]
struct Arguments {
    #[command(subcommand)]
    command: Command,
}

#[derive(Subcommand)]
enum Command {
    /// Read manuscripts, recompute their figures, and print the queries they raise
    ///
    /// Exit status: 0 when no query is at the asked level or above, 1 when one is, 2 when a manuscript could not
    /// be read.
    Audit(Audit),
    /// List the rules, or explain one with its sources and cases
    Rules {
        /// A rule, as a query or the list names it
        name: Option<String>,
    },
}

#[derive(Args)]
struct Audit {
    /// Manuscripts or folders; `-` reads one manuscript from standard input
    #[arg(required_unless_present = "text", value_name = "FILE")]
    files: Vec<PathBuf>,
    /// Audit this snippet and print everything that follows from its figures, also where nothing disagrees
    #[arg(long, conflicts_with = "files", value_name = "SNIPPET")]
    text: Option<String>,
    /// The form of the report
    #[arg(long = "as", value_enum, default_value_t = Form::Terminal, value_name = "FORM")]
    form: Form,
    /// Write the report to this file
    #[arg(long, value_name = "FILE")]
    out: Option<PathBuf>,
    /// The lowest level of a query that makes the exit status 1
    #[arg(long, value_enum, default_value_t = AskLevel::Major, value_name = "LEVEL")]
    ask_level: AskLevel,
}

#[derive(Clone, Copy, PartialEq, Eq, ValueEnum)]
enum Form {
    /// For reading
    Terminal,
    /// One object for one manuscript, an array for several
    Json,
    /// One object a line
    JsonLines,
    /// A table (CSV) of the manuscripts, what needs a human first
    Worklist,
}

#[derive(Clone, Copy, PartialEq, Eq, ValueEnum)]
enum AskLevel {
    Note,
    Minor,
    Major,
}

fn main() -> ExitCode {
    let done = match Arguments::parse().command {
        Command::Audit(arguments) => run(&arguments),
        Command::Rules { name } => rules(name.as_deref()),
    };
    match done {
        Ok(status) => ExitCode::from(status),
        // Whoever read the output has seen enough.
        Err(Stop::Output(e)) if e.kind() == io::ErrorKind::BrokenPipe => ExitCode::SUCCESS,
        Err(Stop::Output(e)) => {
            complain("the report", &format!("could not be written ({e}); check the disk and try again"));
            ExitCode::from(2)
        }
        Err(Stop::Said) => ExitCode::from(2),
    }
}

/// Why a run ends early.
enum Stop {
    Output(io::Error),
    /// A sentence has been printed.
    Said,
}

impl From<io::Error> for Stop {
    fn from(e: io::Error) -> Stop {
        Stop::Output(e)
    }
}

/// One sentence on standard error that names what it is about.
fn complain(about: &str, says: &str) {
    eprintln!("tallyproof: {about}: {says}.");
}

/// One thing to audit.
struct Job {
    /// As given on the command line.
    path: String,
    input: Input,
}

enum Input {
    File(PathBuf),
    Stdin,
    Text(String),
    /// A folder without manuscripts, or one that cannot be listed.
    Nothing(String),
}

/// A rendered manuscript of a batch.
struct Done {
    text: Vec<u8>,
    line: Line,
}

fn run(arguments: &Audit) -> Result<u8, Stop> {
    let jobs = jobs(arguments);
    let report = form(arguments, one_object(arguments, &jobs));
    let mut out = output(arguments, &jobs)?;
    report.begin(&mut out)?;
    let mut lines = Vec::with_capacity(jobs.len());
    if let [job] = jobs.as_slice() {
        lines.push(with_entry(job, |entry| report.manuscript(entry, &mut out).map(|()| Line::of(entry)))?);
    } else {
        batch(&jobs, &*report, &mut out, &mut lines)?;
    }
    report.end(&lines, &mut out)?;
    out.flush()?;
    Ok(status(&lines, arguments.ask_level))
}

/// The catalogue, or one rule of it.
fn rules(name: Option<&str>) -> Result<u8, Stop> {
    let mut out = BufWriter::new(anstream::stdout().lock());
    let width = terminal_width(true);
    match name {
        None => explain::list(catalogue().rules(), &mut out, width)?,
        Some(name) => match catalogue().find(name) {
            Some(rule) => explain::rule(rule, &mut out, width)?,
            None => {
                complain(name, "there is no such rule; `tallyproof rules` lists them all");
                return Err(Stop::Said);
            }
        },
    }
    out.flush()?;
    Ok(0)
}

fn status(lines: &[Line], ask: AskLevel) -> u8 {
    let from = match ask {
        AskLevel::Note => Level::Note,
        AskLevel::Minor => Level::Minor,
        AskLevel::Major => Level::Major,
    } as usize;
    if lines.iter().any(|l| l.outcome.is_err()) {
        2
    } else {
        u8::from(lines.iter().flat_map(|l| &l.outcome).any(|d| d.queries[from..].iter().any(|&n| n > 0)))
    }
}

fn form(arguments: &Audit, one: bool) -> Box<dyn Report> {
    match arguments.form {
        Form::Terminal => {
            Box::new(Terminal { width: terminal_width(arguments.out.is_none()), workings: arguments.text.is_some() })
        }
        Form::Json if one => Box::new(Json::Object),
        Form::Json => Box::new(Json::Array),
        Form::JsonLines => Box::new(Json::Lines),
        Form::Worklist => Box::new(Worklist),
    }
}

/// A single file gives one object; a folder gives an array, even when it holds one manuscript.
fn one_object(arguments: &Audit, jobs: &[Job]) -> bool {
    jobs.len() == 1 && !arguments.files.iter().any(|f| f.is_dir())
}

/// Columns to fill: those of the terminal, within what reads well, else 80.
fn terminal_width(standard_output: bool) -> usize {
    let terminal = || terminal_size::terminal_size().map(|(w, _)| usize::from(w.0));
    let seen = standard_output && io::stdout().is_terminal();
    seen.then(terminal).flatten().unwrap_or(80).clamp(60, 100)
}

fn jobs(arguments: &Audit) -> Vec<Job> {
    if let Some(text) = &arguments.text {
        return vec![Job { path: "--text".to_owned(), input: Input::Text(text.clone()) }];
    }
    let mut jobs = Vec::new();
    for path in &arguments.files {
        if path.as_os_str() == "-" {
            jobs.push(Job { path: "-".to_owned(), input: Input::Stdin });
        } else if path.is_dir() {
            folder(path, &mut jobs);
        } else {
            jobs.push(Job { path: path.display().to_string(), input: Input::File(path.clone()) });
        }
    }
    jobs
}

/// The manuscripts of a folder and the folders in it, in the order of their names.
fn folder(path: &Path, jobs: &mut Vec<Job>) {
    fn walk(path: &Path, jobs: &mut Vec<Job>) -> io::Result<()> {
        let mut entries = fs::read_dir(path)?.collect::<Result<Vec<_>, _>>()?;
        entries.sort_by_key(|e| e.file_name());
        for entry in entries.iter().filter(|e| !e.file_name().as_encoded_bytes().starts_with(b".")) {
            let (path, kind) = (entry.path(), entry.file_type()?);
            if kind.is_dir() {
                walk(&path, jobs)?;
            } else if is_manuscript(&path.to_string_lossy()) {
                jobs.push(Job { path: path.display().to_string(), input: Input::File(path) });
            }
        }
        Ok(())
    }
    let before = jobs.len();
    let why = match walk(path, jobs) {
        Ok(()) if jobs.len() > before => return,
        Ok(()) => format!("the folder holds no manuscripts; give files that end in {}", audit::EXTENSIONS.join(", ")),
        Err(e) => format!("the folder cannot be listed ({e}); check its name and permissions"),
    };
    jobs.push(Job { path: path.display().to_string(), input: Input::Nothing(why) });
}

/// Where the report goes. Colour is stripped from everything but a terminal that has it.
fn output(arguments: &Audit, jobs: &[Job]) -> Result<Box<dyn Write>, Stop> {
    let Some(path) = &arguments.out else {
        return Ok(match arguments.form {
            Form::Terminal => Box::new(BufWriter::new(anstream::stdout().lock())),
            Form::Json | Form::JsonLines | Form::Worklist => Box::new(BufWriter::new(io::stdout().lock())),
        });
    };
    let refuse = |why: &str| {
        complain(&path.display().to_string(), why);
        Stop::Said
    };
    let same = |f: &Path| matches!((f.canonicalize(), path.canonicalize()), (Ok(a), Ok(b)) if a == b);
    if jobs.iter().any(|j| matches!(&j.input, Input::File(f) if same(f))) {
        return Err(refuse("is itself a manuscript of this run; give the report another name"));
    }
    let file = File::create(path)
        .map_err(|e| refuse(&format!("the report cannot be written there ({e}); check the folder and permissions")))?;
    Ok(Box::new(BufWriter::new(anstream::StripStream::new(file))))
}

/// Audits one job and hands on what came of it. A file that cannot be read is complained of at once.
fn with_entry<T>(job: &Job, use_it: impl FnOnce(&Entry) -> T) -> T {
    let audited = read(&job.input).and_then(|bytes| audit_safely(&bytes, job));
    if let Err(why) = &audited {
        complain(&job.path, why);
    }
    use_it(&Entry { path: &job.path, outcome: audited.as_ref().map_err(String::as_str) })
}

fn read(input: &Input) -> Result<Vec<u8>, String> {
    let in_words = |e: io::Error| match e.kind() {
        io::ErrorKind::NotFound => "there is no such file; check its name and folder".to_owned(),
        io::ErrorKind::PermissionDenied => "it may not be read; check its permissions".to_owned(),
        _ => format!("it cannot be read ({e})"),
    };
    match input {
        Input::File(path) => fs::read(path).map_err(in_words),
        Input::Stdin => {
            let mut bytes = Vec::new();
            io::stdin().lock().read_to_end(&mut bytes).map_err(in_words)?;
            Ok(bytes)
        }
        Input::Text(text) => Ok(text.clone().into_bytes()),
        Input::Nothing(why) => Err(why.clone()),
    }
}

/// A mistake of ours in one manuscript must not end a batch.
fn audit_safely(bytes: &[u8], job: &Job) -> Result<Audited, String> {
    let name = if matches!(job.input, Input::Text(_)) { "snippet.md" } else { &job.path };
    match panic::catch_unwind(|| audit::audit(bytes, name)) {
        Ok(audited) => audited.map_err(|why| why.to_string()),
        Err(_) => {
            Err("tallyproof stumbled over this manuscript, which is a fault in tallyproof; please report it".into())
        }
    }
}

/// How many finished manuscripts a worker may hold ready.
const AHEAD: usize = 8;

/// Audits and renders manuscripts side by side and writes them in order. Worker k of n takes every
/// n-th manuscript, so that reading from the workers in turn gives the order back.
fn batch(jobs: &[Job], report: &dyn Report, out: &mut dyn Write, lines: &mut Vec<Line>) -> io::Result<()> {
    let workers = thread::available_parallelism().map_or(1, |n| n.get()).min(jobs.len()).max(1);
    let progress = Progress::new(jobs.len());
    thread::scope(|scope| {
        let mut queues = Vec::with_capacity(workers);
        for k in 0..workers {
            let (send, receive) = mpsc::sync_channel(AHEAD);
            queues.push(receive);
            scope.spawn(move || {
                for job in jobs.iter().skip(k).step_by(workers) {
                    if send.send(render(job, report)).is_err() {
                        break;
                    }
                }
            });
        }
        for i in 0..jobs.len() {
            let done = queues[i % workers].recv().map_err(io::Error::other)??;
            if i > 0 && !done.text.is_empty() {
                report.between(out)?;
            }
            out.write_all(&done.text)?;
            lines.push(done.line);
            progress.show(lines.len());
        }
        Ok(())
    })
}

fn render(job: &Job, report: &dyn Report) -> io::Result<Done> {
    let mut text = Vec::new();
    with_entry(job, |entry| report.manuscript(entry, &mut text).map(|()| Line::of(entry)))
        .map(|line| Done { text, line })
}

/// A count on standard error while a batch runs and its report goes elsewhere.
struct Progress {
    of: usize,
    shown: bool,
}

impl Progress {
    fn new(of: usize) -> Progress {
        Progress { of, shown: io::stderr().is_terminal() && !io::stdout().is_terminal() }
    }

    fn show(&self, done: usize) {
        if self.shown && (done.is_multiple_of(16) || done == self.of) {
            eprint!("\r{done} of {} manuscripts{}", self.of, if done == self.of { "\n" } else { "" });
        }
    }
}
