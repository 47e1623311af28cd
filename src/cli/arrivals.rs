//! `snugdown arrivals`: when winds arrive, for a single forecast or for a port's own places.

use crate::advisory::choice::{Choice, parse_cycle};
use crate::advisory::forecast::Advisory;
use crate::advisory::official_odds::{OfficialOdds, read_official_odds};
use crate::advisory::read::read_chosen;
use crate::arrival::earlier::{earlier_of, mostly_first};
use crate::arrival::errors::ErrorTables;
use crate::arrival::odds::{Answer, Answers, Draw, ask};
use crate::arrival::question::{Question, Sought};
use crate::cli::clock::{port_now, zoned_time};
use crate::cli::exit::{Exit, Failure};
use crate::cli::folder::read_bytes;
use crate::cli::load::{load, shipped_tables};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::{show, tell_findings, width};
use crate::geo::position::Position;
use crate::geo::position_text::parse_decimal;
use crate::output::arrivals_text::arrivals_text;
use crate::output::asked::{Asked, AskedPlace};
use crate::output::beside::{OfficialSource, beside};
use crate::output::setting::Setting;
use crate::output::wire::arrivals::arrivals_out;
use crate::output::wire::value::to_text;
use crate::record::fold::situation;
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use crate::units::chance::Chance;
use crate::units::speed::Knots;
use chrono::{DateTime, Utc};
use clap::Args;
use std::path::PathBuf;

/// The winds that are asked about, weakest first.
const WINDS: [Knots; 3] = [Knots::GALE, Knots::STORM, Knots::HURRICANE];

/// What `arrivals` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct ArrivalsArgs {
    /// An office's forecast text, a deck, a best track, a forecast typed in as TOML, "-" for standard input, or a port's
    /// folder
    #[arg(value_name = "FORECAST")]
    pub forecast: PathBuf,
    /// A place in decimal degrees, north and east positive; may be given many times
    #[arg(long, value_name = "NAME=LAT,LON", value_parser = read_place, allow_hyphen_values = true)]
    pub at: Vec<NamedPlace>,
    /// The present time, for the forecast's age; for a port's folder also which advisory is in force
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// The storm, where a file holds several: AL062018, AL06, 22W or its name
    #[arg(long, value_name = "STORM")]
    pub storm: Option<String>,
    /// The technique of a deck; the office's own forecast (OFCL) if not given
    #[arg(long, value_name = "NAME")]
    pub technique: Option<String>,
    /// The base time of a deck's forecast (the latest if not given), where a drill begins in a best track, or the date of
    /// a text that names no month: 2018083012
    #[arg(long, value_name = "YYYYMMDDHH", value_parser = read_cycle)]
    pub cycle: Option<DateTime<Utc>>,
    /// An official text of wind speed probabilities, shown beside our odds
    #[arg(long, value_name = "FILE")]
    pub official_odds: Option<PathBuf>,
    /// Write JSON
    #[arg(long)]
    pub json: bool,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
A port's folder brings its own places, its clock and the advisories in force. For a single
forecast name places with --at; without --now nothing depends on the clock. Official odds are
shown beside ours at places of the same name or position; the rules use ours. A best track
(b-deck, HURDAT2) makes a drill, not a forecast.

Examples:
  snugdown arrivals advisory.txt --at 'Pilot station=22.3,-40.8' --at Quay=22.5,-41
  snugdown arrivals - --at Quay=22.5,-41 --json < advisory.txt
  snugdown arrivals aal062018.dat --technique OFCL --cycle 2018091200 --at Quay=34.2,-77.9
  snugdown arrivals hurdat2.txt --storm AL062018 --cycle 2018091200 --at Quay=34.2,-77.9
  snugdown arrivals advisory.txt --at Acapulco=16.8,-99.9 --official-odds probabilities.txt
  snugdown arrivals demo-port";

/// A place given on the command line.
#[derive(Clone, Debug, PartialEq)]
pub struct NamedPlace {
    /// Its name.
    pub name: String,
    /// Where it is.
    pub position: Position,
    /// The listed place of the official odds that stands for it, if the port names one.
    pub listed: Option<String>,
}

fn read_place(text: &str) -> Result<NamedPlace, String> {
    // A name may hold "=", a position cannot.
    let (name, position) = text.rsplit_once('=').ok_or("write NAME=LAT,LON, as in Quay=22.5,-41.0")?;
    if name.trim().is_empty() {
        return Err("the place has no name; write NAME=LAT,LON, as in Quay=22.5,-41.0".to_owned());
    }
    let position = parse_decimal(position).map_err(|error| error.to_string())?;
    Ok(NamedPlace { name: name.trim().to_owned(), position, listed: None })
}

/// Shows the arrivals.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &ArrivalsArgs) -> Result<Exit, Failure> {
    if args.forecast.is_dir() { for_port(args) } else { for_forecast(args) }
}

fn read_cycle(text: &str) -> Result<DateTime<Utc>, String> {
    parse_cycle(text).ok_or_else(|| "write year, month, day and hour in UTC, as in 2018083012".to_owned())
}

fn for_forecast(args: &ArrivalsArgs) -> Result<Exit, Failure> {
    if args.at.is_empty() {
        return Err(Failure::Usage(
            "name a place with --at NAME=LAT,LON, or name a port's folder".to_owned(),
        ));
    }
    let now = args.now.as_deref().map(|text| zoned_time("--now", text)).transpose()?;
    let file = args.forecast.display().to_string();
    let choice = Choice {
        storm: args.storm.clone(),
        technique: args.technique.clone(),
        cycle: args.cycle,
        taken: now.map(Moment::to_utc),
    };
    let reading = read_chosen(&file, &read_bytes(&args.forecast)?, &choice);
    let sources = vec![reading.source];
    let Some(advisory) = reading.advisory else {
        return Err(Failure::Input { findings: reading.findings, sources });
    };
    tell_findings(&reading.findings, &sources);
    let given = given_odds(args)?;
    let storms = vec![Storm {
        file: &file,
        advisory: &advisory,
        answers: answers(&advisory, &args.at, &shipped_tables()?),
    }];
    let official = given.as_ref().map(|(file, odds)| OfficialSource { file, odds });
    let clock = PortClock::utc();
    let telling = Telling { clock: &clock, banner: String::new(), now, official };
    tell(args, &storms, &args.at, telling, false)
}

fn for_port(args: &ArrivalsArgs) -> Result<Exit, Failure> {
    if args.storm.is_some() || args.technique.is_some() || args.cycle.is_some() {
        return Err(Failure::Usage(
            "--storm, --technique and --cycle pick from a single file; in a port's record the event that takes it says them"
                .to_owned(),
        ));
    }
    let loaded = load(&PortArgs::of(args.forecast.clone()))?;
    let setting = Setting::of(&loaded.port, &loaded.rules);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let then = situation(&loaded.events, now.to_utc());
    let force = loaded.in_force(&then);
    if force.storms.is_empty() {
        return Err(Failure::Usage(format!("no advisory has been taken by {}", setting.clock.show(now))));
    }
    let mut named: Vec<NamedPlace> = loaded
        .port
        .places
        .iter()
        .map(|place| NamedPlace {
            name: place.name.clone(),
            position: place.position,
            listed: place.official_place.clone(),
        })
        .collect();
    named.extend(args.at.iter().cloned());
    let storms: Vec<Storm> = force
        .storms
        .iter()
        .map(|chosen| Storm {
            file: chosen.file,
            advisory: chosen.advisory,
            answers: answers(chosen.advisory, &named, &loaded.tables),
        })
        .collect();
    let given = given_odds(args)?;
    let own = storms.iter().find_map(|storm| loaded.official_odds(storm.advisory, &then));
    let official = given.as_ref().map(|(file, odds)| (file.as_str(), odds)).or(own);
    let official = official.map(|(file, odds)| OfficialSource { file, odds });
    let telling = Telling { clock: setting.clock, banner: setting.banner(), now: Some(now), official };
    tell(args, &storms, &named, telling, loaded.is_out_of_order(now))
}

/// One storm with its odds.
struct Storm<'a> {
    file: &'a str,
    advisory: &'a Advisory,
    answers: Answers,
}

/// How arrivals are told.
struct Telling<'a> {
    clock: &'a PortClock,
    banner: String,
    now: Option<Moment>,
    official: Option<OfficialSource<'a>>,
}

/// The official odds named on the command line.
fn given_odds(args: &ArrivalsArgs) -> Result<Option<(String, OfficialOdds)>, Failure> {
    let Some(path) = &args.official_odds else { return Ok(None) };
    let file = path.display().to_string();
    let reading = read_official_odds(&file, &read_bytes(path)?);
    match reading.odds {
        Some(odds) => Ok(Some((file, odds))),
        None => Err(Failure::Input { findings: reading.findings, sources: vec![reading.source] }),
    }
}

fn tell(
    args: &ArrivalsArgs,
    storms: &[Storm<'_>],
    named: &[NamedPlace],
    telling: Telling<'_>,
    is_out_of_order: bool,
) -> Result<Exit, Failure> {
    let all: Vec<&Answers> = storms.iter().map(|storm| &storm.answers).collect();
    let (Some(first), Some(together)) = (storms.first(), earlier_of(&all)) else {
        return Err(Failure::NoPlan);
    };
    let Telling { clock, banner, now, official } = telling;
    let of_odds = official.and_then(|official| {
        let same = |storm: &&Storm<'_>| official.odds.storm == storm.advisory.storm.id;
        storms.iter().find(same)
    });
    let mut notes = together.notes.clone();
    if let Some(official) = official {
        notes.extend(odds_note(&official, of_odds.map(|storm| storm.advisory)));
    }
    let places = (0..)
        .zip(named)
        .map(|(number, place)| AskedPlace {
            name: place.name.clone(),
            position: place.position,
            winds: winds(&together, number),
            first_storms: WINDS.iter().map(|wind| first_storm(storms, &all, &key(number, *wind))).collect(),
            beside: official.zip(of_odds).map(|(official, storm)| {
                let rows = official.odds.of_place(place.listed.as_deref(), &place.name, place.position);
                beside(official.odds, &rows, &winds(&storm.answers, number))
            }),
        })
        .collect();
    let asked = Asked {
        advisory: first.advisory,
        file: first.file,
        other_storms: storms.iter().skip(1).map(|storm| (storm.file, storm.advisory)).collect(),
        official,
        clock,
        banner,
        now,
        places,
        notes,
    };
    finish(args, &asked, is_out_of_order)
}

/// The storm that mostly brings a wind first, where there are several.
fn first_storm<'a>(storms: &'a [Storm<'_>], answers: &[&Answers], key: &str) -> Option<(&'a str, Chance)> {
    let (index, share) = mostly_first(answers, key).filter(|_| storms.len() > 1)?;
    Some((storms.get(index)?.advisory.storm.name.as_str(), share))
}

/// What must be said of official odds that are of another storm or of another advisory.
fn odds_note(official: &OfficialSource<'_>, storm: Option<&Advisory>) -> Option<String> {
    let of = official.odds.storm.as_deref().unwrap_or("no named storm");
    let Some(advisory) = storm else {
        return Some(format!("{} is of {of}, another storm: it is not shown", official.file));
    };
    (official.odds.issued != advisory.issued).then(|| {
        format!(
            "{} was issued {}, the advisory {}: the two are not of the same forecast",
            official.file,
            official.odds.issued.format("%Y-%m-%d %H:%MZ"),
            advisory.issued.format("%Y-%m-%d %H:%MZ")
        )
    })
}

fn winds(answers: &Answers, number: usize) -> Vec<(Knots, &Answer)> {
    WINDS.into_iter().filter_map(|wind| Some((wind, answers.get(&key(number, wind))?))).collect()
}

fn answers(advisory: &Advisory, places: &[NamedPlace], tables: &ErrorTables) -> Answers {
    let questions: Vec<Question> = (0..)
        .zip(places)
        .flat_map(|(number, place)| {
            WINDS.map(|limit| Question {
                key: key(number, limit),
                position: place.position,
                sought: Sought::Wind(limit),
            })
        })
        .collect();
    ask(advisory, &tables.for_advisory(advisory), &questions, Draw::default())
}

/// Two places may bear one name, so questions go by number.
fn key(number: usize, wind: Knots) -> String {
    format!("{number} {wind}")
}

fn finish(args: &ArrivalsArgs, asked: &Asked, is_out_of_order: bool) -> Result<Exit, Failure> {
    if args.json {
        show(&to_text(&arrivals_out(asked))?)?;
    } else {
        show(&arrivals_text(asked, width(args.width)))?;
    }
    Ok(if asked.is_overdue() || is_out_of_order { Exit::Stale } else { Exit::Fits })
}
