//! Asked against done: as text for people, and as a table for spreadsheets.

use crate::output::clock_text::{Times, lasting};
use crate::output::escape::visible;
use crate::output::layout::Page;
use crate::output::setting::Setting;
use crate::output::wire::value::{maybe, time};
use crate::plan::review::{End, ReviewLine};
use crate::time::moment::{Minutes, Moment};

/// The columns of the table.
const COLUMNS: [&str; 13] = [
    "task",
    "name",
    "who",
    "asked_start",
    "asked_finish",
    "deadline",
    "began",
    "end",
    "done",
    "after_asked_min",
    "late_min",
    "told_by",
    "evidence",
];

/// The word for an end that programs read.
#[must_use]
pub fn end_key(end: End) -> &'static str {
    match end {
        End::Done(_) => "done",
        End::Cannot => "cannot",
        End::NotNeeded => "not_needed",
        End::Open => "open",
        End::Untold => "untold",
        End::GivenUp => "given_up",
        End::NeverAsked => "never_asked",
    }
}

/// When a task was done.
#[must_use]
pub fn done_at(end: End) -> Option<Moment> {
    match end {
        End::Done(at) => Some(at),
        End::Cannot | End::NotNeeded | End::Open | End::Untold | End::GivenUp | End::NeverAsked => None,
    }
}

/// How many of the tasks asked for were done in time, late, or not; then each task. Tasks never asked for are counted.
#[must_use]
pub fn review_text(lines: &[ReviewLine], now: Moment, setting: &Setting, width: usize) -> String {
    let times = Times::new(setting.clock, now);
    let mut page = Page::new(width);
    let banner = setting.banner();
    if !banner.is_empty() {
        page.text(0, &banner);
    }
    page.text(0, &format!("{}: asked against done until {}", setting.port.to_uppercase(), times.full(now)));
    if !setting.record.is_empty() {
        page.text(0, &format!("record: {}", setting.record));
    }
    page.text(0, &summary(lines));
    page.gap();
    for line in lines.iter().filter(|line| line.end != End::NeverAsked) {
        page.text(0, &format!("{} {}: {}", visible(&line.task), visible(&line.name), words(line, &times)));
    }
    page.finish()
}

fn summary(lines: &[ReviewLine]) -> String {
    let number = |test: &dyn Fn(&ReviewLine) -> bool| lines.iter().filter(|line| test(line)).count();
    let done = number(&|line| matches!(line.end, End::Done(_)));
    let late = number(&|line| line.late.is_some());
    format!(
        "{} tasks: {done} done, {late} of them after their deadline; {} cannot be done; {} not needed; {} begun and not \
         told done; {} asked and nothing told; {} given up; {} never asked",
        lines.len(),
        number(&|line| line.end == End::Cannot),
        number(&|line| line.end == End::NotNeeded),
        number(&|line| line.end == End::Open),
        number(&|line| line.end == End::Untold),
        number(&|line| line.end == End::GivenUp),
        number(&|line| line.end == End::NeverAsked),
    )
}

fn words(line: &ReviewLine, times: &Times) -> String {
    let at = |label: &str, time: Option<Moment>| time.map(|time| format!("{label} {}", times.both(time)));
    let asked = match (line.asked_start, line.asked_finish) {
        (Some(start), Some(finish)) => Some(format!("asked {} to {}", times.both(start), times.both(finish))),
        (start, finish) => at("asked", start.or(finish)),
    };
    let end = match line.end {
        End::Done(done) => format!("done {}{}", times.both(done), apart(line.after_asked)),
        End::Cannot => "CANNOT BE DONE".to_owned(),
        End::NotNeeded => "not needed".to_owned(),
        End::Open => "NOT TOLD DONE".to_owned(),
        End::Untold => "NOTHING TOLD".to_owned(),
        End::GivenUp => "GIVEN UP".to_owned(),
        End::NeverAsked => "never asked".to_owned(),
    };
    let late = line.late.map(|late| format!("{} AFTER ITS DEADLINE", lasting(late)));
    let by = (!line.told_by.is_empty()).then(|| format!("told by {}", visible(&line.told_by)));
    let evidence = (!line.evidence.is_empty()).then(|| visible(&line.evidence));
    let parts = [asked, at("began", line.began), Some(end), late, by, evidence];
    parts.into_iter().flatten().collect::<Vec<_>>().join("; ")
}

fn apart(after: Option<Minutes>) -> String {
    match after {
        Some(after) if after > Minutes::ZERO => format!(", {} after asked", lasting(after)),
        Some(after) if after < Minutes::ZERO => format!(", {} before asked", lasting(-after)),
        Some(_) | None => String::new(),
    }
}

/// The table: comma-separated, RFC 4180, times in UTC, one line a task.
#[must_use]
pub fn review_csv(lines: &[ReviewLine]) -> String {
    let mut text = COLUMNS.join(",") + "\r\n";
    for line in lines {
        let minutes = |span: Option<Minutes>| span.map_or(String::new(), |span| span.get().to_string());
        let cells = [
            cell(&line.task),
            cell(&line.name),
            cell(&line.who),
            maybe(line.asked_start).unwrap_or_default(),
            maybe(line.asked_finish).unwrap_or_default(),
            maybe(line.deadline).unwrap_or_default(),
            maybe(line.began).unwrap_or_default(),
            end_key(line.end).to_owned(),
            done_at(line.end).map(time).unwrap_or_default(),
            minutes(line.after_asked),
            minutes(line.late),
            cell(&line.told_by),
            cell(&line.evidence),
        ];
        text.push_str(&cells.join(","));
        text.push_str("\r\n");
    }
    text
}

/// A text as a cell: quoted where it must be, and never the beginning of a formula in a spreadsheet.
fn cell(text: &str) -> String {
    let text = visible(text);
    let is_formula = text.starts_with(['=', '+', '-', '@']);
    let text = if is_formula { format!("'{text}") } else { text };
    if text.contains(['"', ',', ';']) || is_formula {
        format!("\"{}\"", text.replace('"', "\"\""))
    } else {
        text
    }
}

#[cfg(test)]
mod tests {
    use super::cell;

    #[test]
    fn a_cell_is_quoted_as_rfc_4180_asks_and_is_no_formula() {
        assert_eq!(cell("Lunden Gale"), "Lunden Gale");
        assert_eq!(cell("he said \"now\", twice"), "\"he said \"\"now\"\", twice\"");
        assert_eq!(cell("=HYPERLINK(x)"), "\"'=HYPERLINK(x)\"");
        assert_eq!(cell("a\nb"), "a\\nb");
    }
}
