//! A whole plan as plain text.

use crate::output::arrival_text::{Onset, onset_sentence};
use crate::output::clock_text::Times;
use crate::output::given_up_text::write_given_up;
use crate::output::head_text::{write_head, write_title};
use crate::output::layout::Page;
use crate::output::setting::Setting;
use crate::output::task_text::{MARGIN, title, write_task};
use crate::output::words::{cautions, count, duty_state, stage_status};
use crate::plan::sheet::{DutyLine, Plan, StageLine, TaskLine, TaskState};
use crate::time::moment::Moment;

/// The plan, `width` columns wide.
#[must_use]
pub fn plan_text(plan: &Plan, setting: &Setting, width: usize) -> String {
    let times = Times::new(setting.clock, plan.now);
    let mut page = Page::new(width);
    write_title(&mut page, &times, setting, "plan made for");
    write_head(&mut page, &times, setting, plan);
    write_given_up(&mut page, &times, plan);
    write_tasks(&mut page, &times, plan);
    write_stages(&mut page, &times, setting, &plan.stages);
    write_arrivals(&mut page, &times, plan);
    write_duties(&mut page, &times, &plan.duties);
    write_breaches(&mut page, plan);
    page.section("WHO DECIDES, AND WHAT THIS DOES NOT COVER", "");
    for caution in cautions(setting) {
        page.labelled(2, "-", &caution);
    }
    let banner = setting.banner();
    if !banner.is_empty() {
        page.gap();
        page.text(0, &banner);
    }
    page.finish()
}

fn write_tasks(page: &mut Page, times: &Times, plan: &Plan) {
    let of = |state| plan.tasks.iter().filter(move |task| task.state == state);
    let timed = || plan.tasks.iter().filter(|t| matches!(t.state, TaskState::Planned | TaskState::Started));
    page.section(
        "TASKS BY TIME",
        &format!("{}, {} done", count(timed().count(), "task"), of(TaskState::Done).count()),
    );
    if plan.tasks.is_empty() {
        page.text(0, "The files name no tasks.");
    }
    let unreported: Vec<&TaskLine> = timed().filter(|task| task.is_unreported).collect();
    if !unreported.is_empty() {
        page.text(0, "Not reported: the planned time has passed, so each is placed again from now and what follows waits");
        write_days(page, times, &unreported);
    }
    let others: Vec<&TaskLine> = timed().filter(|task| !task.is_unreported).collect();
    write_days(page, times, &others);
    write_without_time(
        page,
        "Waiting for a stage that nothing makes due yet",
        of(TaskState::Waiting),
        |task| task.if_declared.as_ref().map_or(String::new(), |stage| format!(" (stage {stage})")),
    );
    write_without_time(page, "Done", of(TaskState::Done), |task| {
        task.finish.map_or(String::new(), |finish| format!(", {}", times.both(finish)))
    });
    write_without_time(page, "Not needed", of(TaskState::NotNeeded), |_| String::new());
}

fn write_days(page: &mut Page, times: &Times, tasks: &[&TaskLine]) {
    let mut day: Option<Moment> = None;
    for task in tasks {
        if let Some(start) = task.start.filter(|start| day.is_none_or(|day| !times.is_same_day(day, *start)))
        {
            page.gap();
            page.text(0, &times.day(start));
            day = Some(start);
        }
        write_task(page, times, task);
    }
}

fn write_without_time<'a>(
    page: &mut Page,
    heading: &str,
    tasks: impl Iterator<Item = &'a TaskLine>,
    remark: impl Fn(&TaskLine) -> String,
) {
    let all: Vec<String> = tasks.map(|task| format!("{}{}", title(task), remark(task))).collect();
    if !all.is_empty() {
        page.gap();
        page.text(0, &format!("{heading}:"));
        page.text(2, &format!("{}.", all.join("; ")));
    }
}

fn write_stages(page: &mut Page, times: &Times, setting: &Setting, stages: &[StageLine]) {
    page.section("STAGES", &format!("{}, in force since {}", setting.rules, setting.effective));
    for stage in stages {
        let due = stage.due.map(|due| times.told_down(due));
        let left = due.map_or(vec!["no time".to_owned()], |due| {
            vec![times.local_day(due), format!(" {}", times.utc(due))]
        });
        let mut parts = vec![format!("{} {}: {}", stage.id, stage.name, stage_status(stage.status))];
        if let Some((since, by)) = &stage.declared {
            parts.push(format!("declared {} by {by}", times.both(*since)));
        }
        parts.extend(stage.lifted.map(|since| format!("lifted {}", times.both(since))));
        parts.extend((!stage.because.is_empty()).then(|| format!("due because {}", stage.because)));
        parts.extend(stage.port_status.iter().map(|(what, how)| format!("{what} {how}")));
        parts.extend((!stage.source.is_empty()).then(|| stage.source.clone()));
        page.beside(MARGIN, &left, &parts.join("; "));
    }
}

fn write_arrivals(page: &mut Page, times: &Times, plan: &Plan) {
    let others: Vec<_> = plan.arrivals.iter().filter(|arrival| !arrival.is_reference).collect();
    if others.is_empty() {
        return;
    }
    page.section("WIND AT OTHER PLACES", "");
    let end = plan.advisory.as_ref().map(|advisory| advisory.forecast_end);
    for arrival in others {
        page.text(
            0,
            &format!(
                "{}, {}: {}.",
                arrival.place_name,
                arrival.wind,
                onset_sentence(times, &Onset::of(arrival), end)
            ),
        );
    }
}

fn write_duties(page: &mut Page, times: &Times, duties: &[DutyLine]) {
    if duties.is_empty() {
        return;
    }
    page.section("DUTIES", "");
    let mut by_time: Vec<&DutyLine> = duties.iter().collect();
    by_time.sort_by_key(|duty| (duty.by.is_none(), duty.by));
    for duty in by_time {
        let by = duty.by.map(|by| times.told_down(by));
        let left = by.map_or(vec![format!("with {}", duty.stage)], |by| {
            vec![times.local_day(by), format!(" {}", times.utc(by))]
        });
        let mut parts = vec![format!("{}: {} ({})", duty.who, duty.act, duty.id)];
        parts.push(duty_state(duty.state).to_owned());
        if !duty.missing.is_empty() {
            parts.push(format!("not fulfilled by {}", duty.missing.join(", ")));
        }
        parts.extend((!duty.source.is_empty()).then(|| duty.source.clone()));
        page.beside(MARGIN, &left, &parts.join("; "));
    }
}

fn write_breaches(page: &mut Page, plan: &Plan) {
    if plan.breaches.is_empty() {
        return;
    }
    page.section("WHAT THE AUDIT FOUND", "do not rely on this plan");
    for breach in &plan.breaches {
        page.text(0, &format!("{}: {}: {}.", breach.code, breach.about, breach.what));
    }
}
