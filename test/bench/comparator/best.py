#!/usr/bin/env python3
"""The vectorised valuation made as quick as NumPy lets it be: quantile tables, paying states only, power series for the rest.

    OMP_NUM_THREADS=1 OPENBLAS_NUM_THREADS=1 python3 best.py CASE [--occurrences FOLDER]
"""
import math
import sys

import numpy as np
from scipy import special

# Leave nothing behind in the folder.
sys.dont_write_bytecode = True

import common  # noqa: E402
from quantiles import BETA, BetaQuantiles, RowQuantiles  # noqa: E402

CHUNK = 1 << 16
"""Occurrences worked on together, so that their columns stay in the nearer caches."""
DAY_BITS = 24
DAY_PARTS = 1 << 15
"""Parts of a day that are told apart: 365 days of them fit into the bits."""


class Alias:
    """Draws from a discrete law by M. Vose, IEEE Transactions on Software Engineering 17 (1991)."""

    def __init__(self, weights):
        n = len(weights)
        scaled = (weights * (n / weights.sum())).tolist()
        self.chance, self.other = [1.0] * n, list(range(n))
        small = [i for i, w in enumerate(scaled) if w < 1]
        large = [i for i, w in enumerate(scaled) if w >= 1]
        while small and large:
            i, j = small.pop(), large[-1]
            self.chance[i], self.other[i] = scaled[i], j
            scaled[j] -= 1 - scaled[i]
            if scaled[j] < 1:
                small.append(large.pop())
        self.chance, self.other = np.array(self.chance), np.array(self.other, dtype=np.intp)

    def draw(self, rng, out):
        for low in range(0, len(out), CHUNK):
            part = out[low : low + CHUNK]
            u = rng.random(len(part))
            u *= len(self.chance)
            np.copyto(part, u, casting="unsafe")
            u -= part
            # One uniform number serves both: its whole part picks, its rest decides.
            np.copyto(part, self.other.take(part), where=u >= self.chance.take(part))


class Counts:
    """Yearly numbers of occurrences, Poisson."""

    def __init__(self, mean):
        self.mean, self.alias = mean, None
        if mean <= 500:
            numbers = np.arange(int(mean + 12 * math.sqrt(mean) + 40))
            self.alias = Alias(np.exp(numbers * math.log(mean) - mean - special.gammaln(numbers + 1)))

    def draw(self, rng, size):
        if self.alias is None:
            return rng.poisson(self.mean, size)
        counts = np.empty(size, dtype=np.intp)
        self.alias.draw(rng, counts)
        return counts


class Drawing:
    """Draws the occurrences of a few thousand states, in order of state and day: the two and the event as one integer."""

    def __init__(self, case):
        self.counts, self.events = Counts(case.rate.sum()), Alias(case.rate)
        self.event_bits = max((len(case.rate) - 1).bit_length(), 1)
        self.state_bits = DAY_BITS + self.event_bits
        if self.state_bits + (case.states - 1).bit_length() > 63:
            raise SystemExit("more states and events than this program was written for")
        season = (case.season_day - case.inception_day) % common.DAYS
        self.season = np.where(np.isnan(season), -1, season * DAY_PARTS).astype(np.intp)

    def draw(self, rng, first, last):
        """The occurrences' keys, events and common scores."""
        key = np.repeat(np.arange(first, last), self.counts.draw(rng, last - first))
        event = np.empty(len(key), dtype=np.intp)
        self.events.draw(rng, event)
        day = self.season.take(event)
        any_day = rng.random(len(key))
        any_day *= common.DAYS * DAY_PARTS
        np.copyto(day, any_day, where=day < 0, casting="unsafe")
        key <<= DAY_BITS
        key += day
        key <<= self.event_bits
        key += event
        # Nearly in order already, which the stable sort makes use of.
        key.sort(kind="stable")
        np.bitwise_and(key, (1 << self.event_bits) - 1, out=event)
        return key, event, rng.standard_normal(len(key))

    def day(self, key):
        return ((key >> self.event_bits) & ((1 << DAY_BITS) - 1)) * (1 / DAY_PARTS)


class TableLosses:
    """Draws a table's losses in a chunk of occurrences."""

    def __init__(self, table, laws, betas, least):
        """`least`: losses at or below it are not needed; None: all are."""
        self.quantiles = RowQuantiles(table, laws, betas)
        self.row_of_event = np.full(table.events, -1)
        self.row_of_event[table.event] = np.arange(len(table.event))
        self.common, self.own = np.sqrt(table.common_share), np.sqrt(1 - table.common_share)
        self.threshold = None if least is None else self.quantiles.score_not_above(least)

    def draw(self, event, score, rng):
        """Places of the occurrences that may lose more than the least, and their losses."""
        row = self.row_of_event.take(event)
        hit = np.flatnonzero(row >= 0)
        row = row.take(hit)
        own = rng.standard_normal(len(hit))
        own *= self.own.take(row)
        both = self.common.take(row)
        both *= score.take(hit)
        both += own
        if self.threshold is not None:
            over = np.flatnonzero(both > self.threshold.take(row))
            hit, row, both = hit.take(over), row.take(over), both.take(over)
        return hit, self.quantiles.losses(row, both)


class Losses:
    """Occurrences with a loss, in order of state and day: columns that are filled from the front."""

    def __init__(self, room):
        self.count = 0
        self.state, self.event = np.empty(room, dtype=np.int32), np.empty(room, dtype=np.int32)
        self.day, self.loss = np.empty(room), np.empty(room)

    def append(self, state, event, day, loss):
        to = self.count + len(loss)
        if to > len(self.loss):
            raise SystemExit("more occurrences than were to be expected")
        part = slice(self.count, to)
        self.state[part], self.event[part], self.day[part], self.loss[part] = state, event, day, loss
        self.count = to

    def close(self):
        for name in ("state", "event", "day", "loss"):
            setattr(self, name, getattr(self, name)[: self.count])
        return self

    @classmethod
    def given(cls, occurrences, loss, reach):
        """Of occurrences drawn elsewhere those that lose more than `reach`."""
        over = np.flatnonzero(loss > reach)
        losses = cls(len(over))
        losses.append(*(column.take(over) for column in (occurrences.state, occurrences.event, occurrences.day, loss)))
        return losses


def draw_losses(case, rng, clock):
    """The programme's losses all, the book's where they pass its lowest attachment; a few thousand states at a time, so
    that their columns stay in the nearer caches."""
    drawing = Drawing(case)
    clock.phase("draw")
    reach = min(layer.attachment for layer in case.book_layers)
    tables, laws = (case.programme, case.book), (case.programme.laws(), case.book.laws())
    betas = BetaQuantiles(*(np.concatenate([law[shape][law[0] == BETA] for law in laws]) for shape in (1, 2)))
    draws = [TableLosses(table, law, betas, least) for table, law, least in zip(tables, laws, (None, reach))]
    expected = [case.states * case.rate[table.event].sum() for table in tables]
    # The room that is not used is never touched, and so takes no memory.
    programme, book = (Losses(int(n + 12 * math.sqrt(n) + 100)) for n in expected)
    clock.phase("losses")
    step = max(int(CHUNK / case.rate.sum()), 1)
    for first in range(0, case.states, step):
        key, event, score = drawing.draw(rng, first, min(first + step, case.states))
        clock.phase("draw")
        for losses, table, least in zip((programme, book), draws, (0, reach)):
            hit, loss = table.draw(event, score, rng)
            if table.threshold is not None:
                over = np.flatnonzero(loss > least)
                hit, loss = hit.take(over), loss.take(over)
            own = key.take(hit)
            losses.append(own >> drawing.state_bits, event.take(hit), drawing.day(own), loss)
        clock.phase("losses")
    return programme.close(), book.close()


class Years:
    """The states in which a layer pays, rising: Z and ρ, and the occurrences that made them."""

    def __init__(self, layer, state, loss, place):
        """`state` and `loss` of the occurrences at `place`, those over a lower attachment; `place` counts in another list."""
        over = np.flatnonzero(loss > layer.attachment)
        self.over = over
        self.place = over if place is None else place.take(over)
        self.all_states, self.all_losses = state.take(over), loss.take(over)
        recovery = self.all_losses - layer.attachment
        np.minimum(recovery, layer.limit, out=recovery)
        self.recovery = recovery
        n = len(over)
        new = np.empty(n, dtype=bool)
        new[:1] = True
        np.not_equal(self.all_states[1:], self.all_states[:-1], out=new[1:])
        starts = np.flatnonzero(new)
        counted = np.add.reduceat(recovery, starts) if n > 0 else np.zeros(0)
        self.counted_sums = float(counted.sum()), float(counted @ counted)
        self.sizes = np.diff(starts, append=n)
        self.state = self.all_states.take(starts)
        paid = np.minimum(np.maximum(counted - layer.annual_deductible, 0), layer.cover)
        self.pays = None
        if layer.annual_deductible > 0:
            self.pays = paid > 0
            self.state, paid = self.state[self.pays], paid[self.pays]
        self.counted, self.paid = counted, paid
        self.back = np.zeros(len(paid))
        if len(layer.reinstatements) > 0:
            self.back = np.minimum(paid, layer.limit) * (layer.reinstatements[0] / layer.limit)
        # Few states use more than one limit.
        more = np.flatnonzero(paid > layer.limit) if len(layer.reinstatements) > 1 else np.zeros(0, dtype=np.intp)
        for k, price in list(enumerate(layer.reinstatements))[1:]:
            self.back[more] += price / layer.limit * np.minimum(np.maximum(paid[more] - k * layer.limit, 0), layer.limit)

    def by_event(self, priced, event, events):
        """A figure of the paying states shared among their events in proportion to what these recovered."""
        each = priced / self.counted if self.pays is None else np.zeros(len(self.counted))
        if self.pays is not None:
            each[self.pays] = priced / self.counted[self.pays]
        return np.bincount(event.take(self.place), np.repeat(each, self.sizes) * self.recovery, events)


def all_years(layers, state, loss):
    """Years of every layer; each looks only at the occurrences over the next lower attachment."""
    found = [None] * len(layers)
    place = None
    for index in sorted(range(len(layers)), key=lambda i: layers[i].attachment):
        years = found[index] = Years(layers[index], state, loss, place)
        state, loss, place = years.all_states, years.all_losses, years.place
    return found


def book_losses(case, losses):
    """The states in which the book costs or brings anything, and what, net of reinstatement premiums."""
    basis = case.basis
    total = np.zeros(case.states)
    for layer, year in zip(case.book_layers, all_years(case.book_layers, losses.state, losses.loss)):
        total[year.state] += layer.line * (year.paid * (1 + basis["lossAdjustment"]) - layer.premium * (1 - basis["taxes"]) * year.back)
    states = np.flatnonzero(total)
    return states, total.take(states)


class Utility:
    """Power utility with a straight line below the floor."""

    def __init__(self, gamma, floor):
        self.gamma, self.floor = gamma, floor

    def slope(self, k):
        return np.maximum(k, self.floor) ** -self.gamma

    def curve(self, k, slope, change):
        """u(k + change) − u(k) above the floor, without cancellation: k^(1 − γ) = k · u′(k)."""
        gain = change / k
        np.log1p(gain, out=gain)
        power = 1 - self.gamma
        if power == 0:
            return gain
        gain *= power
        np.expm1(gain, out=gain)
        gain *= k
        gain *= slope
        gain *= 1 / power
        return gain

    def gain_and_slope(self, k, slope, change):
        """u(k + change) − u(k) and u′(k + change), where slope = u′(k)."""
        end = k + change
        if len(end) == 0 or min(k.min(), end.min()) >= self.floor:
            gain = self.curve(k, slope, change)
            if self.gamma == 1:
                return gain, 1 / end
            # (k + change)^(1 − γ) = k^(1 − γ) + (1 − γ) · gain.
            after = k * slope
            after += (1 - self.gamma) * gain
            after /= end
            return gain, after
        start = np.maximum(k, self.floor)
        below = np.minimum(end, self.floor) - np.minimum(k, self.floor)
        return self.curve(start, slope, change - below) + below * self.floor**-self.gamma, self.slope(end)


class House:
    """The house in every state. Most states see no loss of the book and are alike: they are kept as one."""

    TERMS = 14

    def __init__(self, case, states, loss):
        basis = case.basis
        self.utility = utility = Utility(basis["riskAversion"], basis["floor"])
        self.states, self.hit, self.loss = case.states, states, loss
        self.free = common.loss_free_capital(case)
        self.free_slope = float(utility.slope(np.float64(self.free)))
        self.hit_k = self.free - loss / basis["capital"]
        self.hit_slope = utility.slope(self.hit_k)
        self.k, self.slope = np.full(case.states, self.free), np.full(case.states, self.free_slope)
        self.k[states], self.slope[states] = self.hit_k, self.hit_slope
        self.is_hit = np.zeros(case.states, dtype=bool)
        self.is_hit[states] = True
        unhit = case.states - len(states)
        self.unhit = unhit
        self.slope_sum = unhit * self.free_slope + float(self.hit_slope.sum())
        self.slope_squares = unhit * self.free_slope**2 + float(self.hit_slope @ self.hit_slope)
        self.discount = case.states / self.slope_sum / (1 + basis["risklessRate"])
        self.sure = self.discount * self.slope_sum / case.states
        away = self.hit_slope - self.free_slope
        off = self.slope_sum / case.states - self.free_slope
        scatter = max(float(away @ away) / case.states - off * off, 0)
        on_floor = float(self.hit_slope[self.hit_k <= utility.floor].sum()) + (unhit * self.free_slope if self.free <= utility.floor else 0)
        self.report = {
            "discount": self.discount,
            "sureValue": self.sure,
            "risklessRate": basis["risklessRate"],
            "largestSharpeRatio": math.sqrt(scatter) / (self.slope_sum / case.states),
            "floorShare": on_floor / self.slope_sum,
            "effectiveStates": self.slope_sum**2 / self.slope_squares,
            "netPremium": common.net_premium(case),
        }
        # The power series of a common change of capital holds where it is small beside capital; states near the floor stand apart.
        self.near_below = max(1.25 * utility.floor, 0.5)
        self.near = states[self.hit_k < self.near_below]
        far = self.hit_k >= self.near_below
        self.moments = self.moments_of(self.hit_k[far], self.hit_slope[far])

    def moments_of(self, k, slope):
        """Σ u′·k^(−j), and Σ u′²·k^(−j) for the first three j."""
        inverse, term = 1 / k, slope.copy()
        moments = np.empty(self.TERMS + 3)
        squares = slope * slope
        for j in range(self.TERMS):
            moments[j] = term.sum()
            term *= inverse
            if j < 3:
                moments[self.TERMS + j] = squares.sum()
                squares *= inverse
        return moments

    def idle(self, paying):
        """The states in which nothing is paid: `Idle`, which knows their gain from a common change of capital."""
        return Idle(self, paying)


class Idle:
    def __init__(self, house, paying):
        self.house = house
        hit = paying[house.is_hit.take(paying)]
        self.unhit = house.unhit - (len(paying) - len(hit))
        k = house.k.take(hit)
        far = k >= house.near_below
        self.moments = house.moments - house.moments_of(k[far], house.slope.take(hit)[far])
        self.near = np.setdiff1d(house.near, paying, assume_unique=True)
        self.paying = paying

    def gain(self, c):
        """Σ [u(k + c) − u(k)], Σ u′(k + c), Σ u″(k + c) and Σ [u(k + c) − u(k)]² over the idle states."""
        house, gamma = self.house, self.house.utility.gamma
        ratio, remainder = abs(c) / house.near_below, 1.0
        for j in range(house.TERMS):
            remainder *= (gamma + j) / (j + 1) * ratio
        if not (ratio < 0.2 and remainder < 1e-15):
            idle = np.ones(house.states, dtype=bool)
            idle[self.paying] = False
            return self.exact(np.flatnonzero(idle), c)
        gain = slope = bend = 0.0
        factor = 1.0
        for j in range(house.TERMS):
            term = factor * self.moments[j]
            slope += term
            gain += term * c / (j + 1)
            factor *= -(gamma + j) / (j + 1)
            if j + 1 < house.TERMS:
                bend += (j + 1) * factor * self.moments[j + 1]
            factor *= c
        zeroth, first, second = self.moments[house.TERMS :]
        squares = c * c * (zeroth - gamma * c * first + (gamma * gamma / 4 + gamma * (gamma + 1) / 3) * c * c * second)
        unhit_gain, unhit_slope = house.utility.gain_and_slope(np.array([house.free]), np.array([house.free_slope]), np.array([c]))
        near = self.exact(self.near, c)
        g, s = float(unhit_gain[0]), float(unhit_slope[0])
        b = -gamma * s / (house.free + c) if house.free + c > house.utility.floor else 0.0
        return gain + self.unhit * g + near[0], slope + self.unhit * s + near[1], bend + self.unhit * b + near[2], squares + self.unhit * g * g + near[3]

    def exact(self, states, c):
        if len(states) == 0:
            return 0.0, 0.0, 0.0, 0.0
        utility, k = self.house.utility, self.house.k.take(states)
        gain, slope = utility.gain_and_slope(k, self.house.slope.take(states), np.full(len(states), c))
        end = k + c
        bend = np.where(end > utility.floor, -utility.gamma * slope / end, 0)
        return float(gain.sum()), float(slope.sum()), float(bend.sum()), float(gain @ gain)


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
