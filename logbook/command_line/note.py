"""`logbook note`: an event, work done, a lot, a setting, a remark."""

from __future__ import annotations

import argparse
from typing import Any

from logbook.command_line import arguments as shared
from logbook.command_line.environment import Environment, ExitCode, Refused

# Kind of note -> fields it needs; more may be given.
NEEDED = {
    "event": ("event",),
    "work": ("work",),
    "lot": ("lot", "grade"),
    "setting": ("setting",),
    "remark": ("text",),
    "clock": ("before_min", "after_min"),
}
_NUMBERS = ("closing", "opening", "digits", "multiplier", "decimals", "entry", "times", "mixing_hours", "before_min",
            "after_min")  # fmt: skip


def configure(parser: argparse.ArgumentParser) -> None:
    parser.description = (
        "What happened or was done, for the book: event, work, lot, setting, remark, clock. Some are borders or marks"
        " of the trend. A wrong word is answered with the list of those there are."
    )
    parser.epilog = (
        "examples:\n"
        "  logbook note my_ship work work=turbocharger_cleaning --of ME --at 2026-05-14T10:00\n"
        "  logbook note my_ship lot lot=R16 grade='RMG 380' density15_kg_m3=962 sulphur_percent=0.47\n"
        "  logbook note my_ship event event=change_over lot=R16 engines=ME\n"
        "  logbook note my_ship event event=instrument_exchanged instrument=fuel_meter_supply.ME_in"
        " closing=4815910 opening=120 --of ME"
    )
    shared.plant_folder(parser)
    parser.add_argument("kind", metavar="KIND", help=", ".join(NEEDED))
    parser.add_argument("fields", metavar="key=value", nargs="+")
    parser.add_argument("--of", default="plant", metavar="ENGINE", help="the engine it concerns (the whole plant)")
    parser.add_argument("--at", metavar="MOMENT", help="when; ship time, with its offset or the plant's")
    shared.person(parser)


def run(arguments: argparse.Namespace, environment: Environment) -> ExitCode:
    import difflib

    from logbook.book.entry import NewEntry
    from logbook.command_line.plant_folder import opened
    from logbook.exchange.importing import EVENT_WORDS, WORK_WORDS
    from logbook.reading.ship_time import TimeRefused, parse_moment

    if arguments.kind not in NEEDED:
        near = difflib.get_close_matches(arguments.kind, NEEDED, n=1)
        raise Refused(f"A note is one of: {', '.join(NEEDED)}.{f' Did you mean {near[0]}?' if near else ''}")
    body = dict(_field(given) for given in arguments.fields)
    missing = [key for key in NEEDED[arguments.kind] if key not in body]
    if missing:
        raise Refused(f"A note of kind {arguments.kind} needs {', '.join(missing)}.")
    words = {"event": EVENT_WORDS | {"counter_answer", "baseline_changed"}, "work": WORK_WORDS}.get(arguments.kind)
    if words is not None and body[arguments.kind] not in words:
        raise Refused(
            f"'{body[arguments.kind]}' is no word for {arguments.kind}; there are: {', '.join(sorted(words))}."
        )
    person = environment.person(arguments.person)
    with opened(arguments.plant, environment, person, write=True) as (plant, book):
        engines = [engine.id for engine in plant.engines]
        named = body.get("engines", [])
        for engine in [arguments.of, *named]:
            if engine not in [*engines, "plant"]:
                raise Refused(f"This plant has no engine '{engine}'; it has: {', '.join(engines)}.")
        taken, offset = environment.now().replace(microsecond=0), plant.utc_offset_min
        if arguments.at:
            try:
                taken, offset = parse_moment(arguments.at, plant.utc_offset_min)
            except TimeRefused as error:
                raise Refused(str(error)) from error
        entry = book.append(
            NewEntry(
                kind=arguments.kind,
                subject=str(body["lot"]) if arguments.kind == "lot" else arguments.of,
                taken_utc=taken,
                utc_offset_min=offset,
                person=person.name,
                identity_by=person.identity_by,
                body=body,
            )
        )
    environment.say(f"Entry {entry.number}: {arguments.kind} at {taken:%Y-%m-%d %H:%M}Z.")
    return ExitCode.DONE


def _field(given: str) -> tuple[str, Any]:
    key, equals, text = given.partition("=")
    if not equals or not text:
        raise Refused(f"'{given}' is not written as key=value.")
    if key == "engines":
        return key, [engine.strip() for engine in text.split(",")]
    if key in _NUMBERS or key.endswith(("_percent", "_kg_m3", "_mj_kg", "_mj_m3", "_mm2_s")):
        try:
            number = float(text.replace(",", "."))
        except ValueError as error:
            raise Refused(f"{key}: '{text}' is no number.") from error
        if key == "density15_kg_m3" and not 600 <= number <= 1100:
            raise Refused(f"density15_kg_m3: {text} is not in kg/m3; 0.987 kg/L is 987.")
        return key, int(number) if number.is_integer() and key in _NUMBERS else number
    return key, text
