#!/usr/bin/env python3
"""The vectorised valuation made as quick as NumPy lets it be: quantile tables, paying states only, power series for the rest.

    OMP_NUM_THREADS=1 OPENBLAS_NUM_THREADS=1 python3 best.py CASE [--occurrences FOLDER]
"""
import sys

import numpy as np

# Leave nothing behind in the folder.
sys.dont_write_bytecode = True

import common  # noqa: E402
from quick.drawing import Losses, draw_losses  # noqa: E402
from quick.house import House  # noqa: E402
from quick.measures import LeanOrder, error_of_mean, exceedance, layer_report, lens, payoff_measures, probability  # noqa: E402
from quick.premiums import Deal, Together  # noqa: E402
from quick.years import all_years, book_losses  # noqa: E402


class Valuation:
    """What is known once the losses are, whatever the programme's terms."""

    def __init__(self, case, losses, house):
        self.case, self.losses, self.house = case, losses, house
        self.lean = None

    def measure_once(self):
        """Measures that no term of the programme moves."""
        states, losses = self.case.states, self.losses
        self.lean = LeanOrder(self.house)
        new = np.empty(len(losses.state), dtype=bool)
        new[:1] = True
        np.not_equal(losses.state[1:], losses.state[:-1], out=new[1:])
        starts = np.flatnonzero(new)
        largest, total = (f.reduceat(losses.loss, starts) if len(starts) > 0 else losses.loss for f in (np.maximum, np.add))
        mean = float(total.sum()) / states
        self.ground = mean, error_of_mean(total, mean, states)[1]
        self.exceedance = {
            "occurrence": exceedance(largest, states, common.RETURN_PERIODS),
            "aggregate": exceedance(total, states, common.RETURN_PERIODS),
            "houseBefore": self.house_tail(self.house.hit, self.house.loss),
        }

    def house_tail(self, hit, loss):
        """`loss` of the states `hit`; all others have 0, and none has less unless reinstatement premiums outweigh a loss."""
        states = self.case.states
        if len(loss) > 0 and loss.min() < 0:
            dense = np.zeros(states)
            dense[hit] = loss
            loss = dense
        return exceedance(loss, states, common.HOUSE_PERIODS)

    def price(self, layers, clock):
        case, house, losses = self.case, self.house, self.losses
        states, basis = case.states, case.basis
        years = all_years(layers, losses.state, losses.loss)
        clock.phase("layers")
        deals = [Deal(case, layer, year, house, len(layers)) for layer, year in zip(layers, years)]
        for deal in deals:
            deal.margin, deal.marginal_error = deal.marginal()
            deal.alone, deal.alone_error = deal.walk_away(deal.margin)
        together = Together(deals, house)
        premiums, scale_error = together.walk_away(np.array([deal.alone for deal in deals]))
        for deal, premium in zip(deals, premiums.tolist()):
            deal.together = premium
        clock.phase("premiums")
        if self.lean is None:
            self.measure_once()
        reports, sums = zip(*(layer_report(case, deal, self.lean, losses.event) for deal in deals))
        total = together.added(deal.years.paid for deal in deals)
        figures, errors = payoff_measures(total, together.slope, together.slope * total, house)
        done = np.zeros(len(total), dtype=np.int32)
        for deal, at in zip(deals, together.places):
            done[at] += deal.years.paid >= deal.layer.cover
        exhausted, errors["exhaustionProbability"] = probability(int(np.count_nonzero(done == len(deals))), states)
        walk_away = sum(deal.layer.line * deal.together for deal in deals)
        errors["walkAwayPremium"] = walk_away * scale_error
        minimum = sum(x.line * basis["minimumRateOnLine"] * x.limit for x in layers)
        after = together.added(
            d.years.paid * (d.layer.line * d.cost) - d.years.back * (d.layer.line * d.back_kept * d.together) for d in deals
        )
        dense = np.zeros(states)
        dense[house.hit] = house.loss
        dense[together.state] += after
        touched = np.flatnonzero(dense)
        results = {
            "perLayer": list(reports),
            "programme": {
                **figures,
                "exhaustionProbability": exhausted,
                "marginalPremium": sum(deal.layer.line * deal.margin for deal in deals),
                "walkAwayPremium": walk_away,
                "technicalPremium": max(walk_away * (1 + basis["targetMargin"]), minimum),
                "standardErrors": errors,
            },
            "house": house.report,
            "exceedance": {**self.exceedance, "houseAfter": self.house_tail(touched, dense.take(touched))},
            "lens": lens(house, self.lean, layers, sums),
            "selfCheck": common.self_check(states, common.exact_means(case, layers), *self.ground, [year.counted_sums for year in years]),
        }
        clock.phase("measures")
        return results


def price(case, drawn, clock):
    """The vectorised valuation made as quick as NumPy lets it be."""
    if drawn is None:
        programme, book = draw_losses(case, np.random.Generator(np.random.SFC64(case.seed)), clock)
    else:
        reach = min(layer.attachment for layer in case.book_layers)
        programme, book = Losses.given(drawn, drawn.programme_loss, 0), Losses.given(drawn, drawn.book_loss, reach)
        clock.phase("losses")
    states, loss = book_losses(case, book)
    clock.phase("book")
    valuation = Valuation(case, programme, House(case, states, loss))
    clock.phase("house")
    return valuation.price(case.layers, clock), valuation.price


if __name__ == "__main__":
    common.run(price)
