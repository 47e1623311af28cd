"""Compares the compiled-in time-zone data with a newer IANA release, for 2026 to 2028.

Writes into a folder zone-corrections.toml (where the two differ; the program reads it from rules/) and
transitions-2026-2028.txt (what the newer release says for every zone; tests/port_clock.rs compares the corrected clock
with it, from tests/data/tzdata/).

    pip install tzdata
    cargo run --example zone_transitions > target/compiled-in.txt
    python3 tests/outside/zone_corrections.py target/compiled-in.txt target
"""

import os
import sys
import zoneinfo
from collections import defaultdict
from datetime import datetime, timedelta, timezone

zoneinfo.reset_tzpath(to=[])  # The package's data only, never the machine's own.
import tzdata

FIRST = datetime(2026, 1, 1, tzinfo=timezone.utc)
LAST = datetime(2029, 1, 1, tzinfo=timezone.utc)
STEP = timedelta(hours=3)
RELEASE = tzdata.IANA_VERSION


def text(instant):
    return instant.strftime("%Y-%m-%dT%H:%MZ")


def stretches_of(name):
    """[(start, "minutes east/abbreviation")] of a zone in the newer release."""
    zone = zoneinfo.ZoneInfo.no_cache(name)

    def state(instant):
        local = instant.astimezone(zone)
        return f"{int(local.utcoffset().total_seconds()) // 60}/{local.tzname()}"

    at, before = FIRST, state(FIRST)
    found = [(FIRST, before)]
    while at + STEP < LAST:
        after = state(at + STEP)
        if after != before:
            low, high = at, at + STEP
            while high - low > timedelta(minutes=1):
                middle = (low + (high - low) / 2).replace(second=0, microsecond=0)
                if state(middle) == before:
                    low = middle
                else:
                    high = middle
            found.append((high, after))
            before = after
        at += STEP
    return found


def compiled_in(path):
    zones = {}
    with open(path, encoding="utf-8") as lines:
        for line in lines:
            name, *words = line.split()
            pairs = [word.split("=") for word in words]
            zones[name] = [
                (datetime.strptime(start, "%Y-%m-%dT%H:%MZ").replace(tzinfo=timezone.utc), state)
                for start, state in pairs
            ]
    return zones


def state_at(stretches, instant):
    return [state for start, state in stretches if start <= instant][-1]


def differences(old, new):
    """[(from, until, state)]: where `new` says something else than `old`."""
    cuts = sorted({start for start, _ in old} | {start for start, _ in new}) + [LAST]
    found = []
    for start, end in zip(cuts, cuts[1:]):
        state = state_at(new, start)
        if state == state_at(old, start):
            continue
        if found and found[-1][1] == start and found[-1][2] == state:
            found[-1] = (found[-1][0], end, state)
        else:
            found.append((start, end, state))
    return found


HEAD = """# Where the time-zone data that is compiled into the program is out of date, and what holds instead.
#
# Made by tests/outside/zone_corrections.py from IANA time zone database release {release} (public domain), as packaged in
# the Python package tzdata; every zone was compared from checked_from to checked_until. Between them each stretch
# replaces the compiled-in offset; nothing is known here about later changes of law.

release = "{release}"
checked_from = "{first}"
checked_until = "{last}"
"""


def main():
    old, folder = compiled_in(sys.argv[1]), sys.argv[2]
    new = {name: stretches_of(name) for name in sorted(zoneinfo.available_timezones())}
    print("only in the newer release:", sorted(set(new) - set(old)))
    print("only compiled in:", sorted(set(old) - set(new)))

    same = defaultdict(list)
    for name, stretches in new.items():
        same[tuple(stretches)].append(name)
    with open(os.path.join(folder, "transitions-2026-2028.txt"), "w", encoding="utf-8") as out:
        for stretches, names in sorted(same.items(), key=lambda item: item[1]):
            out.write(",".join(names) + " " + " ".join(f"{text(s)}={w}" for s, w in stretches) + "\n")

    wrong = defaultdict(list)
    for name in sorted(set(old) & set(new)):
        found = differences(old[name], new[name])
        if found:
            wrong[tuple(found)].append(name)
    with open(os.path.join(folder, "zone-corrections.toml"), "w", encoding="utf-8") as out:
        out.write(HEAD.format(release=RELEASE, first=text(FIRST), last=text(LAST)))
        for stretches, names in sorted(wrong.items(), key=lambda item: item[1]):
            listed = ", ".join(f'"{name}"' for name in names)
            out.write(f"\n[[correction]]\nzones = [{listed}]\nstretches = [\n")
            for start, end, state in stretches:
                east, abbreviation = state.split("/")
                out.write(
                    f'    {{ from = "{text(start)}", until = "{text(end)}", '
                    f'east_minutes = {east}, abbreviation = "{abbreviation}" }},\n'
                )
            out.write("]\n")
    print("corrected zones:", sum(len(names) for names in wrong.values()))


main()
