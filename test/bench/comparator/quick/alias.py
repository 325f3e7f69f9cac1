"""Draws from discrete laws."""
import math

import numpy as np
from scipy import special

CHUNK = 1 << 16
"""Occurrences worked on together, so that their columns stay in the nearer caches."""


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
