#!/usr/bin/env bash
# Every test of the project. `bash tests/run.sh` is the usual run; `bash tests/run.sh all` adds the long runs and makes
# the stored reference values again with the libraries they came from (needs pip). Python 3 is installed if it is missing.
# An outside check whose tool is missing fails; none is skipped.
set -euo pipefail
cd "$(dirname "$0")/.."

say() { printf '\n== %s\n' "$*"; }

# The record's chain is checked by an independent program in Python.
if ! command -v python3 >/dev/null; then
  say "installing python3"
  as_root() { if [ "$(id -u)" -eq 0 ]; then "$@"; else sudo "$@"; fi; }
  as_root apt-get update -q && as_root apt-get install -y -q python3
fi

say "formatting"
cargo fmt --all --check

say "lints"
cargo clippy --locked --all-targets -- -D warnings

say "documentation"
RUSTDOCFLAGS="-D warnings" cargo doc --locked --no-deps --document-private-items

say "tests"
cargo test --locked

if [ "${1:-}" = all ]; then
  say "outside references, made again"
  bash tests/outside/run.sh
  say "the same bytes from both optimisation levels"
  cargo build --locked
  cargo build --locked --release
  for asked in 'plan demo-port --json' 'wind demo-port greywether --json' 'arrivals demo-port --json'; do
    # Exit code 4 says that something does not fit, which is so in the demo.
    cmp <(target/debug/snugdown $asked || [ $? -eq 4 ]) <(target/release/snugdown $asked || [ $? -eq 4 ])
  done
  say "long runs"
  SNUGDOWN_LONG=1 cargo test --locked --release --test demo_port
  SNUGDOWN_LONG=1 cargo test --locked --release --test record_faults -- --nocapture
  SNUGDOWN_LONG=1 cargo test --locked --release --test demo_by_commands
  cargo build --locked --release --bins
  cargo run --locked --release --example record_speed
  say "benches"
  cargo bench --locked
fi

say "all passed"
