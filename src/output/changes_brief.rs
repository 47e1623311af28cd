//! What one piece of news changed, in a few lines: for whoever has just told it.

use crate::output::arrival_text::apart;
use crate::output::clock_text::Times;
use crate::output::head_text::verdict;
use crate::output::layout::Page;
use crate::output::setting::Setting;
use crate::output::words::{stage_status, turn_title};
use crate::plan::changes::{Changes, TaskTurned, Turn};
use crate::plan::sheet::Plan;

/// Room for "verdict".
const MARGIN: usize = 10;

/// How many things of a kind are named; the rest is counted.
const MOST: usize = 4;

/// What the news was, what it moved, and how the plan stands now; the gravest first. For all of it see `changes`.
#[must_use]
pub fn changes_brief(changes: &Changes, plan: &Plan, setting: &Setting, width: usize) -> String {
    let times = Times::new(setting.clock, changes.to);
    let mut page = Page::new(width);
    let banner = setting.banner();
    if !banner.is_empty() {
        page.text(0, &banner);
    }
    for news in few(changes.news.iter().cloned()) {
        page.labelled(MARGIN, "news", &news);
    }
    for turn in [Turn::GivenUp, Turn::Relieved, Turn::Late, Turn::Unreported, Turn::Added, Turn::Dropped] {
        let these: Vec<&TaskTurned> = changes.turned.iter().filter(|task| task.turn == turn).collect();
        if !these.is_empty() {
            let names = few(these.iter().map(|task| format!("{} {}", task.id, task.name)));
            page.text(0, &format!("{}: {}", turn_title(turn), names.join("; ")));
        }
    }
    let stages = changes.stages.iter().map(|stage| match (stage.was == stage.is, stage.from, stage.to) {
        (false, _, _) => format!("{} {} {}", stage.id, stage.name, stage_status(stage.is)),
        (true, Some(from), Some(to)) => {
            format!("{} due {}, {}", stage.id, times.both(times.told_down(to)), apart(to - from))
        }
        (true, _, to) => {
            format!("{} due {}", stage.id, to.map_or_else(|| "never".to_owned(), |to| times.both(to)))
        }
    });
    for stage in few(stages) {
        page.labelled(MARGIN, "stage", &stage);
    }
    let moved = changes.moved.iter().map(|task| {
        let start = times.told_start(task.to, None);
        format!("{} {} to {}, {}", task.id, task.name, times.both(start), apart(task.by()))
    });
    for task in few(moved) {
        page.labelled(MARGIN, "moved", &task);
    }
    if changes.stages.is_empty() && changes.moved.is_empty() && changes.turned.is_empty() {
        page.labelled(MARGIN, "moved", "nothing");
    }
    page.labelled(MARGIN, "verdict", &verdict(&times, plan));
    page.finish()
}

/// The first few, and how many more there are.
fn few(all: impl Iterator<Item = String>) -> Vec<String> {
    let mut all: Vec<String> = all.collect();
    let more = all.len().saturating_sub(MOST);
    // One more fits in the line that would count it.
    if more > 1 {
        all.truncate(MOST);
        all.push(format!("and {more} more"));
    }
    all
}
