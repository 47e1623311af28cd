//! What changed between two plans, as plain text: what turned first, then arrivals, stages and tasks that moved.

use crate::output::arrival_text::apart;
use crate::output::clock_text::Times;
use crate::output::head_text::write_title;
use crate::output::layout::Page;
use crate::output::setting::Setting;
use crate::output::task_text::MARGIN;
use crate::output::words::{count, stage_status, turn_title};
use crate::plan::changes::{ArrivalMoved, Changes, StageMoved, TaskMoved, TaskTurned, Turn};
use crate::time::moment::Moment;

/// All ways in which a task's state changes, the gravest first.
const TURNS: [Turn; 8] = [
    Turn::GivenUp,
    Turn::Relieved,
    Turn::Late,
    Turn::Unreported,
    Turn::Added,
    Turn::Dropped,
    Turn::Started,
    Turn::Done,
];

/// The changes, `width` columns wide, each with its cause. Times are exact: they are for comparing.
#[must_use]
pub fn changes_text(changes: &Changes, setting: &Setting, width: usize) -> String {
    let times = Times::new(setting.clock, changes.to);
    let mut page = Page::new(width);
    write_title(&mut page, &times, setting, "what changed until");
    page.text(0, &format!("compared with the plan made for {}", times.full(changes.from)));
    page.gap();
    for news in &changes.news {
        page.labelled(8, "news", news);
    }
    if is_quiet(changes) {
        page.text(0, "Nothing moved: no arrival, no stage, no task.");
    }
    let grave = TURNS.into_iter().filter(|turn| *turn <= Turn::Unreported);
    grave.for_each(|turn| write_turned(&mut page, turn, &changes.turned));
    write_arrivals(&mut page, &times, &changes.arrivals);
    write_stages(&mut page, &times, &changes.stages);
    write_moved(&mut page, &times, &changes.moved);
    let rest = TURNS.into_iter().filter(|turn| *turn > Turn::Unreported);
    rest.for_each(|turn| write_turned(&mut page, turn, &changes.turned));
    page.finish()
}

fn is_quiet(changes: &Changes) -> bool {
    changes.arrivals.is_empty()
        && changes.stages.is_empty()
        && changes.moved.is_empty()
        && changes.turned.is_empty()
}

fn write_turned(page: &mut Page, turn: Turn, turned: &[TaskTurned]) {
    let these: Vec<&TaskTurned> = turned.iter().filter(|task| task.turn == turn).collect();
    if these.is_empty() {
        return;
    }
    page.section(turn_title(turn), &count(these.len(), "task"));
    for task in these {
        page.text(0, &because(&format!("{} {}", task.id, task.name), &task.cause));
    }
}

fn write_arrivals(page: &mut Page, times: &Times, arrivals: &[ArrivalMoved]) {
    if arrivals.is_empty() {
        return;
    }
    page.section("ARRIVALS MOVED", "");
    for arrival in arrivals {
        let kind = if arrival.is_adopted { "adopted" } else { "computed" };
        let moved = from_to(times, arrival.from, arrival.to);
        page.text(
            0,
            &because(&format!("{} at {}, {kind}: {moved}", arrival.wind, arrival.place), &arrival.cause),
        );
    }
}

fn write_stages(page: &mut Page, times: &Times, stages: &[StageMoved]) {
    if stages.is_empty() {
        return;
    }
    page.section("STAGES MOVED", "");
    for stage in stages {
        let mut words = format!("{} {}", stage.id, stage.name);
        if stage.was != stage.is {
            words.push_str(&format!(": {}; before: {}", stage_status(stage.is), stage_status(stage.was)));
        }
        if stage.from != stage.to {
            words.push_str(&format!("; due {}", from_to(times, stage.from, stage.to)));
        }
        page.text(0, &because(&words, &stage.cause));
    }
}

fn write_moved(page: &mut Page, times: &Times, moved: &[TaskMoved]) {
    if moved.is_empty() {
        return;
    }
    page.section("TASKS MOVED", &count(moved.len(), "task"));
    for task in moved {
        let left = [times.local_day(task.to), format!(" {}", apart(task.by()))];
        let words = format!("{} {}, before {}", task.id, task.name, times.both(task.from));
        page.beside(MARGIN, &left, &because(&words, &task.cause));
    }
}

/// "Fri 22:00 (Sat 01:00Z) -> Fri 14:00 (17:00Z), 8 h earlier".
fn from_to(times: &Times, from: Option<Moment>, to: Option<Moment>) -> String {
    let time = |at: Option<Moment>| at.map_or("none".to_owned(), |at| times.both(at));
    let by = from.zip(to).map_or(String::new(), |(from, to)| format!(", {}", apart(to - from)));
    format!("{} to {}{by}", time(from), time(to))
}

fn because(what: &str, cause: &str) -> String {
    if cause.is_empty() { what.to_owned() } else { format!("{what}; because {cause}") }
}
