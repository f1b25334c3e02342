"""Statistics and cost at the desk."""

from __future__ import annotations

import math

from logbook.command_line.calculations.record import LIST, Answer, Calculation, Inputs, Key, shown

VALUES = Key("values", kind=LIST)


def _readings_needed(i: Inputs) -> Answer:
    from logbook.physics.compare import readings_needed

    scatter, change = i["scatter"], i["change"]
    n = readings_needed(scatter, change)
    more = 2 if n < 6 else 1
    return Answer(
        {"per_side": n},
        (
            f"2 x (2.80159 x {scatter:g} / {abs(change):g})^2 = {2 * (2.80159 * scatter / change) ** 2:.6g}, rounded up: {n}",
            f"the normal formula is {'two' if more == 2 else 'one'} too few here: read {n + more} a side",
        ),
    )


def _cleaning_interval(i: Inputs) -> Answer:
    from logbook.physics.cost import cleaning_interval

    cost, growth = i["cost"], i["growth_per_day2"]
    found = cleaning_interval(cost, growth)
    return Answer(
        {"days": found.days, "cost_per_day": found.cost_per_day},
        (
            f"T* = sqrt(2 x {cost:g} / {growth:g}) = {found.days:.6g} days",
            f"cost rate = sqrt(2 x {cost:g} x {growth:g}) = {found.cost_per_day:.6g} per day",
            f"flat: at {0.7 * found.days:.3g} or {1.4 * found.days:.3g} days it costs only about 6 % more",
        ),
    )


def _trend(i: Inputs) -> Answer:
    from logbook.physics.trend import mann_kendall, theil_sen

    values = i["values"]
    times = i.get("times", [float(place + 1) for place in range(len(values))])
    test, fit = mann_kendall(values), theil_sen(values, times)
    order = (
        "in the order given" if times == sorted(times) else "in the order given, which is not that of time: check it"
    )
    return Answer(
        {
            "s": test.s, "z": test.z, "p": test.p, "slope": fit.slope, "intercept": fit.intercept,
            "interval": [fit.low, fit.high],
        },
        (
            f"{len(values)} points {order}: S = {test.s}, variance {test.variance:.6g}",
            f"Z = (S - sign S)/sqrt(variance) = {test.z:.6g}, two-sided p = {test.p:.4g}",
            f"median of all pair slopes = {fit.slope:.6g}, Sen's interval at 95 %: {fit.low:.6g} to {fit.high:.6g}",
            f"intercept = median value - slope x median time = {fit.intercept:.6g}, at time 0",
        ),
    )  # fmt: skip


def _change_point(i: Inputs) -> Answer:
    from logbook.physics.detect import change_point

    values = i["values"]
    found = change_point(values)
    verdict = "accepted, below 0.05" if found.p < 0.05 else "not accepted, not below 0.05"
    return Answer(
        {"after_index": found.after, "means": [found.before_mean, found.after_mean], "k": found.k, "p": found.p},
        (
            f"sum of squares about one mean {found.total_sum_of_squares:.6g}, about two with a change after reading "
            f"{found.after}: {found.sum_of_squares:.6g}, the least",
            f"means {found.before_mean:.6g} before, {found.after_mean:.6g} after",
            f"Pettitt: K = {found.k:g}, p = 2 exp[-6 K^2/(n^3 + n^2)] = {found.p:.4g} with n = {len(values)}: {verdict}",
        ),
    )


def _cusum(i: Inputs) -> Answer:
    from logbook.physics.detect import cusum

    found = cusum(i["values"], i["target"], i["allowance"], i["limit"])
    first = None if found.first_signal is None else found.first_signal + 1
    since = "" if found.since is None else f", summing since reading {found.since + 1}"
    high, low = found.high.tolist(), found.low.tolist()
    return Answer(
        {"high": high, "low": low, "first_signal": first},
        (
            f"greatest sum above {max(high):.6g}, below {max(low):.6g}; limit {i['limit']:g}",
            "no signal" if first is None else f"first signal at reading {first}{since}",
        ),
    )


def _agree(i: Inputs) -> Answer:
    from logbook.physics.uncertainty import agreement

    values, percents = i["values"], i["uncertainties"]
    if len(values) != len(percents):
        raise ValueError(f"uncertainties need one for each value: {len(percents)} were given for {len(values)}.")
    if any(value <= 0 for value in values):
        raise ValueError("The values must be above zero: their logarithms are compared.")
    found = agreement([math.log(value) for value in values], [percent / 100 for percent in percents])
    combined, suspect = math.exp(found.combined), None if found.suspect is None else found.suspect + 1
    verdict = "in order, no instrument is accused" if found.p > 0.05 else "they disagree"
    if suspect is not None and found.suspect_error is not None:
        verdict += f"; value {suspect} stands out, by {100 * math.expm1(found.suspect_error):+.2f} % from the others"
    return Answer(
        {"combined": combined, "z": found.z.tolist(), "chi2": found.chi2, "p": found.p, "suspect": suspect},
        (
            f"weighted mean of the logarithms {found.combined:.6g}, that is {combined:.6g}",
            f"residuals over their own uncertainty: z = {shown(found.z.tolist())}",
            f"chi2 = {found.chi2:.4g} with {len(values) - 1} degrees of freedom, p = {found.p:.4g}: {verdict}",
        ),
        ("With two values only: they disagree or not; a third witness is needed to say which.",)
        if len(values) == 2
        else (),
    )


ALL = (
    Calculation(
        "readings-needed",
        (Key("scatter", says="of one reading, standard deviation"), Key("change", says="to be seen, in the unit of the scatter")),
        {"per_side": "readings"}, _readings_needed,
        ("n a side = ceil[2 ((1.95996 + 0.84162) s/delta)^2], for 95 % and 80 %",
         "the normal formula is one too few, two below six: add them"),
        "arithmetic; agrees with scipy", "readings-needed scatter=2 change=1",
        ("Readings of consecutive watches are not independent: take more.",),
    ),
    Calculation(
        "cleaning-interval",
        (Key("cost", says="of one cleaning with off-hire"),
         Key("growth_per_day2", says="by how much the daily penalty grows each day, in the currency of the cost")),
        {"days": "days", "cost_per_day": "currency/day"}, _cleaning_interval,
        ("T* = sqrt(2 C/(a p))", "cost rate = sqrt(2 C a p)"), "arithmetic; agrees with scipy's minimiser",
        "cleaning-interval cost=9000 growth_per_day2=6",
        ("The maker's interval comes first. Do not change washing because a figure looks better here.",),
    ),
    Calculation(
        "trend", (VALUES, Key("times", kind=LIST, needed=False, says="else 1, 2, 3 ...")),
        {"s": "-", "z": "-", "p": "-", "slope": "value/time", "intercept": "value", "interval": "value/time"}, _trend,
        ("Mann-Kendall: S = sum of the signs of all later less earlier values; Z = (S - sign S)/sqrt(V); p two-sided",
         "Theil-Sen: median of all pair slopes; Sen's interval at 95 %"),
        "Mann-Kendall and Sen; checked with pymannkendall and scipy",
        "trend values=12.9,14.8,13.2,15.7,13.8,15.6,12.9,11.0,17.3,15.9,19.0,18.3,20.1,21.7",
        ("Readings of consecutive watches are not independent: that makes |Z| too large. Use daily means.",),
    ),
    Calculation(
        "change-point", (VALUES,), {"after_index": "reading, from 1", "means": "value", "k": "-", "p": "-"}, _change_point,
        ("the split in two with the least sum of squares",
         "Pettitt: K = max|2 sum of ranks - k (n + 1)|, p = 2 exp[-6 K^2/(n^3 + n^2)]"), "Pettitt; checked with ruptures",
        "change-point values=.4,-.3,.6,.1,-.5,.2,.7,-.2,.3,-.1,.2,1.9,2.6,1.8,2.2,2.9,1.7,2.4,2.1,2.5",
        ("A ramp looks like a step here: see also trend.",),
    ),
    Calculation(
        "cusum",
        (VALUES, Key("target"), Key("allowance", says="K, half the shift to find"), Key("limit", says="H, a signal above it")),
        {"high": "value", "low": "value", "first_signal": "reading, from 1"}, _cusum,
        ("Hi = max(0, Hi + x - target - K); Lo = max(0, Lo + target - K - x); signal above H",),
        "Montgomery & Runger, Applied Statistics and Probability for Engineers, ch. 16",
        "cusum target=99 allowance=1 limit=10 values=102.0,94.8,98.3,98.4,102.0,98.5",
        ("Target and scatter come from a good span, never from the values tested.",),
    ),
    Calculation(
        "agree", (VALUES, Key("uncertainties", "%", kind=LIST, family="share", says="standard, of each value")),
        {"combined": "value", "z": "-", "chi2": "-", "p": "-", "suspect": "value, from 1"}, _agree,
        ("weighted mean of the logarithms, w = 1/u^2", "z = r/(u sqrt(1 - h)), chi2 = sum w r^2 with m - 1 degrees"),
        "weighted least squares; checked with scipy", "agree values=9800,9980,10010,9960 uncertainties=1.5,2,2.5,3",
    ),
)  # fmt: skip
