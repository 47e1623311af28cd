//! One row for each advisory and place with official odds: what was told, and what came.

use crate::archive::Archive;
use crate::archive::advisories::Entry;
use crate::archive::best_track::There;
use crate::archive::official::{LEADS_H, OfficialOdds};
use chrono::{DateTime, TimeDelta, Utc};
use snugdown::advisory::forecast::Advisory;
use snugdown::arrival::errors::ErrorTable;
use snugdown::arrival::odds::{Answer, Draw, ask};
use snugdown::arrival::question::{Question, Sought};
use snugdown::time::moment::{Minutes, Moment};
use snugdown::units::chance::Chance;
use snugdown::units::speed::Knots;
use snugdown::wind::sphere::vector;
use std::fmt::Write;

/// Who told.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Teller {
    /// This program, to whoever does not see whether the wind blows at issue.
    Told,
    /// This program, given that the wind does not blow at issue, as in all rows that count.
    Ours,
    /// The office.
    Official,
    /// The office's odds, recalibrated on the other seasons.
    Recalibrated,
    /// The forecast's own track, 0 or 1.
    Single,
}

/// One advisory and place.
pub struct Row {
    /// The storm's number.
    pub storm: String,
    /// Issue time as the archive writes it.
    pub issued: String,
    /// The place.
    pub site: String,
    /// When the wind came, hours after issue; `None` if not by 120 h after the base time.
    pub onset_h: Option<f64>,
    /// Hours from the base time to issue.
    pub age_h: f64,
    /// End of the forecast, hours after issue.
    pub end_h: f64,
    /// Chances by [`LEADS_H`].
    pub told: [f64; 7],
    /// Chances by [`LEADS_H`].
    pub ours: [f64; 7],
    /// Chances by [`LEADS_H`].
    pub official: [f64; 7],
    /// Chances by [`LEADS_H`].
    pub recalibrated: [f64; 7],
    /// Chances by [`LEADS_H`].
    pub single: [f64; 7],
    /// Earliest, likely, latest among onsets within the forecast, hours after issue.
    pub quantiles_h: Option<[f64; 3]>,
}

impl Row {
    /// 1 if the wind came by lead number `i`, else 0.
    pub fn happened(&self, i: usize) -> f64 {
        f64::from(self.onset_h.is_some_and(|onset| onset + self.age_h <= LEADS_H[i] as f64 + 1e-6))
    }

    /// What a teller said about lead number `i`.
    pub fn chance(&self, teller: Teller, i: usize) -> f64 {
        match teller {
            Teller::Told => self.told[i],
            Teller::Ours => self.ours[i],
            Teller::Official => self.official[i],
            Teller::Recalibrated => self.recalibrated[i],
            Teller::Single => self.single[i],
        }
    }

    /// Its season.
    pub fn season(&self) -> &str {
        self.storm.get(4..).unwrap_or_default()
    }
}

/// The rows of a season's Atlantic storms.
pub fn rows(archive: &Archive, season: &str, table: impl Fn(&Advisory) -> ErrorTable) -> Vec<Row> {
    let atlantic = |entry: &&Entry| entry.key.starts_with("AL") && entry.season() == season;
    archive
        .entries
        .iter()
        .filter(atlantic)
        .flat_map(|entry| rows_of(archive, entry, &table(&entry.advisory)))
        .collect()
}

fn hours(from: DateTime<Utc>, to: DateTime<Utc>) -> f64 {
    (to - from).num_seconds() as f64 / 3600.0
}

fn rows_of(archive: &Archive, entry: &Entry, table: &ErrorTable) -> Vec<Row> {
    let key = (entry.key.clone(), entry.issued.clone());
    let (Some(official), Some(track)) = (archive.official.get(&key), archive.tracks.get(&entry.key)) else {
        return Vec::new();
    };
    let advisory = &entry.advisory;
    let end = advisory.base + TimeDelta::hours(LEADS_H[6]);
    let mut asked: Vec<(&OfficialOdds, Option<f64>)> = Vec::new();
    for odds in official {
        let place = archive.sites[odds.site].position;
        if track.gale_at(vector(place), advisory.issued) != There::No {
            continue;
        }
        let Ok(onset) = track.onset(place, advisory.issued, end) else { continue };
        asked.push((odds, onset.map(|onset| hours(advisory.issued, onset))));
    }
    let questions: Vec<Question> = asked
        .iter()
        .map(|(odds, _)| Question {
            key: archive.sites[odds.site].name.clone(),
            position: archive.sites[odds.site].position,
            sought: Sought::Wind(Knots::GALE),
        })
        .collect();
    if questions.is_empty() {
        return Vec::new();
    }
    let answers = ask(advisory, table, &questions, Draw { scenarios: 1000, most: 1000 });
    asked
        .iter()
        .zip(&answers.answers)
        .map(|((odds, onset_h), answer)| row(entry, odds, *onset_h, answer))
        .collect()
}

fn row(entry: &Entry, odds: &OfficialOdds, onset_h: Option<f64>, answer: &Answer) -> Row {
    let advisory = &entry.advisory;
    let base = Moment::at_or_before(advisory.base);
    let by = LEADS_H.map(|lead| base + Minutes::hours(lead));
    let after_issue = |moment: Moment| (moment - answer.issued).get() as f64 / 60.0;
    let quantile = |tenths: usize| answer.quantile_within(Chance::share(tenths, 10)).map(after_issue);
    let quantiles_h = match [1, 5, 9].map(quantile) {
        [Some(earliest), Some(likely), Some(latest)] => Some([earliest, likely, latest]),
        _ => None,
    };
    Row {
        storm: entry.key.clone(),
        issued: entry.issued.clone(),
        site: answer.key.clone(),
        onset_h,
        age_h: hours(advisory.base, advisory.issued),
        end_h: after_issue(answer.forecast_end),
        told: by.map(|t| answer.chance_by(t).get()),
        ours: by.map(|t| answer.chance_by_unless_there(t).get()),
        official: odds.chances,
        recalibrated: odds.chances,
        single: by.map(|t| f64::from(answer.single_track.is_some_and(|onset| onset <= t))),
        quantiles_h,
    }
}

/// All rows as a table.
pub fn csv(rows: &[Row]) -> String {
    let mut text = String::from("storm,issued,site,age_h,end_h,onset_h,earliest_h,likely_h,latest_h");
    for teller in ["told", "ours", "official", "recalibrated", "single"] {
        for lead in LEADS_H {
            write!(text, ",{teller}_{lead}").unwrap();
        }
    }
    text.push('\n');
    let number = |value: Option<f64>| value.map(|value| format!("{value:.2}")).unwrap_or_default();
    for row in rows {
        write!(text, "{},{},{},{:.2},{:.2}", row.storm, row.issued, row.site, row.age_h, row.end_h).unwrap();
        write!(text, ",{}", number(row.onset_h)).unwrap();
        for i in 0..3 {
            write!(text, ",{}", number(row.quantiles_h.map(|quantiles| quantiles[i]))).unwrap();
        }
        for teller in [Teller::Told, Teller::Ours, Teller::Official, Teller::Recalibrated, Teller::Single] {
            for i in 0..7 {
                write!(text, ",{:.4}", row.chance(teller, i)).unwrap();
            }
        }
        text.push('\n');
    }
    text
}
