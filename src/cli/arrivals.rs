//! `snugdown arrivals`: when winds arrive, for a single forecast or for a port's own places.

use crate::advisory::forecast::Advisory;
use crate::advisory::read::read_forecast;
use crate::arrival::errors::ErrorTables;
use crate::arrival::odds::{Answers, Draw, ask};
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
use crate::output::setting::Setting;
use crate::output::wire::arrivals::arrivals_out;
use crate::output::wire::value::to_text;
use crate::time::clock::PortClock;
use crate::units::speed::Knots;
use clap::Args;
use std::path::PathBuf;

/// The winds that are asked about, weakest first.
const WINDS: [Knots; 3] = [Knots::GALE, Knots::STORM, Knots::HURRICANE];

/// What `arrivals` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct ArrivalsArgs {
    /// A Forecast/Advisory text, a forecast typed in as TOML, "-" for standard input, or a port's folder
    #[arg(value_name = "FORECAST")]
    pub forecast: PathBuf,
    /// A place in decimal degrees, north and east positive; may be given many times
    #[arg(long, value_name = "NAME=LAT,LON", value_parser = read_place, allow_hyphen_values = true)]
    pub at: Vec<NamedPlace>,
    /// The present time, for the forecast's age; for a port's folder also which advisory is in force
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// Write JSON
    #[arg(long)]
    pub json: bool,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
A port's folder brings its own places, its clock and the advisory in force. For a single forecast name places with --at;
without --now nothing depends on the clock.

Examples:
  snugdown arrivals advisory.txt --at 'Pilot station=22.3,-40.8' --at Quay=22.5,-41
  snugdown arrivals - --at Quay=22.5,-41 --json < advisory.txt
  snugdown arrivals demo-port";

/// A place given on the command line.
#[derive(Clone, Debug, PartialEq)]
pub struct NamedPlace {
    /// Its name.
    pub name: String,
    /// Where it is.
    pub position: Position,
}

fn read_place(text: &str) -> Result<NamedPlace, String> {
    // A name may hold "=", a position cannot.
    let (name, position) = text.rsplit_once('=').ok_or("write NAME=LAT,LON, as in Quay=22.5,-41.0")?;
    if name.trim().is_empty() {
        return Err("the place has no name; write NAME=LAT,LON, as in Quay=22.5,-41.0".to_owned());
    }
    let position = parse_decimal(position).map_err(|error| error.to_string())?;
    Ok(NamedPlace { name: name.trim().to_owned(), position })
}

/// Shows the arrivals.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &ArrivalsArgs) -> Result<Exit, Failure> {
    if args.forecast.is_dir() { for_port(args) } else { for_forecast(args) }
}

fn for_forecast(args: &ArrivalsArgs) -> Result<Exit, Failure> {
    if args.at.is_empty() {
        return Err(Failure::Usage(
            "name a place with --at NAME=LAT,LON, or name a port's folder".to_owned(),
        ));
    }
    let now = args.now.as_deref().map(|text| zoned_time("--now", text)).transpose()?;
    let file = args.forecast.display().to_string();
    let reading = read_forecast(&file, &read_bytes(&args.forecast)?);
    let sources = vec![reading.source];
    let Some(advisory) = reading.advisory else {
        return Err(Failure::Input { findings: reading.findings, sources });
    };
    tell_findings(&reading.findings, &sources);
    let answers = answers(&advisory, &args.at, &shipped_tables()?);
    let asked = Asked {
        advisory: &advisory,
        file: &file,
        clock: &PortClock::utc(),
        banner: String::new(),
        now,
        places: places(&args.at, &answers),
        notes: answers.notes.clone(),
    };
    finish(args, &asked, false)
}

fn for_port(args: &ArrivalsArgs) -> Result<Exit, Failure> {
    let loaded = load(&PortArgs::of(args.forecast.clone()))?;
    let setting = Setting::of(&loaded.port, &loaded.rules);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let Some((file, advisory)) = loaded.in_force(now) else {
        return Err(Failure::Usage(format!("no advisory has been taken by {}", setting.clock.show(now))));
    };
    let mut named: Vec<NamedPlace> = loaded
        .port
        .places
        .iter()
        .map(|place| NamedPlace { name: place.name.clone(), position: place.position })
        .collect();
    named.extend(args.at.iter().cloned());
    let answers = answers(advisory, &named, &loaded.tables);
    let asked = Asked {
        advisory,
        file,
        clock: setting.clock,
        banner: setting.banner(),
        now: Some(now),
        places: places(&named, &answers),
        notes: answers.notes.clone(),
    };
    finish(args, &asked, loaded.is_out_of_order(now))
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

fn places<'a>(named: &[NamedPlace], answers: &'a Answers) -> Vec<AskedPlace<'a>> {
    let one = |(number, place): (usize, &NamedPlace)| AskedPlace {
        name: place.name.clone(),
        position: place.position,
        winds: WINDS.into_iter().filter_map(|wind| Some((wind, answers.get(&key(number, wind))?))).collect(),
    };
    (0..).zip(named).map(one).collect()
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
