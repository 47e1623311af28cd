//! Several storms and several centres in one plan: whose odds count, which storm comes first where, and what a second
//! centre warns of.

use crate::advisory::same_storm::is_same_storm;
use crate::plan::in_force::{Chosen, InForce};
use crate::plan::make::{Forecast, advisory_line};
use crate::plan::odds::AllOdds;
use crate::plan::sheet::Plan;
use crate::port::harbour::Port;
use crate::record::situation::Situation;
use crate::rules::limit::Reckoning;
use crate::time::moment::Moment;
use crate::units::speed::Knots;
use crate::work::questions::head_key;
use crate::work::reckoned::reckon;

/// What a plan stands on: the odds of all storms in force, headed by the advisory whose storm brings gales to the port's
/// reference place first; the newest of them if none does.
#[must_use]
pub fn forecast_of<'a>(
    force: &InForce<'a>,
    odds: &'a AllOdds<'_>,
    port: &Port,
    usual: Reckoning,
) -> Option<Forecast<'a>> {
    let answers = odds.get(&force.files())?;
    let gale =
        |chosen: &&Chosen<'a>| computed(odds, chosen.file, &head_key(&port.reference, Knots::GALE), usual);
    let first = force.storms.iter().min_by_key(|chosen| gale(chosen).unwrap_or(Moment::LATEST))?;
    let known = Moment::at_or_after(first.known);
    Some(Forecast { advisory: first.advisory, answers, file: first.file, known })
}

fn computed(odds: &AllOdds<'_>, file: &str, key: &str, usual: Reckoning) -> Option<Moment> {
    odds.get(&[file]).and_then(|answers| answers.get(key)).and_then(|answer| reckon(answer, usual))
}

/// Tells in a plan of the other storms, of which storm brings each wind first, and of what second centres say.
pub fn tell_of_storms(
    plan: &mut Plan,
    force: &InForce<'_>,
    odds: &AllOdds<'_>,
    (port, usual): (&Port, Reckoning),
    situation: &Situation,
) {
    let head = plan.advisory.as_ref().map(|advisory| advisory.file.clone());
    for chosen in force.storms.iter().filter(|chosen| Some(chosen.file) != head.as_deref()) {
        let Some(answers) = odds.get(&[chosen.file]) else { continue };
        let known = Moment::at_or_after(chosen.known);
        let forecast = Forecast { advisory: chosen.advisory, answers, file: chosen.file, known };
        plan.other_advisories.push(advisory_line(&forecast, situation));
    }
    if force.storms.len() > 1 {
        for arrival in &mut plan.arrivals {
            let key = head_key(&arrival.place, arrival.wind.speed);
            let times = force.storms.iter().filter_map(|storm| {
                Some((computed(odds, storm.file, &key, usual)?, storm.advisory.storm.name.as_str()))
            });
            arrival.storm = times.min().map(|(_, storm)| storm.to_owned());
        }
    }
    for chosen in force.storms.iter().filter(|chosen| chosen.advisory.is_drill) {
        plan.warnings.push(format!("{}: {}", chosen.file, chosen.advisory.issuer));
    }
    for second in &force.second_centres {
        let official = force.storms.iter().find(|storm| is_same_storm(storm.advisory, second.advisory));
        plan.warnings.push(second_words(second, official, odds, (port, usual)));
    }
}

/// What a second centre says: gales earlier than the forecast in force, or no news.
fn second_words(
    second: &Chosen<'_>,
    official: Option<&Chosen<'_>>,
    odds: &AllOdds<'_>,
    (port, usual): (&Port, Reckoning),
) -> String {
    let averaging = second.advisory.averaging;
    let winds = match official.filter(|official| official.advisory.averaging != averaging) {
        Some(_) => format!(" whose winds are a {averaging}"),
        None => String::new(),
    };
    let who = format!("{} by {}, a second centre{winds}", second.file, second.advisory.issuer);
    let earlier = port.places.iter().filter_map(|place| {
        let key = head_key(&place.id, Knots::GALE);
        let theirs = computed(odds, second.file, &key, usual)?;
        let by = match official.and_then(|official| computed(odds, official.file, &key, usual)) {
            Some(ours) if theirs < ours => format!(", {} earlier", ours - theirs),
            Some(_) => return None,
            None => ", where it has none".to_owned(),
        };
        Some(format!("{} {}{by}", place.name, port.clock.show(theirs)))
    });
    let earlier = earlier.collect::<Vec<String>>().join("; ");
    let nothing = "Nothing in this plan counts on it, unless an order says so.";
    match (official, earlier.is_empty()) {
        (Some(_), false) => format!("{who}: gales EARLIER THAN YOUR OFFICIAL SOURCE at {earlier}. {nothing}"),
        (Some(_), true) => format!("{who}: gales nowhere earlier than your official source. {nothing}"),
        (None, false) => {
            format!("{who}: YOUR OFFICIAL SOURCE HAS NOT TOLD OF THIS STORM; gales at {earlier}. {nothing}")
        }
        (None, true) => {
            format!("{who}: your official source has not told of this storm; no gales here. {nothing}")
        }
    }
}
