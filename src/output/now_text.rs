//! What matters now, on one screen: at most 24 lines of 80 columns, whatever the plan holds.

use crate::output::arrival_text::{Onset, apart, onset_in_short};
use crate::output::call_text::overdue_words;
use crate::output::clock_text::{Times, lasting};
use crate::output::escape::visible;
use crate::output::head_text::{currency, next_one, next_stage_line};
use crate::output::layout::{Page, clip, columns, glued, wrap};
use crate::output::now_lists::{Now, NowOptions, decision_line, misfit_line, now_of, timed_line};
use crate::output::setting::Setting;
use crate::output::words::count;
use crate::plan::sheet::{Arrival, Plan, TaskLine};

/// Lines on the screen.
pub const LINES: usize = 24;
/// Columns on the screen.
pub const COLUMNS: usize = 80;
/// Room for "NO LONGER FITS".
const MARGIN: usize = 15;
/// Names are cut to this inside sentences, so that the times beside them always stay.
const NAME: usize = 24;

/// One screen about now. A list that is too long is cut with a count; the head and each list's first line never are.
#[must_use]
pub fn now_text(plan: &Plan, setting: &Setting, options: &NowOptions) -> String {
    let times = Times::new(setting.clock, plan.now);
    let mut page = Page::new(COLUMNS);
    write_head(&mut page, &times, setting, plan);
    write_lists(&mut page, &times, options, &now_of(plan, options));
    page.finish()
}

fn write_head(page: &mut Page, times: &Times, setting: &Setting, plan: &Plan) {
    let banner = setting.banner();
    let title = format!("{}, {}", short(&setting.port.to_uppercase()), times.full(times.now()));
    let room = COLUMNS.saturating_sub(columns(&title) + 2);
    if columns(&visible(&banner)) <= room {
        page.one_line(&format!("{title}  {banner}"));
    } else {
        page.one_line(&banner);
        page.one_line(&title);
    }
    if !plan.breaches.is_empty() {
        let points = count(plan.breaches.len(), "point");
        page.one_line(&format!("THIS PLAN FAILS ITS AUDIT in {points}: do not rely on it"));
    }
    if let Some(first) = plan.overtaken.first() {
        let place = plan.arrivals.iter().find(|arrival| arrival.place == first.place);
        let name = place.map_or(&first.place, |arrival| &arrival.place_name);
        let words = format!(
            "computed {} at {}, adopted {}: {}; endangers {}",
            times.local_day(times.told_down(first.computed)),
            short(name),
            times.local_day(first.adopted),
            apart(first.computed - first.adopted),
            count(first.endangers.len(), "task"),
        );
        at_most(page, "EARLIER", &words, 2, plan.overtaken.len() - 1);
    }
    if let Some((first, more)) = overdue_words(plan, times) {
        at_most(page, "CALL", &first, 1, more);
    }
    at_most(page, "in force", &in_force(times, setting, plan), 2, 0);
    at_most(page, "advisory", &advisory(times, setting, plan), 2, 0);
    if let Some(first) = plan.warnings.first() {
        at_most(page, "WARNING", first, 2, plan.warnings.len() - 1);
    }
    let mut references = plan.arrivals.iter().filter(|arrival| arrival.is_reference);
    if let Some(first) = references.next() {
        at_most(page, &first.wind.speed.to_string(), &arrival(times, first), 3, references.count());
    }
}

fn in_force(times: &Times, setting: &Setting, plan: &Plan) -> String {
    let mut words = plan.stage_in_force().map_or_else(
        || format!("no stage declared by the {}", short(setting.authority)),
        |stage| {
            let since = stage
                .declared
                .as_ref()
                .map_or(String::new(), |(at, _)| format!(" since {}", times.local_day(*at)));
            format!("{} {}{since}", clip(&visible(&stage.id), 8), short(&stage.name))
        },
    );
    if let Some(next) = next_stage_line(plan) {
        let due =
            next.due.map_or(String::new(), |due| format!(" due {}", times.local_day(times.told_down(due))));
        words.push_str(&format!("; next {} {}{due}", clip(&visible(&next.id), 8), short(&next.name)));
    }
    words
}

fn advisory(times: &Times, setting: &Setting, plan: &Plan) -> String {
    let Some(advisory) = &plan.advisory else {
        return format!("NONE TAKEN; ask {}", short(setting.official_source));
    };
    let number = advisory.number.map_or(String::new(), |number| format!("{number} "));
    let others = plan.other_advisories.iter().map(|other| format!(", {}", short(&other.storm)));
    format!(
        "{}{number}on {}{}, {}\u{a0}old (issued {}); {}",
        currency(advisory),
        short(&advisory.storm),
        others.collect::<String>(),
        lasting(advisory.age),
        times.local_day(advisory.issued),
        next_one(times, advisory),
    )
}

fn arrival(times: &Times, arrival: &Arrival) -> String {
    let time = |at| times.local_day(times.told_down(at));
    let counted = match (arrival.adopted, arrival.computed) {
        (Some(adopted), Some(computed)) => {
            format!("adopted {}, computed {}", times.local_day(adopted), time(computed))
        }
        (Some(adopted), None) => format!("adopted {}, computed none", times.local_day(adopted)),
        (None, Some(computed)) => format!("none adopted, computed {}", time(computed)),
        (None, None) => "none adopted, none computed".to_owned(),
    };
    let place = short(&arrival.place_name);
    format!("{counted} at {place}; {}", onset_in_short(times, &Onset::of(arrival)))
}

fn write_lists(page: &mut Page, times: &Times, options: &NowOptions, now: &Now) {
    let ahead = format!("next {}", lasting(options.ahead));
    let whose = options.concerning.as_ref().map_or(String::new(), |who| format!(" for {}", short(who)));
    let nothing = format!("nothing{whose}");
    let timed = |tasks: &[&TaskLine]| tasks.iter().map(|task| timed_line(times, task)).collect();
    let lists: [(&str, Vec<String>, &str); 5] = [
        ("NO LONGER FITS", now.no_longer_fits.iter().map(|task| misfit_line(task)).collect(), &nothing),
        ("NOT REPORTED", timed(&now.unreported), &nothing),
        ("START NOW", timed(&now.start_now), &nothing),
        (&ahead, timed(&now.next), &nothing),
        ("DECISIONS DUE", now.decisions.iter().map(|one| decision_line(times, one)).collect(), "none"),
    ];
    let needs = lists.each_ref().map(|(_, lines, _)| lines.len().max(1));
    let shares = shared(LINES.saturating_sub(page.height()), needs);
    for ((label, lines, empty), share) in lists.iter().zip(shares) {
        write_list(page, label, lines, empty, share);
    }
}

fn write_list(page: &mut Page, label: &str, lines: &[String], empty: &str, share: usize) {
    if lines.is_empty() {
        return page.labelled(MARGIN, label, empty);
    }
    for (row, line) in lines.iter().take(share).enumerate() {
        let is_cut_here = row + 1 == share && lines.len() > share;
        let more = if is_cut_here { lines.len() - share } else { 0 };
        at_most(page, if row == 0 { label } else { "" }, line, 1, more);
    }
}

/// Shares `room` lines out: one to each list, then one more in turn, from the first list on, while any wants more.
fn shared<const N: usize>(room: usize, needs: [usize; N]) -> [usize; N] {
    let mut shares = needs.map(|need| need.min(1));
    let mut left = room.saturating_sub(shares.iter().sum());
    while left > 0 && shares != needs {
        for (share, need) in shares.iter_mut().zip(needs) {
            if *share < need && left > 0 {
                *share += 1;
                left -= 1;
            }
        }
    }
    shares
}

/// Writes a text in at most `rows` lines; what does not fit is cut, and `more` further items are counted at its end.
fn at_most(page: &mut Page, label: &str, text: &str, rows: usize, more: usize) {
    let width = COLUMNS - MARGIN;
    let tail = if more == 0 { String::new() } else { glued(&format!(" (and {more} more)")) };
    let all = wrap(&visible(text), width);
    let (whole, rest) = all.split_at(all.len().min(rows).saturating_sub(1));
    let last = clip(&rest.join(" "), width - columns(&tail)) + &tail;
    let lines = whole.iter().chain(std::iter::once(&last));
    for (row, line) in lines.enumerate() {
        page.labelled(MARGIN, if row == 0 { label } else { "" }, line);
    }
}

fn short(name: &str) -> String {
    glued(&clip(&visible(name), NAME))
}
