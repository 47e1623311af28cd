#!/usr/bin/env bash
# Makes the stored reference values again with the libraries that they came from, and compares. Needs Python 3.11 or newer
# with pip and venv, and a package index for pip. Ends with 1 if anything differs, and with an error if anything is missing.
#
# The values must come out as they are stored: the versions are pinned, and what a script writes is rounded more coarsely
# than machines differ. Two exceptions, each below what the tests could notice: a second in the times of the sun, and
# 0.1 mm in the heights of the tide.
set -euo pipefail
cd "$(dirname "$0")/../.."

made=target/outside
venv="$made/venv"
mkdir -p "$made"

if [ ! -x "$venv/bin/python" ]; then
  python3 -m venv "$venv"
fi
python="$venv/bin/python"
"$python" -m pip install --quiet --disable-pip-version-check --requirement tests/outside/requirements.txt

failed=0
check() { # what, command...
  local what="$1"
  shift
  if "$@"; then
    echo "same: $what"
  else
    echo "DIFFERS: $what" >&2
    failed=1
  fi
}

echo "sun, by skyfield"
"$python" tests/outside/sun.py > "$made/sun-60.txt"
check "sunrise, sunset and twilight" "$python" tests/outside/compare.py seconds tests/data/skyfield/sun-60.txt "$made/sun-60.txt"

echo "tide, by utide"
"$python" tests/outside/tide.py > "$made/heights.txt"
check "heights of the tide" "$python" tests/outside/compare.py metres tests/data/utide/heights.txt "$made/heights.txt"

echo "geodesics, by geographiclib"
"$python" tests/outside/geodesics.py > "$made/geodtest-20.dat"
check "geodesics" "$python" tests/outside/compare.py exact tests/data/geodtest/geodtest-20.dat "$made/geodtest-20.dat"

echo "time zones, by tzdata"
cargo run --locked --quiet --example zone_transitions > "$made/compiled-in.txt"
"$python" tests/outside/zone_corrections.py "$made/compiled-in.txt" "$made"
for file in rules/zone-corrections.toml tests/data/tzdata/transitions-2026-2028.txt; do
  check "$file" "$python" tests/outside/compare.py exact "$file" "$made/$(basename "$file")"
done

exit "$failed"
