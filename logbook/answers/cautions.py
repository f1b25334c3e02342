"""The cautions that go with the figures: within reach in every pane, and on every export."""

STATUS = "Not an approved electronic record book; does not replace any statutory record."

CAUTIONS = (
    "Figures are for trend and economy. Limits, alarms, trips and settings: maker's manual, class rules, flag "
    "and local codes only.",
    "Do not change timing, Pmax, washing, cooling temperatures or oil feed because a figure looks better here.",
    "Injection timing, nozzles, pumps, valve timing, turbocharger and charge air cooler are NOx-relevant: "
    "changes go into the record book of engine parameters.",
    "Better efficiency with rising Pmax or falling exhaust may be early ignition or knock. Check Pmax now.",
    "Low oil pressure, rising bearing, mist or crankcase reading, high jacket or scavenge-space temperature, "
    "fuel spray: act first, log afterwards.",
    "After a hot-spot or mist alarm keep away from the crankcase until the maker's cooling time is over.",
    "One unit's scavenge space hot, sparks or smoke: emergency procedure, not this screen.",
    "Do not wait for a trend to confirm a safety reading. A doubtful safety reading is treated as true.",
    "Indicator readings, soundings and samples: hot surfaces, pressure, rotating parts, enclosed spaces, toxic"
    " vapour. Gas engines: leak, purge, explosion relief.",
    "Fuel change-over: thermal shock, low viscosity, loss of power. The master must know beforehand.",
    "The reversible bound comes from two temperatures; the combustion temperature is assumed, not logged.",
    "The gap is not recoverable loss and is no promise of saving.",
    "Exhaust here means: after cylinder / before turbine / after turbine / stack. Ambient means: suction air /"
    " outside air / sea water.",
    "Contains estimated values (E). / Contains amended values. / Readings left out: n, see list.",
    "Not more exact than its instruments: +- is printed beside the figure.",
    "Not an approved electronic record book; does not replace any statutory record.",
    "Not for custody transfer, off-hire, emission trading or warranty claims without independent checks.",
    "Correction coefficients used: entered by ... from ... / typical defaults, not your maker's.",
    "A correction above reference output is arithmetic, not permission to overload.",
    "Several causes fit. Check the list before taking anything apart.",
    "Fewer sets means less reserve. The engineer on watch and the dispatcher decide; not at stand-by, in "
    "confined water or against the network's orders.",
)
"""In the order in which they are numbered on screen and paper; `CAUTIONS[0]` is caution 1."""
