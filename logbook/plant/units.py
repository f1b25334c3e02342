"""Units as people type them: a closed list of spellings for each quantity, never a library's open vocabulary.

A general unit library reads trade shorthand as something else without a word (`PS` petasiemens, `MT` megatesla, `ton`
907 kg, `mt` a thousandth of a tonne). Factors here are plain floats; a test proves each of them against pint.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass

_DROPPED = str.maketrans("", "", " \t^.°º*")
_QUANTITY = re.compile(r"\s*([+-]?(?:\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE][+-]?\d+)?)\s*(.*?)\s*")


class UnitRefused(Exception):
    """The unit is not understood, or would have to be guessed: a sentence that says what to type."""


@dataclass(frozen=True, slots=True)
class Unit:
    """number x factor + offset, in the family's own base unit."""

    factor: float
    offset: float = 0.0
    reference: str = ""
    """pressures: `gauge` or `absolute`; empty: whatever the point is"""
    ask: str = ""
    """not one thing: what to type instead"""


def _same(unit: Unit, *spellings: str) -> dict[str, Unit]:
    return dict.fromkeys(spellings, unit)


_METRIC_HP, _MECHANICAL_HP = 0.73549875, 0.745699872
_KG_CM2, _PSI, _MMWC = 0.980665, 0.06894757293168361, 0.0980665
_BTU_KJ, _KCAL_KJ, _LB = 1.05505585262, 4.1868, 0.45359237
_GAUGE, _ABSOLUTE = "gauge", "absolute"

_WHICH_HP = "horsepower is metric (PS) or mechanical, 1.4 % apart: set horsepower in plant.toml, or type PS or kW"
_WHICH_TON = "ton is a tonne (t), a long ton (1016.05 kg) or a short ton (907.185 kg): type t or kg"

_TEMPERATURE = {
    **_same(Unit(1.0), "c", "degc", "deg", "celsius"),
    **_same(Unit(1 / 1.8, -32 / 1.8), "f", "degf"),
    **_same(Unit(1.0, -273.15), "k", "kelvin"),
}
_DIFFERENCE = {**_same(Unit(1.0), "k", "c", "degc", "deg"), **_same(Unit(1 / 1.8), "f", "degf")}
_PRESSURE = {
    **_same(Unit(1.0), "bar", "b"),
    **_same(Unit(1.0, reference=_GAUGE), "barg", "bar(g)"),
    **_same(Unit(1.0, reference=_ABSOLUTE), "bara", "bar(a)"),
    **_same(Unit(_KG_CM2, reference=_GAUGE), "kg/cm2", "kgf/cm2", "kp/cm2", "ksc", "kg", "atue"),
    **_same(Unit(_KG_CM2, reference=_ABSOLUTE), "ata"),
    **_same(Unit(10.0), "mpa"),
    **_same(Unit(0.01), "kpa"),
    **_same(Unit(0.001), "mbar", "hpa"),
    **_same(Unit(_PSI, reference=_GAUGE), "psi", "psig", "lb", "#"),
    **_same(Unit(_PSI, reference=_ABSOLUTE), "psia"),
    **_same(Unit(1.0, ask="at is 0.980665 bar and atm 1.01325 bar: type it in bar"), "at", "atm"),
}
_SMALL = {
    **_same(Unit(1.0), "mbar", "mb", "hpa"),
    **_same(Unit(_MMWC), "mmwc", "mmwg", "mmaq", "mmh2o", "mmws", "mm"),
    **_same(Unit(2.4908891), "inwc", "inh2o"),
    **_same(Unit(0.01), "pa"),
    **_same(Unit(10.0), "kpa"),
    **_same(Unit(1000.0), "bar"),
}
_BAROMETER = {
    **_same(Unit(1.0), "mbar", "mb", "hpa"),
    **_same(Unit(10.0), "kpa"),
    **_same(Unit(1000.0), "bar"),
    **_same(Unit(1.33322387415), "mmhg", "torr"),
    **_same(Unit(33.86388640341), "inhg"),
}
_POWER = {
    **_same(Unit(1.0), "kw", "kwe"),
    **_same(Unit(1000.0), "mw"),
    **_same(Unit(0.001), "w"),
    **_same(Unit(_METRIC_HP), "ps", "cv", "ch", "pk"),
    **_same(Unit(1.0, ask=_WHICH_HP), "hp", "bhp", "shp"),
}  # fmt: skip
_ENERGY = {
    **_same(Unit(1.0), "kwh", "units"),
    **_same(Unit(1000.0), "mwh"),
    **_same(Unit(1 / 3.6), "mj"),
    **_same(Unit(1000 / 3.6), "gj"),
}
_MASS = {
    **_same(Unit(1.0), "kg", "kgs"),
    **_same(Unit(1000.0), "t", "te", "mt", "tonne", "tonnes"),
    **_same(Unit(_LB), "lb", "lbs"),
    **_same(Unit(1.0, ask=_WHICH_TON), "ton", "lt", "st"),
}  # fmt: skip
_VOLUME = {
    **_same(Unit(1.0), "l", "ltr", "lit", "litre", "litres"),
    **_same(Unit(1000.0), "m3", "cbm", "kl"),
    **_same(Unit(3.785411784), "usg"),
    **_same(Unit(4.54609), "ig"),
    **_same(Unit(158.987294928), "bbl"),
    **_same(Unit(1.0, ask="gal is a US gallon (usg) or an imperial one (ig): type which, or L"), "gal"),
}
_GAS_VOLUME = {
    **_same(Unit(1.0), "nm3", "mn3"),
    **_same(Unit(273.15 / 288.15), "sm3", "scm"),
    **_same(
        Unit(1.0, ask="m3 of gas needs its condition: Nm3 (0 degC) or Sm3 (15 degC), or a meter of actual m3"), "m3"
    ),
    **_same(Unit(1.0, ask="cubic feet of gas need their base pressure: type Nm3 or Sm3"), "scf", "mscf", "mmscf"),
}
_LENGTH = {
    **_same(Unit(1.0), "m", "mtr"),
    **_same(Unit(0.01), "cm"),
    **_same(Unit(0.001), "mm"),
    **_same(Unit(0.3048), "ft"),
}
_CALORIFIC = {
    **_same(Unit(1.0), "mj/kg"),
    **_same(Unit(0.001), "kj/kg"),
    **_same(Unit(_KCAL_KJ / 1000), "kcal/kg"),
    **_same(Unit(_BTU_KJ / _LB / 1000), "btu/lb"),
}
_CONTENT = {**_same(Unit(1.0), "%", "%m/m", "%v/v", "pct"), **_same(Unit(1e-4), "ppm")}

FAMILIES: Mapping[str, Mapping[str, Unit]] = {
    "power": _POWER,
    "energy": _ENERGY,
    "pressure": _PRESSURE,
    "small pressure": _SMALL,
    "barometer": _BAROMETER,
    "temperature": _TEMPERATURE,
    "difference": _DIFFERENCE,
    "mass": _MASS,
    "volume": _VOLUME,
    "gas volume": _GAS_VOLUME,
    "length": _LENGTH,
    "calorific value": _CALORIFIC,
    "content": _CONTENT,
    "gas calorific value": {
        **_same(Unit(1.0), "mj/nm3"),
        **_same(Unit(288.15 / 273.15), "mj/sm3"),
        **_same(Unit(3.6), "kwh/nm3"),
        **_same(Unit(1.0, ask="Btu/scf needs its base pressure: type MJ/Nm3 or MJ/Sm3"), "btu/scf"),
    },
    "density": {
        **_same(Unit(1.0), "kg/m3"),
        **_same(Unit(1000.0), "kg/l", "g/cm3", "t/m3"),
        **_same(Unit(1.0, ask="sg is at 60/60 degF and API a scale of its own: type kg/m3 at 15 degC"), "sg", "api"),
    },
    "viscosity": {
        **_same(Unit(1.0), "cst", "mm2/s"),
        **_same(Unit(1.0, ask="seconds need their table: type mm2/s (cSt)"), "sec", "rw1", "ssu"),
    },
    "rotation": {**_same(Unit(1.0), "rpm", "r/min", "1/min", "min-1", "u/min"), **_same(Unit(60.0), "rps", "1/s")},
    "distance": {
        **_same(Unit(1.0), "nm", "nmi", "m", "miles"),
        **_same(Unit(1 / 1.852), "km"),
    },
    "ship speed": {
        **_same(Unit(1.0), "kn", "kt", "kts"),
        **_same(Unit(3600 / 1852), "m/s"),
        **_same(Unit(1 / 1.852), "km/h"),
    },
    "torque": {**_same(Unit(1.0), "knm"), **_same(Unit(0.001), "nm")},
    "hours": {**_same(Unit(1.0), "h", "hr", "hrs", "hours"), **_same(Unit(1 / 60), "min")},
    "angle": _same(Unit(1.0), "deg", "cad", "dbtdc", "degbtdc"),
    "frequency": _same(Unit(1.0), "hz"),
    "share": _same(Unit(1.0), "%", "pct"),
    "index": _same(Unit(1.0), "%", "mm", "index"),
    "specific use": {
        **_same(Unit(1.0), "g/kwh", "gr/kwh"),
        **_same(Unit(1 / _METRIC_HP), "g/psh"),
        **_same(
            Unit(1.0, ask="horsepower hours are metric (g/PSh) or mechanical: type g/kWh or g/PSh"), "g/bhph", "lb/hph"
        ),
    },
    "heat rate": {
        **_same(Unit(1.0), "kj/kwh", "mj/mwh"),
        **_same(Unit(_KCAL_KJ), "kcal/kwh"),
        **_same(Unit(_BTU_KJ), "btu/kwh"),
    },
    "duration": {**_same(Unit(1.0), "ms"), **_same(Unit(1000.0), "s")},
    "nox": _same(Unit(1.0), "mg/nm3"),
    "wind force": _same(Unit(1.0), "bft", "bf"),
    "count": _same(Unit(1.0), "count", "rev", "revs"),
    "number": _same(Unit(1.0), "-"),
    "state": {},
}


def normal(spelling: str) -> str:
    """A spelling without blanks, dots, degree signs and case: `bar (g)` and `BAR(G)` are one."""
    return spelling.translate(_DROPPED).lower().replace("³", "3").replace("²", "2")


def spellings(family: str) -> str:
    """The spellings of a family, for a sentence."""
    return ", ".join(FAMILIES.get(family, {})) or "no unit"


def unit_of(spelling: str, family: str, *, horsepower: str = "") -> Unit:
    """The unit behind a spelling. Raises UnitRefused with the list, or with what has to be said instead."""
    word = normal(spelling)
    unit = FAMILIES.get(family, {}).get(word)
    if unit is None:
        raise UnitRefused(f"'{spelling.strip()}' is not understood here; understood are: {spellings(family)}.")
    if unit.ask:
        if word in ("hp", "bhp", "shp") and horsepower:
            return Unit(_METRIC_HP if horsepower == "metric" else _MECHANICAL_HP)
        raise UnitRefused(f"{unit.ask}.")
    return unit


def convert(
    number: float,
    spelling: str,
    family: str,
    canonical_unit: str,
    *,
    pressure_reference: str = "",
    barometer_bar: float | None = None,
    horsepower: str = "",
) -> float:
    """A number with a typed unit in the canonical unit of its point. Raises UnitRefused.

    A pressure typed as absolute on a gauge point (or the reverse) needs the barometer of that moment [bar].
    """
    unit = unit_of(spelling, family, horsepower=horsepower)
    value = number * unit.factor + unit.offset
    if unit.reference and pressure_reference in (_GAUGE, _ABSOLUTE) and unit.reference != pressure_reference:
        if barometer_bar is None:
            raise UnitRefused(
                f"'{spelling.strip()}' is {unit.reference}, this reading is {pressure_reference}: without a barometer"
                f" it cannot be converted. Type it as {pressure_reference}."
            )
        value += barometer_bar if pressure_reference == _ABSOLUTE else -barometer_bar
    canonical = FAMILIES.get(family, {}).get(normal(canonical_unit))
    return value if canonical is None else (value - canonical.offset) / canonical.factor


def split_quantity(text: str) -> tuple[str, str] | None:
    """`208degF` as (`208`, `degF`): the number as text and what follows; None where no number leads."""
    match = _QUANTITY.fullmatch(text)
    return (match[1], match[2]) if match else None


def parse_quantity(text: str, family: str, canonical_unit: str = "", *, horsepower: str = "") -> float:
    """`208degF` or `12,5` in the canonical unit; without a unit it is canonical already. Raises UnitRefused."""
    apart = split_quantity(text)
    if apart is None:
        raise UnitRefused(f"'{text}' is no number; a number is expected, with a unit or without.")
    number = float(apart[0].replace(",", "."))
    if not apart[1]:
        return number
    return convert(number, apart[1], family, canonical_unit, horsepower=horsepower)
