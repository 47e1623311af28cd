//! The calls that are to be made, as a list: those past their time first, those confirmed last.

use crate::output::call_text::{Style, message};
use crate::output::clock_text::{Times, lasting};
use crate::output::head_text::write_title;
use crate::output::layout::{Page, clip};
use crate::output::setting::Setting;
use crate::output::words::count;
use crate::plan::call::{Call, Standing};
use crate::plan::sheet::Plan;

/// Room for "Thu 06:20".
const MARGIN: usize = 12;
/// Names and reasons are cut to this: the whole stands in the call's own text, in the plan and in JSON.
const ROOM: usize = 120;

/// Whether a call is for somebody: by title, by ship's id or by both; upper and lower case are alike.
#[must_use]
pub fn is_for(call: &Call, who: &str) -> bool {
    let who = who.trim().to_lowercase();
    let ship = call.to.ship.split(' ').next().unwrap_or_default().to_lowercase();
    [call.to.who.to_lowercase(), call.to.words().to_lowercase(), ship].contains(&who)
}

/// The list, `width` columns wide; `calls` are some of the plan's.
#[must_use]
pub fn calls_text(calls: &[&Call], plan: &Plan, setting: &Setting, width: usize) -> String {
    let times = Times::new(setting.clock, plan.now);
    let mut page = Page::new(width);
    write_title(&mut page, &times, setting, "calls to be made at");
    page.text(0, "The program tells nobody: people call, and 'snugdown called' records it.");
    if calls.is_empty() {
        page.gap();
        page.text(0, "No call is to be made.");
    }
    let of =
        |test: &dyn Fn(&Call) -> bool| calls.iter().copied().filter(|call| test(call)).collect::<Vec<_>>();
    let (late, done) = (|call: &Call| call.is_overdue(plan.now), |call: &Call| !call.is_unanswered());
    write_list(&mut page, &times, "UNANSWERED PAST THEIR TIME", &of(&late));
    write_list(&mut page, &times, "TO BE MADE", &of(&|call| !late(call) && !done(call)));
    write_list(&mut page, &times, "CONFIRMED", &of(&done));
    page.finish()
}

fn write_list(page: &mut Page, times: &Times, title: &str, calls: &[&Call]) {
    if calls.is_empty() {
        return;
    }
    page.section(title, &count(calls.len(), "call"));
    let style = Style { first: &|at| times.both(at), short: &|text| clip(text, ROOM) };
    for call in calls {
        let by = times.told_down(call.by);
        let left = [times.local_day(by), format!(" {}", times.utc(by))];
        let mut words = format!("{}; {}", heading(call), message(call, times, &style));
        if !call.reason.is_empty() {
            words.push_str(&format!("; because {}", call.reason));
        }
        words.push_str(&format!("; {} before; {}", lasting(call.lead), standing_words(call, times)));
        page.beside(MARGIN, &left, &words);
    }
}

/// "C3F9A1 to tug office, VHF 12: ADVICE".
fn heading(call: &Call) -> String {
    let channel = call.channel.as_deref().unwrap_or("channel not given");
    let draft = if call.released_by.is_some() { "" } else { "DRAFT " };
    let kind = if call.is_order { "ORDER" } else { "ADVICE" };
    format!("{} to {}, {channel}: {draft}{kind}", call.id, call.to.words())
}

/// What became of a call.
fn standing_words(call: &Call, times: &Times) -> String {
    match call.standing {
        Standing::Open => String::from("not told"),
        Standing::NoAnswer(at) => format!("NO ANSWER {}", times.local_day(at)),
        Standing::Told(at) => format!("told {}, not confirmed", times.local_day(at)),
        Standing::Acknowledged(at) => format!("confirmed {}", times.local_day(at)),
    }
}
