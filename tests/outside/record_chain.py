"""Checks a port's record with nothing of the program itself: Python's own sqlite3, json and hashlib.

    python3 tests/outside/record_chain.py PORT/record.sqlite [NUMBER:DIGITS]

Every event's hash is SHA-256(hash before, newline, number, newline, text), the first one's hash before being the SHA-256 of
"snugdown record 1"; every paper's key is the SHA-256 of its bytes; every advisory that an event takes is there. With
NUMBER:DIGITS the chain must have that head at that event. Prints the head; ends with 1 and a message at the first fault.
"""

import hashlib
import json
import sqlite3
import sys


def sha256(data):
    return hashlib.sha256(data).hexdigest()


def check(path, anchor=None):
    record = sqlite3.connect(f"file:{path}?mode=ro", uri=True)
    if record.execute("PRAGMA application_id").fetchone()[0] != 0x736E7567:
        raise SystemExit("this is no record")
    papers = {key: bytes(data) for key, data in record.execute("SELECT sha256, bytes FROM paper")}
    for key, data in papers.items():
        if sha256(data) != key:
            raise SystemExit(f"paper {key} is not as it came")
    head = sha256(b"snugdown record 1")
    heads = {}
    for expected, (number, text, stored) in enumerate(
        record.execute("SELECT number, text, hash FROM event ORDER BY number"), start=1
    ):
        if number != expected:
            raise SystemExit(f"event {expected} is missing")
        head = sha256(f"{head}\n{number}\n{text}".encode())
        if head != stored:
            raise SystemExit(f"event {number} is not as it was written")
        taken = json.loads(text)["what"].get("took_advisory")
        if taken and taken.get("sha256") and taken["sha256"] not in papers:
            raise SystemExit(f"the bytes of {taken['file']} are missing")
        heads[number] = head
    if anchor:
        number, digits = anchor.split(":")
        if not heads.get(int(number), "").startswith(digits.lower()):
            raise SystemExit(f"there is no event {number} with the chain {digits}")
    print(f"event {len(heads)}, chain {head[:12]}")


if __name__ == "__main__":
    check(*sys.argv[1:])
