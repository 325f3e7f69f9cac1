"""The house in every state, and what a change of its capital is worth to it."""
import math

import numpy as np

import common


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
        together = np.array([gain, slope, bend, squares]) + self.unhit * np.array([g, s, b, g * g]) + near
        return tuple(together.tolist())

    def exact(self, states, c):
        if len(states) == 0:
            return 0.0, 0.0, 0.0, 0.0
        utility, k = self.house.utility, self.house.k.take(states)
        gain, slope = utility.gain_and_slope(k, self.house.slope.take(states), np.full(len(states), c))
        end = k + c
        bend = np.where(end > utility.floor, -utility.gamma * slope / end, 0)
        return float(gain.sum()), float(slope.sum()), float(bend.sum()), float(gain @ gain)
