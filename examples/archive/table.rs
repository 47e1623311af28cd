//! Comma-separated tables, packed or plain.

use chrono::{DateTime, NaiveDateTime, Utc};
use flate2::read::GzDecoder;
use serde::de::DeserializeOwned;
use std::fs::File;
use std::io::Read;
use std::path::Path;

/// All rows of `folder/name.csv.gz` or `folder/name.csv`.
pub fn rows<T: DeserializeOwned>(folder: &Path, name: &str) -> Vec<T> {
    let packed = folder.join(format!("{name}.csv.gz"));
    let plain = folder.join(format!("{name}.csv"));
    if packed.exists() { rows_of(&packed) } else { rows_of(&plain) }
}

/// All rows of one file. Longer rows than the header's are cut: some archives write commas into their last column.
pub fn rows_of<T: DeserializeOwned>(path: &Path) -> Vec<T> {
    let file = File::open(path).unwrap_or_else(|error| panic!("{}: {error}", path.display()));
    let is_packed = path.extension().is_some_and(|extension| extension == "gz");
    let text: Box<dyn Read> = if is_packed { Box::new(GzDecoder::new(file)) } else { Box::new(file) };
    let mut reader = csv::ReaderBuilder::new().flexible(true).from_reader(text);
    reader
        .deserialize()
        .map(|row| row.unwrap_or_else(|error| panic!("{}: {error}", path.display())))
        .collect()
}

/// "2006-06-10T13:00Z".
pub fn instant(text: &str) -> DateTime<Utc> {
    NaiveDateTime::parse_from_str(text, "%Y-%m-%dT%H:%MZ")
        .unwrap_or_else(|error| panic!("\"{text}\" is no time: {error}"))
        .and_utc()
}
