//! The files of a port's rules and tasks, and the rules they describe.

use crate::finding::fault::{Finding, has_error, sort_findings};
use crate::finding::page::Page;
use crate::finding::source::SourceText;
use crate::finding::table::Keys;
use crate::port::folder::{Draft, Folder, read_draft};
use crate::port::harbour::Port;
use crate::rules::codes;
use crate::rules::desk::{Desk, Names, Sort};
use crate::rules::reader_stage::{Head, read_duties, read_head, read_stages};
use crate::rules::reader_task::read_tasks;
use crate::rules::stage::{Duty, Rules, Stage};
use crate::rules::task::TaskSpec;

/// Reads the rules for a port that is already checked: all findings at once, and the rules if none of them is an error.
///
/// Whether the tasks that links name exist, and whether all of it holds a circle, is for the work graph to check.
#[must_use]
pub fn read_rules(folder: &Folder, port: &Port) -> (Option<Rules>, Vec<Finding>) {
    read_rules_against(folder, &Draft::of(port))
}

/// Reads a port and its rules: the findings of all files at once, whether or not the port itself has faults.
#[must_use]
pub fn read_folder(folder: &Folder) -> (Option<(Port, Rules)>, Vec<Finding>) {
    let (draft, mut findings) = read_draft(folder);
    let (rules, rules_findings) = read_rules_against(folder, &draft);
    let port = if has_error(&findings) { None } else { draft.into_port() };
    findings.extend(rules_findings);
    sort_findings(&mut findings);
    (port.zip(rules), findings)
}

fn read_rules_against(folder: &Folder, draft: &Draft) -> (Option<Rules>, Vec<Finding>) {
    let page = |name: &str| folder.get(name).map(|source| Page::read(source, &codes::TABLE));
    let (rules_page, tasks_page) = (page("rules.toml"), page("tasks.toml"));
    let rules = read_pages(rules_page.as_ref(), tasks_page.as_ref(), draft);
    let mut findings: Vec<Finding> = Vec::new();
    for (name, page) in [("rules.toml", rules_page), ("tasks.toml", tasks_page)] {
        findings.extend(page.map_or_else(|| vec![missing_file(name)], Page::into_findings));
    }
    sort_findings(&mut findings);
    (rules.filter(|_| !has_error(&findings)), findings)
}

fn missing_file(name: &str) -> Finding {
    let place = SourceText::new(name, "").line(1);
    let allowed = "a port's folder holds at least port.toml, rules.toml and tasks.toml";
    Finding::error(codes::MISSING_FILE, place, format!("there is no {name}"), allowed, "write the file")
}

fn read_pages(rules: Option<&Page<'_>>, tasks: Option<&Page<'_>>, draft: &Draft) -> Option<Rules> {
    let mut rules_file = rules.and_then(Keys::of_file);
    let mut tasks_file = tasks.and_then(Keys::of_file);
    let mut names = Names::none(rules_file.is_some());
    if let Some(file) = &mut rules_file {
        note_ids(&mut names, Sort::Stage, "stage", file);
        note_ids(&mut names, Sort::Duty, "duty", file);
    }
    if let Some(file) = &mut tasks_file {
        note_ids(&mut names, Sort::Task, "task", file);
    }
    let head = rules_file.as_mut().and_then(read_head);
    let winds = head.as_ref().and_then(|head| head.winds);
    let desk = Desk { draft, names: &names, winds };
    let (stages, duties) = rules_file
        .as_mut()
        .map_or((Vec::new(), Vec::new()), |file| (read_stages(file, &desk), read_duties(file, &desk)));
    let tasks = tasks_file.as_mut().map(|file| read_tasks(file, &desk)).unwrap_or_default();
    [rules_file, tasks_file].into_iter().flatten().for_each(Keys::finish);
    together(head?, stages, duties, tasks)
}

fn note_ids(names: &mut Names, sort: Sort, heading: &'static str, file: &mut Keys<'_>) {
    // Headings of the wrong form are reported when the things themselves are read.
    let Some(things) = file.optional(heading).filter(|item| item.is_list()) else { return };
    for thing in things.list().iter().filter(|thing| thing.is_table()) {
        let Some(mut keys) = thing.keys(heading) else { continue };
        let is_template = sort == Sort::Task && keys.optional("for_each").is_some();
        if let Some(id) = keys.optional("id") {
            names.add(if is_template { Sort::Template } else { sort }, &id);
        }
    }
}

fn together(head: Head, stages: Vec<Stage>, duties: Vec<Duty>, tasks: Vec<TaskSpec>) -> Option<Rules> {
    Some(Rules {
        title: head.title?,
        effective: head.effective?,
        reckoning: head.reckoning?,
        least_chance: head.least_chance?,
        adopted_margin: head.adopted_margin?,
        stages,
        duties,
        tasks,
    })
}
