//! What the readers of rules and tasks check against: the port, the stages' ids, and how winds are meant.

use crate::finding::fault::{Place, did_you_mean, quoted};
use crate::finding::table::Item;
use crate::port::folder::Draft;
use crate::rules::codes;
use crate::text::quantity;
use crate::units::length::Metres;
use crate::units::wind::Averaging;
use std::collections::BTreeMap;

/// How a wind is meant that does not say for itself: the `winds` of `[rules]`.
#[derive(Clone, Copy, Debug)]
pub struct WindSense {
    /// Its averaging period.
    pub averaging: Averaging,
    /// Its height.
    pub height: Metres,
}

/// What rules and tasks are checked against.
#[derive(Clone, Copy, Debug)]
pub struct Desk<'a> {
    /// The port, as far as it could be read.
    pub draft: &'a Draft,
    /// The ids of stages, duties and tasks.
    pub names: &'a Names,
    /// How winds are meant; `None` if `[rules]` does not say, which is a finding of its own.
    pub winds: Option<WindSense>,
}

impl Desk<'_> {
    /// The stage in `item`, or a finding.
    #[must_use]
    pub fn stage(&self, item: &Item<'_>) -> Option<String> {
        let id = item.text()?;
        let stages = self.names.of(Sort::Stage);
        if stages.contains(&id) {
            return Some(id.to_owned());
        }
        if self.names.rules_were_read {
            item.fault(
                codes::UNKNOWN_STAGE,
                format!("stage \"{id}\" is not listed"),
                format!(
                    "rules.toml lists {}",
                    if stages.is_empty() { "none".to_owned() } else { quoted(&stages) }
                ),
                did_you_mean(id, stages, "correct the name, or add the stage to rules.toml"),
            );
        }
        None
    }
}

/// What an id of the rules stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sort {
    /// A stage.
    Stage,
    /// A duty.
    Duty,
    /// A task.
    Task,
    /// A template: several may share an id if each is for other things, as the sailing of a gas carrier and of others.
    Template,
}

impl Sort {
    fn word(self) -> &'static str {
        match self {
            Sort::Stage => "stage",
            Sort::Duty => "duty",
            Sort::Task => "task",
            Sort::Template => "template",
        }
    }
}

/// The ids of stages, duties and tasks: all of them stand in one plan, so none stands for two things.
#[derive(Clone, Debug)]
pub struct Names {
    ids: BTreeMap<String, (String, Sort, Place)>,
    rules_were_read: bool,
}

impl Names {
    /// No ids yet; `rules_were_read` says whether rules.toml could be read, so that an unknown stage proves something.
    #[must_use]
    pub fn none(rules_were_read: bool) -> Names {
        Names { ids: BTreeMap::new(), rules_were_read }
    }

    /// Notes the id in `item`, and reports it if it is there already.
    pub fn add(&mut self, sort: Sort, item: &Item<'_>) {
        let Some(id) = quantity::id(item) else { return };
        let Some((other, other_sort, place)) = self.ids.get(&id.to_lowercase()) else {
            self.ids.insert(id.to_lowercase(), (id.to_owned(), sort, item.place()));
            return;
        };
        if (*other_sort, sort) == (Sort::Template, Sort::Template) && other == id {
            // Whether two of them are for the same thing shows when they are expanded.
            return;
        }
        let other_sort = other_sort.word();
        let found = if other == id {
            format!("the id \"{id}\" is already that of the {other_sort} at {place}")
        } else {
            format!("the id \"{id}\" differs by case only from the {other_sort} \"{other}\" at {place}")
        };
        let allowed = "an id stands for one stage, duty or task";
        item.fault(codes::DUPLICATE_ID, found, allowed, "give it another id");
    }

    /// The ids of one sort, in the order of the alphabet.
    #[must_use]
    pub fn of(&self, sort: Sort) -> Vec<&str> {
        self.ids.values().filter(|(_, of, _)| *of == sort).map(|(id, ..)| id.as_str()).collect()
    }
}
