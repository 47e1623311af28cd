//! Which ids a port's files hold, faulty or not, so that other files can be checked against them.

use crate::finding::fault::{Place, did_you_mean, quoted};
use crate::finding::table::Item;
use crate::port::codes;
use crate::port::kind::Kind;
use crate::text::quantity;
use std::collections::{BTreeMap, BTreeSet};

/// The ids of a port. Two ids never differ by case only, whatever they stand for: one is read out over the radio.
#[derive(Clone, Debug, Default)]
pub struct Known {
    /// By the id in small letters: the id as written, its kind, its place.
    ids: BTreeMap<String, (String, Kind, Option<Place>)>,
    /// Kinds whose file could not be read, so that an unknown id proves nothing.
    unread: BTreeSet<Kind>,
}

impl Known {
    /// Notes that the file of this kind could not be read.
    pub fn could_not_read(&mut self, kind: Kind) {
        self.unread.insert(kind);
    }

    /// Whether the file of this kind could be read as far as its ids.
    #[must_use]
    pub fn could_read(&self, kind: Kind) -> bool {
        !self.unread.contains(&kind)
    }

    /// Notes an id of a port that is already checked.
    pub fn note(&mut self, kind: Kind, id: &str) {
        self.ids.insert(id.to_lowercase(), (id.to_owned(), kind, None));
    }

    /// Notes the id in `item`, and reports it if it is there already.
    pub fn add(&mut self, kind: Kind, item: &Item<'_>) {
        let Some(id) = quantity::id(item) else { return };
        let entry = (id.to_owned(), kind, Some(item.place()));
        let Some((other, other_kind, place)) = self.ids.get(&id.to_lowercase()) else {
            self.ids.insert(id.to_lowercase(), entry);
            return;
        };
        let place = place.as_ref().map_or_else(String::new, |place| format!(" at {place}"));
        let found = if other == id {
            format!("the id \"{id}\" is already that of a {}{place}", other_kind.word())
        } else {
            format!("the id \"{id}\" differs by case only from the {} \"{other}\"{place}", other_kind.word())
        };
        item.fault(
            codes::DUPLICATE_ID,
            found,
            "an id stands for one thing in the whole port",
            "give it another id",
        );
    }

    /// The id in `item` if one of this kind has it; else a finding with `code`.
    #[must_use]
    pub fn refer(&self, item: &Item<'_>, kind: Kind, code: &'static str) -> Option<String> {
        let id = item.text()?;
        if let Some((known, known_kind, _)) = self.ids.get(&id.to_lowercase())
            && known == id
        {
            if *known_kind == kind {
                return Some(id.to_owned());
            }
            let found = format!("\"{id}\" is a {}, not a {}", known_kind.word(), kind.word());
            item.fault(code, found, self.listed(kind), "name one of these");
            return None;
        }
        if self.could_read(kind) {
            let otherwise = format!("correct the name, or add it to {}", kind.file());
            let to_do = did_you_mean(id, self.of_kind(kind), &otherwise);
            item.fault(code, format!("{} \"{id}\" is not listed", kind.word()), self.listed(kind), to_do);
        }
        None
    }

    /// The ids of this kind, in the order of the alphabet.
    #[must_use]
    pub fn of_kind(&self, kind: Kind) -> Vec<&str> {
        self.ids.values().filter(|(_, of, _)| *of == kind).map(|(id, ..)| id.as_str()).collect()
    }

    /// Whether `id` is that of one of this kind.
    #[must_use]
    pub fn is(&self, id: &str, kind: Kind) -> bool {
        self.ids.get(&id.to_lowercase()).is_some_and(|(known, of, _)| known == id && *of == kind)
    }

    fn listed(&self, kind: Kind) -> String {
        let ids = self.of_kind(kind);
        if ids.is_empty() {
            format!("{} lists none", kind.file())
        } else {
            format!("{} lists {}", kind.file(), quoted(&ids))
        }
    }
}
