//! Official odds beside ours as plain text: two lines a wind, the official one first.

use crate::advisory::official_rows::Percent;
use crate::output::beside::{Beside, OfficialSource};
use crate::output::clock_text::Times;
use crate::output::layout::{Page, columns, glued};
use crate::time::moment::Moment;

/// Room for "34 kt official".
const MARGIN: usize = 16;
/// Room for one chance.
const CELL: usize = 7;

/// Writes the official odds of a place under ours, for the official times; says which of the two the rules use.
pub fn write_beside(
    page: &mut Page,
    times: &Times,
    source: &OfficialSource,
    beside: &Beside,
    issued: Moment,
) {
    let odds = source.odds;
    let number = odds.number.map_or(String::new(), |number| format!("{number} "));
    let text =
        format!("text {number}issued {}, {}", times.both(Moment::at_or_before(odds.issued)), source.file);
    let Some(listed) = &beside.listed else {
        let words = format!(
            "Official odds ({text}): this place is not listed, or below 3 % of 34 and 50 kt within five days. The rules \
             use ours in any case."
        );
        page.text(0, &words);
        return;
    };
    page.text(0, &format!("Official odds for {listed} ({text}) beside ours; the rules use ours, always:"));
    let fitting = ((page.width() - MARGIN) / CELL).min(beside.times.len());
    let skipped = beside.times.len() - fitting;
    let row = |cells: Vec<String>| -> String { cells.iter().skip(skipped).map(|cell| right(cell)).collect() };
    let hours = beside
        .times
        .iter()
        .map(|time| format!("{} h", ((*time - issued).get() + 30).div_euclid(60)))
        .collect();
    page.labelled(MARGIN, "within", &row(hours));
    for wind in &beside.winds {
        let official = match &wind.official {
            Some(chances) => row(chances.iter().map(|chance| percent(*chance)).collect()),
            None => "not listed".to_owned(),
        };
        page.labelled(MARGIN, &format!("{} official", wind.wind), &official);
        page.labelled(MARGIN, "      ours", &row(wind.ours.iter().map(ToString::to_string).collect()));
    }
}

fn percent(chance: Percent) -> String {
    match chance {
        Percent::BelowOne => "<1\u{a0}%".to_owned(),
        Percent::Of(percent) => format!("{percent}\u{a0}%"),
    }
}

fn right(text: &str) -> String {
    glued(&format!("{}{text}", " ".repeat(CELL.saturating_sub(columns(text)))))
}
