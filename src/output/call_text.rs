//! A call as one plain text to paste or to read out: at most 700 ASCII characters, a draft until somebody releases it.

use crate::output::clock_text::Times;
use crate::output::setting::Setting;
use crate::output::words::count;
use crate::plan::call::{Call, Matter};
use crate::plan::sheet::Plan;
use crate::record::call::Substance;
use crate::time::moment::Moment;

/// The longest text.
pub const LONGEST: usize = 700;

/// How long names and reasons may be, tried in turn until all fits; at the last everything fits whatever it is.
const ROOMS: [usize; 6] = [160, 100, 70, 45, 25, 12];

/// How long an id may be within a text.
const ID: usize = 40;

/// The text of a call. Names are written in ASCII, as radios and old message systems have it; what cannot be is "?".
#[must_use]
pub fn call_text(call: &Call, plan: &Plan, setting: &Setting) -> String {
    let times = Times::new(setting.clock, plan.now);
    let written = ROOMS.iter().map(|room| text_within(call, plan, setting, &times, *room));
    let mut last = String::new();
    for text in written {
        last = text;
        if last.len() <= LONGEST {
            break;
        }
    }
    last.truncate(LONGEST);
    last
}

fn text_within(call: &Call, plan: &Plan, setting: &Setting, times: &Times<'_>, room: usize) -> String {
    let mut sentences: Vec<String> = Vec::new();
    let banner = setting.banner();
    sentences.extend((!banner.is_empty()).then(|| short(&banner, 40)));
    let draft = if call.released_by.is_none() { "DRAFT " } else { "" };
    let kind = if call.is_order { "ORDER" } else { "ADVICE" };
    let channel =
        call.channel.as_ref().map_or_else(String::new, |channel| format!(" ({})", short(channel, 30)));
    sentences.push(format!(
        "{draft}{kind} {} from {} to {}{channel}",
        short(&call.id, ID),
        short(setting.port, room.min(30)),
        short(&call.to.words(), room.min(60)),
    ));
    let style = Style { first: &|at| times.full(at), short: &|text| short(text, room) };
    sentences.push(message(call, times, &style));
    sentences
        .extend((!call.place.is_empty()).then(|| format!("Place: {}", short(&call.place, room.min(40)))));
    sentences.extend((!call.reason.is_empty()).then(|| format!("Reason: {}", short(&call.reason, room))));
    sentences.push(grounds(plan, setting, times, room));
    sentences.push(validity(call, plan, times));
    sentences
        .extend(call.released_by.as_ref().map(|who| format!("Released by {}", short(who, room.min(40)))));
    sentences.push(format!("Please confirm {}", short(&call.id, ID)));
    let text: String = sentences.iter().map(|sentence| format!("{}. ", ascii(sentence))).collect();
    text.trim_end().to_owned()
}

/// How a message is written.
#[derive(Clone, Copy)]
pub struct Style<'a> {
    /// The time that matters most.
    pub first: &'a dyn Fn(Moment) -> String,
    /// Names and reasons.
    pub short: &'a dyn Fn(&str) -> String,
}

/// What a call says, in one sentence without its end.
#[must_use]
pub fn message(call: &Call, times: &Times<'_>, style: &Style<'_>) -> String {
    let Style { first, short } = style;
    let about: String = call.about.chars().take(ID).collect();
    match &call.matter {
        Matter::Task { name, issued, latest } => {
            let task = format!("{about} {}", short(name));
            let was = issued.map(|at| times.both(times.told_start(at, None)));
            match (call.substance, was) {
                (Substance::Start(start), was) => {
                    let start = Moment::at_or_after(start);
                    let told = first(times.told_start(start, *latest));
                    let latest = latest.filter(|latest| *latest >= start);
                    let latest =
                        latest.map(|at| format!(", latest {}", times.both(times.told_latest(start, at))));
                    let was = was.map_or_else(|| String::from(", had no time"), |was| format!(", was {was}"));
                    format!("{task}: starts {told}{was}{}", latest.unwrap_or_default())
                }
                (substance, was) => {
                    let was = was.map_or_else(String::new, |was| format!(", was to start {was}"));
                    format!("{task}: {}{was}", now_words(substance))
                }
            }
        }
        Matter::Relief { what, price, relieves, decide_by } => {
            let price = if price.is_empty() { String::new() } else { format!(", price: {}", short(price)) };
            let by = first(times.told_down(*decide_by));
            let fits = if *relieves == 1 { "fits" } else { "fit" };
            format!("Decide by {by}: {}{price}; then {} {fits}", short(what), count(*relieves, "task"))
        }
        Matter::Declare { name, due } => {
            let verb = if *due < times.now() { "was due" } else { "is due" };
            let due = first(times.told_down(*due));
            format!("Stage {} {} {verb} {due} and is not declared", short(&about), short(name))
        }
        Matter::Adopt { adopted, computed } => {
            let computed = first(times.told_down(*computed));
            let adopted = times.both(*adopted);
            format!(
                "Arrival at {} computed {computed}, adopted {adopted}: adopt the earlier one?",
                short(&about)
            )
        }
        Matter::Confirm { order } => format!("A second person must confirm {about}: {}", short(order)),
        Matter::Duty { stage, act, by } => {
            let by = by.map(|by| format!(" by {}", first(times.told_down(by))));
            format!("Stage {} is declared: {}{}", short(stage), short(act), by.unwrap_or_default())
        }
        Matter::Stay { conditions, until } => {
            let until = until.map(|until| format!(" until {}", first(until)));
            let on = if conditions.is_empty() {
                String::new()
            } else {
                format!(", on condition: {}", short(conditions))
            };
            format!("{} may stay in port{}{on}", short(&about), until.unwrap_or_default())
        }
    }
}

fn now_words(substance: Substance) -> &'static str {
    match substance {
        Substance::GivenUp => "GIVEN UP, cannot be done in time",
        Substance::NotNeeded => "not needed",
        Substance::Waits => "waits, has no time now",
        Substance::Unreported => "NOT REPORTED, has it begun?",
        Substance::Start(_) | Substance::Decision | Substance::Duty | Substance::Stay => "",
    }
}

/// "Plan of Thu 06:20 (09:20Z), record event 63, chain 0f1e2d3c4b5a; advisory 12 on OSKELA".
fn grounds(plan: &Plan, setting: &Setting, times: &Times<'_>, room: usize) -> String {
    let record = if setting.record.is_empty() {
        String::new()
    } else {
        format!(", record {}", short(setting.record, 40))
    };
    let advisory = plan.advisory.as_ref().map_or_else(
        || String::from("no advisory"),
        |advisory| {
            let number = advisory.number.map_or_else(String::new, |number| format!(" {number}"));
            let current = if advisory.is_overdue { "NOT CURRENT: " } else { "" };
            format!("{current}advisory{number} on {}", short(&advisory.storm, room.min(30)))
        },
    );
    format!("Plan of {}{record}; {advisory}", times.full(plan.now))
}

/// An order stands until another one; advice until there is a newer forecast.
fn validity(call: &Call, plan: &Plan, times: &Times<'_>) -> String {
    if call.is_order {
        return String::from("Valid until changed by order");
    }
    let due = plan.advisory.as_ref().filter(|advisory| !advisory.is_overdue && !advisory.is_last);
    match due.and_then(|advisory| advisory.next_due) {
        Some(due) => format!("Valid until {} (next advisory) or called again", times.both(due)),
        None => String::from("Valid until called again"),
    }
}

/// The calls that nobody has answered in time, in a few words for the head of a page, and how many more there are;
/// `None` if there are none.
#[must_use]
pub fn overdue_words(plan: &Plan, times: &Times) -> Option<(String, usize)> {
    let late: Vec<&Call> = plan.calls.iter().filter(|call| call.is_overdue(plan.now)).collect();
    let first = late.first()?;
    let by = times.local_day(times.told_down(first.by));
    let words = format!("UNANSWERED past {by}: {} {} to {}", first.id, first.about, first.to.words());
    Some((words, late.len() - 1))
}

/// `text` in ASCII and at most `room` characters long.
fn short(text: &str, room: usize) -> String {
    let mut text = ascii(text);
    if text.len() > room {
        text.truncate(room.saturating_sub(2));
        text.truncate(text.trim_end().len());
        text.push_str("..");
    }
    text
}

/// Letters of Latin scripts without their marks, common signs in their ASCII form, "?" for all else.
#[must_use]
pub fn ascii(text: &str) -> String {
    let mut plain = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            ' '..='~' => plain.push(c),
            '\u{a0}' | '\t' | '\n' | '\r' => plain.push(' '),
            'à'..='å' | 'ā' | 'ă' | 'ą' => plain.push('a'),
            'À'..='Å' | 'Ā' | 'Ă' | 'Ą' => plain.push('A'),
            'ç' | 'ć' | 'č' => plain.push('c'),
            'Ç' | 'Ć' | 'Č' => plain.push('C'),
            'è'..='ë' | 'ē' | 'ę' | 'ě' => plain.push('e'),
            'È'..='Ë' | 'Ē' | 'Ę' | 'Ě' => plain.push('E'),
            'ì'..='ï' | 'ī' | 'ı' => plain.push('i'),
            'Ì'..='Ï' | 'Ī' | 'İ' => plain.push('I'),
            'ñ' | 'ń' | 'ň' => plain.push('n'),
            'Ñ' | 'Ń' | 'Ň' => plain.push('N'),
            'ò'..='ö' | 'ø' | 'ō' | 'ő' => plain.push('o'),
            'Ò'..='Ö' | 'Ø' | 'Ō' | 'Ő' => plain.push('O'),
            'ù'..='ü' | 'ū' | 'ů' | 'ű' => plain.push('u'),
            'Ù'..='Ü' | 'Ū' | 'Ů' | 'Ű' => plain.push('U'),
            'ý' | 'ÿ' => plain.push('y'),
            'ł' => plain.push('l'),
            'Ł' => plain.push('L'),
            'ś' | 'š' | 'ş' => plain.push('s'),
            'Ś' | 'Š' | 'Ş' => plain.push('S'),
            'ź' | 'ż' | 'ž' => plain.push('z'),
            'Ź' | 'Ż' | 'Ž' => plain.push('Z'),
            'æ' => plain.push_str("ae"),
            'Æ' => plain.push_str("AE"),
            'œ' => plain.push_str("oe"),
            'ß' => plain.push_str("ss"),
            '‘' | '’' => plain.push('\''),
            '“' | '”' | '„' => plain.push('"'),
            '–' | '—' | '−' => plain.push('-'),
            '…' => plain.push_str(".."),
            _ => plain.push('?'),
        }
    }
    plain
}
