//! Turns the table of an invented storm into texts in the layout of a Forecast/Advisory.

use chrono::{DateTime, Duration, NaiveDate, Utc};

/// An invented storm.
#[derive(Clone, Copy, Debug)]
pub struct Storm {
    /// Its name.
    pub name: &'static str,
    /// Basin, number and year. Real storms are numbered from 01 to 49 (from memory); these are from 80 on.
    pub id: &'static str,
    /// Where its texts go, within demo-port.
    pub folder: &'static str,
    /// Its usual way: hours before (negative) or after its nearest approach, latitude north, longitude east.
    pub track: &'static [(f64, f64, f64)],
    /// Its usual life: the same hours, greatest wind in kt.
    pub life: &'static [(f64, f64)],
    /// One line for each advisory.
    pub lines: &'static [Line],
}

/// One advisory: where the storm is on its usual way, and when it is forecast to pass.
#[derive(Clone, Copy, Debug)]
pub struct Line {
    /// The advisory's number.
    pub number: u32,
    /// When it is issued: day of September 2026 and hour, UTC; its forecast counts from three hours before.
    pub issued: (u32, u32),
    /// Where the storm is at that earlier time, in the hours of its usual way.
    pub here: f64,
    /// In how many hours from then it is forecast to be nearest.
    pub passes_in: f64,
    /// How far to the right of its usual way it is forecast to be by then, n mi.
    pub aside: f64,
    /// Stronger than usual by so much, kt.
    pub stronger: f64,
    /// Larger than usual by this factor.
    pub larger: f64,
}

/// Hours after the base time for which a forecast is given.
const LEADS: [f64; 8] = [12.0, 24.0, 36.0, 48.0, 60.0, 72.0, 96.0, 120.0];

/// After this lead no radii are given.
const LAST_RADII: f64 = 72.0;

/// Usual reach of 34, 50 and 64 kt of a storm of 70 kt in its four quadrants (NE, SE, SW, NW), n mi. Invented.
const REACH: [(f64, [f64; 4]); 3] =
    [(64.0, [25.0, 20.0, 10.0, 15.0]), (50.0, [60.0, 55.0, 30.0, 45.0]), (34.0, [125.0, 120.0, 75.0, 100.0])];

/// North of this latitude the storms are forecast to be tropical no longer. Invented.
const EXTRATROPICAL: f64 = 33.0;

/// Reach of seas of 12 ft, as a multiple of the reach of 34 kt. Invented.
const SEAS: f64 = 1.6;

/// The file names and texts of a storm.
pub fn texts(storm: &Storm) -> Vec<(String, String)> {
    let texts = storm.lines.iter().map(|line| {
        (format!("{}advisories/{:02}.txt", storm.folder, line.number), Bulletin { storm, line }.text())
    });
    texts.collect()
}

struct Bulletin<'a> {
    storm: &'a Storm,
    line: &'a Line,
}

/// What the bulletin says of one time.
struct State {
    latitude: f64,
    longitude: f64,
    wind: f64,
    radii: Vec<(f64, [f64; 4])>,
}

impl Bulletin<'_> {
    fn text(&self) -> String {
        let (storm, line) = (self.storm, self.line);
        let now = self.state(3.0);
        let base = self.state(0.0);
        let (heading, speed) = movement(&base, &now, 3.0);
        let class = if now.wind >= 64.0 { "HURRICANE" } else { "TROPICAL STORM" };
        let issued = self.issued();
        let here = format!("{} AT {}", place(&now), issued.format("%d/%H00Z"));
        let mut text = format!(
            "INVENTED - EXERCISE ONLY - NO SUCH STORM OFFICE OR PORT\n\n\
             {class} {} FORECAST/ADVISORY NUMBER {:3}\n\
             CORVANE EXERCISE FORECAST OFFICE             {}\n{}\n\n\
             INVENTED - EXERCISE. THIS TEXT WAS MADE UP FOR A DEMONSTRATION.\n\
             THERE ARE NO WATCHES OR WARNINGS.\n\n\
             {class} CENTER LOCATED NEAR {here}\nPOSITION ACCURATE WITHIN  20 NM\n\n\
             PRESENT MOVEMENT TOWARD THE {} OR {heading:3.0} DEGREES AT {speed:3.0} KT\n\n\
             ESTIMATED MINIMUM CENTRAL PRESSURE {:4.0} MB\n\
             MAX SUSTAINED WINDS {:3.0} KT WITH GUSTS TO {:3.0} KT.\n",
            storm.name,
            line.number,
            storm.id,
            issued.format("%H00 UTC %a %b %d %Y").to_string().to_uppercase(),
            compass(heading),
            pressure(now.wind),
            now.wind,
            gust(now.wind),
        );
        for (speed, reach) in &now.radii {
            text += &format!("{speed:.0} KT.......{}\n", quadrants(reach));
        }
        if let Some((_, gale)) = now.radii.last() {
            text += &format!("12 FT SEAS..{}\n", quadrants(&gale.map(|reach| nearest(reach * SEAS, 15.0))));
        }
        text += "WINDS AND SEAS VARY GREATLY IN EACH QUADRANT.  RADII IN NAUTICAL\n\
                 MILES ARE THE LARGEST RADII EXPECTED ANYWHERE IN THAT QUADRANT.\n\n";
        let before = self.issued() - Duration::hours(3);
        text += &format!(
            "REPEAT...CENTER LOCATED NEAR {here}\nAT {} CENTER WAS LOCATED NEAR {}\n",
            before.format("%d/%H00Z"),
            place(&base)
        );
        for lead in LEADS {
            text += &self.forecast(lead);
        }
        let next = self.issued() + Duration::hours(6);
        text + &format!(
            "\nREQUEST FOR 3 HOURLY SHIP REPORTS WITHIN 300 MILES OF {}\n\nNEXT ADVISORY AT {}\n\n\
             $$\nFORECASTER EXERCISE\n\nNNNN\n",
            place(&now),
            next.format("%d/%H00Z")
        )
    }

    fn forecast(&self, lead: f64) -> String {
        let state = self.state(lead);
        let valid = self.issued() + Duration::minutes((60.0 * (lead - 3.0)) as i64);
        let word = if lead > LAST_RADII { "OUTLOOK" } else { "FORECAST" };
        let ending = if state.latitude > EXTRATROPICAL { "...POST-TROPICAL" } else { "" };
        let mut text = format!(
            "\n{word} VALID {} {}{ending}\nMAX WIND {:3.0} KT...GUSTS {:3.0} KT.\n",
            valid.format("%d/%H00Z"),
            place(&state),
            state.wind,
            gust(state.wind)
        );
        for (speed, reach) in state.radii.iter().filter(|_| lead <= LAST_RADII) {
            text += &format!("{speed:.0} KT...{}\n", quadrants(reach));
        }
        text
    }

    /// What is forecast for `lead` hours after the base time.
    fn state(&self, lead: f64) -> State {
        let line = self.line;
        let along = line.here * (1.0 - lead / line.passes_in);
        let share = lead / line.passes_in;
        let (latitude, longitude) = self.beside(along, line.aside * share.min(1.5));
        let usual = between(self.storm.life.iter().copied(), along);
        let wind = nearest(usual + line.stronger * share.min(1.0), 5.0);
        let size = line.larger * (wind / 70.0).max(0.3);
        let blowing = REACH.iter().filter(|(speed, _)| wind >= *speed);
        // The reach of a wind grows from a third of its usual one as the storm grows past it.
        let radii = blowing.map(|(speed, reach)| {
            let grown = (0.35 + (wind - speed) / 30.0).min(1.0);
            (*speed, reach.map(|reach| nearest(reach * size * grown, 5.0)))
        });
        State { latitude, longitude, wind, radii: radii.collect() }
    }

    /// The point of the usual way at these hours, moved to the right of it.
    fn beside(&self, hours: f64, aside: f64) -> (f64, f64) {
        let point = |hours: f64| {
            let latitude = between(self.storm.track.iter().map(|(t, latitude, _)| (*t, *latitude)), hours);
            let longitude = between(self.storm.track.iter().map(|(t, _, longitude)| (*t, *longitude)), hours);
            (latitude, longitude)
        };
        let ((south, west), (north, east)) = (point(hours - 1.0), point(hours + 1.0));
        let (latitude, longitude) = point(hours);
        let stretch = libm::cos(latitude.to_radians());
        let (up, right) = (north - south, (east - west) * stretch);
        let length = libm::hypot(up, right).max(1e-9);
        (latitude - aside / 60.0 * right / length, longitude + aside / 60.0 * up / length / stretch)
    }

    fn issued(&self) -> DateTime<Utc> {
        let (day, hour) = self.line.issued;
        let date = NaiveDate::from_ymd_opt(2026, 9, day).and_then(|date| date.and_hms_opt(hour, 0, 0));
        date.unwrap_or_default().and_utc()
    }
}

/// The value between the entries around `at`; beyond the ends, the line through the last two.
fn between(entries: impl Iterator<Item = (f64, f64)>, at: f64) -> f64 {
    let entries: Vec<(f64, f64)> = entries.collect();
    let after = entries.iter().position(|(t, _)| *t > at).unwrap_or(entries.len());
    let after = after.clamp(1, entries.len() - 1);
    let ((t0, a), (t1, b)) = (entries[after - 1], entries[after]);
    a + (b - a) * (at - t0) / (t1 - t0)
}

fn nearest(value: f64, step: f64) -> f64 {
    libm::round(value / step) * step
}

fn gust(wind: f64) -> f64 {
    nearest(wind * 1.22, 5.0)
}

/// Invented: near what storms of this strength have.
fn pressure(wind: f64) -> f64 {
    libm::round(1012.0 - wind * wind / 170.0)
}

fn place(state: &State) -> String {
    let letter = if state.longitude < 0.0 { 'W' } else { 'E' };
    format!("{:4.1}N {:5.1}{letter}", state.latitude, state.longitude.abs())
}

fn quadrants(reach: &[f64; 4]) -> String {
    let words = reach.iter().zip(["NE", "SE", "SW", "NW"]).map(|(reach, name)| format!("{reach:3.0}{name}"));
    words.collect::<Vec<_>>().join(" ") + "."
}

/// Heading in degrees and speed in kt.
fn movement(from: &State, to: &State, hours: f64) -> (f64, f64) {
    let up = (to.latitude - from.latitude) * 60.0;
    let right = (to.longitude - from.longitude) * 60.0 * libm::cos(to.latitude.to_radians());
    let heading = nearest(libm::atan2(right, up).to_degrees().rem_euclid(360.0), 5.0) % 360.0;
    (heading, libm::round(libm::hypot(up, right) / hours))
}

fn compass(heading: f64) -> &'static str {
    const POINTS: [&str; 16] = [
        "NORTH",
        "NORTH-NORTHEAST",
        "NORTHEAST",
        "EAST-NORTHEAST",
        "EAST",
        "EAST-SOUTHEAST",
        "SOUTHEAST",
        "SOUTH-SOUTHEAST",
        "SOUTH",
        "SOUTH-SOUTHWEST",
        "SOUTHWEST",
        "WEST-SOUTHWEST",
        "WEST",
        "WEST-NORTHWEST",
        "NORTHWEST",
        "NORTH-NORTHWEST",
    ];
    POINTS[libm::round(heading / 22.5) as usize % 16]
}
