//! What a port would have been told at each advisory of a past storm, and what happened.
//!
//! `cargo run --release --example hindcast -- TEXTS BEST-TRACKS NAME=LAT,LON STORM`: TEXTS is a folder with the storm's advisories,
//! BEST-TRACKS one with `best-track-*.csv`, STORM its number there ("AL112017"). Prints a table: one row an advisory.
#![expect(clippy::print_stdout, reason = "a program that shows a table")]
#![allow(clippy::unwrap_used, clippy::panic, reason = "a program that cannot read its archive must fail")]

#[path = "../archive/mod.rs"]
mod archive;
#[path = "../../tests/storms/mod.rs"]
mod storms;

use archive::best_track::{BestTrack, There};
use chrono::{DateTime, TimeDelta, Utc};
use snugdown::advisory::forecast::Advisory;
use snugdown::advisory::read::read_forecast;
use snugdown::arrival::odds::{Answer, Draw, Quantile, ask};
use snugdown::geo::position::Position;
use snugdown::geo::position_text::parse_decimal;
use snugdown::time::moment::Moment;
use snugdown::units::chance::Chance;
use snugdown::wind::sphere::vector;
use std::path::Path;
use storms::{ask_about, shipped};

fn main() {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let [texts, tracks, place, storm] = arguments.as_slice() else {
        panic!("give TEXTS BEST-TRACKS NAME=LAT,LON STORM");
    };
    let (name, position) = place.rsplit_once('=').unwrap();
    let position = parse_decimal(position).unwrap();
    let track = archive::best_track::read(Path::new(tracks)).remove(storm.as_str()).unwrap();
    let (came, went) = gale(&track, position);
    println!("{storm} at {name}: {}\n", happened(came, went));
    println!(
        "| advisory | issued | 34 kt comes | 10 % | 50 % | 90 % | single track | first hour at 10 % | it came |"
    );
    println!("| --- | --- | --- | --- | --- | --- | --- | --- | --- |");
    for advisory in advisories(Path::new(texts)) {
        if came.is_some_and(|came| advisory.issued > came) {
            break;
        }
        println!("{}", row(&advisory, position, came));
    }
}

/// The advisories of a folder, by issue time.
fn advisories(folder: &Path) -> Vec<Advisory> {
    let files = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path());
    let mut advisories: Vec<Advisory> = files
        .filter(|path| path.extension().is_some_and(|extension| extension == "txt"))
        .filter_map(|path| read_forecast(&path.to_string_lossy(), &std::fs::read(&path).unwrap()).advisory)
        .collect();
    advisories.sort_by_key(|advisory| advisory.issued);
    advisories
}

/// When the best track's 34-kt wind was first and last at a place, to half an hour.
fn gale(track: &BestTrack, place: Position) -> (Option<DateTime<Utc>>, Option<DateTime<Utc>>) {
    let (Some(first), Some(last)) = (track.fixes().first(), track.fixes().last()) else {
        return (None, None);
    };
    let (mut time, mut came, mut went) = (first.time, None, None);
    while time <= last.time {
        if track.gale_at(vector(place), time) == There::Yes {
            came = came.or(Some(time));
            went = Some(time);
        }
        time += TimeDelta::minutes(30);
    }
    (came, went)
}

fn happened(came: Option<DateTime<Utc>>, went: Option<DateTime<Utc>>) -> String {
    match (came, went) {
        (Some(came), Some(went)) => {
            format!(
                "34 kt by the best track from {} to {}",
                came.format("%d %H:%MZ"),
                went.format("%d %H:%MZ")
            )
        }
        _ => "34 kt never came by the best track".to_owned(),
    }
}

fn row(advisory: &Advisory, place: Position, came: Option<DateTime<Utc>>) -> String {
    let table = shipped().for_advisory(advisory);
    let answers = ask(advisory, &table, &[ask_about("gale", place, 34.0)], Draw::default());
    let answer = answers.get("gale").unwrap();
    let number = advisory.number.map_or(String::new(), |number| number.to_string());
    let ahead = came.map_or(String::new(), |came| {
        format!("{:.0} h later", (came - advisory.issued).num_minutes() as f64 / 60.0)
    });
    let [p10, p50, p90] = [answer.earliest(), answer.likely(), answer.latest()].map(|q| quantile(answer, q));
    let [single, reckoned] = [answer.single_track, answer.first_reaching(Chance::share(1, 10))]
        .map(|at| at.map_or("-".to_owned(), |at| hours(answer, at)));
    let issued = advisory.issued.format("%d %H:%MZ");
    let chance = answer.chance();
    format!("| {number} | {issued} | {chance} | {p10} | {p50} | {p90} | {single} | {reckoned} | {ahead} |")
}

fn quantile(answer: &Answer, quantile: Quantile) -> String {
    match quantile {
        Quantile::At(at) => hours(answer, at),
        Quantile::AfterEnd => "after the end".to_owned(),
        Quantile::TooFew => "-".to_owned(),
    }
}

/// "27 h" after issue.
fn hours(answer: &Answer, at: Moment) -> String {
    format!("{:.0} h", (at - answer.issued).get() as f64 / 60.0)
}
