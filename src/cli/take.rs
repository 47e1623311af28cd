//! `snugdown take`: an advisory has come in; its bytes are kept in the record as they came.

use crate::advisory::forecast::Advisory;
use crate::advisory::read::read_forecast;
use crate::cli::desk::{Desk, Paper};
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::folder::read_bytes;
use crate::cli::screen::{tell, tell_findings};
use crate::cli::write_args::{RECORDING, WriteArgs};
use crate::record::event::What;
use crate::record::fold::{in_order, withdrawn};
use crate::store::chain::digest;
use crate::time::moment::{Minutes, Moment};
use clap::Args;
use std::path::{Path, PathBuf};

/// An advisory that comes in later than this after its issue is told as late. Our choice: offices issue every six hours, so
/// it is half way to the next.
const LATE: Minutes = Minutes::hours(3);

/// What `take` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = format!("{EXAMPLES}\n\n{RECORDING}"))]
pub struct TakeArgs {
    /// Whose record, and who says it
    #[command(flatten)]
    pub write: WriteArgs,
    /// The advisories: texts as they came, forecasts typed in as TOML, or "-" for standard input
    #[arg(value_name = "FILE", required = true)]
    pub files: Vec<PathBuf>,
    /// Take it although it is about another storm than the advisory in force
    #[arg(long)]
    pub other_storm: bool,
}

const EXAMPLES: &str = "\
Taking the same bytes twice records nothing the second time. The newest advisory by its time of issue is in force, a \
correction before what it corrects, whatever the order in which they came in.

Examples:
  snugdown take quillhaven advisory-12.txt --by 'Duty officer'
  snugdown withdraw quillhaven 63 --by 'Duty officer' --reason 'this was the exercise text'";

/// Records the advisories.
///
/// # Errors
/// Any [`Failure`]; [`Failure::Input`] if one cannot be read, or is about another storm.
pub fn run(args: &TakeArgs) -> Result<Exit, Failure> {
    let desk = Desk::open(&args.write)?;
    let mut papers: Vec<Paper> = Vec::new();
    let mut drafts = Vec::new();
    for path in &args.files {
        let Some(paper) = read(&desk, path, &papers)? else { continue };
        for words in remarks(&desk, &paper, args.other_storm)? {
            tell(&format!("snugdown: {}: {words}", path.display()));
        }
        let sha256 = digest(&paper.bytes);
        drafts.push(Draft::of("took_advisory").with("file", paper.file.as_str()).with("sha256", sha256));
        papers.push(paper);
    }
    if drafts.is_empty() {
        return Ok(Exit::Fits);
    }
    desk.record(&drafts, &papers)
}

/// The advisory of a file; `None` if these bytes were taken before.
fn read(desk: &Desk<'_>, path: &Path, before: &[Paper]) -> Result<Option<Paper>, Failure> {
    let bytes = read_bytes(path)?;
    let reading = read_forecast(&path.display().to_string(), &bytes);
    let sources = vec![reading.source];
    let Some(advisory) = reading.advisory else {
        return Err(Failure::Input { findings: reading.findings, sources });
    };
    let sha256 = digest(&bytes);
    let sorted = in_order(&desk.loaded.events);
    let gone = withdrawn(&sorted);
    let mut names: Vec<(&str, &str)> = Vec::new();
    for event in sorted {
        if let What::AdvisoryTaken { file, digest } = &event.what {
            names.push((file, digest));
            if *digest == sha256 && !gone.contains(&event.number) {
                tell(&format!(
                    "snugdown: {}: taken already, as event {}; nothing is recorded",
                    path.display(),
                    event.number
                ));
                return Ok(None);
            }
        }
    }
    let digests: Vec<(String, String)> =
        before.iter().map(|paper| (paper.file.clone(), digest(&paper.bytes))).collect();
    if digests.iter().any(|(_, before)| *before == sha256) {
        tell(&format!("snugdown: {}: named twice; it is taken once", path.display()));
        return Ok(None);
    }
    names.extend(digests.iter().map(|(file, digest)| (file.as_str(), digest.as_str())));
    tell_findings(&reading.findings, &sources);
    Ok(Some(Paper { file: free_name(path, &sha256, &names), bytes, advisory }))
}

/// The file's name; with a number if another advisory has it.
fn free_name(path: &Path, sha256: &str, names: &[(&str, &str)]) -> String {
    let name = path.file_name().map(|name| name.to_string_lossy().into_owned());
    let plain: String = name
        .filter(|name| name != "-")
        .unwrap_or_else(|| format!("advisory-{}.txt", sha256.get(..8).unwrap_or_default()))
        .chars()
        .map(|c| if c.is_control() || matches!(c, '\\' | ':') { '_' } else { c })
        .collect();
    let is_free = |name: &str| names.iter().all(|(taken, digest)| *taken != name || *digest == sha256);
    if is_free(&plain) {
        return plain;
    }
    let (stem, end) = plain
        .rsplit_once('.')
        .map_or((plain.as_str(), String::new()), |(stem, end)| (stem, format!(".{end}")));
    (2..).map(|number| format!("{stem}-{number}{end}")).find(|name| is_free(name)).unwrap_or_default()
}

/// What the duty officer should know about an advisory: another storm, late, out of order, a correction, a gap.
fn remarks(desk: &Desk<'_>, paper: &Paper, other_storm: bool) -> Result<Vec<String>, Failure> {
    let new = &paper.advisory;
    let clock = &desk.loaded.port.clock;
    let mut words = Vec::new();
    let issued = Moment::at_or_before(new.issued);
    if issued > desk.now {
        words.push(format!("issued {}, which is still to come: is the clock right?", clock.show(issued)));
    } else if desk.now - issued > LATE {
        words.push(format!("it comes in {} after its issue", desk.now - issued));
    }
    let Some((file, old)) = desk.loaded.in_force(desk.now) else { return Ok(words) };
    if new.key().storm != old.key().storm && !other_storm {
        return Err(Failure::Usage(format!(
            "this advisory is about {}, the one in force ({file}) about {}; if the port is now to plan for this storm, \
             take it with --other-storm",
            storm(new),
            storm(old)
        )));
    }
    let same = desk.loaded.taken_by(desk.now).into_iter().find(|(_, taken)| {
        let (new, taken) = (new.key(), taken.key());
        new.storm == taken.storm && new.issued == taken.issued && new.number == taken.number
    });
    match same {
        Some((file, _)) if new.is_corrected => words.push(format!("a correction: it replaces {file}")),
        Some((file, _)) => words.push(format!(
            "{file} has the same number and time of issue, and another text; the one taken later counts"
        )),
        None if new.issued < old.issued => {
            words.push(format!("issued before {file}, which stays in force"));
        }
        None => {
            if let (Some(new), Some(old)) = (new.number, old.number)
                && new > old + 1
            {
                words.push(format!("numbers {} to {} have not come in", old + 1, new - 1));
            }
        }
    }
    Ok(words)
}

fn storm(advisory: &Advisory) -> String {
    match &advisory.storm.id {
        Some(id) => format!("{} ({id})", advisory.storm.name),
        None => advisory.storm.name.clone(),
    }
}
