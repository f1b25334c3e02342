"""The closed list of refusals and marks."""

import numpy as np
import pytest

from logbook.judgement import flags
from logbook.judgement.flags import EMPTY, FLAGS, MARK, REFUSED, Flags


def test_the_list_is_closed_and_every_reason_speaks() -> None:
    assert len(FLAGS) == 54
    assert {flag.kind for flag in FLAGS.values()} == {EMPTY, REFUSED, MARK}
    for flag in FLAGS.values():
        assert flag.sentence
        assert flag.comparable_when
        assert not flag.sentence.endswith(".")
    with pytest.raises(KeyError):
        flags.mask_of("a_reason_of_my_own")
    with pytest.raises(KeyError):
        flags.split("lot_mixed;a_reason_of_my_own")


def test_comparable_follows_the_kind() -> None:
    for flag in FLAGS.values():
        mask = np.array([flags.mask_of(flag.key)])
        assert bool(flags.comparable(mask)[0]) is (flag.kind == MARK)
        assert flags.is_comparable([flag.key]) is (flag.kind == MARK)


def test_flags_are_joined_in_the_order_of_the_list_and_split_again() -> None:
    rows = Flags(3)
    rows.add("passed_zero", np.array([False, True, True]))
    rows.add("no_fuel_reading", np.array([False, False, True]))
    assert flags.joined(rows.masks).tolist() == ["", "passed_zero", "no_fuel_reading;passed_zero"]
    assert flags.comparable(rows.masks).tolist() == [True, True, False]
    assert flags.split("no_fuel_reading;passed_zero") == ("no_fuel_reading", "passed_zero")
    assert rows.has("no_fuel_reading", "lot_mixed").tolist() == [False, False, True]


def test_sentences() -> None:
    assert flags.sentence("blowers_differ").startswith(
        "Not compared: auxiliary blowers in another state than the reference. To make it comparable: "
    )
    assert flags.sentence("passed_zero") == "Counter passed zero."
