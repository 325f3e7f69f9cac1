"""What both comparators share: timing, and the arithmetic that takes no time."""
import argparse
import json
import math
import pathlib
import platform
import resource
import time

import numpy as np
import scipy
from scipy import special

from case_files import read_case, read_occurrences

RETURN_PERIODS = (2, 5, 10, 20, 50, 100, 200, 250, 500, 1000)
HOUSE_PERIODS = (100, 250)
FEWEST_YEARS = 10
THIN_STATES = 2500
DAYS = 365


class Clock:
    """Seconds of each phase."""

    def __init__(self):
        self.phases, self.start = {}, time.perf_counter()
        self.last = self.start

    def phase(self, name):
        now = time.perf_counter()
        self.phases[name] = self.phases.get(name, 0) + now - self.last
        self.last = now

    @property
    def total(self):
        return self.last - self.start


def lens_ends(states):
    """Bins of the lean lens, even in the logarithm of the share of states: shares from and to, widths, last ranks."""
    step = 10 ** (1 / 12)
    bins, before, share = [], 0, 1e-4 * step
    while before < states:
        to_share = 1.0 if share > 1 / math.sqrt(step) else share
        end = min(states, math.floor(to_share * states))
        if end > before:
            from_share = bins[-1][1] if bins else to_share / step
            bins.append((from_share, to_share, math.log(to_share / bins[-1][1]) if bins else math.log(step), end))
            before = end
        share *= step
    return bins


def net_premium(case):
    """The book's premium at inception, net of what is paid out of it."""
    basis = case.basis
    kept = sum(x.line * x.premium * (1 - x.brokerage - basis["taxes"] - basis["variableExpense"]) for x in case.book_layers)
    return kept - basis["fixedExpensePerContract"] - basis["attritionalAndOutward"]


def loss_free_capital(case):
    basis = case.basis
    riskless = basis["risklessRate"]
    own = basis.get("returnOnAssets")
    return 1 + (riskless if own is None else own) + net_premium(case) * (1 + riskless) / basis["capital"]


def exact_means(case, layers):
    """Σ rate·mean, and of each layer Σ rate·E[Y] = Σ rate·(E min(X, A + L) − E min(X, A)), by the laws of the rows."""
    table = case.programme
    kind, p, q = table.laws()
    rate = case.rate[table.event]
    certain, log, beta = (np.flatnonzero(kind == k) for k in range(3))
    a, b, exposed, share = p[beta], q[beta], table.exposed[beta], table.mean[beta] * rate[beta]
    log_front = special.betaln(a, b) + np.log(a)
    m = a / (a + b)

    def limited(d):
        """Σ rate·E min(X, d)."""
        if d <= 0:
            return 0.0
        total = rate[certain] @ np.minimum(table.mean[certain], d)
        z = (math.log(d) - p[log]) / q[log]
        total += rate[log] @ (table.mean[log] * special.ndtr(z - q[log]) + d * special.ndtr(-z))
        # P(X > d) is at most exp(−(a + b)·KL(m, x)) for x over the mean m (A. Henzi, L. Dümbgen, Statistics & Probability
        # Letters 195, 2023; from memory): where that is under 1e-20, E min(X, d) is E X to the last digit.
        x = np.minimum(d / exposed, 1)
        with np.errstate(divide="ignore"):
            distance = (a + b) * (m * np.log(m / x) + (1 - m) * np.log((1 - m) / (1 - x)))
        within = np.flatnonzero((d < exposed) & ((x <= m) | (distance < 46)))
        x, a_in, b_in = d / exposed[within], a[within], b[within]
        below = special.betainc(a_in, b_in, x)
        # I(a + 1, b) = I(a, b) − x^a·(1 − x)^b/(a·B(a, b)).
        next_below = below - np.exp(a_in * np.log(x) + b_in * np.log1p(-x) - log_front[within])
        return total + share.sum() - share[within].sum() + share[within] @ next_below + rate[beta][within] @ (d * (1 - below))

    # Where one layer ends the next begins, but for the last digit.
    ends = [(float(f"{x.attachment:.14g}"), float(f"{x.attachment + x.limit:.14g}")) for x in layers]
    known = {d: limited(d) for d in {d for pair in ends for d in pair}}
    return float(rate @ table.mean), [float(known[end] - known[start]) for start, end in ends]


def in_errors(simulated, exact, error):
    if exact == 0 and simulated == 0:
        return None
    return float((simulated - exact) / error) if error > 0 else (0.0 if simulated == exact else None)


def premium_split(layer, basis, figures, marginal, walk_away):
    """Every step from the riskless loss to the technical premium; `figures` has E[mZ], E[m]·E[Z], E[mρ] and F/w."""
    loaded = walk_away * (1 + basis["targetMargin"])
    technical = max(loaded, basis["minimumRateOnLine"] * layer.limit)
    return {
        "risklessLoss": figures["riskless"],
        "leanLoad": figures["priced"] - figures["riskless"],
        "lossAdjustment": figures["priced"] * basis["lossAdjustment"],
        "fixedExpense": figures["fixed"],
        "brokerageAndExpense": marginal * (layer.brokerage + basis["taxes"] + basis["variableExpense"]),
        "reinstatementValue": -(1 - basis["taxes"]) * marginal * figures["pricedBack"],
        "marginalPremium": marginal,
        "lineSizeLoad": walk_away - marginal,
        "walkAwayPremium": walk_away,
        "margin": loaded - walk_away,
        "minimumTopUp": technical - loaded,
        "technicalPremium": technical,
    }


def contributors(case, by_event):
    """Shares of E[m·Z] of the ten largest events, and of perils and regions."""
    total = by_event.sum()
    top = np.argpartition(by_event, -min(10, len(by_event)))[-10:]
    top = [int(e) for e in top[np.argsort(-by_event[top], kind="stable")] if by_event[e] > 0]

    def grouped(names, index):
        sums = np.bincount(index, by_event, len(names)) / total if total > 0 else np.zeros(len(names))
        return [{"name": names[g], "priceShare": float(sums[g])} for g in np.argsort(-sums, kind="stable") if sums[g] > 0]

    return {
        "topEvents": [
            {"event": e, "peril": case.perils[case.peril[e]], "region": case.regions[case.region[e]], "priceShare": float(by_event[e] / total)}
            for e in top
        ],
        "perils": grouped(case.perils, case.peril),
        "regions": grouped(case.regions, case.region),
    }


def self_check(states, exact, ground_up, ground_up_error, counted):
    """Simulated against exact means in standard errors; `counted` has Σ and Σ of squares of each layer's yearly ΣY."""
    exact_ground, exact_layers = exact
    errors = []
    for (total, squares), known in zip(counted, exact_layers):
        variance = max(squares - total * total / states, 0) / (states - 1)
        errors.append(in_errors(total / states, known, math.sqrt(variance / states)))
    ground = in_errors(ground_up, exact_ground, ground_up_error)
    largest = max((abs(e) for e in (ground, *errors) if e is not None), default=0)
    return {"groundUp": ground, "layers": errors, "largest": largest, "flagged": largest > 4}


def tail_ranks(states, periods):
    """Of each period the ranks, counted from the smallest, of its value and of one binomial deviation to either side."""
    ranks = {}
    for years in periods:
        beyond = states // years
        if beyond >= FEWEST_YEARS:
            spread = math.floor(math.sqrt(beyond * (1 - 1 / years)) + 0.5)
            ranks[years] = [states - 1 - max(above, 0) for above in (beyond, beyond - spread, min(beyond + spread, states - 1))]
    return ranks


def tail_point(years, states, value, low, high, excess, squares):
    mean = excess / states
    return {
        "years": years,
        "value": float(value),
        "valueError": 0.5 * float(low - high),
        "tailValue": float(value + years * mean),
        "tailValueError": years * math.sqrt(max(squares / states - mean * mean, 0) / states),
    }


def no_tail_point(years):
    return {"years": years, "value": None, "valueError": None, "tailValue": None, "tailValueError": None}


def as_estimates(report):
    """Figures that have a standard error, as an estimate each."""
    errors = report.pop("standardErrors")
    return {**report, **{name: {"value": report[name], "standardError": error} for name, error in errors.items()}}


def with_estimates(results):
    return {**results, "perLayer": list(map(as_estimates, results["perLayer"])), "programme": as_estimates(results["programme"])}


def run(price):
    """Runs a comparator from the command line. `price(case, occurrences or None, clock)` gives its results and a function
    that prices changed layers on what is in memory, given the layers and a clock."""
    parser = argparse.ArgumentParser(description=price.__doc__)
    parser.add_argument("folder", type=pathlib.Path)
    parser.add_argument("--occurrences", type=pathlib.Path, help="price these occurrences instead of drawing")
    parser.add_argument("--factor", type=float, default=1.1, help="of attachments and limits in the second pass")
    arguments = parser.parse_args()
    case = read_case(arguments.folder)
    drawn = read_occurrences(arguments.occurrences) if arguments.occurrences else None
    clock = Clock()
    results, again = price(case, drawn, clock)
    second = Clock()
    changed = again(tuple(layer.scaled(arguments.factor) for layer in case.layers), second)
    print(json.dumps({
        "timings": {"cold": clock.total, "phases": clock.phases, "again": second.total, "againPhases": second.phases},
        "peakRssMb": resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024,
        "versions": {"python": platform.python_version(), "numpy": np.__version__, "scipy": scipy.__version__},
        "results": with_estimates(results),
        "again": {key: value for key, value in with_estimates(changed).items() if key in ("perLayer", "programme")},
    }, allow_nan=False))
