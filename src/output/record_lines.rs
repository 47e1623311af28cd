//! The record as people and programs read it: one line an event.

use crate::output::clock_text::Times;
use crate::output::escape::visible;
use crate::output::layout::Page;
use crate::output::setting::Setting;
use crate::plan::news::news_words;
use crate::record::event::Event;
use crate::time::moment::Moment;
use chrono::{DateTime, Utc};

/// An event in the record, with what the record knows about it.
#[derive(Clone, Debug, PartialEq)]
pub struct RecordLine {
    /// The event.
    pub event: Event,
    /// When it was written down; `None` if the record is a text.
    pub recorded: Option<DateTime<Utc>>,
    /// The first digits of the chain's head after it; empty if the record is a text.
    pub chain: String,
    /// Whether a later event takes it back.
    pub is_withdrawn: bool,
    /// Whether it still waits for a second person.
    pub is_waiting: bool,
}

/// The events as text, `width` columns wide.
#[must_use]
pub fn record_text(lines: &[RecordLine], setting: &Setting, width: usize) -> String {
    let last = lines.iter().map(|line| line.event.known).max().unwrap_or_default();
    let times = Times::new(setting.clock, Moment::at_or_before(last));
    let mut page = Page::new(width);
    let banner = setting.banner();
    if !banner.is_empty() {
        page.text(0, &banner);
    }
    let record = if setting.record.is_empty() { String::new() } else { format!(": {}", setting.record) };
    page.text(0, &format!("{}: the record{record}", setting.port.to_uppercase()));
    page.gap();
    for line in lines {
        let state = match (line.is_withdrawn, line.is_waiting) {
            (true, _) => "WITHDRAWN: ",
            (false, true) => "WAITS FOR A SECOND PERSON: ",
            (false, false) => "",
        };
        let at = Moment::at_or_before(line.event.known);
        let words = format!("{} {state}{}", times.both(at), visible(&news_words(&line.event, setting.clock)));
        page.labelled(MARGIN, &line.event.number.to_string(), &words);
    }
    page.finish()
}

/// Room for the number of an event.
const MARGIN: usize = 7;
