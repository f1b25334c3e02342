"""The plant.toml that a new plant begins with."""

import re
import tomllib
from typing import Any

import pytest

from logbook.plant import fields
from logbook.plant.description import parse_plant
from logbook.plant.template import KINDS, template

# A key or table that is not in use stands behind # without a blank, and so do the lines of its list.
_NOT_IN_USE = re.compile(r"^#(?=[a-z\[\]]|    \")", re.MULTILINE)


def in_use(text: str) -> str:
    return _NOT_IN_USE.sub("", text)


@pytest.mark.parametrize("kind", KINDS)
def test_a_template_opens_at_once(kind: str) -> None:
    plant, faults = parse_plant(template(kind))
    assert faults == ()
    assert plant is not None
    assert plant.kind == kind
    assert "sign" in plant.people[0].rights


@pytest.mark.parametrize("kind", KINDS)
def test_every_key_that_is_not_in_use_is_good_when_it_is_used(kind: str) -> None:
    plant, faults = parse_plant(in_use(template(kind)))
    assert [fault.sentence() for fault in faults] == []
    assert plant is not None
    assert plant.marks.excess_points == 1.0


def keys_of(content: Any, table: str = "") -> set[tuple[str, str]]:
    found = set()
    if isinstance(content, list):
        for item in content:
            found |= keys_of(item, table)
    elif isinstance(content, dict):
        for key, value in content.items():
            found |= {(table, key)} | keys_of(value, f"{table}.{key}".lstrip("."))
    return found


def test_the_two_templates_together_show_every_key_there_is(monkeypatch: pytest.MonkeyPatch) -> None:
    asked: set[tuple[str, str]] = set()
    original = fields.Table.__init__

    def remembering(self: fields.Table, *arguments: Any) -> None:
        original(self, *arguments)
        tables.append(self)

    tables: list[fields.Table] = []
    monkeypatch.setattr(fields.Table, "__init__", remembering)
    shown: set[tuple[str, str]] = set()
    for kind in KINDS:
        text = in_use(template(kind))
        parse_plant(text)
        shown |= keys_of(tomllib.loads(text))
    for table in tables:
        name = ".".join(part for part in table.path if isinstance(part, str))
        asked |= {(name, key) for key in table.asked if not name.startswith("engine.counters.")}
    told = "\n".join(template(kind) for kind in KINDS)
    missing = {(name, key) for name, key in asked - shown if key not in told}
    assert missing == set()
    assert ("engine", "compression_ratio") in asked


@pytest.mark.parametrize("kind", KINDS)
def test_numbers_are_marked_as_examples(kind: str) -> None:
    text = template(kind)
    assert "EVERY NUMBER BELOW IS AN EXAMPLE" in text
    for key in ("bore_mm", "stroke_mm", "cylinders", "rated_speed_rpm", "sfoc_g_kwh", "digits", "volume_m3"):
        lines = [line for line in text.split("\n") if line.startswith(f"{key} = ")]
        assert lines
        assert all("example" in line for line in lines), lines


@pytest.mark.parametrize("kind", KINDS)
def test_it_fits_a_terminal_of_eighty_columns(kind: str) -> None:
    assert max(map(len, template(kind).split("\n"))) <= 80
    assert template(kind).isascii()


def test_no_other_kind() -> None:
    with pytest.raises(ValueError, match="ship and station"):
        template("barge")
