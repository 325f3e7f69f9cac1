"""Marginal and walk-away premiums of a layer, and the programme's."""
import math

import numpy as np


class Deal:
    """One layer of the programme. Its change of the house's capital share: of_premium for each unit of premium, and so on."""

    def __init__(self, case, layer, years, house, layers):
        basis = case.basis
        self.layer, self.years, self.house = layer, years, house
        self.kept = 1 - layer.brokerage - basis["taxes"] - basis["variableExpense"]
        self.back_kept = 1 - basis["taxes"]
        self.cost = 1 + basis["lossAdjustment"]
        self.expense = basis["fixedExpensePerContract"] / layers
        share = layer.line / basis["capital"]
        self.of_premium, self.of_back = share * self.kept / house.sure, share * self.back_kept
        self.of_paid, self.fixed = -share * self.cost, -self.expense / house.sure / basis["capital"]
        self.k, self.slope = house.k.take(years.state), house.slope.take(years.state)
        self.weighted = self.slope * years.paid
        self.mean_paid = float(years.paid.sum()) / house.states
        self.priced = house.discount * float(self.weighted.sum()) / house.states
        self.priced_back = house.discount * float(self.slope @ years.back) / house.states

    def marginal(self):
        house, years = self.house, self.years
        states = house.states
        below = self.kept + self.back_kept * self.priced_back
        value = (self.priced * self.cost + self.expense / self.layer.line) / below
        # A state moves the ratio by m·(net − centre)/below; where the layer does not pay, net is 0.
        centre = (self.priced * self.cost - value * self.back_kept * self.priced_back) / house.sure
        net = years.paid * self.cost - years.back * (value * self.back_kept)
        hunger = self.slope * house.discount
        moved = hunger * net
        squares = centre**2 * house.discount**2 * house.slope_squares + float(moved @ (moved - 2 * centre * hunger))
        total = float(moved.sum()) - centre * house.discount * house.slope_sum
        variance = max(squares - total * total / states, 0) / (states - 1) / below**2
        return value, math.sqrt(variance / states)

    def walk_away(self, premium):
        """Halley's method on E u(k + change) = E u(k), from the marginal premium."""
        house, years, utility = self.house, self.years, self.house.utility
        idle = house.idle(years.state)
        rate = years.back * self.of_back
        rate += self.of_premium
        base = years.paid * self.of_paid
        base += self.fixed
        change = np.empty(len(base))
        for _ in range(100):
            np.multiply(rate, premium, out=change)
            change += base
            gain, slope = utility.gain_and_slope(self.k, self.slope, change)
            rest = idle.gain(premium * self.of_premium + self.fixed)
            total = float(gain.sum()) + rest[0]
            steep = rate * slope
            rise = float(steep.sum()) + self.of_premium * rest[1]
            # u″ = −γ·u′/k above the floor, 0 below it.
            change += self.k
            np.divide(steep, change, out=steep, where=change > utility.floor)
            if utility.floor > 0 and len(change) > 0 and change.min() <= utility.floor:
                steep[change <= utility.floor] = 0
            bend = -utility.gamma * float(steep @ rate) + self.of_premium**2 * rest[2]
            newton = total / rise
            curved = 1 - newton * bend / (2 * rise)
            move = newton / curved if curved > 0.5 else newton
            premium -= move
            # The error after a step is of the order of the step's cube, or of its square near a kink at the floor.
            if abs(move) <= 1e-7 * abs(premium):
                break
        squares = float(gain @ gain) + rest[3]
        return premium, math.sqrt(squares / (house.states - 1) / house.states) * house.states / rise


class Together:
    """The states in which any layer pays, and each layer's places among them."""

    def __init__(self, deals, house):
        self.deals, self.house = deals, house
        mark = np.zeros(house.states, dtype=bool)
        for deal in deals:
            mark[deal.years.state] = True
        self.state = np.flatnonzero(mark)
        place = np.empty(house.states, dtype=np.int32)
        place[self.state] = np.arange(len(self.state), dtype=np.int32)
        # A layer that pays wherever any does has every place: its columns are used as they are.
        self.places = [
            slice(None) if len(deal.years.state) == len(self.state) else place.take(deal.years.state).astype(np.intp) for deal in deals
        ]
        self.k, self.slope = house.k.take(self.state), house.slope.take(self.state)
        self.base = np.zeros(len(self.state))
        for deal, at in zip(deals, self.places):
            self.base[at] += deal.years.paid * deal.of_paid
        self.fixed = sum(deal.fixed for deal in deals)

    def added(self, figures):
        """Sum over the layers of one figure a paying state each."""
        total = np.zeros(len(self.state))
        for at, figure in zip(self.places, figures):
            total[at] += figure
        return total

    def walk_away(self, premiums):
        """Premiums at which each layer's net payoff is worth nothing along the programme scaled from 0 to 1 (the allocation
        of R. J. Aumann and L. S. Shapley, Values of Non-Atomic Games, 1974), and the standard error of their common scale."""
        deals, house, utility = self.deals, self.house, self.house.utility
        idle = house.idle(self.state)
        anderson = Anderson()
        for _ in range(60):
            common_change = sum(p * deal.of_premium for p, deal in zip(premiums, deals)) + self.fixed
            change = self.base + common_change
            for p, deal, at in zip(premiums, deals, self.places):
                change[at] += deal.years.back * (p * deal.of_back)
            gain, after = utility.gain_and_slope(self.k, self.slope, change)
            rest = idle.gain(common_change)
            # ∫₀¹ u′(k + t·change) dt = (u(k + change) − u(k))/change.
            zero = change == 0
            weight = gain / np.where(zero, 1, change)
            weight[zero] = self.slope[zero]
            sure = float(weight.sum()) + (rest[0] / common_change if common_change != 0 else rest[1])
            found = np.empty(len(deals))
            for l, (deal, at) in enumerate(zip(deals, self.places)):
                own = weight if isinstance(at, slice) else weight.take(at)
                paid, back = float(own @ deal.years.paid) / sure, float(own @ deal.years.back) / sure
                cost = paid * deal.cost + deal.expense / house.sure / deal.layer.line
                found[l] = cost / (deal.kept / house.sure + deal.back_kept * back)
            moved = float(np.max(np.abs(found - premiums) / np.maximum(found, 1e-300)))
            if moved < 1e-12:
                premiums = found
                break
            premiums = anderson.next(premiums, found)
        # To the twelfth digit the last round's states serve the error as well.
        income = sum(p * deal.of_premium for p, deal in zip(premiums, deals))
        rate = self.added(deal.years.back * (p * deal.of_back) for p, deal in zip(premiums, deals))
        rate += income
        squares = float(gain @ gain) + rest[3]
        return premiums, math.sqrt(squares) / (income * rest[1] + float(rate @ after))


class Anderson:
    """Speeds up repetition x → f(x) by its last few steps: D. G. Anderson, Journal of the ACM 12 (1965)."""

    def __init__(self, memory=4):
        self.memory, self.points, self.rests = memory, [], []

    def next(self, point, image):
        scale = 1 / np.maximum(np.abs(image), 1e-300)
        self.points, self.rests = [*self.points, image][-self.memory :], [*self.rests, (image - point) * scale][-self.memory :]
        if len(self.points) == 1:
            return image
        steps = np.diff(np.array(self.rests), axis=0).T
        mix = np.linalg.lstsq(steps, self.rests[-1], rcond=1e-10)[0]
        better = image - np.diff(np.array(self.points), axis=0).T @ mix
        return better if np.all(np.abs(better - image) <= 0.1 * np.abs(image)) else image
