//! Reads how people are reached: the tables `[[contact]]` of means.toml.

use crate::finding::table::{Item, Keys};
use crate::port::codes;
use crate::port::contact::{Contact, is_same_name};
use crate::port::kind::Kind;
use crate::port::known::Known;
use crate::text::quantity;

/// The tables `[[contact]]`: each of its own name, and each pool in one of them only.
#[must_use]
pub fn read_contacts(file: &mut Keys<'_>, known: &Known) -> Vec<Contact> {
    let mut contacts: Vec<Contact> = Vec::new();
    for item in file.tables("contact") {
        contacts.extend(read_contact(&item, known, &contacts));
    }
    contacts
}

fn read_contact(item: &Item<'_>, known: &Known, before: &[Contact]) -> Option<Contact> {
    let mut keys = item.keys("a contact")?;
    let who_item = keys.required("who");
    let who = who_item.and_then(|item| item.text());
    let channel = keys.required("channel").and_then(|item| item.text());
    let number = keys.text_or_empty("number");
    let lead = keys.optional("lead").map(|item| quantity::lasting(&item));
    let pool_items = keys.one_or_more("pools");
    keys.finish();
    if let (Some(item), Some(who)) = (who_item, who)
        && before.iter().any(|other| is_same_name(&other.who, who))
    {
        item.fault(
            codes::DUPLICATE_CONTACT,
            format!("\"{who}\" has a contact already"),
            "one contact for each name",
            "put both channels into one contact: number = \"12, else 16\"",
        );
    }
    let mut pools = Vec::new();
    for item in pool_items {
        let Some(pool) = known.refer(&item, Kind::Pool, codes::UNKNOWN_POOL) else { continue };
        if let Some(other) = before.iter().find(|other| other.pools.contains(&pool)) {
            item.fault(
                codes::DUPLICATE_CONTACT,
                format!("{} is called for \"{pool}\" already", other.who),
                "one contact for each pool",
                "name the pool in one of the two",
            );
        }
        pools.push(pool);
    }
    let lead = match lead {
        Some(lead) => Some(lead?),
        None => None,
    };
    Some(Contact { who: who?.to_owned(), pools, channel: channel?.to_owned(), number, lead })
}
