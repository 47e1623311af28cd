//! The wind at a place as plain text: in sentences, then hour by hour, then limit by limit.

use crate::arrival::series::{Band, HourWind, Lasting};
use crate::output::arrival_text::{glued_chance, onset_sentence};
use crate::output::asked::{onset, over_by};
use crate::output::clock_text::{Times, lasting};
use crate::output::head_text::write_title;
use crate::output::layout::{Page, columns, glued};
use crate::output::wind_asked::{LimitAsked, WindAsked};
use crate::output::words::{count, wind_cautions};
use crate::plan::sheet::Point;
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::units::speed::Knots;
use crate::wind::swell::FORERUNNER_PERIODS_S;

/// Room for "greatest".
const MARGIN: usize = 11;
/// Winds below this (kt) are told as "<20": the storm is not what makes the weather there.
const LEAST_TOLD_KT: f64 = 20.0;
/// At most so many ids of those whom a limit concerns; all stand in the JSON.
const MOST_USERS: usize = 4;

/// The page, `width` columns wide, with a row every `every` hours.
#[must_use]
pub fn wind_text(asked: &WindAsked, every: i64, width: usize) -> String {
    let times = Times::new(asked.setting.clock, asked.now);
    let mut page = Page::new(width);
    write_title(&mut page, &times, asked.setting, &format!("wind at {} for", asked.place));
    page.gap();
    write_sentences(&mut page, &times, asked);
    write_hours(&mut page, &times, asked, every);
    write_limits(&mut page, &times, asked);
    page.section("CAUTIONS", "");
    for caution in wind_cautions(asked.setting).iter().chain(&asked.notes) {
        page.labelled(2, "-", caution);
    }
    page.finish()
}

fn write_sentences(page: &mut Page, times: &Times, asked: &WindAsked) {
    let (advisory, file) = asked.advisory;
    let number = advisory.number.map_or(String::new(), |number| format!("{number} "));
    let issued = Moment::at_or_before(advisory.issued);
    let age = lasting(advisory.age_at(asked.now.to_utc()));
    page.labelled(
        MARGIN,
        "advisory",
        &format!("{number}on {}, issued {}, {age}\u{a0}old; {file}", advisory.storm.name, times.both(issued)),
    );
    let height = format!("{:.0}\u{a0}m", asked.height.get());
    let means = format!("winds are a {} at {height}, gusts over 3\u{a0}s", asked.averaging);
    page.labelled(MARGIN, "place", &format!("{}; {means}", asked.exposure));
    let end = Some(asked.gale.forecast_end);
    let gale = format!(
        "34\u{a0}kt over the open sea ({}): {}",
        advisory.averaging,
        onset_sentence(times, &onset(asked.gale), end)
    );
    page.labelled(MARGIN, "gale", &gale);
    if let Some(words) = lasts(&asked.series.lasts) {
        let over = match over_by(asked.gale) {
            Point::At(at) => format!("; over for good by {} (90\u{a0}%)", times.both(times.told_up(at))),
            Point::AfterEnd | Point::Unknown => String::new(),
        };
        page.labelled(MARGIN, " lasts", &format!("if it comes, {words}{over}"));
    }
    let (mean, gust) = (&asked.series.peak_mean, &asked.series.peak_gust);
    let greatest =
        format!("mean {}, gusts {} (10, 50, 90\u{a0}% of scenarios have less)", kt(mean), kt(gust));
    page.labelled(MARGIN, "greatest", &greatest);
    write_turning(page, asked);
    let seas = match asked.seas {
        Some(answer) => format!("12\u{a0}ft and more: {}", onset_sentence(times, &onset(answer), end)),
        None => "the advisory does not give the reach of 12-ft seas".to_owned(),
    };
    page.labelled(MARGIN, "high seas", &seas);
    let [first, then] = asked.swell.map(|at| times.both(times.told_down(at)));
    let [long, short] = FORERUNNER_PERIODS_S;
    let mut swell = format!(
        "long swell ({long:.0} to {short:.0}\u{a0}s) that left the storm at issue is here from {first} to {then}, \
         if no land lies between"
    );
    if let Some(waves) = &asked.waves {
        swell.push_str(&format!(
            "; near the centre the waves are about {:.0}\u{a0}m, {:.0}\u{a0}s (Young 1988, deep water)",
            waves.height.get(),
            waves.period_s
        ));
    }
    page.labelled(MARGIN, "swell", &swell);
}

fn write_turning(page: &mut Page, asked: &WindAsked) {
    let Some(turning) = &asked.series.turning else { return };
    let parts = [
        (turning.veers, "it veers (turns clockwise; the storm's right side)"),
        (turning.backs, "it backs (turns anticlockwise; the left side)"),
        (turning.steady, "it hardly turns"),
        (turning.eye, "THE EYE PASSES OVER"),
    ];
    let told: Vec<String> = parts
        .iter()
        .filter(|(chance, _)| *chance > Chance::NEVER)
        .map(|(chance, words)| format!("{} {words}", glued_chance(*chance)))
        .collect();
    page.labelled(MARGIN, "turning", &format!("if the gale comes: {}", told.join("; ")));
    if turning.eye > Chance::NEVER {
        page.labelled(
            MARGIN,
            "LULL",
            "if the eye passes, a calm of minutes to an hour or more, and then THE WIND RETURNS FROM THE OTHER SIDE as strong \
             as before: nobody goes out to work in it",
        );
    }
}

/// "5 h, 9 h, 14 h (10, 50, 90 %)"; `None` where too few scenarios bring it.
fn lasts(points: &[Lasting; 3]) -> Option<String> {
    let told: Option<Vec<String>> = points
        .iter()
        .map(|point| match point {
            Lasting::For(length) => Some(format!("{:.0}\u{a0}h", length.get() as f64 / 60.0)),
            Lasting::BeyondEnd => Some("past the end of the forecast".to_owned()),
            Lasting::TooFew => None,
        })
        .collect();
    told.map(|told| format!("it lasts {} (10, 50, 90\u{a0}%)", told.join(", ")))
}

fn write_hours(page: &mut Page, times: &Times, asked: &WindAsked, every: i64) {
    let title = format!("EVERY {}", lasting(Minutes::hours(every))).to_uppercase();
    page.section(&title, "kt: 10, 50, 90 % of scenarios have less");
    let row = |cells: [&str; 6]| {
        let widths = [24, 13, 13, 15, 7, 6];
        let cells = cells.iter().zip(widths).map(|(cell, width)| {
            glued(&format!("{cell}{}", " ".repeat(width.max(columns(cell)) - columns(cell))))
        });
        cells.collect::<String>()
    };
    page.one_line(&row(["", "mean", "gust", "from", "gale", "lull"]));
    let from = asked.now.floor_to(Minutes::hours(1));
    let ahead: Vec<&HourWind> = asked.series.hours.iter().filter(|hour| hour.at >= from).collect();
    let is_due = |hour: &HourWind| ((hour.at - from).get() / 60) % every == 0;
    // Where the storm no longer makes the wind, rows say nothing.
    let calm_from =
        ahead.iter().rposition(|hour| hour.gust.high.get() >= LEAST_TOLD_KT).map_or(0, |last| last + 1);
    let (told, calm) = ahead.split_at(calm_from);
    for hour in told.iter().filter(|hour| is_due(hour)) {
        let direction = hour
            .from
            .as_ref()
            .map_or(String::new(), |fan| format!("{} ({}-{})", fan.likely, fan.left, fan.right));
        let share = |chance: Chance| if chance == Chance::NEVER { String::new() } else { chance.to_string() };
        page.one_line(&row([
            &times.both(hour.at),
            &band(&hour.mean),
            &band(&hour.gust),
            &direction,
            &share(hour.gale),
            &share(hour.lull),
        ]));
    }
    if let (Some(first), Some(last)) = (calm.first(), calm.last()) {
        let (first, last) = (times.both(first.at), times.both(last.at));
        page.text(
            0,
            &format!(
                "From {first} to the end of the forecast, {last}, the storm brings less than 20\u{a0}kt."
            ),
        );
    }
}

fn write_limits(page: &mut Page, times: &Times, asked: &WindAsked) {
    if asked.limits.is_empty() {
        return;
    }
    page.section("LIMITS HERE", &count(asked.limits.len(), "limit"));
    for LimitAsked { limit, used_by, answer } in &asked.limits {
        let mut users: Vec<&str> = used_by.iter().map(String::as_str).take(MOST_USERS).collect();
        let more = format!("{} more", used_by.len().saturating_sub(MOST_USERS));
        if used_by.len() > MOST_USERS {
            users.push(&more);
        }
        page.text(0, &format!("{limit}: {}", users.join(", ")));
        page.text(2, &format!("{}.", onset_sentence(times, &onset(answer), Some(answer.forecast_end))));
    }
}

/// "<20 34 51".
fn band(band: &Band) -> String {
    [band.low, band.middle, band.high].map(told).join(" ")
}

fn kt(told_band: &Band) -> String {
    let points = [told_band.low, told_band.middle, told_band.high].map(|wind| told(wind).trim().to_owned());
    glued(&format!("{} kt", points.join(" / ")))
}

fn told(wind: Knots) -> String {
    if wind.get() < LEAST_TOLD_KT { "<20".to_owned() } else { format!("{:3.0}", wind.get()) }
}
