"""What is measured on layers, states and curves."""
import math

import numpy as np

import common


def exceedance(figures, states, periods):
    """Value and tail value at each return period. `figures` may leave out states, if these have 0 and none has less."""
    ranks = common.tail_ranks(states, periods)
    absent = states - len(figures)
    if min((min(three) for three in ranks.values()), default=absent) < absent:
        figures, absent = np.concatenate([np.zeros(absent), figures]), 0
    ordered = figures.copy()
    points = []
    for years in periods:
        if years not in ranks:
            points.append(common.no_tail_point(years))
            continue
        # Each period's ranks are sought among the figures that the one before left above its lowest.
        at = [rank - absent - (len(figures) - len(ordered)) for rank in ranks[years]]
        ordered.partition(sorted(at))
        value, low, high = (ordered[rank] for rank in at)
        over = ordered[at[0] + 1 :] - value
        points.append(common.tail_point(years, states, value, low, high, float(over.sum()), float(over @ over)))
        ordered = ordered[min(at) :]
    return points


class LeanOrder:
    """The states from the leanest to the most plentiful; those of equal capital stand by their number."""

    def __init__(self, house):
        self.house = house
        states = house.states
        self.bins = common.lens_ends(states)
        self.tenths = [(d + 1) * states // 10 for d in range(10)]
        # The book only costs, but for reinstatement premiums: then states without its loss come last, in their own order.
        simple = len(house.hit) == 0 or house.hit_k.max() < house.free
        self.rank = None
        if simple:
            order = np.argsort(house.hit_k, kind="stable")
            rank_of_hit = np.empty(len(order), dtype=np.int32)
            rank_of_hit[order] = np.arange(len(order), dtype=np.int32)
            self.rank = np.arange(len(order), len(order) + states, dtype=np.int32)
            self.rank -= np.cumsum(house.is_hit, dtype=np.int32)
            self.rank[house.hit] = rank_of_hit
            sorted_k, sorted_slope = house.hit_k.take(order), house.hit_slope.take(order)
        else:
            order = np.argsort(house.k, kind="stable")
            self.rank = np.empty(states, dtype=np.int32)
            self.rank[order] = np.arange(states, dtype=np.int32)
            sorted_k, sorted_slope = house.k.take(order), house.slope.take(order)
        ends = [end for *_, end in self.bins]
        self.tenth_capital = self.means(sorted_k, house.free, self.tenths)
        self.bin_capital, self.bin_slope = self.means(sorted_k, house.free, ends), self.means(sorted_slope, house.free_slope, ends)
        self.tenth_of = np.repeat(np.arange(10, dtype=np.uint8), np.diff(self.tenths, prepend=0))
        self.bin_of = np.repeat(np.arange(len(ends), dtype=np.uint8), np.diff(ends, prepend=0))

    @staticmethod
    def means(leanest, rest, ends):
        """Means of a figure between ranks, given those of the leanest states and the one of all others."""
        found, start = [], 0
        for end in ends:
            inner = leanest[start:end]
            found.append((float(inner.sum()) + (end - start - len(inner)) * rest) / (end - start))
            start = end
        return found

    def parts(self, states):
        rank = self.rank.take(states)
        return self.tenth_of.take(rank), self.bin_of.take(rank)


def error_of_mean(figures, mean, states):
    """Standard deviation over all states of a figure that is 0 in those left out, and the standard error of its mean."""
    away = figures - mean
    deviation = math.sqrt((float(away @ away) + (states - len(figures)) * mean * mean) / (states - 1))
    return deviation, deviation / math.sqrt(states)


def probability(happens, states):
    p = happens / states
    return p, math.sqrt(p * (1 - p) / states)


def payoff_measures(paid, slope, weighted, house):
    """Measures that a layer and the programme share, from the paying states, and their standard errors."""
    states = house.states
    mean = float(paid.sum()) / states
    deviation, error = error_of_mean(paid, mean, states)
    attachment, attachment_error = probability(len(paid), states)
    priced = float(slope.sum()) / house.slope_sum
    scatter = float(slope @ slope) * (1 - 2 * priced) + priced**2 * house.slope_squares
    first, second = float(weighted.sum()), float(weighted @ weighted)
    effective = first * first / second if second > 0 else 0.0
    figures = {
        "expectedLoss": mean,
        "standardDeviation": deviation,
        "attachmentProbability": attachment,
        "pricedAttachmentProbability": priced,
        "effectiveStates": effective,
        "thin": effective < common.THIN_STATES,
    }
    errors = {
        "expectedLoss": error,
        "attachmentProbability": attachment_error,
        "pricedAttachmentProbability": math.sqrt(max(scatter, 0)) / house.slope_sum,
    }
    return figures, errors


def shares(figures):
    total = figures.sum()
    return (figures / total if total > 0 else figures).tolist()


def layer_report(case, deal, lean, event):
    basis, layer, years, house = case.basis, deal.layer, deal.years, deal.house
    states = house.states
    figures, errors = payoff_measures(years.paid, deal.slope, deal.weighted, house)
    exhausted, errors["exhaustionProbability"] = probability(int(np.count_nonzero(years.paid >= layer.cover)), states)
    back = float(years.back.sum()) / states
    errors["expectedReinstatement"] = error_of_mean(years.back, back, states)[1]
    errors["marginalPremium"], errors["walkAwayPremium"] = deal.marginal_error, deal.alone_error
    steps = {
        "priced": deal.priced, "riskless": house.sure * deal.mean_paid, "pricedBack": deal.priced_back, "fixed": deal.expense / layer.line,
    }
    split = common.premium_split(layer, basis, steps, deal.margin, deal.alone)
    technical = split["technicalPremium"]
    priced = deal.weighted * house.discount
    tenth, bin_of = lean.parts(years.state)
    losses, prices = shares(np.bincount(tenth, years.paid, 10)), shares(np.bincount(tenth, priced, 10))
    report = {
        **figures,
        "exhaustionProbability": exhausted,
        "expectedReinstatement": back,
        "payoffValue": deal.priced,
        "marginalPremium": deal.margin,
        "walkAwayPremium": deal.alone,
        "programmeWalkAwayPart": deal.together,
        "technicalPremium": technical,
        "technicalRateOnLine": technical / layer.limit,
        "multiple": technical * (1 + back) / figures["expectedLoss"] if figures["expectedLoss"] > 0 else None,
        "impliedDeviationLoad": split["leanLoad"] / house.sure / figures["standardDeviation"] if figures["standardDeviation"] > 0 else None,
        "split": split,
        "deciles": [{"meanCapital": k, "lossShare": x, "priceShare": y} for k, x, y in zip(lean.tenth_capital, losses, prices)],
        **common.contributors(case, years.by_event(priced, event, len(case.rate))),
        "standardErrors": errors,
    }
    bins = len(lean.bins)
    return report, (np.bincount(bin_of, years.paid, bins), np.bincount(bin_of, priced, bins))


def lens(house, lean, layers, sums):
    """The house in each bin of states, and what each layer pays there; areas of `product` add to price ÷ limit."""
    bins, before = [], 0
    for b, (from_share, to_share, width, end) in enumerate(lean.bins):
        size, before = end - before, end
        bins.append({
            "shareFrom": from_share, "shareTo": to_share, "meanCapital": lean.bin_capital[b],
            "hunger": lean.bin_slope[b] / (house.slope_sum / house.states),
            "payoff": [float(paid[b]) / x.limit / size for x, (paid, _) in zip(layers, sums)],
            "product": [float(priced[b]) / house.sure / x.limit / house.states / width for x, (_, priced) in zip(layers, sums)],
            "plain": [float(paid[b]) / x.limit / house.states / width for x, (paid, _) in zip(layers, sums)],
        })
    return bins
