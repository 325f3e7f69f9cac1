#!/usr/bin/env python3
"""Prices one programme with NumPy and SciPy, by code and random numbers of its own.

    python3 scipy_price.py REQUEST.json [--states 500000] [--seed 1]

Simulates years of events, lays the book and the programme on the same occurrences, and prints as JSON what a run
of the desk reports, each Monte Carlo figure as {"value": .., "standardError": ..}. Nothing of the desk's engine is used:
counts are drawn a catalogue at a time and dealt to events, quantiles are SciPy's, and roots are found by SciPy.
Needs NumPy 1.24 or later and SciPy 1.10 or later.

REQUEST.json (file names are relative to its folder; rates and shares are fractions of 1):

    {
      "catalogues": [{"lineage": "wind", "file": "catalogue.csv"}],
      "programme": CONTRACT,
      "book": [CONTRACT, ..],
      "basis": {"capital": 1.5e9, "riskAversion": 6, "floor": 0.25, "returnOnAssets": null, "taxes": 0,
                "discounting": {"mode": "anchored", "risklessRate": 0.03}
                            or {"mode": "stated", "discountFactor": 0.95},
                "variableExpense": 0, "lossAdjustment": 0, "fixedExpensePerContract": 0, "attritionalAndOutward": 0}
    }
    CONTRACT = {
      "toHouseCurrency": 1,
      "tables": [{"lineage": "homes", "catalogueLineage": "wind", "file": "losses.csv", "toContractCurrency": 1}],
      "layers": [{"key": "first", "limit": 1e7, "attachment": 5e6, "annualDeductible": 0, "reinstatements": [1],
                  "annualLimit": (optional), "line": 0.1, "brokerage": 0.1, "premium": 9e5 (for 100%; book only)}]
    }

Catalogue CSV: event, rate_per_year, peril, region and optionally season_day, group, variance_to_mean. Loss table CSV:
event, mean_loss, sd, common_share, exposed_value (empty: lognormal). Tables of one lineage meet the same losses wherever
they stand. The season does not matter here: no term that is priced depends on the day of a loss.
Amounts of a contract are in its currency, of the basis in the house's.
"""
import argparse
import csv
import json
import pathlib
import zlib

import numpy as np
import scipy
from scipy import optimize, special, stats


def mean_of(values):
    """Mean over equally likely states with its standard error."""
    return {"value": float(np.mean(values)), "standardError": float(np.std(values, ddof=1) / np.sqrt(len(values)))}


def read_csv(path):
    """Rows of a CSV file as dictionaries of stripped text; a column that is absent reads as empty."""
    with open(path, newline="", encoding="utf-8-sig") as file:
        return [{key.strip(): (value or "").strip() for key, value in row.items()} for row in csv.DictReader(file)]


def number(text, otherwise):
    return float(text) if text else otherwise


class Occurrences:
    """Simulated occurrences of one catalogue: the state, event and common score of each."""

    def __init__(self, path, states, rng):
        rows = read_csv(path)
        self.place = {row["event"]: i for i, row in enumerate(rows)}
        if len(self.place) != len(rows):
            raise SystemExit(f"{path}: an event stands twice")
        rates = np.array([float(row["rate_per_year"]) for row in rows])
        groups = np.array([row.get("group", "") for row in rows])
        ratio = {row["group"]: float(row["variance_to_mean"]) for row in rows if row.get("group") and row["variance_to_mean"]}
        state, event = [], []
        for group in np.unique(groups):
            members = np.flatnonzero(groups == group)
            total = rates[members].sum()
            if group == "":
                counts = rng.poisson(total, states)
            else:
                shape = total / (ratio[group] - 1)
                counts = rng.poisson(total * rng.gamma(shape, 1 / shape, states))
            state.append(np.repeat(np.arange(states), counts))
            event.append(rng.choice(members, counts.sum(), p=rates[members] / total))
        self.state, self.event = np.concatenate(state), np.concatenate(event)
        self.score = rng.standard_normal(len(self.state))


class Table:
    """A loss table's losses on its catalogue's occurrences: `hit`, their places, and `loss`, in the table's currency."""

    def __init__(self, path, occurrences, rng, least):
        """`least`: losses at or below it are not needed and are left out."""
        columns = ["mean_loss", "sd", "common_share", "exposed_value"]
        table = np.full((len(occurrences.place), len(columns)), np.nan)
        for row in read_csv(path):
            if row["event"] not in occurrences.place:
                raise SystemExit(f"{path}: event {row['event']} is not in the catalogue")
            table[occurrences.place[row["event"]]] = [number(row.get(column, ""), np.nan) for column in columns]
        mean, sd, common, exposed = table.T
        own = rng.standard_normal(len(occurrences.event))
        hit = np.flatnonzero(~np.isnan(mean[occurrences.event]))
        event = occurrences.event[hit]
        score = np.sqrt(common[event]) * occurrences.score[hit] + np.sqrt(1 - common[event]) * own[hit]
        kept = score > self.score_at(least, mean, sd, exposed)[event]
        self.hit, event, score = hit[kept], event[kept], score[kept]
        self.loss = self.loss_at(score, mean[event], sd[event], exposed[event])

    @staticmethod
    def laws(mean, sd, exposed):
        """Which rows are lognormal and which beta; the lognormal's location and scale, the beta's shapes."""
        lognormal, beta = (sd > 0) & np.isnan(exposed), (sd > 0) & ~np.isnan(exposed)
        with np.errstate(divide="ignore", invalid="ignore"):
            scale = np.sqrt(np.log1p((sd / mean) ** 2))
            location = np.log(mean) - scale**2 / 2
            ratio, spread = mean / exposed, sd / exposed
            concentration = ratio * (1 - ratio) / spread**2 - 1
        return lognormal, beta, location, scale, ratio * concentration, (1 - ratio) * concentration

    @classmethod
    def score_at(cls, loss, mean, sd, exposed):
        """Score at which each row's loss is `loss`."""
        lognormal, beta, location, scale, a, b = cls.laws(mean, sd, exposed)
        score = np.where(mean > loss, -np.inf, np.inf)
        if loss <= 0:
            return np.full_like(mean, -np.inf)
        score[lognormal] = (np.log(loss) - location[lognormal]) / scale[lognormal]
        x = np.minimum(loss / exposed[beta], 1)
        below, above = stats.beta.cdf(x, a[beta], b[beta]), stats.beta.sf(x, a[beta], b[beta])
        score[beta] = np.where(below < 0.5, special.ndtri(below), -special.ndtri(above))
        return score

    @classmethod
    def loss_at(cls, score, mean, sd, exposed):
        """Quantile of each loss at the probability of its score, from the nearer tail."""
        lognormal, beta, location, scale, a, b = cls.laws(mean, sd, exposed)
        loss = mean.copy()
        loss[lognormal] = np.exp(location + scale * score)[lognormal]
        low, high = beta & (score <= 0), beta & (score > 0)
        loss[low] = exposed[low] * stats.beta.ppf(special.ndtr(score[low]), a[low], b[low])
        loss[high] = exposed[high] * stats.beta.isf(special.ndtr(-score[high]), a[high], b[high])
        return loss


class World:
    """Everything simulated: occurrences by catalogue, losses by lineage of the table."""

    def __init__(self, request, folder, states, seed):
        self.states, self.folder, self.seed, self.tables = states, folder, seed, {}
        self.catalogues = {
            catalogue["lineage"]: Occurrences(folder / catalogue["file"], states, self.stream("catalogue", catalogue["lineage"]))
            for catalogue in request["catalogues"]
        }
        self.contracts = [request["programme"], *request["book"]]
        self.whole = {table["lineage"] for table in request["programme"]["tables"]}

    def stream(self, *names):
        return np.random.default_rng([self.seed, zlib.crc32("/".join(names).encode())])

    def least(self, lineage):
        """Lowest loss of a table that can matter to any layer: any at all where tables are summed on one catalogue."""
        bounds = [0.0 if lineage in self.whole else np.inf]
        for contract in self.contracts:
            homes = [table["catalogueLineage"] for table in contract["tables"]]
            for table in contract["tables"]:
                if table["lineage"] == lineage:
                    lowest = min(layer["attachment"] for layer in contract["layers"])
                    bounds.append(lowest / table["toContractCurrency"] if len(set(homes)) == len(homes) else 0.0)
        return min(bounds)

    def table(self, terms):
        lineage = terms["lineage"]
        if lineage not in self.tables:
            home = self.catalogues[terms["catalogueLineage"]]
            self.tables[lineage] = Table(self.folder / terms["file"], home, self.stream("table", lineage), self.least(lineage))
        return self.tables[lineage]

    def losses(self, contract):
        """Of each catalogue the states and summed losses of a contract's occurrences, contract currency."""
        for lineage, home in self.catalogues.items():
            losses = np.zeros(len(home.event))
            for terms in contract["tables"]:
                if terms["catalogueLineage"] == lineage:
                    table = self.table(terms)
                    losses[table.hit] += table.loss * terms["toContractCurrency"]
            hit = np.flatnonzero(losses)
            yield home.state[hit], losses[hit]

    def payoffs(self, contract):
        """Z and ρ of each layer in each state, and E[ΣX], contract currency."""
        occurrences = list(self.losses(contract))
        state = np.concatenate([states for states, _ in occurrences])
        loss = np.concatenate([losses for _, losses in occurrences])
        layers = []
        for layer in contract["layers"]:
            limit, backs = layer["limit"], layer["reinstatements"]
            recovery = np.clip(loss - layer["attachment"], 0, limit)
            summed = np.bincount(state, recovery, self.states)
            cover = min((len(backs) + 1) * limit, layer.get("annualLimit", np.inf))
            payoff = np.clip(summed - layer["annualDeductible"], 0, cover)
            back = sum((price * np.clip(payoff - k * limit, 0, limit) / limit for k, price in enumerate(backs)), np.zeros(self.states))
            layers.append((payoff, back))
        return layers, np.bincount(state, loss, self.states)


class House:
    """Capital k and hunger m of the house in every state, on its book."""

    def __init__(self, world, request):
        self.basis = basis = request["basis"]
        self.gamma, self.floor = basis["riskAversion"], basis["floor"]
        self.loss = np.zeros(world.states)
        self.premium = -basis["attritionalAndOutward"]
        for contract in request["book"]:
            rate = contract["toHouseCurrency"]
            self.premium -= basis["fixedExpensePerContract"]
            for layer, (payoff, back) in zip(contract["layers"], world.payoffs(contract)[0]):
                share = layer["line"] * rate
                kept = 1 - layer["brokerage"] - basis["taxes"] - basis["variableExpense"]
                self.premium += share * layer["premium"] * kept
                self.loss += share * (payoff * (1 + basis["lossAdjustment"]) - (1 - basis["taxes"]) * layer["premium"] * back)
        discounting = basis["discounting"]
        if discounting["mode"] == "anchored":
            self.riskless = discounting["risklessRate"]
            self.k = self.capital_at(self.riskless)
            beta = 1 / (1 + self.riskless) / np.mean(self.slope(self.k))
        else:
            beta = discounting["discountFactor"]
            excess = lambda rate: beta * np.mean(self.slope(self.capital_at(rate))) * (1 + rate) - 1
            self.riskless = optimize.brentq(excess, -0.3, 0.5, xtol=1e-14)
            self.k = self.capital_at(self.riskless)
        self.m = beta * self.slope(self.k)
        self.sure = float(np.mean(self.m))

    def capital_at(self, riskless):
        basis = self.basis
        own = riskless if basis["returnOnAssets"] is None else basis["returnOnAssets"]
        return (basis["capital"] * (1 + own) + self.premium * (1 + riskless) - self.loss) / basis["capital"]

    def slope(self, k):
        """u'(k) = max(k, floor)^(-gamma)."""
        return np.maximum(k, self.floor) ** -self.gamma

    def utility(self, k):
        """Power utility, logarithmic at gamma 1, a straight line below the floor; fixed so that u(1) = 0."""
        above = np.maximum(k, self.floor)
        return special.boxcox(above, 1 - self.gamma) + (np.minimum(k, self.floor) - self.floor) * self.floor**-self.gamma

    def tail(self, years):
        """The book's loss that is passed in 1 of `years`; its error by order statistics one deviation to each side."""
        ordered, places = np.sort(self.loss), len(self.loss)
        at = places * (1 - 1 / years) - 1
        aside = np.sqrt(places / years * (1 - 1 / years))
        low, value, high = (float(ordered[min(int(place), places - 1)]) for place in (at - aside, at, at + aside))
        return {"value": value, "standardError": (high - low) / 2}

    def sharpe_ratio(self):
        """sd(m)/E[m], by the delta method."""
        m = self.m / self.sure
        ratio = float(np.std(m))
        return {"value": ratio, "standardError": mean_of(m**2 - 2 * np.mean(m**2) * m)["standardError"] / (2 * ratio)}


class Deal:
    """One layer of the programme: its change of the house's capital share is premium * per_premium + fixed."""

    def __init__(self, layer, payoff, back, house, contract):
        basis = house.basis
        self.layer, self.payoff, self.back, self.house = layer, payoff, back, house
        self.kept = 1 - layer["brokerage"] - basis["taxes"] - basis["variableExpense"]
        self.back_kept = 1 - basis["taxes"]
        self.cost = payoff * (1 + basis["lossAdjustment"])
        # The contract's fixed expense is borne by its layers in equal parts.
        self.expense = basis["fixedExpensePerContract"] / len(contract["layers"]) / contract["toHouseCurrency"]
        to_share = contract["toHouseCurrency"] / basis["capital"]
        self.per_premium = layer["line"] * to_share * (self.kept / house.sure + self.back_kept * back)
        self.fixed = -to_share * (layer["line"] * self.cost + self.expense / house.sure)

    def priced(self, figure):
        """E[m * figure]; its error knows that m is normalised on the same states."""
        m = self.house.m
        value = float(np.mean(m * figure))
        return {"value": value, "standardError": mean_of(m * (figure - value / self.house.sure))["standardError"]}

    def marginal(self):
        """Premium at which a vanishing line neither gains nor loses, by the delta method."""
        house, line = self.house, self.layer["line"]
        below = self.kept + self.back_kept * np.mean(house.m * self.back)
        premium = (np.mean(house.m * self.cost) + self.expense / line) / below
        net = self.priced(self.cost - premium * self.back_kept * self.back)
        return {"value": float(premium), "standardError": net["standardError"] / float(below)}

    def walk_away(self):
        """Premium at which the house is as well off as not writing."""
        house = self.house
        before = house.utility(house.k)
        gain = lambda premium: house.utility(house.k + premium * self.per_premium + self.fixed) - before
        start = self.marginal()["value"]
        if start == 0:
            return {"value": 0.0, "standardError": 0.0}
        premium = optimize.brentq(lambda p: np.mean(gain(p)), 0.2 * start, 5 * start, xtol=1e-9 * start)
        slope = np.mean(house.slope(house.k + premium * self.per_premium + self.fixed) * self.per_premium)
        return {"value": premium, "standardError": mean_of(gain(premium))["standardError"] / float(slope)}

    def measures(self):
        return {
            "key": self.layer["key"],
            "expectedLoss": mean_of(self.payoff),
            "attachmentProbability": mean_of(self.payoff > 0),
            "expectedReinstatement": mean_of(self.back),
            "pricedLoss": self.priced(self.payoff),
            "pricedReinstatement": self.priced(self.back),
            "marginalPremium": self.marginal(),
            "walkAwayPremium": self.walk_away(),
        }


def programme_walk_away(deals, house):
    """Premiums at which each layer's net payoff is worth nothing along the programme scaled from 0 to 1."""
    nodes, weights = np.polynomial.legendre.leggauss(16)
    start = np.array([deal.walk_away()["value"] for deal in deals])

    def along(premiums):
        change = sum(p * deal.per_premium + deal.fixed for p, deal in zip(premiums, deals))
        m = sum(w / 2 * house.slope(house.k + (x + 1) / 2 * change) for x, w in zip(nodes, weights))
        return [m * (p * deal.per_premium + deal.fixed) for p, deal in zip(premiums, deals)], m

    slopes = np.array([np.mean(along(start)[1] * deal.per_premium) for deal in deals])
    found = optimize.root(lambda x: [np.mean(net) for net in along(x * start)[0]] / slopes / start, np.ones(len(deals)), tol=1e-10)
    if not found.success:
        raise SystemExit(f"no programme walk-away: {found.message}")
    premiums = found.x * start
    nets, m = along(premiums)
    slopes = [np.mean(m * deal.per_premium) for deal in deals]
    lines = np.array([deal.layer["line"] for deal in deals])
    per_share = [net / slope for net, slope in zip(nets, slopes)]
    return {
        "parts": [{"value": float(p), "standardError": mean_of(net)["standardError"]} for p, net in zip(premiums, per_share)],
        "total": {"value": float(lines @ premiums), "standardError": mean_of(sum(w * net for w, net in zip(lines, per_share)))["standardError"]},
    }


def value(request, folder, states, seed):
    world = World(request, folder, states, seed)
    house = House(world, request)
    programme = request["programme"]
    payoffs, ground_up = world.payoffs(programme)
    deals = [Deal(layer, payoff, back, house, programme) for layer, (payoff, back) in zip(programme["layers"], payoffs)]
    return {
        "states": states,
        "layers": [deal.measures() for deal in deals],
        "programme": {"expectedGroundUp": mean_of(ground_up), "walkAway": programme_walk_away(deals, house)},
        "house": {
            "sureValue": house.sure,
            "risklessRate": house.riskless,
            "netPremium": house.premium,
            "expectedBookLoss": mean_of(house.loss),
            "largestSharpeRatio": house.sharpe_ratio(),
            "floorShare": float(np.sum(house.m[house.k <= house.floor]) / np.sum(house.m)),
            "effectiveStates": float(np.sum(house.m) ** 2 / np.sum(house.m**2)),
            "oneIn100": house.tail(100),
            "oneIn250": house.tail(250),
        },
        "versions": {"numpy": np.__version__, "scipy": scipy.__version__},
    }


def main():
    parser = argparse.ArgumentParser(description="Prices one programme with NumPy and SciPy.")
    parser.add_argument("request", type=pathlib.Path)
    parser.add_argument("--states", type=int, default=500_000)
    parser.add_argument("--seed", type=int, default=1)
    arguments = parser.parse_args()
    request = json.loads(arguments.request.read_text(encoding="utf-8"))
    print(json.dumps(value(request, arguments.request.parent, arguments.states, arguments.seed), indent=1, allow_nan=False))


if __name__ == "__main__":
    main()
