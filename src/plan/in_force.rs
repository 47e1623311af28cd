//! Which of the advisories taken a plan stands on: one for each storm, from the port's official source.

use crate::advisory::forecast::Advisory;
use crate::advisory::same_storm::is_same_storm;
use crate::port::harbour::Port;
use crate::record::situation::{Adopted, Said, Situation, TakenAdvisory};
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;

/// An advisory with the name under which it was taken.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Chosen<'a> {
    /// Its file, and what was picked from it.
    pub file: &'a str,
    /// What it says.
    pub advisory: &'a Advisory,
    /// When the port knew it.
    pub known: DateTime<Utc>,
    /// It is planned on by order.
    pub by_order: bool,
}

/// The advisories that count at a time.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct InForce<'a> {
    /// One for each storm, the newest issue first.
    pub storms: Vec<Chosen<'a>>,
    /// The newest of every other centre for a storm: they may warn, and change nothing.
    pub second_centres: Vec<Chosen<'a>>,
}

impl<'a> InForce<'a> {
    /// The names of the advisories in force, sorted: what the odds of a plan depend on.
    #[must_use]
    pub fn files(&self) -> Vec<&'a str> {
        let mut files: Vec<&str> = self.storms.iter().map(|chosen| chosen.file).collect();
        files.sort_unstable();
        files
    }
}

/// What counts at `now` of the advisories in `taken`, which are in the order of taking.
///
/// For each storm: of those from the port's official source the newest by issue, a correction after what it corrects, then
/// the one taken later. One that was taken by order stands until a newer official one comes. A storm whose forecast has
/// run out counts no longer, unless it is the only one.
#[must_use]
pub fn in_force<'a>(
    forecasts: &'a BTreeMap<String, Advisory>,
    port: &Port,
    taken: &'a [TakenAdvisory],
    now: DateTime<Utc>,
) -> InForce<'a> {
    let mut storms: Vec<Vec<Chosen<'a>>> = Vec::new();
    for taken in taken {
        let Some(advisory) = forecasts.get(&taken.file) else { continue };
        let chosen =
            Chosen { file: &taken.file, advisory, known: taken.said.known, by_order: taken.by_order };
        let same =
            storms.iter_mut().find(|storm| storm.iter().any(|one| is_same_storm(one.advisory, advisory)));
        match same {
            Some(storm) => storm.push(chosen),
            None => storms.push(vec![chosen]),
        }
    }
    let mut found = InForce::default();
    for storm in &storms {
        let of_storm = chosen_of(storm, port);
        found.second_centres.extend(others(storm, port, of_storm));
        found.storms.extend(of_storm);
    }
    found.storms.sort_by_key(|chosen| std::cmp::Reverse((newness(chosen), chosen.known)));
    let newest = found.storms.first().map(|chosen| chosen.file);
    let is_over = |chosen: &Chosen<'_>| chosen.advisory.last_valid() <= now;
    let is_any_left = found.storms.iter().any(|chosen| !is_over(chosen));
    found.storms.retain(|chosen| !is_over(chosen) || (!is_any_left && Some(chosen.file) == newest));
    found.second_centres.retain(|chosen| !is_over(chosen));
    found
}

/// The names of the advisories that were in force when an arrival was adopted, sorted.
#[must_use]
pub fn at_adoption<'a>(
    forecasts: &'a BTreeMap<String, Advisory>,
    port: &Port,
    then: &'a Situation,
    adopted: &Adopted,
) -> Vec<&'a str> {
    let told = |said: &Said| (said.known, said.nth);
    let before = then.advisories.iter().take_while(|taken| told(&taken.said) < told(&adopted.said)).count();
    let taken = then.advisories.get(..before).unwrap_or(&[]);
    in_force(forecasts, port, taken, adopted.said.known).files()
}

/// By what one advisory of a storm replaces another.
fn newness(chosen: &Chosen<'_>) -> (DateTime<Utc>, bool) {
    (chosen.advisory.issued, chosen.advisory.is_corrected)
}

/// Whether an advisory is from the port's official source: its issuer's name holds one of the names that the port gives;
/// every issuer is official where it gives none, and so is a drill.
#[must_use]
pub fn is_official(port: &Port, advisory: &Advisory) -> bool {
    let issuer = advisory.issuer.to_uppercase();
    advisory.is_drill
        || port.official_issuers.is_empty()
        || port.official_issuers.iter().any(|name| issuer.contains(&name.to_uppercase()))
}

/// The one in force among the advisories of a storm, in the order of taking.
fn chosen_of<'a>(storm: &[Chosen<'a>], port: &Port) -> Option<Chosen<'a>> {
    let (mut current, mut newest): (Option<Chosen<'a>>, Option<Chosen<'a>>) = (None, None);
    for chosen in storm {
        let is_newest = newest.is_none_or(|newest| newness(chosen) >= newness(&newest));
        if chosen.by_order {
            current = Some(*chosen);
        } else if is_official(port, chosen.advisory) && is_newest {
            (current, newest) = (Some(*chosen), Some(*chosen));
        }
    }
    current
}

/// The newest advisory of each centre that is not official, but for the one in force.
fn others<'a>(storm: &[Chosen<'a>], port: &Port, in_force: Option<Chosen<'a>>) -> Vec<Chosen<'a>> {
    let mut newest: BTreeMap<&str, Chosen<'a>> = BTreeMap::new();
    for chosen in storm.iter().filter(|chosen| !is_official(port, chosen.advisory)) {
        let issuer = chosen.advisory.issuer.as_str();
        if newest.get(issuer).is_none_or(|before| newness(chosen) >= newness(before)) {
            newest.insert(issuer, *chosen);
        }
    }
    newest.into_values().filter(|chosen| in_force.is_none_or(|one| one.file != chosen.file)).collect()
}
