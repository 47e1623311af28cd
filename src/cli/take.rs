//! `snugdown take`: an advisory has come in; its bytes are kept in the record as they came.

use crate::advisory::choice::{Choice, parse_cycle};
use crate::advisory::forecast::Advisory;
use crate::advisory::official_odds::{is_official_odds, read_official_odds};
use crate::advisory::read::read_chosen;
use crate::advisory::same_storm::is_same_storm;
use crate::cli::desk::{Desk, Paper};
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::folder::read_bytes;
use crate::cli::screen::{tell, tell_findings};
use crate::cli::write_args::{RECORDING, WriteArgs};
use crate::finding::fault::{Finding, has_error};
use crate::finding::source::SourceText;
use crate::plan::in_force::is_official;
use crate::record::event::What;
use crate::record::fold::{in_order, situation, withdrawn};
use crate::record::taking::Taking;
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
    /// Take it although it is about another storm than those in force: from now on the port plans for both
    #[arg(long)]
    pub other_storm: bool,
    /// Plan on it although it is not from the port's official source: an order
    #[arg(long)]
    pub by_order: bool,
    /// The storm, where a file holds several: AL062018, AL06 or its name
    #[arg(long, value_name = "STORM")]
    pub storm: Option<String>,
    /// The technique of a deck; the office's own forecast (OFCL) if not given
    #[arg(long, value_name = "NAME")]
    pub technique: Option<String>,
    /// The base time of a deck's forecast, or where a drill begins in a best track: 2018083012
    #[arg(long, value_name = "YYYYMMDDHH", value_parser = read_cycle)]
    pub cycle: Option<String>,
}

fn read_cycle(text: &str) -> Result<String, String> {
    parse_cycle(text)
        .map(|_| text.to_owned())
        .ok_or_else(|| "write year, month, day and hour in UTC, as in 2018083012".to_owned())
}

impl TakeArgs {
    /// What an event about this file will say, without its digest.
    fn taking(&self, file: &str) -> Taking {
        Taking {
            storm: self.storm.as_ref().map(|storm| storm.to_uppercase()),
            technique: self.technique.as_ref().map(|technique| technique.to_uppercase()),
            cycle: self.cycle.as_deref().and_then(parse_cycle),
            ..Taking::of(file)
        }
    }
}

/// What a file holds: an advisory, or official odds (none); with what was found in it.
fn opened(
    desk: &Desk<'_>,
    path: &Path,
    args: &TakeArgs,
    bytes: &[u8],
) -> (Option<Advisory>, Vec<Finding>, SourceText) {
    let name = path.display().to_string();
    if is_official_odds(bytes) {
        let reading = read_official_odds(&name, bytes);
        return (None, reading.findings, reading.source);
    }
    let Taking { storm, technique, cycle, .. } = args.taking(&name);
    let choice = Choice { storm, technique, cycle, taken: Some(desk.now.to_utc()) };
    let reading = read_chosen(&name, bytes, &choice);
    (reading.advisory, reading.findings, reading.source)
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
        let Some(paper) = read(&desk, path, args, &papers)? else { continue };
        for words in remarks(&desk, &paper, args)? {
            tell(&format!("snugdown: {}: {words}", path.display()));
        }
        let sha256 = digest(&paper.bytes);
        let mut draft = Draft::of("took_advisory").with("file", paper.file.as_str()).with("sha256", sha256);
        for (key, value) in [("storm", &args.storm), ("technique", &args.technique), ("cycle", &args.cycle)] {
            if let Some(value) = value {
                draft = draft.with(key, value.as_str());
            }
        }
        drafts.push(if args.by_order { draft.with("by_order", true) } else { draft });
        papers.push(paper);
    }
    if drafts.is_empty() {
        return Ok(Exit::Fits);
    }
    desk.record(&drafts, &papers)
}

/// The advisory of a file; `None` if these bytes were taken before.
fn read(desk: &Desk<'_>, path: &Path, args: &TakeArgs, before: &[Paper]) -> Result<Option<Paper>, Failure> {
    let bytes = read_bytes(path)?;
    let (advisory, findings, source) = opened(desk, path, args, &bytes);
    let sources = vec![source];
    if has_error(&findings) {
        return Err(Failure::Input { findings, sources });
    }
    let sha256 = digest(&bytes);
    let sorted = in_order(&desk.loaded.events);
    let gone = withdrawn(&sorted);
    let mut names: Vec<(&str, &str)> = Vec::new();
    for event in sorted {
        if let What::AdvisoryTaken(taking @ Taking { file, digest, .. }) = &event.what {
            names.push((file, digest));
            let picks_the_same = taking.key() == args.taking(file).key() && taking.by_order == args.by_order;
            if *digest == sha256 && picks_the_same && !gone.contains(&event.number) {
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
    tell_findings(&findings, &sources);
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
fn remarks(desk: &Desk<'_>, paper: &Paper, args: &TakeArgs) -> Result<Vec<String>, Failure> {
    let Some(new) = &paper.advisory else { return Ok(Vec::new()) };
    let clock = &desk.loaded.port.clock;
    let mut words = Vec::new();
    let issued = Moment::at_or_before(new.issued);
    if issued > desk.now {
        words.push(format!("issued {}, which is still to come: is the clock right?", clock.show(issued)));
    } else if desk.now - issued > LATE {
        words.push(format!("it comes in {} after its issue", desk.now - issued));
    }
    let then = situation(&desk.loaded.events, desk.now.to_utc());
    let storms = desk.loaded.in_force(&then).storms;
    if !is_official(&desk.loaded.port, new) && !args.by_order {
        words.push(format!(
            "it is by {}, not by the port's official source: it changes no plan, unless it is taken with --by-order",
            new.issuer
        ));
    }
    let Some(chosen) = storms.iter().find(|chosen| is_same_storm(chosen.advisory, new)) else {
        let Some(first) = storms.first().filter(|_| !args.other_storm) else { return Ok(words) };
        return Err(Failure::Usage(format!(
            "this advisory is about {}, the one in force ({}) about {}; if the port is now to plan for this storm, \
             take it with --other-storm",
            storm(new),
            first.file,
            storm(first.advisory)
        )));
    };
    let (file, old) = (chosen.file, chosen.advisory);
    let same = desk.loaded.taken(&then).into_iter().find(|(_, taken)| {
        is_same_storm(taken, new)
            && taken.issuer == new.issuer
            && (taken.issued, taken.number) == (new.issued, new.number)
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
