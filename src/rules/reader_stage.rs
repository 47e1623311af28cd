//! Reads rules.toml: how arrivals are reckoned, stages and what makes them due, duties.

use crate::finding::table::{Item, Keys};
use crate::rules::codes;
use crate::rules::desk::{Desk, WindSense};
use crate::rules::limit::Reckoning;
use crate::rules::reader_limit::{read_chance, read_deadline, read_reckoning, read_wind_at, read_wind_sense};
use crate::rules::reader_link::read_links;
use crate::rules::reader_pick::read_ship_pick;
use crate::rules::stage::{Duty, Stage, StageDirection, Trigger};
use crate::text::quantity;
use crate::time::moment::Minutes;
use crate::units::chance::Chance;

/// The table `[rules]`; each part `None` if it is missing or faulty.
#[derive(Clone, Debug)]
pub struct Head {
    /// Their title.
    pub title: Option<String>,
    /// In force since.
    pub effective: Option<String>,
    /// How arrivals are reckoned.
    pub reckoning: Option<Reckoning>,
    /// How winds are meant.
    pub winds: Option<WindSense>,
    /// The least chance at which a plan's head speaks of an arrival.
    pub least_chance: Option<Chance>,
    /// How much earlier the computed arrival may be before the head says so first.
    pub adopted_margin: Option<Minutes>,
}

/// The table `[rules]`.
#[must_use]
pub fn read_head(file: &mut Keys<'_>) -> Option<Head> {
    let mut keys = file.required("rules")?.keys("[rules]")?;
    let head = Head {
        title: keys.required("title").and_then(|item| item.text()).map(str::to_owned),
        effective: keys.required("effective").and_then(|item| item.time_text()).map(str::to_owned),
        reckoning: keys.required("reckoning").and_then(|item| read_reckoning(&item)),
        winds: keys.required("winds").and_then(|item| read_wind_sense(&item)),
        least_chance: keys.required("least_chance").and_then(|item| read_chance(&item)),
        adopted_margin: keys.required("adopted_margin").and_then(|item| quantity::lasting_or_none(&item)),
    };
    let _ = keys.text_or_empty("source");
    keys.finish();
    Some(head)
}

/// The tables `[[stage]]`, in the order in which stages follow each other.
#[must_use]
pub fn read_stages(file: &mut Keys<'_>, desk: &Desk<'_>) -> Vec<Stage> {
    file.tables("stage").iter().filter_map(|item| read_stage(item, desk)).collect()
}

fn read_stage(item: &Item<'_>, desk: &Desk<'_>) -> Option<Stage> {
    let mut keys = item.keys("a stage")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let source = keys.text_or_empty("source");
    let triggers: Vec<Option<Trigger>> =
        keys.one_or_more("any").iter().map(|item| read_trigger(item, id, desk)).collect();
    let after = read_links(&mut keys, false);
    let status = keys.optional("status").map(|item| read_status(&item)).unwrap_or_default();
    let direction = keys.optional("direction").map_or(Some(StageDirection::Closing), |item| {
        item.word(&[("closing", StageDirection::Closing), ("reopening", StageDirection::Reopening)])
    });
    let needs_second = keys.optional("two_persons").map_or(Some(false), |item| item.flag());
    keys.finish();
    Some(Stage {
        id: id?.to_owned(),
        name: name?.to_owned(),
        source,
        any: triggers.into_iter().collect::<Option<_>>()?,
        after: after?,
        status,
        direction: direction?,
        needs_second: needs_second?,
        written: item.place(),
    })
}

fn read_status(item: &Item<'_>) -> Vec<(String, String)> {
    let entries = item.keys("status").map(Keys::all).unwrap_or_default();
    let texts = entries.into_iter().map(|(what, item)| Some((what.to_owned(), item.text()?.to_owned())));
    texts.flatten().collect()
}

fn read_trigger(item: &Item<'_>, own_id: Option<&str>, desk: &Desk<'_>) -> Option<Trigger> {
    let mut keys = item.keys("a trigger")?;
    let way = keys.one_of(&["forecast", "observed", "stage", "wind_over"]);
    keys.finish();
    let way = way?;
    let mut keys = way.keys("a trigger")?;
    let trigger = match way.key() {
        "forecast" => read_forecast(&mut keys, desk),
        "observed" => read_wind_at(&mut keys, desk).map(|wind| Trigger::Observed { wind }),
        "stage" => read_after_stage(&mut keys, own_id, desk),
        _ => {
            let wind = read_wind_at(&mut keys, desk);
            let after = keys.required("after").and_then(|item| quantity::lasting_or_none(&item));
            wind.zip(after).map(|(wind, after)| Trigger::WindOver { wind, after })
        }
    };
    keys.finish();
    trigger
}

fn read_forecast(keys: &mut Keys<'_>, desk: &Desk<'_>) -> Option<Trigger> {
    let wind = read_wind_at(keys, desk);
    let within = keys.required("within").and_then(|item| quantity::lasting_or_none(&item));
    let reckoning = keys.optional("reckoning").map(|item| read_reckoning(&item));
    let reckoning = match reckoning {
        Some(read) => Some(read?),
        None => None,
    };
    Some(Trigger::Forecast { wind: wind?, within: within?, reckoning })
}

fn read_after_stage(keys: &mut Keys<'_>, own_id: Option<&str>, desk: &Desk<'_>) -> Option<Trigger> {
    let item = keys.required("id");
    let stage = item.and_then(|item| desk.stage(&item));
    let after = keys.required("after").and_then(|item| quantity::shift(&item));
    if let Some(item) = item.filter(|_| stage.as_deref() == own_id && own_id.is_some()) {
        item.fault(
            codes::STAGE_ITSELF,
            format!("stage \"{}\" waits for itself", own_id.unwrap_or_default()),
            "a stage follows another stage",
            "name the stage it follows",
        );
        return None;
    }
    Some(Trigger::Stage { stage: stage?, after: after? })
}

/// The tables `[[duty]]`.
#[must_use]
pub fn read_duties(file: &mut Keys<'_>, desk: &Desk<'_>) -> Vec<Duty> {
    file.tables("duty").iter().filter_map(|item| read_duty(item, desk)).collect()
}

fn read_duty(item: &Item<'_>, desk: &Desk<'_>) -> Option<Duty> {
    let mut keys = item.keys("a duty")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let stage = keys.required("stage").and_then(|item| desk.stage(&item));
    let who = keys.required("who").and_then(|item| item.text());
    let ships = keys.optional("ships").map(|item| read_ship_pick(&item, desk.draft));
    let act = keys.required("do").and_then(|item| item.text());
    let by = keys.optional("by").map(|item| read_deadline(&item, desk));
    let fulfilled_by = keys.texts("fulfilled_by");
    let source = keys.text_or_empty("source");
    keys.finish();
    let ships = match ships {
        Some(pick) => Some(pick?),
        None => None,
    };
    let by = match by {
        Some(deadline) => Some(deadline?),
        None => None,
    };
    Some(Duty {
        id: id?.to_owned(),
        stage: stage?,
        who: who?.to_owned(),
        ships,
        act: act?.to_owned(),
        by,
        fulfilled_by,
        source,
        written: item.place(),
    })
}
