"""Refusals and marks: the one closed list of what may stand in `flags`, as data, and sets of them as bit masks.

*empty*: a figure cannot be had. *refused*: shown, not compared. *mark*: compared, and the mark goes with it.
A row is comparable when none of the first two stands in it.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

EMPTY, REFUSED, MARK = "empty", "refused", "mark"

Mask = NDArray[np.uint64]
"""One set of flags a row: bit i = i-th of the list."""


@dataclass(frozen=True, slots=True)
class Flag:
    """One reason of the closed list."""

    key: str
    kind: str
    """empty, refused or mark"""
    sentence: str
    """follows "Not compared: " where the kind is empty or refused"""
    comparable_when: str
    """what would make it comparable, or what to do about the mark"""

    @property
    def bit(self) -> np.uint64:
        return _BITS[self.key]


_LIST = (
    Flag("no_fuel_reading", EMPTY, "fuel was not read in this span",
         "read every fuel meter of the engine at both ends of the span"),
    Flag("no_power_reading", EMPTY, "power was not read in this span",
         "read the power or the energy counter, and the power take-off where one is fitted"),
    Flag("lcv_missing", EMPTY, "the lot has no calorific value (consumption stands, efficiency is empty)",
         "enter the laboratory value of the lot, or its density and sulphur"),
    Flag("counter_open_question", EMPTY, "a counter question is open",
         "answer it: passed zero, exchanged, reset, or a reading was wrong (then amend that one)"),
    Flag("common_fuel_meter", EMPTY, "one meter serves several sets; see the group",
         "run this set alone for a span, or take the figures of the group"),
    Flag("barometer_missing", EMPTY, "no barometer at this altitude", "read the barometer in the same round"),
    Flag("no_reference", REFUSED, "no reference curve is entered", "enter the trial results in plant.toml"),
    Flag("mode_has_no_reference", REFUSED, "no reference in this operating mode",
         "enter a trial of this mode, or build an own baseline in it"),
    Flag("outside_curve", REFUSED, "load outside the reference range",
         "run inside the range of the trial, or build an own baseline at this load"),
    Flag("load_band_differs", REFUSED, "the two sides ran at different load", "compare readings of the same load band"),
    Flag("not_steady", REFUSED, "load was not steady", "read after half an hour at steady load"),
    Flag("load_changed_in_span", REFUSED, "spot power does not stand for this span",
         "read at steady load, or read an energy counter"),
    Flag("span_too_long", REFUSED, "span too long for a spot power",
         "read at least every six hours (generating sets: every hour), or read an energy counter"),
    Flag("span_with_start_or_stop", REFUSED, "a start or stop lies inside the span",
         "read all counters again once the engine runs steadily"),
    Flag("blowers_differ", REFUSED, "auxiliary blowers in another state than the reference",
         "enter a trial with the blowers in this state, or build an own baseline"),
    Flag("blowers_unknown", REFUSED, "state of the auxiliary blowers unknown", "log the blowers as on or off"),
    Flag("lot_mixed", REFUSED, "fuel lots were mixed", "wait until the service tank holds the new lot alone"),
    Flag("lot_unknown", REFUSED, "the lot in use is not known",
         "enter the change-over to the lot in use, and its analysis"),
    Flag("lcv_default", REFUSED, "calorific value is only the default of the grade",
         "enter the laboratory value of the lot, or its density and sulphur"),
    Flag("correction_input_missing", REFUSED, "suction temperature or humidity not read",
         "read what the correction needs in the same round"),
    Flag("bypass_position_differs", REFUSED, "bypass or waste gate in another position",
         "read with the bypass as it was at the trial"),
    Flag("unit_cut_out", REFUSED, "a unit or turbocharger was cut out", "read with all units in service"),
    Flag("soot_blowing_or_washing", REFUSED, "soot blowing or washing in the span",
         "take the next span without blowing or washing"),
    Flag("setting_changed", REFUSED, "a setting was changed in between", "take the next span with one setting"),
    Flag("method_differs", REFUSED, "method or power source differ between the two sides",
         "compare what was worked out by one method and one power source"),
    Flag("meter_exchanged", REFUSED, "an instrument was exchanged in between",
         "take the next span, which one instrument covers alone"),
    Flag("meter_doubtful", REFUSED, "an instrument is under repair, defective or doubted",
         "look at the instruments of this span; amend the reading if one was typed wrong"),
    Flag("power_from_index", REFUSED, "power was taken from the fuel index", "read the power"),
    Flag("estimated_share", REFUSED, "more than 5 % is estimated", "read the instrument instead of estimating"),
    Flag("outside_plausible", REFUSED, "efficiency or consumption outside the typing span",
         "look for a wrong reading of power, fuel meters or temperature in this span"),
    Flag("weather", REFUSED, "ice, shallow water or heavy weather", "read in open water and moderate weather"),
    Flag("too_few", REFUSED, "too few readings", "keep logging"),
    Flag("reserve_not_entered", REFUSED, "no spinning reserve is entered", "enter the reserve of this plant"),
    Flag("lowest_load_not_entered", REFUSED, "no lowest load of a set is entered", "enter the lowest load of a set"),
    Flag("least_run_time_not_entered", REFUSED, "no least running time is entered", "enter the least running time"),
    Flag("beyond_data", REFUSED, "the forecast lies beyond what the data support", "keep logging"),
    Flag("no_combustion_temperature", MARK,
         "no combustion temperature by the line method: bound and gap are empty, the excess stands",
         "read charge pressure and charge air temperature with power and fuel"),
    Flag("above_bound", MARK, "above the bound for the temperatures chosen: a reading or T_H is wrong",
         "look at power, fuel meters and calorific value, then at the combustion temperature"),
    Flag("above_ideal_cycle", MARK, "above the ideal cycle",
         "look at Pmax, compression and expansion ratio, calorific value and power"),
    Flag("better_than_clean", MARK, "better than clean: instrument or fuel first",
         "look at instruments and fuel first, then at Pmax"),
    Flag("curve_shape_differs", MARK, "the curve's shape does not fit this engine", "build an own baseline"),
    Flag("not_corrected", MARK, "no ambient correction is set", "set the correction in plant.toml"),
    Flag("coolant_not_read", MARK, "coolant left out on both sides", "read the cooler water inlet temperature"),
    Flag("barometer_assumed", MARK, "1013 mbar assumed", "read the barometer"),
    Flag("blowers_assumed", MARK, "blower state taken from load", "log the blowers as on or off"),
    Flag("power_by_speed_cube", MARK, "power by mean speed cubed", "read an energy counter"),
    Flag("passed_zero", MARK, "counter passed zero", "nothing to do if the counter is near its end"),
    Flag("pooled_span", MARK, "two spans pooled", "nothing to do; the reading between was left out"),
    Flag("contains_estimate", MARK, "up to 5 % is estimated (E)", "read the instrument instead of estimating"),
    Flag("contains_amended", MARK, "an amended value is in it", "see the entry that was struck out"),
    Flag("finding_accepted", MARK, "a value outside its typing span was accepted", "look at that value again"),
    Flag("maker_interval_first", MARK, "the maker's interval comes first", "keep the maker's interval"),
    Flag("plant_value_nearby", MARK, "plant value from another round", "read the plant values in the same round"),
    Flag("gaps_in_instrument_file", MARK, "gaps in the instrument file", "look at the instrument's record"),
)  # fmt: skip

FLAGS: Mapping[str, Flag] = {flag.key: flag for flag in _LIST}
"""The closed list by key, in its order."""

_BITS = {flag.key: np.uint64(1 << place) for place, flag in enumerate(_LIST)}


def mask_of(*keys: str) -> np.uint64:
    """The set of these flags as one bit mask. Raises KeyError for a word that is not in the list."""
    mask = np.uint64(0)
    for key in keys:
        mask |= _BITS[key]
    return mask


NOT_COMPARABLE = mask_of(*(flag.key for flag in _LIST if flag.kind != MARK))


class Flags:
    """The flags of many rows while they are worked out."""

    def __init__(self, rows: int) -> None:
        self.masks: Mask = np.zeros(rows, np.uint64)

    def add(self, key: str, where: NDArray[np.bool_]) -> None:
        """Set one flag on the rows where `where` is true."""
        self.masks[np.asarray(where, bool)] |= _BITS[key]

    def merge(self, masks: Mask) -> None:
        self.masks |= masks

    def has(self, *keys: str) -> NDArray[np.bool_]:
        """Rows that carry at least one of these flags."""
        result: NDArray[np.bool_] = (self.masks & mask_of(*keys)) != 0
        return result


def comparable(masks: Mask) -> NDArray[np.bool_]:
    """False as soon as a flag of kind empty or refused stands in the row."""
    result: NDArray[np.bool_] = (masks & NOT_COMPARABLE) == 0
    return result


def keys_of(mask: np.uint64 | int) -> tuple[str, ...]:
    """The flags of one mask, in the order of the list."""
    return tuple(key for key, bit in _BITS.items() if int(mask) & int(bit))


def joined(masks: Mask) -> NDArray[np.object_]:
    """`flags` of every row: keys in the order of the list, joined by semicolons; empty text for none."""
    distinct, place = np.unique(masks, return_inverse=True)
    texts = np.array([";".join(keys_of(mask)) for mask in distinct], dtype=object)
    return texts[place]


def split(text: str) -> tuple[str, ...]:
    """The keys of a `flags` cell. Raises KeyError for a word that is not in the list."""
    keys = tuple(key for key in text.split(";") if key)
    mask_of(*keys)
    return keys


def is_comparable(keys: Iterable[str]) -> bool:
    """The same rule for one row given as keys. Raises KeyError for a word that is not in the list."""
    return all(FLAGS[key].kind == MARK for key in keys)


def sentence(key: str) -> str:
    """The flag in words: "Not compared: ..." with what would change it, or the mark's own sentence."""
    flag = FLAGS[key]
    if flag.kind == MARK:
        return f"{flag.sentence[0].upper()}{flag.sentence[1:]}."
    return f"Not compared: {flag.sentence}. To make it comparable: {flag.comparable_when}."
