"""The rooms and what each may import: read from the code, and tried in fresh interpreters."""

import ast
import subprocess
import sys
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parents[1] / "logbook"

# room -> rooms of ours it may import, libraries it may import at all
ROOMS: dict[str, tuple[set[str], set[str]]] = {
    "plant": (set(), {"pint"}),
    "reading": ({"plant"}, set()),
    "book": ({"plant", "reading"}, {"sqlite_utils"}),
    "physics": (set(), {"numpy", "scipy"}),
    "judgement": ({"plant", "reading", "physics", "book"}, {"numpy", "pandas", "scipy"}),
    "answers": ({"plant", "reading", "book", "judgement"}, {"numpy", "pandas"}),
    "month": ({"answers"}, set()),
    "exchange": ({"answers", "plant", "reading", "book"}, {"openpyxl", "pandas"}),
    "chart": (set(), {"plotext"}),
    "panes": ({"answers", "reading", "plant", "book", "chart"}, {"textual", "rich"}),
    "command_line": ({"plant", "reading", "book", "physics", "answers", "month", "exchange", "panes"}, set()),
}  # fmt: skip
# Of the book, judgement takes the records only: it never opens one.
ONLY = {"judgement": {"book": {"logbook.book.entry"}}, "answers": {"book": {"logbook.book.entry"}}}
# pint lives in units alone.
ONLY_IN = {"pint": {"plant/units.py"}}


def imports_of(path: Path) -> list[tuple[str, bool]]:
    """Every module imported in a file, and whether only for the type checker."""
    tree = ast.parse(path.read_text(encoding="utf-8"))
    for_types: set[int] = set()
    for node in ast.walk(tree):
        if isinstance(node, ast.If) and "TYPE_CHECKING" in ast.dump(node.test):
            for_types |= {id(inner) for inner in ast.walk(node)}
    found: list[tuple[str, bool]] = []
    for node in ast.walk(tree):
        if isinstance(node, ast.Import):
            found += [(alias.name, id(node) in for_types) for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}: relative import"
            found.append((node.module or "", id(node) in for_types))
    return found


def modules() -> list[Path]:
    return sorted(path for path in PACKAGE.rglob("*.py") if path.parent != PACKAGE or path.name == "chart.py")


@pytest.mark.parametrize("path", modules(), ids=lambda path: str(path.relative_to(PACKAGE)))
def test_a_room_imports_only_what_it_may(path: Path) -> None:
    inside = path.relative_to(PACKAGE)
    room = inside.parts[0].removesuffix(".py")
    ours, libraries = ROOMS[room]
    wrong = []
    for module, _ in imports_of(path):
        top, _, rest = module.partition(".")
        if top == "logbook":
            other = rest.split(".")[0] or "logbook"
            allowed = other in ours | {room, "version"}
            narrowed = ONLY.get(room, {}).get(other)
            if not allowed or (narrowed and module not in narrowed):
                wrong.append(module)
        elif top not in sys.stdlib_module_names and top not in libraries:
            wrong.append(module)
        if module in ONLY_IN and str(inside) not in ONLY_IN[module]:
            wrong.append(module)
    assert not wrong, f"{inside} may not import {', '.join(wrong)}"


@pytest.mark.parametrize("path", modules(), ids=lambda path: str(path.relative_to(PACKAGE)))
def test_no_module_grows_over_five_hundred_lines(path: Path) -> None:
    assert len(path.read_text(encoding="utf-8").splitlines()) <= 500


HEAVY = {"textual", "pandas", "pint", "plotext", "sqlite_utils", "numpy", "scipy", "openpyxl"}


def loaded_by(code: str) -> set[str]:
    """Which heavy libraries a fresh interpreter has loaded after running `code`."""
    script = f"import sys\n{code}\nprint(*sorted({HEAVY!r} & set(sys.modules)), file=sys.__stderr__)"
    done = subprocess.run([sys.executable, "-c", script], capture_output=True, text=True, check=True)
    return set(done.stderr.splitlines()[-1].split())


RUN = """
from logbook.command_line.main import main
try:
    main({argv!r})
except SystemExit:
    pass
"""


@pytest.mark.parametrize(
    "argv",
    [["--version"], ["--help"], ["nonsense"], ["figures", "--nonsense"], ["open", "--help"], ["month", "--help"]],
)
def test_help_and_refusals_load_no_library(argv: list[str]) -> None:
    assert loaded_by(RUN.format(argv=argv)) == set()


def test_calc_loads_physics_and_no_more() -> None:
    argv = ["calc", "cycle", "p1_bar=3.6", "t1_k=350", "compression_ratio=13.5", "pmax_bar=180", "lambda=2.2",
            "lcv=40.3", "hc_ratio=1.8"]  # fmt: skip
    assert loaded_by(RUN.format(argv=argv)) <= {"numpy", "scipy"}
