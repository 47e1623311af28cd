//! What cannot be done in time: why, minute by minute, and what would help until when.

use crate::output::arrival_text::apart;
use crate::output::clock_text::{Times, lasting};
use crate::output::layout::Page;
use crate::output::task_text::{chain_words, title};
use crate::output::words::count;
use crate::plan::sheet::{GivenUp, Plan, Relief, TaskLine};
use crate::time::moment::Moment;

/// Writes every given-up task with its cause, then what would relieve the plan, earliest decision first.
pub fn write_given_up(page: &mut Page, times: &Times, plan: &Plan) {
    let tasks: Vec<&TaskLine> = plan.given_up().collect();
    if tasks.is_empty() {
        return;
    }
    page.section("CANNOT BE DONE IN TIME", &count(tasks.len(), "task"));
    for task in &tasks {
        page.text(0, &title(task));
        if let Some(given_up) = &task.given_up {
            write_cause(page, times, task, given_up);
        }
    }
    page.section("WHAT WOULD HELP", &relief_fact(times, plan));
    if plan.reliefs.is_empty() {
        page.text(
            0,
            "No cut, substitute, further member or lifted order was found that makes any of them fit.",
        );
    }
    for relief in &plan.reliefs {
        write_relief(page, times, relief);
    }
}

fn write_cause(page: &mut Page, times: &Times, task: &TaskLine, given_up: &GivenUp) {
    let proof = if given_up.is_proved {
        "Proved: no plan at all can do it."
    } else {
        "Not proved: none was found that does it."
    };
    page.text(4, &format!("{}. {proof}", given_up.why));
    if !given_up.chain.is_empty() {
        page.text(4, &chain_words(times, given_up.chain_from, &given_up.chain));
    }
    if let (Some(finish), Some(deadline)) = (given_up.would_finish, task.deadline) {
        let late = given_up.late_by.map_or(String::new(), |late| format!(", {} too late", lasting(late)));
        page.text(
            4,
            &format!("It would end {} and must end by {}{late}.", times.both(finish), times.both(deadline)),
        );
    }
}

fn relief_fact(times: &Times, plan: &Plan) -> String {
    plan.reliefs.iter().map(|relief| relief.decide_by).min().map_or("nothing found".to_owned(), |by| {
        format!("decide by {}", times.local_day(times.told_down(by)))
    })
}

fn write_relief(page: &mut Page, times: &Times, relief: &Relief) {
    let by = times.told_down(relief.decide_by);
    let left = by - times.now();
    let until =
        if left.get() < 0 { format!("{} ago", lasting(-left)) } else { format!("in {}", lasting(left)) };
    let steps = if relief.steps.len() == 1 { "" } else { ", all of these together" };
    page.text(0, &format!("Decide by {}, {until}{steps}:", times.both(by)));
    for step in &relief.steps {
        let price =
            if step.price.is_empty() { String::new() } else { format!("; its price: {}", step.price) };
        page.text(4, &format!("{}{price}", step.what));
    }
    let mut outcome = format!("Then these fit: {}.", relief.relieves.join(", "));
    if !relief.gives_up.is_empty() {
        outcome.push_str(&format!(" Given up instead, of less weight: {}.", relief.gives_up.join(", ")));
    }
    if !relief.leaves.is_empty() {
        outcome.push_str(&format!(" Still without a place: {}.", relief.leaves.join(", ")));
    }
    page.text(4, &outcome);
}

/// Writes adopted arrivals that the computed ones have left behind, and what that endangers.
pub fn write_overtaken(page: &mut Page, times: &Times, plan: &Plan) {
    for overtaken in &plan.overtaken {
        let danger = if overtaken.endangers.is_empty() {
            "No planned task ends after it allows".to_owned()
        } else {
            format!(
                "It endangers {}: {}",
                count(overtaken.endangers.len(), "task"),
                overtaken.endangers.join(", ")
            )
        };
        page.text(
            0,
            &format!(
                "THE WIND IS COMPUTED TO COME EARLIER THAN ADOPTED at {}: {} instead of {}, {}. {danger}.",
                place_name(plan, &overtaken.place),
                times.both(times.told_down(overtaken.computed)),
                times.both(overtaken.adopted),
                apart(overtaken.computed - overtaken.adopted),
            ),
        );
    }
}

/// Writes what an order to adopt the computed arrival would move.
pub fn write_if_adopted(page: &mut Page, margin: usize, times: &Times, plan: &Plan) {
    for tried in &plan.if_adopted {
        let stages = tried.stages.iter().map(|stage| {
            let due = |at: Option<Moment>| {
                at.map_or_else(|| "not due".to_owned(), |at| times.both(times.told_down(at)))
            };
            format!("{} due {} instead of {}", stage.id, due(stage.to), due(stage.from))
        });
        let mut parts: Vec<String> = stages.collect();
        parts.push(format!("{} start at another time", count(tried.moved, "task")));
        for (words, ids) in [("no longer fit", &tried.given_up), ("fit again", &tried.relieved)] {
            if !ids.is_empty() {
                parts.push(format!("{words}: {}", ids.join(", ")));
            }
        }
        let computed = times.both(times.told_down(tried.computed));
        let words = format!("{} at {computed}, {}: {}", tried.place, apart(tried.by), parts.join("; "));
        page.labelled(margin, "if adopted", &words);
    }
}

/// A place's name as the arrivals give it, or its id.
#[must_use]
pub fn place_name<'a>(plan: &'a Plan, id: &'a str) -> &'a str {
    plan.arrivals.iter().find(|arrival| arrival.place == id).map_or(id, |arrival| &arrival.place_name)
}
