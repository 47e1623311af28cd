//! Where a command records: it reads the port, checks what is to be recorded, writes it down, and tells what it changed.

use crate::advisory::forecast::Advisory;
use crate::cli::clock::{port_now, wall_time};
use crate::cli::draft::{Draft, Voice, text_of};
use crate::cli::exit::{Exit, Failure};
use crate::cli::forecasts::taking;
use crate::cli::kept::{STORE, TEXT, store_path};
use crate::cli::load::{Loaded, load};
use crate::cli::planning::{latest, plan_with_news, plans_until};
use crate::cli::screen::{show, tell, tell_findings, width};
use crate::cli::write_args::WriteArgs;
use crate::finding::fault::{Finding, has_error};
use crate::finding::source::SourceText;
use crate::output::changes_brief::changes_brief;
use crate::output::setting::Setting;
use crate::plan::changes::changes_by;
use crate::plan::news::news_words;
use crate::record::doubt::doubts_of_new;
use crate::record::event::Event;
use crate::record::mention::{MentionKind, mentions};
use crate::record::reader::read_events;
use crate::store::chain::Head;
use crate::store::error::StoreError;
use crate::store::file::{Addition, Store};
use crate::store::form::in_utc;
use crate::time::moment::Moment;
use crate::work::strangers::strangers;
use chrono::TimeDelta;
use std::collections::BTreeSet;

/// How often a command reads again because others wrote in between, before it gives up.
const TRIES: usize = 20;

/// A clock this far before the last event is wrong for certain, and nothing is recorded by it. Our choice.
const SLOW_CLOCK: TimeDelta = TimeDelta::hours(24);

/// A port that something is to be recorded for.
#[derive(Debug)]
pub struct Desk<'a> {
    args: &'a WriteArgs,
    /// The port as it stands.
    pub loaded: Loaded,
    /// When what is recorded becomes known.
    pub now: Moment,
    voice: Voice,
    /// The last event that the user has seen: as said, else the last when the command began.
    seen: usize,
}

/// An advisory that came in: its bytes are kept in the record.
#[derive(Clone, Debug)]
pub struct Paper {
    /// The name under which it is kept.
    pub file: String,
    /// Its bytes.
    pub bytes: Vec<u8>,
    /// What it says; `None` for official odds, which no plan stands on.
    pub advisory: Option<Advisory>,
}

impl<'a> Desk<'a> {
    /// Reads the port.
    ///
    /// # Errors
    /// Any [`Failure`]; [`Failure::Usage`] if nobody is named, or if the port's record is a text.
    pub fn open(args: &'a WriteArgs) -> Result<Desk<'a>, Failure> {
        let Some(by) = args.by.clone().filter(|by| !by.trim().is_empty()) else {
            return Err(Failure::Usage("say who says so: --by 'Duty officer'".to_owned()));
        };
        let loaded = load(&args.port)?;
        if loaded.head.is_none() && (args.port.record.is_some() || !loaded.events.is_empty()) {
            return Err(Failure::Usage(format!(
                "this record is a text ({TEXT}), to which nothing is added; make a {STORE} of it with 'snugdown record \
                 import', or name another with --record"
            )));
        }
        let now = port_now(args.now.as_deref(), &loaded.port.clock, loaded.port.exercise)?;
        let voice = Voice {
            at: in_utc(now.to_utc()),
            by,
            name: args.name.clone(),
            on_behalf: args.on_behalf.clone(),
            reason: args.reason.clone(),
        };
        let last = loaded.events.iter().map(|event| event.number).max().unwrap_or(0);
        let desk = Desk { args, loaded, now, voice, seen: args.seen.unwrap_or(last) };
        desk.check_clock()?;
        Ok(desk)
    }

    /// Whether whoever records is another person than the one who ordered this.
    #[must_use]
    pub fn is_another_than(&self, order: &Event) -> bool {
        let own = Event {
            by: self.voice.by.clone(),
            name: self.voice.name.clone().unwrap_or_default(),
            ..order.clone()
        };
        own.is_by_another(order)
    }

    /// A clock that was put back would hide what is told behind what is known.
    fn check_clock(&self) -> Result<(), Failure> {
        let Some(last) = self.loaded.events.iter().max_by_key(|event| event.known) else { return Ok(()) };
        if self.now.to_utc() >= last.known || self.args.now.is_some() {
            return Ok(());
        }
        let clock = &self.loaded.port.clock;
        let words = format!(
            "the clock says {}, but event {} was known {}",
            clock.show(self.now),
            last.number,
            clock.show(Moment::at_or_before(last.known))
        );
        if last.known - self.now.to_utc() > SLOW_CLOCK {
            return Err(Failure::Usage(format!("{words}: set the clock, or give the time with --now")));
        }
        tell(&format!("snugdown: {words}: is the clock right? It is recorded with the time of the clock."));
        Ok(())
    }

    /// Records the drafts in one piece, and tells what they changed.
    ///
    /// # Errors
    /// Any [`Failure`]; unless it comes after the line "recorded", nothing was recorded.
    pub fn record(mut self, drafts: &[Draft], papers: &[Paper]) -> Result<Exit, Failure> {
        let events = self.put(drafts, papers)?;
        self.tell_changes(events, papers)
    }

    /// Records drafts that move nothing.
    ///
    /// # Errors
    /// As [`Desk::record`].
    pub fn record_only(mut self, drafts: &[Draft]) -> Result<Exit, Failure> {
        self.put(drafts, &[]).map(|_| Exit::Fits)
    }

    fn put(&mut self, drafts: &[Draft], papers: &[Paper]) -> Result<Vec<Event>, Failure> {
        let withdrawal = self.replaced()?;
        let drafts: Vec<Draft> = withdrawal.into_iter().chain(drafts.iter().cloned()).collect();
        let source = text_of(&drafts, &self.voice);
        for _ in 0..TRIES {
            let events = self.checked(&source)?;
            self.refuse_stale(&events)?;
            let head = self.loaded.head.clone().unwrap_or_else(Head::beginning);
            match self.append(&head, &events, papers) {
                Ok(head) => {
                    show(&format!("recorded: {head}\n"))?;
                    return Ok(events);
                }
                Err(StoreError::Moved { .. }) => self.loaded = load(&self.args.port)?,
                Err(error) => return Err(error.into()),
            }
        }
        Err(Failure::Stale(
            "others are writing all the time; nothing was recorded; repeat the command".to_owned(),
        ))
    }

    /// The event to be replaced is there.
    fn replaced(&self) -> Result<Option<Draft>, Failure> {
        let Some(number) = self.args.replaces else { return Ok(None) };
        if !self.loaded.events.iter().any(|event| event.number == number) {
            return Err(Failure::Usage(format!("--replaces: there is no event {number}")));
        }
        withdrawal(number).map(Some)
    }

    fn append(&self, head: &Head, events: &[Event], papers: &[Paper]) -> Result<Head, StoreError> {
        let path = store_path(&self.args.port);
        let mut store = if path.exists() {
            Store::open(&path)?
        } else {
            match Store::create(&path) {
                // Another program has made it in the meantime.
                Err(StoreError::Exists { .. }) => Store::open(&path)?,
                other => other?,
            }
        };
        let papers: Vec<Vec<u8>> = papers.iter().map(|paper| paper.bytes.clone()).collect();
        // In an exercise the clock is the exercise's for everything.
        let recorded = self.loaded.port.exercise.unwrap_or_else(wall_time);
        store.append(head, Addition { events, papers: &papers, recorded })
    }

    /// The events, numbered as they will be, if nothing is wrong with them.
    fn checked(&self, source: &SourceText) -> Result<Vec<Event>, Failure> {
        let Loaded { port, rules, work, events: known, .. } = &self.loaded;
        let (mut events, findings) = read_events(source, Some(&port.clock));
        let fault = |findings| Failure::Input { findings, sources: vec![source.clone()] };
        if has_error(&findings) {
            return Err(fault(findings));
        }
        events.sort_by_key(|event| event.number);
        let last = known.iter().map(|event| event.number).max().unwrap_or(0);
        events.iter_mut().for_each(|event| event.number += last);
        let strange = strangers(port, rules, work, &events);
        let is_new = |finding: &Finding| finding.place.file == source.name();
        let strange: Vec<Finding> = strange.into_iter().filter(is_new).collect();
        if has_error(&strange) {
            return Err(fault(strange));
        }
        let doubtful = doubts_of_new(known, &events, Some(&port.clock)).into_iter().filter(is_new);
        let told: Vec<Finding> = strange.into_iter().chain(doubtful).collect();
        tell_findings(&told, std::slice::from_ref(source));
        Ok(events)
    }

    /// Refuses if somebody has recorded something about the same since the user last looked, and shows both.
    fn refuse_stale(&self, events: &[Event]) -> Result<(), Failure> {
        let seen = self.seen;
        let about: BTreeSet<(MentionKind, &str)> =
            events.iter().flat_map(mentions).map(|mention| (mention.kind, mention.id)).collect();
        let is_newer = |event: &&Event| {
            event.number > seen && mentions(event).iter().any(|m| about.contains(&(m.kind, m.id)))
        };
        let theirs: Vec<&Event> = self.loaded.events.iter().filter(is_newer).collect();
        if theirs.is_empty() {
            return Ok(());
        }
        let clock = &self.loaded.port.clock;
        let mut words = format!("somebody has recorded something about the same since event {seen}:\n");
        for event in &theirs {
            words.push_str(&format!("  event {}: {}\n", event.number, news_words(event, clock)));
        }
        for event in events {
            words.push_str(&format!("  yours: {}\n", news_words(event, clock)));
        }
        let last = theirs.iter().map(|event| event.number).max().unwrap_or(seen);
        words.push_str(&format!("nothing was recorded; if yours still holds, repeat it with --seen {last}"));
        Err(Failure::Stale(words))
    }

    fn tell_changes(mut self, events: Vec<Event>, papers: &[Paper]) -> Result<Exit, Failure> {
        if self.args.record_only {
            return Ok(Exit::Fits);
        }
        let before = plans_until(&self.loaded, self.now);
        self.loaded.events.extend(events.clone());
        self.loaded.events.sort_by_key(|event| event.known);
        let takings = events.iter().filter_map(taking);
        let forecasts = takings.filter_map(|taking| {
            let paper = papers.iter().find(|paper| paper.file == taking.file)?;
            Some((taking.key(), paper.advisory.clone()?))
        });
        self.loaded.forecasts.extend(forecasts);
        let after = plan_with_news(&self.loaded, &before, self.now);
        let Loaded { port, rules, .. } = &self.loaded;
        let setting = Setting::of(port, rules);
        let changes = changes_by(latest(&before)?, &after, events.iter().collect(), &port.clock);
        show(&changes_brief(&changes, &after, &setting, width(None)))?;
        Ok(Exit::Fits)
    }
}

/// The draft that takes back an event.
///
/// # Errors
/// [`Failure::Usage`] for a number that no event can have.
pub fn withdrawal(number: usize) -> Result<Draft, Failure> {
    Ok(Draft::of("withdraws").with("event", event_number(number)?))
}

/// A number of an event as files hold it.
///
/// # Errors
/// [`Failure::Usage`] for a number that no event can have.
pub fn event_number(number: usize) -> Result<i64, Failure> {
    i64::try_from(number).map_err(|_| Failure::Usage(format!("there is no event {number}")))
}
