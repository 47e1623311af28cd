//! `snugdown wind`: the wind at a place of the port, hour by hour, and when each limit there is met.

use crate::advisory::forecast::{Advisory, Motion};
use crate::arrival::odds::{Answers, Draw, ask};
use crate::arrival::question::Question;
use crate::arrival::series::{View, wind_series};
use crate::cli::clock::port_now;
use crate::cli::exit::{Exit, Failure};
use crate::cli::load::{Loaded, load};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::{show, width};
use crate::finding::fault::nearest;
use crate::geo::exposure::ExposureClass;
use crate::geo::geodesic::distance;
use crate::output::setting::Setting;
use crate::output::wind_asked::{LimitAsked, WindAsked};
use crate::output::wind_text::wind_text;
use crate::output::wire::value::to_text;
use crate::output::wire::wind::wind_out;
use crate::plan::in_force::Chosen;
use crate::port::harbour::Place;
use crate::record::fold::situation;
use crate::rules::limit::LimitAt;
use crate::time::moment::{Minutes, Moment};
use crate::units::length::{Metres, NauticalMiles};
use crate::units::speed::Knots;
use crate::units::wind::{Averaging, standard_height};
use crate::wind::averaging::conversion;
use crate::wind::climatology::radius_of_greatest_wind_nmi;
use crate::wind::swell::{FORERUNNER_PERIODS_S, StormWaves, hours_over, storm_waves};
use crate::work::questions::{head_key, limits_at, question_key, questions_at, seas_at};
use clap::Args;
use clap::value_parser;

/// What `wind` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct WindArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// The place: its id or name
    #[arg(value_name = "PLACE")]
    pub place: String,
    /// The storm, where several are in force: its name or number; else the one whose advisory is newest
    #[arg(long, value_name = "STORM")]
    pub storm: Option<String>,
    /// Over which time the mean wind is averaged: "1 min", "2 min", "3 min" or "10 min"; else as the advisory does
    #[arg(long, value_name = "TIME", value_parser = read_averaging)]
    pub over: Option<Averaging>,
    /// The height above the ground: "50 m"
    #[arg(long, value_name = "HEIGHT", value_parser = read_height)]
    pub height: Option<Metres>,
    /// A row every so many hours
    #[arg(long, value_name = "HOURS", default_value_t = 3, value_parser = value_parser!(i64).range(1..=24))]
    pub every: i64,
    /// The present time; else the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// Write JSON, every hour
    #[arg(long)]
    pub json: bool,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
Mean wind and gusts stand for the place as it lies (its exposure by direction), not for the open sea. Limits of the port's
own files at the place follow, each with its own odds.

Examples:
  snugdown wind demo-port pilot-station
  snugdown wind demo-port greywether --height '50 m' --over '10 min' --every 1";

fn read_averaging(text: &str) -> Result<Averaging, String> {
    let mean = Averaging::parse(text).filter(|averaging| *averaging != Averaging::Gust3s);
    mean.ok_or_else(|| {
        "write \"1 min\", \"2 min\", \"3 min\" or \"10 min\"; gusts are told beside it".to_owned()
    })
}

fn read_height(text: &str) -> Result<Metres, String> {
    let height = Metres::parse(text).map_err(|error| error.to_string())?;
    if (1.0..=250.0).contains(&height.get()) { Ok(height) } else { Err("a height of 1 to 250 m".to_owned()) }
}

/// Shows the wind.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &WindArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let setting = Setting::of(&loaded.port, &loaded.rules);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let place = find_place(&args.place, &loaded)?;
    let then = situation(&loaded.events, now.to_utc());
    let storms = loaded.in_force(&then).storms;
    let Some(chosen) = find_storm(args.storm.as_deref(), &storms)? else {
        return Err(Failure::Usage(format!("no advisory has been taken by {}", setting.clock.show(now))));
    };
    let (file, advisory) = (chosen.file, chosen.advisory);
    let table = loaded.tables.for_advisory(advisory);
    let answers = ask(advisory, &table, &asked_there(&loaded, place, advisory), Draw::default());
    let averaging = args.over.unwrap_or(advisory.averaging);
    let height = args.height.unwrap_or_else(standard_height);
    let view = View { position: place.position, exposure: &place.exposure, averaging, height };
    let gale = answers.get(&head_key(&place.id, Knots::GALE)).ok_or(Failure::NoPlan)?;
    let Some(series) = wind_series(advisory, &table, view, gale) else {
        return Err(Failure::Usage("the advisory gives no track to follow".to_owned()));
    };
    let asked = WindAsked {
        setting: &setting,
        advisory: (advisory, file),
        now,
        place: place.name.clone(),
        position: place.position,
        exposure: &place.exposure,
        averaging,
        height,
        series,
        gale,
        seas: answers.get(&question_key(&seas_at(&place.id))),
        swell: swell(advisory, place),
        waves: waves(advisory),
        limits: limits(&loaded, place, &answers),
        notes: others(&storms, chosen).into_iter().chain(answers.notes.clone()).collect(),
    };
    if args.json {
        show(&to_text(&wind_out(&asked))?)?;
    } else {
        show(&wind_text(&asked, args.every, width(args.width)))?;
    }
    let is_overdue = advisory.next_due.filter(|_| !advisory.is_last).is_some_and(|due| due < now.to_utc());
    Ok(if is_overdue || loaded.is_out_of_order(now) { Exit::Stale } else { Exit::Fits })
}

fn find_place<'a>(asked: &str, loaded: &'a Loaded) -> Result<&'a Place, Failure> {
    let is_meant = |name: &str| name.to_lowercase() == asked.trim().to_lowercase();
    let places = &loaded.port.places;
    if let Some(place) = places.iter().find(|place| is_meant(&place.id) || is_meant(&place.name)) {
        return Ok(place);
    }
    let ids: Vec<&str> = places.iter().map(|place| place.id.as_str()).collect();
    let names = places.iter().map(|place| place.name.as_str());
    let hint = nearest(asked, ids.iter().copied().chain(names))
        .map_or(format!("known are {}", ids.join(", ")), |meant| format!("did you mean \"{meant}\"?"));
    Err(Failure::Usage(format!("the port has no place \"{asked}\"; {hint}")))
}

/// The storm asked for; the newest advisory's if none was. `None` if there is no storm at all.
fn find_storm<'a, 'b>(
    asked: Option<&str>,
    storms: &'b [Chosen<'a>],
) -> Result<Option<&'b Chosen<'a>>, Failure> {
    let Some(asked) = asked else { return Ok(storms.first()) };
    let names = |chosen: &'b Chosen<'a>| {
        [Some(chosen.advisory.storm.name.as_str()), chosen.advisory.storm.id.as_deref()]
    };
    let is_meant = |name: &str| name.to_lowercase() == asked.trim().to_lowercase();
    let found = storms.iter().find(|chosen| names(chosen).into_iter().flatten().any(is_meant));
    let known: Vec<&str> = storms.iter().map(|chosen| chosen.advisory.storm.name.as_str()).collect();
    match (found, known.is_empty()) {
        (None, false) => Err(Failure::Usage(format!("--storm: in force are {}", known.join(", ")))),
        (found, _) => Ok(found),
    }
}

/// That other storms are in force as well.
fn others(storms: &[Chosen<'_>], chosen: &Chosen<'_>) -> Vec<String> {
    let others = storms.iter().filter(|storm| storm.file != chosen.file);
    let told = others.map(|storm| {
        let name = &storm.advisory.storm.name;
        format!("{name} is in force as well: this page leaves it out; ask for it with --storm {name}")
    });
    told.collect()
}

fn asked_there(loaded: &Loaded, place: &Place, advisory: &Advisory) -> Vec<Question> {
    questions_at(place, &loaded.rules, &loaded.work, advisory.averaging)
}

fn limits<'a>(loaded: &Loaded, place: &Place, answers: &'a Answers) -> Vec<LimitAsked<'a>> {
    let told = limits_at(&place.id, &loaded.rules, &loaded.work);
    let one = |(limit, used_by): (&LimitAt, Vec<String>)| {
        let answer = answers.get(&question_key(limit))?;
        Some(LimitAsked { limit: limit.limit.to_string(), used_by, answer })
    };
    told.into_iter().filter_map(one).collect()
}

/// When swell of the longest and of the shorter forerunner period that left the storm at issue is at the place.
fn swell(advisory: &Advisory, place: &Place) -> [Moment; 2] {
    let issued = Moment::at_or_before(advisory.issued);
    let away =
        advisory.points.first().map_or(NauticalMiles::ZERO, |now| distance(now.position, place.position));
    FORERUNNER_PERIODS_S.map(|period| issued + Minutes::new((hours_over(away, period) * 60.0) as i64))
}

fn waves(advisory: &Advisory) -> Option<StormWaves> {
    let present = advisory.points.first()?;
    let wind = present.max_wind.get();
    let ten_minutes = wind * conversion(ExposureClass::AtSea, advisory.averaging, Averaging::Minute10);
    let forward = match advisory.motion? {
        Motion::Towards(_, speed) => speed,
        Motion::Stationary => Knots::ZERO,
    };
    let core = radius_of_greatest_wind_nmi(wind, present.position.latitude());
    storm_waves(Knots::clamped(ten_minutes), forward, NauticalMiles::clamped(core))
}
