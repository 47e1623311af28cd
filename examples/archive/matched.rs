//! Which best track belongs to the advisories of a storm.
//!
//! A storm found after the season may shift the numbers of all later ones: in 2006 the best tracks of eight Atlantic storms bear
//! a number one higher than their advisories. So tracks are matched by where the storm was.

use super::advisories::Entry;
use super::best_track::BestTrack;
use snugdown::wind::sphere::{distance_nmi, vector};
use std::collections::BTreeMap;

/// The greatest mean distance (n mi) of advisories from their best track. Our choice: real ones lie within 40, others beyond 1,000.
const NEAR_NMI: f64 = 100.0;

/// Best tracks by the number of the advisories, and the storms whose best track bears another number.
pub fn tracks(
    entries: &[Entry],
    tracks: &BTreeMap<String, BestTrack>,
) -> (BTreeMap<String, BestTrack>, Vec<(String, String)>) {
    let mut storms: BTreeMap<&str, Vec<&Entry>> = BTreeMap::new();
    for entry in entries {
        storms.entry(&entry.key).or_default().push(entry);
    }
    let mut matched = BTreeMap::new();
    let mut renumbered = Vec::new();
    for (key, entries) in storms {
        let alike = |other: &&String| other.get(..2) == key.get(..2) && other.get(4..) == key.get(4..);
        let candidates = tracks.keys().filter(alike);
        let near = candidates.filter_map(|other| Some((mean_distance_nmi(&entries, &tracks[other])?, other)));
        let Some((distance, own)) = near.min_by(|a, b| a.0.total_cmp(&b.0)) else { continue };
        if distance > NEAR_NMI {
            continue;
        }
        if own != key {
            renumbered.push((key.to_owned(), own.clone()));
        }
        matched.insert(key.to_owned(), tracks[own].clone());
    }
    (matched, renumbered)
}

/// The mean distance of the centres at issue; `None` if the track covers less than half of the issue times.
fn mean_distance_nmi(entries: &[&Entry], track: &BestTrack) -> Option<f64> {
    let distance = |entry: &&Entry| {
        let fix = track.at(entry.advisory.issued)?;
        Some(distance_nmi(fix.centre(), vector(entry.advisory.points.first()?.position)))
    };
    let distances: Vec<f64> = entries.iter().filter_map(distance).collect();
    (2 * distances.len() >= entries.len()).then(|| distances.iter().sum::<f64>() / distances.len() as f64)
}
