#!/usr/bin/env python3
"""Writes an invented case for trials of the comparators: 20,000 events, 2.5 occurrences a year, ten layers.

    python3 make_case.py FOLDER [--states 200000] [--seed 1]
"""
import argparse
import json
import pathlib

import numpy as np

EVENTS = 20_000
OCCURRENCES_A_YEAR = 2.5
PERILS, REGIONS = ["wind", "storm flood"], ["north", "south", "east"]


def loss_table(rng, share, size):
    """Losses on a share of the events: heavy-tailed means, nine rows in ten beta, the others lognormal, a few certain."""
    event = np.flatnonzero(rng.random(EVENTS) < share)
    n = len(event)
    exposed = np.where(rng.random(n) < 0.9, size * rng.uniform(5, 25, n), np.nan)
    mean = np.fmin(size * 0.02 * (1 / np.sqrt(1 - rng.random(n)) - 0.99), exposed / 2)
    sd = np.where(rng.random(n) < 0.02, 0, mean * rng.uniform(0.3, 1.5, n))
    # No beta law has a greater deviation than √(mean · (exposed − mean)).
    sd = np.fmin(sd, 0.8 * np.sqrt(mean * (exposed - mean)))
    return {"event.i32": event, "mean.f64": mean, "sd.f64": sd, "common_share.f64": rng.uniform(0.2, 0.8, n), "exposed.f64": exposed}


def columns(rng):
    """Every column of the case by file name."""
    rate = rng.uniform(0.05, 1.05, EVENTS)
    yield "catalogue.rate.f64", rate * OCCURRENCES_A_YEAR / rate.sum()
    yield "catalogue.season_day.f64", np.where(rng.random(EVENTS) < 0.5, np.nan, rng.integers(1, 366, EVENTS))
    yield "catalogue.peril.u16", rng.choice(len(PERILS), EVENTS, p=[0.7, 0.3])
    yield "catalogue.region.u16", rng.integers(0, len(REGIONS), EVENTS)
    for table, share, size in (("programme", 0.5, 80), ("book", 0.3, 50)):
        for name, column in loss_table(rng, share, size).items():
            yield f"{table}.{name}", column


def terms(states, seed):
    ends = [2 * (l + 1) ** 2 for l in range(11)]
    layer = {"annualDeductible": 0, "reinstatements": [1], "line": 0.1, "brokerage": 0.1}
    return {
        "states": states,
        "seed": seed,
        "inceptionDay": 1,
        "perils": PERILS,
        "regions": REGIONS,
        "programme": {"layers": [{"key": f"layer-{l + 1}", "attachment": a, "limit": b - a, **layer} for l, (a, b) in enumerate(zip(ends, ends[1:]))]},
        "book": {"layers": [{"key": f"xs{a}", "attachment": a, "limit": a, "premium": a / 10, **layer} for a in (3, 6, 12, 25)]},
        "basis": {
            "capital": 100, "riskAversion": 6, "risklessRate": 0.03, "returnOnAssets": None, "floor": 0.25, "targetMargin": 0.08,
            "minimumRateOnLine": 0.01, "taxes": 0.01, "variableExpense": 0.02, "lossAdjustment": 0.02, "fixedExpensePerContract": 0.02,
            "attritionalAndOutward": 1,
        },
    }


def main():
    parser = argparse.ArgumentParser(description="Writes an invented case.")
    parser.add_argument("folder", type=pathlib.Path)
    parser.add_argument("--states", type=int, default=200_000)
    parser.add_argument("--seed", type=int, default=1)
    arguments = parser.parse_args()
    arguments.folder.mkdir(parents=True, exist_ok=True)
    kinds = {"f64": "<f8", "i32": "<i4", "u16": "<u2"}
    for name, column in columns(np.random.default_rng(arguments.seed)):
        column.astype(kinds[name.rsplit(".", 1)[1]]).tofile(arguments.folder / name)
    (arguments.folder / "case.json").write_text(json.dumps(terms(arguments.states, arguments.seed), indent=1), encoding="utf-8")


if __name__ == "__main__":
    main()
