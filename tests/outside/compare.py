"""Compares a stored reference file with one made again: the same words in the same places.

    python3 tests/outside/compare.py HOW STORED MADE

HOW is "exact"; "seconds": times may differ by one second; "metres": the last word of a line may differ by 0.0001.
"""

import sys
from datetime import datetime

TIME = "%Y-%m-%dT%H:%M:%SZ"


def words_agree(how, stored, made):
    if stored == made:
        return True
    try:
        if how == "seconds":
            return abs((datetime.strptime(stored, TIME) - datetime.strptime(made, TIME)).total_seconds()) <= 1
        # A tenth of the last digit more than 0.0001, because neither number is a binary fraction.
        return how == "metres" and abs(float(stored) - float(made)) <= 0.00011
    except ValueError:
        return False


def lines_agree(how, stored, made):
    stored, made = stored.split(), made.split()
    if how == "metres" and stored[:-1] != made[:-1]:
        return False
    return len(stored) == len(made) and all(words_agree(how, *pair) for pair in zip(stored, made))


def main():
    how, *paths = sys.argv[1:]
    stored, made = ([*open(path, encoding="utf-8")] for path in paths)
    different = [number for number, pair in enumerate(zip(stored, made), 1) if not lines_agree(how, *pair)]
    for number in different[:10]:
        print(f"{paths[0]}:{number}\n  stored {stored[number - 1]}  made   {made[number - 1]}", end="")
    if len(stored) != len(made):
        print(f"{paths[0]} has {len(stored)} lines, and {len(made)} were made")
    if how not in ("exact", "seconds", "metres"):
        sys.exit(f"how is {how}?")
    sys.exit(1 if different or len(stored) != len(made) else 0)


main()
