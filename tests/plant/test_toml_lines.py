"""Lines of keys in a TOML text."""

import tomllib
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from logbook.plant.toml_lines import Path, line_of, lines_of

TRICKY = (
    """\
top = 1
"quoted key" = 2   # [not.a.table]

[plant]            # with = a remark
name = "a # no remark, [no table] and = no key"
text = '''
[[engine]]
id = "within a text"
'''
other = """
    + '"""'
    + """
a = 1 \\"""
    + '"""'
    + """ and on
[[engine]]
"""
    + '"""'
    + """
after = [
    [1, 2],        # ] not closed by a remark
    [3, 4]
]
late.dotted = true

[[engine]]
id = "one"
[engine.counters]
rev = { digits = 8, "x = y" = "}" }
[[engine.trial]]
load = [1]
  [[ engine . trial ]]
  load = [2]

[[engine]]
id = "two"
[[engine.trial]]
load = [3]
'literal' = 'c:\\'
last = 5"""
)


@pytest.mark.parametrize(
    ("path", "line"),
    [
        (("top",), 1),
        (("quoted key",), 2),
        (("plant",), 4),
        (("plant", "name"), 5),
        (("plant", "text"), 6),
        (("plant", "other"), 10),
        (("plant", "after"), 14),
        (("plant", "late", "dotted"), 18),
        (("engine", 0), 20),
        (("engine", 0, "id"), 21),
        (("engine", 0, "counters"), 22),
        (("engine", 0, "counters", "rev"), 23),
        (("engine", 0, "trial", 0, "load"), 25),
        (("engine", 0, "trial", 1), 26),
        (("engine", 0, "trial", 1, "load"), 27),
        (("engine", 1, "id"), 30),
        (("engine", 1, "trial", 0, "load"), 32),
        (("engine", 1, "trial", 0, "literal"), 33),
        (("engine", 1, "trial", 0, "last"), 34),
        # What is not there: the line of what would hold it.
        (("engine", 1, "bore_mm"), 29),
        (("engine", 0, "counters", "rev", "digits"), 23),
        (("engine",), 20),
        (("meter", 0, "id"), 1),
    ],
)
def test_the_line_of_a_key(path: Path, line: int) -> None:
    tomllib.loads(TRICKY)
    assert line_of(lines_of(TRICKY), path) == line


def test_nothing_is_found_that_is_not_there() -> None:
    content = tomllib.loads(TRICKY)
    for path in lines_of(TRICKY):
        value: Any = content
        for part in path:
            value = value[part]


NAMES = st.text("abc_-1", min_size=1, max_size=3)
VALUES = st.sampled_from(
    ["1", '"[x]"', "'='", "[1,\n 2]", "[\n  [1],\n  []\n]", '"""\nx = 1\n[y]\n"""', "'''\n#\"\n'''", "{ a = [1] }"]
)


@settings(max_examples=200, deadline=None)
@given(st.lists(st.tuples(NAMES, st.dictionaries(NAMES, VALUES, max_size=4)), max_size=4))
def test_every_key_of_any_file_is_found_at_its_line(tables: list[tuple[str, dict[str, str]]]) -> None:
    text, expected, counts = "", {}, {}  # type: ignore[var-annotated]
    for name, content in tables:
        text += f"[[t{name}]]\n"
        index = counts[name] = counts.get(name, -1) + 1
        for key, value in content.items():
            expected["t" + name, index, key] = text.count("\n") + 1
            text += f"{key} = {value}\n"
    tomllib.loads(text)
    found = lines_of(text)
    assert {path: found.get(path) for path in expected} == expected
