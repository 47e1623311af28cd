//! An invented port of any size, as the text of its files: four tasks a ship and one a crane, pilots, tugs and gangs with
//! duty, one channel, tide and daylight. All numbers are ours, chosen so that it can just be closed in time.

use crate::common::Reading;
use snugdown::finding::source::SourceText;
use std::collections::BTreeMap;
use std::fmt::Write;

/// When the port takes its one advisory, with all the time that there is.
pub const EARLY: &str = "2026-09-17T09:00-03:00";

/// When it takes it late, so that not everything fits any more.
pub const LATE: &str = "2026-09-18T20:00-03:00";

const BERTHS: usize = 40;

const PORT: &str = r#"
[port]
name = "Large Haven"
invented = "INVENTED - EXERCISE"
zone = "Etc/GMT+3"
authority = "Harbour Master"
official_source = "the national meteorological service"
reference = "sea"

[[place]]
id = "sea"
name = "Pilot boarding place"
position = "22 24.0 N 040 54.0 W"
exposure = "at-sea"

[[place]]
id = "quays"
name = "The quays"
position = "22 27.0 N 040 57.5 W"
exposure = "off-sea"
counts_from = "sea"
"#;

const WATER: &str = r#"
[tide]
datum = "chart datum"
mean_level = "1.8 m"
simple = [{ constituent = "M2", amplitude = "0.8 m", high_water = "2026-09-17T04:00-03:00" }]

[[channel]]
id = "main"
name = "Main channel"
depth = "10.6 m"
datum = "chart datum"
under_keel = { share = "10 %", at_least = "0.8 m" }
classes = [{ name = "light" }, { name = "deep", draught_over = "10 m" }]
spacing = { light = { light = "4 min", deep = "4 min" }, deep = { light = "5 min", deep = "5 min" } }
clearance = "10 min"
"#;

const RULES: &str = r#"
[rules]
title = "Storm rules"
effective = "2026-06-01"
reckoning = { chance = "10 %" }
winds = { averaging = "1 min", height = "10 m" }
least_chance = "5 %"
adopted_margin = "1 h"

[[stage]]
id = "S1"
name = "Watch"
any = [{ forecast = { wind = "34 kt", at = "sea", within = "72 h" } }]

[[stage]]
id = "S2"
name = "Clear the port"
any = [{ forecast = { wind = "34 kt", at = "sea", within = "12 h" } }]
"#;

const TASKS: &str = r#"
[[task]]
id = "secure"
name = "Secure {name} for sea"
for_each = { ships = {} }
takes = { own = "secure" }
may_be_cut = { to = "45 min", price = "deck cargo is left on the quay", leave = "by order" }
not_before = { own = "ready" }
gate = "S1"
who = "Master"
stake = "harm"
needs = { pool = "gang", count = 1 }

[[task]]
id = "clear"
name = "Clear {name} out"
for_each = { ships = {} }
takes = "1 h"
who = "Agent"
stake = "order"
after = [{ same = "secure" }]
daylight = "start"

[[task]]
id = "sail"
name = "{name} sails"
for_each = { ships = {} }
takes = "45 min"
who = "Pilot"
stake = "harm"
weight = 500
after = [{ same = "secure" }]
done_before = [{ wind = "34 kt", at = "sea", lead = "4 h" }]
stop_at = { wind = "30 kt", at = "sea" }
tide = { channel = "main", from = "15 min", until = "40 min" }
passage = { channel = "main", direction = "out", enters = "15 min", leaves = "40 min" }
needs = [
  { pool = "pilot", count = 1, class = { own = "pilot" }, before = "10 min", after = "10 min" },
  { pool = "tug", count = { own = "tugs" }, before = "10 min", after = "5 min" },
]
or_else = { tasks = ["stay"], price = "rides it out on extra lines", leave = "by order" }

[[task]]
id = "stay"
name = "Extra moorings for {name}"
for_each = { ships = {} }
takes = "4 h"
who = "Master"
stake = "harm"
after = [{ same = "secure" }]
stop_at = { gust = "38 kt", at = "quays" }

[[task]]
id = "pin"
name = "Pin {name}"
for_each = { plant = {} }
takes = "1 h 15 min"
who = "Terminal duty manager"
stake = "harm"
after = [{ ships_at_berth = "sail", if_given_up = "start-at-decision" }]
done_before = { wind = "34 kt", at = "quays", lead = "2 h" }
stop_at = { gust = "45 kt", at = "quays" }
needs = { pool = "rigger", count = 1, before = "10 min" }
"#;

const FORECAST: &str = r#"
[forecast]
issuer = "Invented Exercise Office"
base_time = "2026-09-17T09:00Z"
issued = "2026-09-17T12:00Z"
number = 1
[storm]
name = "ODA"
id = "AL992026"
class = "hurricane"
[now]
centre = "17.2 N 26.0 W"
motion = "290 at 13 kt"
max_wind = "75 kt"
averaging = "1 min"
reach_34kt = "110NE 90SE 60SW 100NW n mi"
reach_50kt = "50 n mi"
reach_64kt = "20 n mi"
[[later]]
after = "24 h"
centre = "18.9 N 31.0 W"
[[later]]
after = "48 h"
centre = "20.6 N 36.0 W"
max_wind = "85 kt"
[[later]]
after = "72 h"
centre = "22.3 N 40.9 W"
[[later]]
after = "96 h"
centre = "25.0 N 45.0 W"
"#;

/// A port with so many ships, read, and its record with one advisory taken at `taken`: five tasks for each ship, of which
/// "stay" only stands in for "sail". Plan it at `taken` for a record of one plan.
pub fn large_port(ships: usize, taken: &str) -> Reading {
    let files = [
        ("port.toml", PORT.to_owned()),
        ("water.toml", WATER.to_owned()),
        ("berths.toml", berths()),
        ("ships.toml", fleet(ships)),
        ("plant.toml", cranes(ships)),
        ("means.toml", means(ships)),
        ("rules.toml", RULES.to_owned()),
        ("tasks.toml", TASKS.to_owned()),
    ];
    let files: BTreeMap<String, SourceText> =
        files.into_iter().map(|(name, text)| (name.to_owned(), SourceText::new(name, text))).collect();
    let mut reading = Reading::files(files);
    reading.add_forecast("01.toml", FORECAST);
    reading.set_events(&format!(
        "[[event]]\nat = \"{taken}\"\nby = \"Duty officer\"\ntook_advisory = {{ file = \"01.toml\" }}\n"
    ));
    reading
}

fn berths() -> String {
    (0..BERTHS).fold(String::new(), |mut text, number| {
        let _ = writeln!(text, "[[berth]]\nid = \"Q{number}\"\nname = \"Quay {number}\"\nplace = \"quays\"");
        text
    })
}

/// Every third ship is deep: she needs the tide, two tugs and a pilot for all ships.
fn fleet(ships: usize) -> String {
    (0..ships).fold(String::new(), |mut text, number| {
        let is_deep = number % 3 == 0;
        let (draught, tugs, pilot) =
            if is_deep { ("11.4 m", 2, "unlimited") } else { ("6 m", 1, "restricted") };
        let secure = 60 + 15 * (number * 7 % 7);
        let ready = 9 + number * 5 % 12;
        let _ = writeln!(
            text,
            "[[ship]]\nid = \"V{number}\"\nname = \"Ship {number}\"\nkind = \"container\"\nberth = \"Q{}\"\n\
             gross_tonnage = 9000\nlength = \"150 m\"\ndraught = \"{draught}\"\n\
             own = {{ secure = \"{secure} min\", tugs = {tugs}, ready = \"2026-09-17T{ready:02}:00-03:00\", pilot = \"{pilot}\" }}",
            number % BERTHS
        );
        text
    })
}

fn cranes(ships: usize) -> String {
    (0..ships).fold(String::new(), |mut text, number| {
        let _ = writeln!(
            text,
            "[[plant]]\nid = \"K{number}\"\nname = \"Crane {number}\"\nkind = \"quay crane\"\nberth = \"Q{}\"",
            number % BERTHS
        );
        text
    })
}

/// Ten to forty members a pool, as many as so many ships need.
fn means(ships: usize) -> String {
    let members = (ships / 8).clamp(10, 40);
    let pool = |id: &str, duty: &str, classes: &dyn Fn(usize) -> &'static str| {
        let members: Vec<String> =
            (0..members).map(|m| format!("{{ id = \"{id}-{m}\"{} }}", classes(m))).collect();
        format!("[[pool]]\nid = \"{id}\"\nname = \"{id}\"\n{duty}members = [{}]\n", members.join(", "))
    };
    let duty = |hours: i64| format!("duty = {{ at_most = \"{hours} h\", then_rest = \"{hours} h\" }}\n");
    let class = |member: usize| match member % 2 {
        0 => ", classes = [\"unlimited\", \"restricted\"]",
        _ => ", classes = [\"restricted\"]",
    };
    [
        pool("pilot", &duty(10), &class),
        pool("tug", "", &|_| ""),
        pool("gang", &duty(12), &|_| ""),
        pool("rigger", &duty(12), &|_| ""),
    ]
    .concat()
}
