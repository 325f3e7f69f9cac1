#!/usr/bin/env python3
"""The straightforward vectorised valuation: dense columns over all states, and each formula as the textbook has it.

    OMP_NUM_THREADS=1 OPENBLAS_NUM_THREADS=1 python3 plain.py CASE [--occurrences FOLDER]
"""
import math
import sys

import numpy as np
from scipy import special, stats

# Leave nothing behind in the folder.
sys.dont_write_bytecode = True

import common  # noqa: E402
from case_files import Occurrences  # noqa: E402


def draw(case):
    """Occurrences in order of state and day, with their common scores, and the generator to draw on with."""
    rng = np.random.default_rng(case.seed)
    total = case.rate.sum()
    counts = rng.poisson(total, case.states)
    state = np.repeat(np.arange(case.states), counts)
    event = rng.choice(len(case.rate), len(state), p=case.rate / total)
    season = case.season_day[event]
    day = np.where(np.isnan(season), rng.uniform(0, common.DAYS, len(state)), season - 1)
    day = (day - (case.inception_day - 1)) % common.DAYS
    order = np.lexsort((day, state))
    return Occurrences(state[order], event[order], day[order], rng.standard_normal(len(state))), rng


def table_loss(table, occurrences, rng):
    """A table's loss in every occurrence: the quantile of its row's law at the probability of the score."""
    row_of_event = np.full(table.events, -1)
    row_of_event[table.event] = np.arange(len(table.event))
    row = row_of_event[occurrences.event]
    hit = np.flatnonzero(row >= 0)
    row = row[hit]
    common_share = table.common_share[row]
    own = rng.standard_normal(len(hit))
    score = np.sqrt(common_share) * occurrences.score[hit] + np.sqrt(1 - common_share) * own
    kind, p, q = (column[row] for column in table.laws())
    found = table.mean[row]
    log, beta = np.flatnonzero(kind == 1), np.flatnonzero(kind == 2)
    found[log] = np.exp(p[log] + q[log] * score[log])
    # Not special.betaincinv, which SciPy 1.10 gets wrong for large shapes.
    found[beta] = table.exposed[row[beta]] * stats.beta.ppf(special.ndtr(score[beta]), p[beta], q[beta])
    loss = np.zeros(len(occurrences.event))
    loss[hit] = found
    return loss


def payoff(layer, state, loss, states):
    """ΣY, Z and ρ in every state, and Y of every occurrence."""
    recovery = np.clip(loss - layer.attachment, 0, layer.limit)
    counted = np.bincount(state, recovery, states)
    paid = np.clip(counted - layer.annual_deductible, 0, layer.cover)
    back = np.zeros(states)
    for k, price in enumerate(layer.reinstatements):
        back += price * np.clip(paid - k * layer.limit, 0, layer.limit) / layer.limit
    return counted, paid, back, recovery


class House:
    """Capital k and hunger m = discount · u′(k) in every state."""

    def __init__(self, case, book_loss):
        basis = case.basis
        self.gamma, self.floor, self.states = basis["riskAversion"], basis["floor"], case.states
        self.book_loss = book_loss
        self.k = common.loss_free_capital(case) - book_loss / basis["capital"]
        self.u = self.slope(self.k)
        self.discount = 1 / (1 + basis["risklessRate"]) / self.u.mean()
        self.m = self.discount * self.u
        self.sure = self.m.mean()
        self.report = {
            "discount": float(self.discount),
            "sureValue": float(self.sure),
            "risklessRate": basis["risklessRate"],
            "largestSharpeRatio": float(self.u.std() / self.u.mean()),
            "floorShare": float(self.u[self.k <= self.floor].sum() / self.u.sum()),
            "effectiveStates": float(self.u.sum() ** 2 / (self.u**2).sum()),
            "netPremium": common.net_premium(case),
        }

    def slope(self, k):
        return np.maximum(k, self.floor) ** -self.gamma

    def gain(self, change):
        """u(k + change) − u(k), without cancellation: along the curve above the floor, along its tangent below."""
        start = np.maximum(self.k, self.floor)
        below = np.minimum(self.k + change, self.floor) - np.minimum(self.k, self.floor)
        growth = np.log1p((change - below) / start)
        power = 1 - self.gamma
        curve = growth if power == 0 else start**power * np.expm1(power * growth) / power
        return curve + below * self.floor**-self.gamma


class Deal:
    """One layer of the programme: its change of the house's capital share is premium · per_premium + fixed."""

    def __init__(self, case, layer, state, loss, house, layers):
        basis = case.basis
        self.layer, self.house = layer, house
        self.counted, self.paid, self.back, self.recovery = payoff(layer, state, loss, case.states)
        self.cost = self.paid * (1 + basis["lossAdjustment"])
        self.kept = 1 - layer.brokerage - basis["taxes"] - basis["variableExpense"]
        self.back_kept = 1 - basis["taxes"]
        self.expense = basis["fixedExpensePerContract"] / layers
        self.per_premium = layer.line / basis["capital"] * (self.kept / house.sure + self.back_kept * self.back)
        self.fixed = -(layer.line * self.cost + self.expense / house.sure) / basis["capital"]

    def marginal(self):
        m, states = self.house.m, self.house.states
        below = self.kept + self.back_kept * np.mean(m * self.back)
        value = (np.mean(m * self.cost) + self.expense / self.layer.line) / below
        net = self.cost - value * self.back_kept * self.back
        moved = m * (net - np.mean(m * net) / self.house.sure)
        return value, np.std(moved, ddof=1) / math.sqrt(states) / below

    def walk_away(self, premium):
        """Newton's method on E u(k + change) = E u(k), from the marginal premium, which lies below the root."""
        house = self.house
        for _ in range(100):
            change = premium * self.per_premium + self.fixed
            gain = house.gain(change)
            slope = np.sum(self.per_premium * house.slope(house.k + change))
            move = gain.sum() / slope
            premium -= move
            # The error after a step is of the order of the step's square.
            if abs(move) <= 1e-7 * abs(premium):
                break
        states = house.states
        return premium, math.sqrt(np.sum(gain**2) / (states - 1) / states) * states / slope


def programme_walk_away(deals, house):
    """Premiums at which each layer's net payoff is worth nothing along the programme scaled from 0 to 1."""
    premiums = np.array([deal.alone for deal in deals])
    for _ in range(60):
        change = sum(p * deal.per_premium + deal.fixed for p, deal in zip(premiums, deals))
        gain = house.gain(change)
        # ∫₀¹ u′(k + t·change) dt = (u(k + change) − u(k))/change.
        weight = np.divide(gain, change, out=house.u.copy(), where=change != 0)
        found = np.array([-np.sum(weight * deal.fixed) / np.sum(weight * deal.per_premium) for deal in deals])
        moved = np.max(np.abs(found - premiums) / np.maximum(found, 1e-300))
        premiums = found
        if moved < 1e-12:
            break
    income = sum(p * deal.per_premium for p, deal in zip(premiums, deals))
    change = income + sum(deal.fixed for deal in deals)
    scale_error = math.sqrt(np.sum(house.gain(change) ** 2)) / np.sum(income * house.slope(house.k + change))
    return premiums, scale_error


def exceedance(figures, periods):
    """Value and tail value at each return period, with their standard errors."""
    states = len(figures)
    ordered = np.sort(figures)
    ranks = common.tail_ranks(states, periods)
    points = []
    for years in periods:
        if years not in ranks:
            points.append(common.no_tail_point(years))
            continue
        value, low, high = ordered[ranks[years]]
        over = np.maximum(figures - value, 0)
        points.append(common.tail_point(years, states, value, low, high, over.sum(), np.sum(over**2)))
    return points


def lean_parts(house):
    """Of each state its tenth and its bin of the lens in the lean order; states of equal capital stand by their number."""
    rank = np.empty(house.states, dtype=np.intp)
    rank[np.argsort(house.k, kind="stable")] = np.arange(house.states)
    tenths = [(d + 1) * house.states // 10 for d in range(10)]
    ends = [end for *_, end in common.lens_ends(house.states)]
    return np.searchsorted(tenths, rank, side="right"), np.searchsorted(ends, rank, side="right")


def probability(happens):
    p = np.mean(happens)
    return float(p), math.sqrt(p * (1 - p) / len(happens))


def payoff_measures(paid, house):
    """Measures that a layer and the programme share, and their standard errors."""
    states, u = house.states, house.u
    pays = paid > 0
    priced = np.sum(u * pays) / u.sum()
    weighted = u * paid
    effective = weighted.sum() ** 2 / np.sum(weighted**2) if pays.any() else 0.0
    deviation = np.std(paid, ddof=1)
    attachment, attachment_error = probability(pays)
    figures = {
        "expectedLoss": float(np.mean(paid)),
        "standardDeviation": float(deviation),
        "attachmentProbability": attachment,
        "pricedAttachmentProbability": float(priced),
        "effectiveStates": float(effective),
        "thin": bool(effective < common.THIN_STATES),
    }
    errors = {
        "expectedLoss": float(deviation / math.sqrt(states)),
        "attachmentProbability": attachment_error,
        "pricedAttachmentProbability": float(math.sqrt(np.sum((u * (pays - priced)) ** 2)) / u.sum()),
    }
    return figures, errors


def layer_report(case, deal, house, occurrences, parts):
    basis, layer, states = case.basis, deal.layer, house.states
    figures, errors = payoff_measures(deal.paid, house)
    back = np.mean(deal.back)
    exhausted, errors["exhaustionProbability"] = probability(deal.paid >= layer.cover)
    errors["expectedReinstatement"] = float(np.std(deal.back, ddof=1) / math.sqrt(states))
    errors["marginalPremium"], errors["walkAwayPremium"] = float(deal.marginal_error), float(deal.alone_error)
    priced = house.m * deal.paid
    steps = {
        "priced": float(np.mean(priced)), "riskless": float(house.sure * np.mean(deal.paid)),
        "pricedBack": float(np.mean(house.m * deal.back)), "fixed": deal.expense / layer.line,
    }
    split = common.premium_split(layer, basis, steps, float(deal.margin), float(deal.alone))
    technical = split["technicalPremium"]
    share = np.divide(priced, deal.counted, out=np.zeros(states), where=deal.counted > 0)
    by_event = np.bincount(occurrences.event, share[occurrences.state] * deal.recovery, len(case.rate))
    tenth, bin_of = parts
    tenths_capital = np.bincount(tenth, house.k, 10) / np.bincount(tenth, minlength=10)
    losses, prices = np.bincount(tenth, deal.paid, 10), np.bincount(tenth, priced, 10)
    loss_shares = losses / losses.sum() if losses.sum() > 0 else losses
    price_shares = prices / prices.sum() if prices.sum() > 0 else prices
    return {
        **figures,
        "exhaustionProbability": exhausted,
        "expectedReinstatement": float(back),
        "payoffValue": steps["priced"],
        "marginalPremium": float(deal.margin),
        "walkAwayPremium": float(deal.alone),
        "programmeWalkAwayPart": float(deal.together),
        "technicalPremium": technical,
        "technicalRateOnLine": technical / layer.limit,
        "multiple": technical * (1 + float(back)) / figures["expectedLoss"] if figures["expectedLoss"] > 0 else None,
        "impliedDeviationLoad": split["leanLoad"] / float(house.sure) / figures["standardDeviation"] if figures["standardDeviation"] > 0 else None,
        "split": split,
        "deciles": [
            {"meanCapital": float(k), "lossShare": float(x), "priceShare": float(y)} for k, x, y in zip(tenths_capital, loss_shares, price_shares)
        ],
        **common.contributors(case, by_event),
        "standardErrors": errors,
    }, (np.bincount(bin_of, deal.paid), np.bincount(bin_of, priced))


def lens(house, parts, layers, sums):
    """The house in each bin of states, and what each layer pays there; areas of `product` add to price ÷ limit."""
    bin_of, states = parts[1], house.states
    hunger, capital = np.bincount(bin_of, house.u) / house.u.mean(), np.bincount(bin_of, house.k)
    bins, before = [], 0
    for b, (from_share, to_share, width, end) in enumerate(common.lens_ends(states)):
        size, before = end - before, end
        bins.append({
            "shareFrom": from_share, "shareTo": to_share, "hunger": float(hunger[b] / size), "meanCapital": float(capital[b] / size),
            "payoff": [float(paid[b] / x.limit / size) for x, (paid, _) in zip(layers, sums)],
            "product": [float(priced[b] / house.sure / x.limit / states / width) for x, (_, priced) in zip(layers, sums)],
            "plain": [float(paid[b] / x.limit / states / width) for x, (paid, _) in zip(layers, sums)],
        })
    return bins


def price_layers(case, layers, occurrences, house, clock):
    """Everything that depends on the programme's terms."""
    states, basis = case.states, case.basis
    loss = occurrences.programme_loss
    deals = [Deal(case, layer, occurrences.state, loss, house, len(layers)) for layer in layers]
    clock.phase("layers")
    for deal in deals:
        deal.margin, deal.marginal_error = deal.marginal()
        deal.alone, deal.alone_error = deal.walk_away(deal.margin)
    premiums, scale_error = programme_walk_away(deals, house)
    for deal, deal.together in zip(deals, premiums):
        pass
    clock.phase("premiums")
    parts = lean_parts(house)
    reports, sums = zip(*(layer_report(case, deal, house, occurrences, parts) for deal in deals))
    total = sum(deal.paid for deal in deals)
    figures, errors = payoff_measures(total, house)
    lines = np.array([layer.line for layer in layers])
    walk_away = float(lines @ premiums)
    exhausted, errors["exhaustionProbability"] = probability(np.all([deal.paid >= deal.layer.cover for deal in deals], axis=0))
    errors["walkAwayPremium"] = float(walk_away * scale_error)
    minimum = sum(x.line * basis["minimumRateOnLine"] * x.limit for x in layers)
    after = house.book_loss + sum(x.line * (d.cost - p * d.back_kept * d.back) for x, p, d in zip(layers, premiums, deals))
    ground = np.bincount(occurrences.state, loss, states)
    counted = [(float(deal.counted.sum()), float(np.sum(deal.counted**2))) for deal in deals]
    check = common.self_check(
        states, common.exact_means(case, layers), float(ground.mean()), float(np.std(ground, ddof=1) / math.sqrt(states)), counted,
    )
    results = {
        "perLayer": reports,
        "programme": {
            **figures,
            "exhaustionProbability": exhausted,
            "marginalPremium": float(sum(x.line * d.margin for x, d in zip(layers, deals))),
            "walkAwayPremium": walk_away,
            "technicalPremium": max(walk_away * (1 + basis["targetMargin"]), minimum),
            "standardErrors": errors,
        },
        "houseAfter": exceedance(after, common.HOUSE_PERIODS),
        "lens": lens(house, parts, layers, sums),
        "selfCheck": check,
    }
    clock.phase("measures")
    return results


def price(case, drawn, clock):
    """The straightforward vectorised valuation."""
    if drawn is None:
        occurrences, rng = draw(case)
        clock.phase("draw")
        occurrences.programme_loss = table_loss(case.programme, occurrences, rng)
        occurrences.book_loss = table_loss(case.book, occurrences, rng)
        clock.phase("losses")
    else:
        occurrences = drawn
    states, basis = case.states, case.basis
    book_loss = np.zeros(states)
    for layer in case.book_layers:
        _, paid, back, _ = payoff(layer, occurrences.state, occurrences.book_loss, states)
        book_loss += layer.line * (paid * (1 + basis["lossAdjustment"]) - layer.premium * (1 - basis["taxes"]) * back)
    clock.phase("book")
    house = House(case, book_loss)
    clock.phase("house")
    results = price_layers(case, case.layers, occurrences, house, clock)
    largest = np.zeros(states)
    np.maximum.at(largest, occurrences.state, occurrences.programme_loss)
    results["exceedance"] = {
        "occurrence": exceedance(largest, common.RETURN_PERIODS),
        "aggregate": exceedance(np.bincount(occurrences.state, occurrences.programme_loss, states), common.RETURN_PERIODS),
        "houseBefore": exceedance(book_loss, common.HOUSE_PERIODS),
        "houseAfter": results.pop("houseAfter"),
    }
    results["house"] = house.report
    clock.phase("measures")
    return results, lambda layers, second: price_layers(case, layers, occurrences, house, second)


if __name__ == "__main__":
    common.run(price)
