//! The record brought in from a text, and out into one.

use crate::cli::exit::{Exit, Failure};
use crate::cli::folder::PortFolder;
use crate::cli::kept::{Kept, STORE, TEXT};
use crate::cli::load::load;
use crate::cli::port_args::PortArgs;
use crate::cli::screen::show;
use crate::record::event::What;
use crate::store::chain::{Head, digest};
use crate::store::error::StoreError;
use crate::store::file::{Addition, Store};
use crate::store::written::events_toml;
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;
use std::fs;
use std::path::Path;

/// Makes a record of a text, with the advisories that it names; the text stays as it is.
///
/// # Errors
/// Any [`Failure`]; [`Failure::Usage`] if the folder's record holds events already.
pub fn import(folder: &Path, text: &Path, recorded: DateTime<Utc>) -> Result<Exit, Failure> {
    let port = PortArgs { folder: folder.to_owned(), record: Some(text.to_owned()) };
    let loaded = load(&port)?;
    let files = PortFolder::open(folder)?;
    let mut events = loaded.events;
    events.sort_by_key(|event| event.number);
    let mut papers = BTreeMap::new();
    for event in &mut events {
        if let What::AdvisoryTaken(taking) = &mut event.what
            && let Some(bytes) = files.bytes(&taking.file)?
        {
            taking.digest = digest(&bytes);
            papers.insert(taking.digest.clone(), bytes);
        }
    }
    let path = folder.join(STORE);
    let mut store = if path.exists() { Store::open(&path)? } else { Store::create(&path)? };
    if store.head()? != Head::beginning() {
        return Err(Failure::Usage(format!(
            "{} holds events already; a text is brought in only where there are none",
            path.display()
        )));
    }
    let papers: Vec<Vec<u8>> = papers.into_values().collect();
    let recorded = loaded.port.exercise.unwrap_or(recorded);
    let head = store.append(&Head::beginning(), Addition { events: &events, papers: &papers, recorded })?;
    show(&format!(
        "{}: {head}; {} advisories\n{} is no longer read: move it out of the folder\n",
        path.display(),
        papers.len(),
        text.display()
    ))?;
    Ok(Exit::Fits)
}

/// Writes the record into a folder that is made for it: events.toml, and the advisories under their names.
///
/// # Errors
/// Any [`Failure`]; [`Failure::Usage`] if the port has no record but a text.
pub fn export(port: &PortArgs, to: &Path) -> Result<Exit, Failure> {
    let loaded = load(port)?;
    let mut folder = PortFolder::open(&port.folder)?;
    let Kept::Store(kept) = Kept::of(port, &mut folder)? else {
        return Err(Failure::Usage(format!("the port has no {STORE}; its record is a text already")));
    };
    let (events, head) = (&kept.events, &kept.head);
    let title = format!("{}\n{}: the record as of {head}", loaded.port.invented, loaded.port.name);
    let text = events_toml(events, &loaded.port.clock, title.trim_start()).map_err(|error| {
        StoreError::Other { file: kept.store.shown().to_owned(), what: error.to_string() }
    })?;
    let disk = |path: &Path| {
        let shown = path.display().to_string();
        move |error| Failure::from(StoreError::disk(&shown, error))
    };
    fs::create_dir(to).map_err(disk(to))?;
    for event in events {
        if let What::AdvisoryTaken(taking) = &event.what
            && let Some(bytes) = kept.store.paper(&taking.digest)?
        {
            let path = to.join(&taking.file);
            if let Some(parent) = path.parent() {
                fs::create_dir_all(parent).map_err(disk(parent))?;
            }
            fs::write(&path, bytes).map_err(disk(&path))?;
        }
    }
    let path = to.join(TEXT);
    fs::write(&path, text).map_err(disk(&path))?;
    show(&format!("{}: {head}\n", path.display()))?;
    Ok(Exit::Fits)
}
