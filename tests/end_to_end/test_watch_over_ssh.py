"""A watch typed over a real SSH server: the line drops in mid-entry, the draft is there, the figures answer."""

import json
import os
import re
import shutil
import signal
import subprocess
import sys
from datetime import UTC, datetime, timedelta
from pathlib import Path

from conftest import SshServer
from terminal_screen import TerminalScreen

FIXTURE = Path(__file__).parents[1] / "fixtures" / "ship_handkept" / "plant.toml"
LOGBOOK = f"{sys.executable} -m logbook"
PERSON = "Third engineer"

# field of the form, by its abbreviation -> what is typed; an empty text is passed over with Enter
BEFORE = {
    "engine_speed": 98.0, "shaft_power": 9300, "engine_fuel_index": 74.5, "compressor_inlet_temperature.1": 31,
    "charge_air_pressure": 2.35, "charge_air_temperature.1": 38, "cooler_water_inlet_temperature.1": 28,
    "fuel_meter_supply.ME_in": 51_000_000, "fuel_meter_temperature.ME_in": 128,
    "fuel_meter_return.ME_out": 21_000_000, "fuel_meter_temperature.ME_out": 136,
    "revolution_counter": 40_000_000, "engine_running_hours": 52_000,
}  # fmt: skip
TYPED = {
    "ST": "run", "RPM": "98.1", "SHP": "9310", "LI": "78", "EXH": "340 352 348 351 347 340",
    "Pmax": "158 159 157 158 160 158", "Pcomp": "122 121 123 122 122 121", "JCW O 1": "82 83 82 84 83 82",
    "PCO": "54 55 54 55 56 54", "SUCT": "31", "dP FLT": "4.1", "SCAV P": "2.36", "SCAV T": "38", "dP AC": "9.4",
    "AC W I": "28", "AC W O": "44", "T/C RPM": "15300", "EXH B/T": "372", "EXH A/T": "243", "EXH REC P": "2.1",
    "FI M": "74.6", "FO P": "8.1", "FO T": "129", "VISC": "12.5", "LO P": "2.4", "LO T": "45", "JCW I": "72",
    "JCW O": "83", "JCW P": "3.8", "SW T": "24", "LT T": "33", "REV": "40023544", "R/H": "52004", "CYL O": "8123",
    "FM S ME_in": "51019900", "FM T ME_in": "128", "FM R ME_out": "21012700", "FM T ME_out": "137",
    "BARO": "1010", "OAT": "27",
}  # fmt: skip


def run(*arguments: str) -> str:
    done = subprocess.run([sys.executable, "-m", "logbook", *arguments], capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stderr
    return done.stdout


def current_label(screen: TerminalScreen) -> str:
    """The label of the field that the form marks as current."""
    line = next((line for line in screen.lines if line.startswith(">")), "")
    return re.split(r"  +", line[1:30].strip())[0].strip()


def text_for(label: str) -> str:
    """What is typed into the field of that label; the longest name that fits."""
    fitting = [name for name in TYPED if label.startswith(name)]
    return TYPED[max(fitting, key=len)] if fitting else ""


def type_field(screen: TerminalScreen) -> str:
    """Type the current field and go on; returns its label."""
    label = current_label(screen)
    assert label, screen.text
    screen.send(text_for(label), "enter")
    screen.wait_for(
        lambda _: current_label(screen) != label or "Sign off" in screen.text or "nter again" in screen.text
    )
    if "nter again" in screen.text:
        screen.send("enter")
        screen.wait_for(lambda _: current_label(screen) != label or "Sign off" in screen.text)
    return label


def test_a_watch_survives_a_dropped_line_and_answers(ssh_server: SshServer, tmp_path: Path) -> None:
    plant = tmp_path / "plant"
    plant.mkdir(mode=0o700)
    shutil.copy(FIXTURE, plant / "plant.toml")
    open_it = f"cd {os.getcwd()} && TERM=xterm-256color LC_ALL=C.UTF-8 {LOGBOOK} open {plant} --person '{PERSON}'"

    # The first line drops in mid-entry: the client is killed, as a lost satellite kills it.
    with TerminalScreen(ssh_server.login(open_it)) as screen:
        screen.wait_for("New round", within=30)
        found = re.search(r"1\s+(\d{4}-\d\d-\d\d) (\d{4}) \+02:00 ME watch", screen.text)
        assert found, screen.text
        screen.send("1")
        screen.wait_for(lambda _: bool(current_label(screen)))
        for _ in range(12):
            type_field(screen)
        stopped_at = current_label(screen)
        screen.send("3", "8")
        screen.signal(signal.SIGKILL)
    ship = datetime.strptime(f"{found[1]} {found[2]}", "%Y-%m-%d %H%M").replace(tzinfo=UTC)
    taken = ship - timedelta(hours=2)

    # Meanwhile the watch before is in the book, and the lot that burns.
    at = (taken - timedelta(hours=4)).isoformat()
    since = (taken - timedelta(days=4)).isoformat()
    run(
        "note",
        str(plant),
        "lot",
        "lot=L1",
        "grade=RMG 380",
        "density15_kg_m3=953",
        "sulphur_percent=0.41",
        "--at",
        since,
    )
    run("note", str(plant), "event", "event=change_over", "lot=L1", "engines=ME", "--at", since)
    run("enter", str(plant), "ME", "--at", at, *[f"{key}={value}" for key, value in BEFORE.items()])
    assert run("entries", str(plant), "ME").count("watch") == 1

    # A second login finds the draft, at the same field.
    with TerminalScreen(ssh_server.login(open_it)) as screen:
        screen.wait_for("go on with", within=30)
        screen.send("1")
        screen.wait_for(lambda _: bool(current_label(screen)))
        assert current_label(screen) == stopped_at
        assert "340 352 348 351 347 340" in screen.text
        for _ in range(60):
            type_field(screen)
            if "Sign off" in screen.text:
                break
        screen.send("enter")
        screen.wait_for("In the book")
        text = screen.wait_for(lambda text: "Gap" in text, within=60)
        for word in ("Excess", "Brake thermal efficiency", "Reversible bound", "Gap"):
            assert word in text, text
        screen.send("q")
        assert screen.wait_exit() == 0

    (last,) = [json.loads(line) for line in run("entries", str(plant), "ME", "--last", "1", "--json").splitlines()]
    assert last["person"] == PERSON
    values = last["body"]["values"]
    assert len(values) >= 40
    assert values["cylinder_exhaust_temperature.2"]["number"] == 352
    (row,) = [json.loads(line) for line in run("figures", str(plant), "ME", "--last", "1", "--json").splitlines()]
    # 19 900 L at 128 degC less 12 700 L at 136.5 degC of a fuel of 953 kg/m3, over 4 h at 9 310 kW.
    assert 0.45 < row["brake_thermal_efficiency"] < 0.56
    assert row["excess_gap"] is not None
    assert row["comparable"] is True
    assert list((plant / "drafts").glob("*.json")) == []
    assert run("verify", str(plant)).startswith("logbook.db is whole")
