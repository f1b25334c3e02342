"""Statistics and cost at the desk."""

from __future__ import annotations

from logbook.command_line.calculations.record import LIST, NUMBER, Calculation, Inputs, Results


def _readings_needed(i: Inputs) -> Results:
    from logbook.physics.compare import readings_needed

    return {"per_side": readings_needed(i["scatter"], i["change"])}


def _cleaning_interval(i: Inputs) -> Results:
    from logbook.physics.cost import cleaning_interval

    found = cleaning_interval(i["cost"], i["growth_per_day2"])
    return {"days": found.days, "cost_per_day": found.cost_per_day}


def _trend(i: Inputs) -> Results:
    from logbook.physics.trend import mann_kendall, theil_sen

    times = i.get("times")
    test, fit = mann_kendall(i["values"]), theil_sen(i["values"], times)
    return {
        "s": test.s, "z": test.z, "p": test.p, "slope": fit.slope, "intercept": fit.intercept,
        "interval": [fit.low, fit.high],
    }  # fmt: skip


def _change_point(i: Inputs) -> Results:
    from logbook.physics.detect import change_point

    found = change_point(i["values"])
    return {"after_index": found.after, "means": [found.before_mean, found.after_mean], "k": found.k, "p": found.p}


def _cusum(i: Inputs) -> Results:
    from logbook.physics.detect import cusum

    found = cusum(i["values"], i["target"], i["allowance"], i["limit"])
    first = None if found.first_signal is None else found.first_signal + 1
    return {"high": found.high.tolist(), "low": found.low.tolist(), "first_signal": first}


def _agree(i: Inputs) -> Results:
    import math

    from logbook.physics.uncertainty import agreement

    values, percents = i["values"], i["uncertainties"]
    if len(values) != len(percents):
        raise ValueError(f"uncertainties need one for each value: {len(percents)} for {len(values)}.")
    if any(value <= 0 for value in values):
        raise ValueError("The values must be above zero: their logarithms are compared.")
    found = agreement([math.log(value) for value in values], [percent / 100 for percent in percents])
    return {
        "combined": math.exp(found.combined), "z": found.z.tolist(), "chi2": found.chi2, "p": found.p,
        "suspect": None if found.suspect is None else found.suspect + 1,
    }  # fmt: skip


ALL = (
    Calculation(
        "readings-needed", {"scatter": NUMBER, "change": NUMBER}, {"per_side": ""}, _readings_needed,
        ("n = ceil[2 ((1.960 + 0.842) s/delta)^2] a side, for 95 % and 80 %", "the normal formula is one too few, two below six: add them"),
        "arithmetic; agrees with scipy", "readings-needed scatter=2 change=1",
        caution="Readings of consecutive watches are not independent: take more.",
    ),
    Calculation(
        "cleaning-interval", {"cost": NUMBER, "growth_per_day2": NUMBER}, {"days": "days", "cost_per_day": "currency/day"},
        _cleaning_interval, ("T* = sqrt(2 C/(a p))", "cost rate = sqrt(2 C a p)"), "arithmetic; agrees with scipy's minimiser",
        "cleaning-interval cost=9000 growth_per_day2=6",
        caution="The maker's interval comes first. Do not change washing because a figure looks better here.",
    ),
    Calculation(
        "trend", {"values": LIST}, {"s": "", "z": "", "p": "", "slope": "", "intercept": "", "interval": ""}, _trend,
        ("Mann-Kendall: S, Z, p", "Theil-Sen: median of all pair slopes; Sen's interval at 95 %"),
        "Mann-Kendall and Sen; checked with pymannkendall and scipy",
        "trend values=12.9,14.8,13.2,15.7,13.8,15.6,12.9,11.0,17.3,15.9,19.0,18.3,20.1,21.7 times=1,2,3,4,5,6,7,8,9,10,11,12,13,14",
        takes={"times": LIST},
    ),
    Calculation(
        "change-point", {"values": LIST}, {"after_index": "", "means": "", "k": "", "p": ""}, _change_point,
        ("least two-segment sum of squares", "Pettitt: K, p = 2 exp[-6 K^2/(n^3 + n^2)]"), "Pettitt; checked with ruptures",
        "change-point values=.4,-.3,.6,.1,-.5,.2,.7,-.2,.3,-.1,.2,1.9,2.6,1.8,2.2,2.9,1.7,2.4,2.1,2.5",
    ),
    Calculation(
        "cusum", {"values": LIST, "target": NUMBER, "allowance": NUMBER, "limit": NUMBER},
        {"high": "", "low": "", "first_signal": ""}, _cusum,
        ("Hi = max(0, Hi + x - target - K); Lo = max(0, Lo + target - K - x); signal above H",),
        "Montgomery & Runger, Applied Statistics and Probability for Engineers, ch. 16",
        "cusum target=99 allowance=1 limit=10 values=102.0,94.8,98.3,98.4,102.0,98.5",
    ),
    Calculation(
        "agree", {"values": LIST, "uncertainties": LIST}, {"combined": "", "z": "", "chi2": "", "p": "", "suspect": ""}, _agree,
        ("weighted mean of the logarithms, w = 1/u^2", "z = r/(u sqrt(1 - h)), chi2 = sum w r^2 with m - 1 degrees"),
        "weighted least squares; checked with scipy", "agree values=9800,9980,10010,9960 uncertainties=1.5,2,2.5,3",
        caution="With two values only: they disagree or not; a third witness is needed to say which.",
    ),
)  # fmt: skip
