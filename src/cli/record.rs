//! `snugdown record`: looks at the record, checks it, copies it, brings it in and out.

use crate::cli::clock::{port_now, wall_time};
use crate::cli::exit::{Exit, Failure};
use crate::cli::folder::PortFolder;
use crate::cli::kept::{Kept, STORE, TEXT, store_path};
use crate::cli::load::{Loaded, load};
use crate::cli::planning::plans_until;
use crate::cli::port_args::PortArgs;
use crate::cli::record_carry::{export, import};
use crate::cli::screen::{show, width};
use crate::output::record_lines::{RecordLine, record_text};
use crate::output::review_text::{review_csv, review_text};
use crate::output::setting::Setting;
use crate::output::wire::record::record_out;
use crate::output::wire::review::review_out;
use crate::output::wire::value::to_text;
use crate::plan::review::review;
use crate::record::event::{Event, What};
use crate::record::fold::{in_order, situation, withdrawn};
use crate::record::taking::Taking;
use crate::store::chain::Head;
use crate::store::error::StoreError;
use crate::store::file::Store;
use clap::{Args, Subcommand, ValueEnum};
use std::path::PathBuf;

/// What `record` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct RecordArgs {
    /// What to do
    #[command(subcommand)]
    pub what: RecordWhat,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
The record is one file, record.sqlite: while nobody writes, a copy of it is the whole record. 'backup' copies it while \
others write. Each event's hash covers its text and the hash before it, so that no event can be changed unseen; plans name \
the last one, and 'verify --head' holds the record against what stands on paper.

Examples:
  snugdown record list quillhaven --last 20
  snugdown record verify quillhaven --head 63:0f1e2d3c4b5a
  snugdown record backup quillhaven /media/stick/quillhaven-0917.sqlite
  snugdown record review quillhaven --as csv > review.csv";

/// The things to do.
#[derive(Clone, Debug, Subcommand)]
pub enum RecordWhat {
    /// List the events with their numbers
    List(ListArgs),
    /// Check every event against the chain, every paper against its hash, and every page of the file
    Verify(VerifyArgs),
    /// Copy the record to a new file, while others may go on writing
    Backup(CarryArgs),
    /// Make a record of the folder's events.toml, or of another text
    Import(ImportArgs),
    /// Write the record into a new folder as events.toml, with the advisories
    Export(CarryArgs),
    /// Hold what was asked of each task against what was done
    Review(ReviewArgs),
}

/// What `record list` is asked.
#[derive(Clone, Debug, Args)]
pub struct ListArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// Only so many events, the last ones
    #[arg(long, value_name = "NUMBER")]
    pub last: Option<usize>,
    /// Write JSON
    #[arg(long)]
    pub json: bool,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// What `record verify` is asked.
#[derive(Clone, Debug, Args)]
pub struct VerifyArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// A head that stands on a plan: the number of an event, and the digits of its chain
    #[arg(long, value_name = "NUMBER:DIGITS")]
    pub head: Option<String>,
}

/// What `record backup` and `record export` are asked.
#[derive(Clone, Debug, Args)]
pub struct CarryArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// Where to: nothing may be there yet
    #[arg(value_name = "TO")]
    pub to: PathBuf,
}

/// What `record import` is asked.
#[derive(Clone, Debug, Args)]
pub struct ImportArgs {
    /// The port's folder
    #[arg(value_name = "DIR")]
    pub folder: PathBuf,
    /// The text to bring in; else the folder's events.toml
    #[arg(long, value_name = "FILE")]
    pub from: Option<PathBuf>,
}

/// What `record review` is asked.
#[derive(Clone, Debug, Args)]
pub struct ReviewArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// The present time; else the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// The form
    #[arg(long = "as", value_name = "FORM", default_value = "text")]
    pub form: Form,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// The forms of a review.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Form {
    /// For reading
    Text,
    /// For spreadsheets
    Csv,
    /// For programs
    Json,
}

/// Does it.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &RecordArgs) -> Result<Exit, Failure> {
    match &args.what {
        RecordWhat::List(args) => list(args),
        RecordWhat::Verify(args) => verify(args),
        RecordWhat::Backup(args) => backup(args),
        RecordWhat::Import(args) => {
            let text = args.from.clone().unwrap_or_else(|| args.folder.join(TEXT));
            import(&args.folder, &text, wall_time())
        }
        RecordWhat::Export(args) => export(&args.port, &args.to),
        RecordWhat::Review(args) => run_review(args),
    }
}

fn list(args: &ListArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let record = loaded.head_words();
    let setting = Setting::of(&loaded.port, &loaded.rules).with_record(&record);
    let mut lines = lines(&args.port, &loaded)?;
    let from = lines.len().saturating_sub(args.last.unwrap_or(usize::MAX));
    let lines = lines.split_off(from);
    if args.json {
        show(&to_text(&record_out(&lines, &setting))?)?;
    } else {
        show(&record_text(&lines, &setting, width(args.width)))?;
    }
    Ok(Exit::Fits)
}

fn lines(port: &PortArgs, loaded: &Loaded) -> Result<Vec<RecordLine>, Failure> {
    let sorted = in_order(&loaded.events);
    let gone = withdrawn(&sorted);
    let end = loaded.events.iter().map(|event| event.known).max().unwrap_or_default();
    let waiting = situation(&loaded.events, end).waiting;
    let line = |event: Event, recorded, chain| RecordLine {
        is_withdrawn: gone.contains(&event.number),
        is_waiting: waiting.contains_key(&event.number),
        event,
        recorded,
        chain,
    };
    if loaded.head.is_none() {
        let mut events = loaded.events.clone();
        events.sort_by_key(|event| event.number);
        return Ok(events.into_iter().map(|event| line(event, None, String::new())).collect());
    }
    let entries = Store::open(&store_path(port))?.read()?;
    let lines = entries.into_iter();
    Ok(lines.map(|entry| line(entry.event, entry.recorded, entry.head.short().to_owned())).collect())
}

fn verify(args: &VerifyArgs) -> Result<Exit, Failure> {
    let store = Store::open(&store_path(&args.port))?;
    let damaged = |what: String| StoreError::Damaged { file: store.shown().to_owned(), what };
    if let Some(fault) = store.page_faults()?.into_iter().next() {
        return Err(damaged(fault).into());
    }
    let entries = store.read()?;
    let mut papers = 0;
    for entry in &entries {
        if let What::AdvisoryTaken(Taking { file, digest, .. }) = &entry.event.what
            && !digest.is_empty()
        {
            if store.paper(digest)?.is_none() {
                let number = entry.event.number;
                return Err(
                    damaged(format!("the bytes of {file}, taken as event {number}, are missing")).into()
                );
            }
            papers += 1;
        }
    }
    let head = entries.last().map_or_else(Head::beginning, |entry| entry.head.clone());
    if let Some(text) = &args.head {
        let (number, digits) = read_head(text)?;
        let there = entries.iter().find(|entry| entry.head.number == number);
        if !there.is_some_and(|entry| entry.head.hash.starts_with(&digits)) {
            return Err(damaged(format!("it does not hold event {number} with the chain {digits}")).into());
        }
    }
    show(&format!(
        "{head}\n{} events and {papers} papers, all as they were written\nwhole head: {}\n",
        head.number, head.hash
    ))?;
    Ok(Exit::Fits)
}

/// "63:0f1e2d3c4b5a".
fn read_head(text: &str) -> Result<(usize, String), Failure> {
    let parts = text.split_once(':').and_then(|(number, digits)| {
        let is_hash = digits.len() >= 8 && digits.chars().all(|c| c.is_ascii_hexdigit());
        Some((number.trim().parse().ok()?, digits.to_lowercase())).filter(|_| is_hash)
    });
    parts.ok_or_else(|| {
        Failure::Usage("--head: write the number and at least 8 digits, as in 63:0f1e2d3c4b5a".to_owned())
    })
}

fn backup(args: &CarryArgs) -> Result<Exit, Failure> {
    let mut folder = PortFolder::open(&args.port.folder)?;
    let Kept::Store(kept) = Kept::of(&args.port, &mut folder)? else {
        return Err(Failure::Usage(format!("the port has no {STORE}; a text is copied like any file")));
    };
    let head = kept.store.back_up(&args.to)?;
    show(&format!("copied to {}: {head}\n", args.to.display()))?;
    Ok(Exit::Fits)
}

fn run_review(args: &ReviewArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let record = loaded.head_words();
    let setting = Setting::of(&loaded.port, &loaded.rules).with_record(&record);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let history = plans_until(&loaded, now);
    let lines = review(&history, &situation(&loaded.events, now.to_utc()));
    show(&match args.form {
        Form::Text => review_text(&lines, now, &setting, width(args.width)),
        Form::Csv => review_csv(&lines),
        Form::Json => to_text(&review_out(&lines, now, &setting))?,
    })?;
    Ok(Exit::Fits)
}
