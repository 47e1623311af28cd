//! Arrivals as plain text: a sentence for each wind at each place, and the chance hour by hour.

use crate::arrival::odds::Answer;
use crate::output::arrival_text::onset_sentence;
use crate::output::asked::{Asked, onset};
use crate::output::beside_text::write_beside;
use crate::output::clock_text::{Times, lasting};
use crate::output::layout::{Page, columns, glued};
use crate::time::moment::{Minutes, Moment};
use crate::units::speed::Knots;

/// Room for "within" and for "34 kt".
const MARGIN: usize = 8;
/// Hours after issue at which the chance is printed; all hours stand in the JSON. Our choice.
const HOURS: [i64; 9] = [6, 12, 24, 36, 48, 60, 72, 96, 120];
/// Room for one chance: ">99 %".
const CELL: usize = 7;

/// The arrivals, `width` columns wide.
#[must_use]
pub fn arrivals_text(asked: &Asked, width: usize) -> String {
    let issued = Moment::at_or_before(asked.advisory.issued);
    // Without a time asked for, times are seen from the issue.
    let times = Times::new(asked.clock, asked.now.unwrap_or(issued));
    let mut page = Page::new(width);
    if !asked.banner.is_empty() {
        page.text(0, &asked.banner);
    }
    page.text(0, &head(&times, asked, issued));
    for place in &asked.places {
        page.section(&place.name, &position_words(place.position.latitude(), place.position.longitude()));
        let firsts = place.first_storms.iter().chain(std::iter::repeat(&None));
        for ((wind, answer), first) in place.winds.iter().zip(firsts) {
            let end = Some(answer.forecast_end);
            let mut sentence = format!("{}.", onset_sentence(&times, &onset(answer), end));
            if let Some((storm, share)) = first {
                sentence.push_str(&format!(
                    " {storm} brings it first in {share} of the scenarios in which it comes."
                ));
            }
            page.labelled(MARGIN, &wind.to_string(), &sentence);
            page.text(MARGIN, &single_track(&times, answer));
        }
        write_hours(&mut page, &place.winds);
        if let (Some(official), Some(beside)) = (&asked.official, &place.beside) {
            write_beside(&mut page, &times, official, beside, issued);
        }
    }
    if !asked.notes.is_empty() {
        page.section("NOTES", "");
        asked.notes.iter().for_each(|note| page.labelled(2, "-", note));
    }
    page.finish()
}

fn head(times: &Times, asked: &Asked, issued: Moment) -> String {
    let advisory = asked.advisory;
    let number = advisory.number.map_or(String::new(), |number| format!("{number} "));
    let mut words = format!(
        "Advisory {number}on {}, issued {} by {}; winds are a {}, chances count from the issue.",
        advisory.storm.name,
        times.full(issued),
        advisory.issuer,
        advisory.averaging,
    );
    if let Some(now) = asked.now {
        words.push_str(&format!(
            " It is {}\u{a0}old at {}.",
            lasting(advisory.age_at(now.to_utc())),
            times.full(now)
        ));
    }
    if advisory.is_drill {
        words.push_str(" THIS IS NO FORECAST: it tells what happened, with the spread of a forecast.");
    }
    for (file, other) in &asked.other_storms {
        let issued = times.both(Moment::at_or_before(other.issued));
        words.push_str(&format!(
            " {} is in force too ({file}, issued {issued}): what stands below is of all storms together.",
            other.storm.name
        ));
    }
    if let Some(due) = asked.overdue_since(advisory) {
        words.push_str(&format!(" NOT CURRENT: the next one was due {}.", times.both(due)));
    }
    words
}

fn single_track(times: &Times, answer: &Answer) -> String {
    answer.single_track.map_or("On the forecast track itself it never comes.".to_owned(), |at| {
        format!(
            "On the forecast track itself, without its errors, it comes {}.",
            times.both(times.told_down(at))
        )
    })
}

/// The chance hour by hour, as many columns as the page has room for.
fn write_hours(page: &mut Page, winds: &[(Knots, &Answer)]) {
    let fitting = ((page.width() - MARGIN) / CELL).min(HOURS.len());
    let hours: Vec<i64> = HOURS.into_iter().skip(HOURS.len() - fitting).collect();
    let row =
        |cell: &dyn Fn(i64) -> String| -> String { hours.iter().map(|hour| right(&cell(*hour))).collect() };
    page.labelled(MARGIN, "within", &row(&|hour| format!("{hour} h")));
    for (wind, answer) in winds {
        let chance = |hour| answer.chance_by(answer.issued + Minutes::hours(hour)).to_string();
        page.labelled(MARGIN, &wind.to_string(), &row(&chance));
    }
}

fn right(text: &str) -> String {
    glued(&format!("{}{text}", " ".repeat(CELL.saturating_sub(columns(text)))))
}

/// "22.30 N 40.80 W".
fn position_words(latitude: f64, longitude: f64) -> String {
    let north = if latitude < 0.0 { 'S' } else { 'N' };
    let east = if longitude < 0.0 { 'W' } else { 'E' };
    format!("{:.2} {north} {:.2} {east}", latitude.abs(), longitude.abs())
}
