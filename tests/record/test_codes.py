"""The list of codes is the list of codes that the code uses."""

from __future__ import annotations

import re
from pathlib import Path

import verify.record.codes
from verify.record.codes import PROBLEM_CODES

ROOM = Path(verify.record.codes.__file__).parent
FILES = [*ROOM.glob("*.py"), *(ROOM.parent / "sources").glob("*.py")]
FAMILY = re.compile(r'"((?:record|structure|spectrum|compound)-[a-z]+(?:-[a-z]+)*)"')
SCHEMA_CODE = re.compile(
    r'["\']((?:wrong|key|too|unknown|many)-[a-z]+)["\']|-(unknown-key|key-missing|many-faults)"'
)
INNER = {"record-key-choice"}  # renamed before it leaves the room


def test_every_code_that_is_used_is_listed_and_the_other_way_round() -> None:
    used: set[str] = set()
    for path in FILES:
        if path.name in ("codes.py", "registry.py"):
            continue
        text = path.read_text(encoding="utf-8")
        used |= set(FAMILY.findall(text))
        if path.name == "schema.py":
            used |= {f"record-{first or second}" for first, second in SCHEMA_CODE.findall(text)}
    assert used - INNER == set(PROBLEM_CODES)


def test_codes_are_kebab_case_and_say_what_they_mean() -> None:
    assert list(PROBLEM_CODES) == sorted(PROBLEM_CODES)
    assert all(re.fullmatch(r"[a-z]+(-[a-z]+)+", code) for code in PROBLEM_CODES)
    assert len(set(PROBLEM_CODES.values())) == len(PROBLEM_CODES)
