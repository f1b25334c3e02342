"""One history of the demonstration vessel for all tests of this process; making it takes seconds."""

import sys
from functools import cache
from pathlib import Path

# The vessel is no part of the installed package: she lives beside it.
sys.path.insert(0, str(Path(__file__).parents[1]))

from demo_vessel.generate import generate
from demo_vessel.records import History
from logbook.plant.description import read_plant
from logbook.plant.records import Plant

ROOM = Path(__file__).parents[1] / "demo_vessel"


@cache
def whole_history() -> History:
    """The two years of the default seed."""
    return generate()


@cache
def vessel() -> Plant:
    """What her plant.toml says."""
    return read_plant(ROOM)
