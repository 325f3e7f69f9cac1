"""Quantiles of many laws at normal scores, from one table that is made in a few hundredths of a second.

The logit of a beta quantile, less its mean and over its deviation or nearly so, is a smooth and bounded function of the two
shapes and of the score. So it is worked out by SciPy at Chebyshev nodes of the shapes and equal steps of the score, turned
into coefficients of a cubic B-spline in the score, and these are read off at every row's shapes by one product of matrices.
A row is then 33 numbers, and a loss is four of them, a cubic and an exponential. Laws on whose sample the table
errs by more than it should, and scores beyond it, are left to SciPy, one by one.

Sources: L. N. Trefethen, Approximation Theory and Approximation Practice (2013), for interpolation at Chebyshev nodes;
C. de Boor, A Practical Guide to Splines (1978), for B-splines at equal steps.
"""
import numpy as np
from scipy import special, stats

STEP = 0.3
RANGE = 4.5
KNOTS = round(2 * RANGE / STEP) + 1
COEFFICIENTS = KNOTS + 2
LARGEST_ERROR = 5e-5
"""Of a logit, and so of the quantile and of its complement, relative."""
CERTAIN, LOGNORMAL, BETA = range(3)


def logit_of_quantile(a, b, score):
    """Logit of a beta quantile at Φ(score), from the nearer tail."""
    tail = special.ndtr(-np.abs(score))
    low = score <= 0
    nearer = stats.beta.ppf(tail, np.where(low, a, b), np.where(low, b, a))
    logit = np.log(nearer) - np.log1p(-nearer)
    return np.where(low, logit, -logit)


def mean_and_deviation(a, b):
    """Of the logit of a beta variable; the deviation nearly, by ψ′(x) = 1/x² + ψ′(x + 1) ≈ 1/x² + 1/(x + ½): it only scales."""
    return special.psi(a) - special.psi(b), np.sqrt(1 / a**2 + 1 / (a + 0.5) + 1 / b**2 + 1 / (b + 0.5))


def spline_of_values():
    """Matrix from values at the knots to B-spline coefficients; the outermost two pieces are one cubic (not a knot)."""
    matrix = np.zeros((COEFFICIENTS, COEFFICIENTS))
    for i in range(KNOTS):
        matrix[i, i : i + 3] = 1 / 6, 4 / 6, 1 / 6
    matrix[-2, :5] = matrix[-1, -5:] = 1, -4, 6, -4, 1
    return np.linalg.inv(matrix)[:, :KNOTS]


def chebyshev(x, n):
    return np.cos(np.arange(n) * np.arccos(np.clip(x, -1, 1))[:, None])


class ShapeAxis:
    """Chebyshev nodes over 1/√(1 + shape), in which both small and large shapes come to rest."""

    def __init__(self, shapes, nodes):
        least, most = self.coordinate(shapes.max()), self.coordinate(shapes.min())
        self.middle, self.half = (most + least) / 2, max((most - least) / 2, 1e-12)
        self.count = nodes
        points = np.cos(np.pi * (np.arange(nodes) + 0.5) / nodes)
        self.shapes = 1 / (self.middle + self.half * points) ** 2 - 1
        self.to_coefficients = np.linalg.inv(chebyshev(points, nodes))

    @staticmethod
    def coordinate(shapes):
        return 1 / np.sqrt(1 + shapes)

    def basis(self, shapes):
        return chebyshev((self.coordinate(shapes) - self.middle) / self.half, self.count)


class LogitSurface:
    """B-spline coefficients of the logit for any shapes within a box."""

    def __init__(self, a, b, nodes):
        self.axes = ShapeAxis(a, nodes), ShapeAxis(b, nodes)
        scores = np.arange(KNOTS) * STEP - RANGE
        at_a, at_b = self.axes[0].shapes[:, None, None], self.axes[1].shapes[None, :, None]
        mean, deviation = mean_and_deviation(at_a, at_b)
        values = (logit_of_quantile(at_a, at_b, scores) - mean) / deviation @ spline_of_values().T
        by_a = np.tensordot(self.axes[0].to_coefficients, values, 1)
        self.surface = np.matmul(self.axes[1].to_coefficients, by_a).reshape(nodes * nodes, COEFFICIENTS)

    def coefficients(self, a, b):
        out = np.empty((len(a), COEFFICIENTS))
        for rows in (slice(low, low + 2048) for low in range(0, len(a), 2048)):
            both = self.axes[0].basis(a[rows])[:, :, None] * self.axes[1].basis(b[rows])[:, None, :]
            np.matmul(both.reshape(len(both), -1), self.surface, out=out[rows])
        mean, deviation = mean_and_deviation(a, b)
        out *= deviation[:, None]
        out += mean[:, None]
        return out


def spline_at(coefficients, place):
    """Value at `place`, in steps from the first knot, of the cubic B-spline of each row."""
    i = np.clip(np.floor(place), 0, KNOTS - 2).astype(np.intp)
    t = place - i
    c0, c1, c2, c3 = (coefficients[np.arange(len(i)), i + j] for j in range(4))
    return ((1 - t) ** 3 * c0 + (3 * t**3 - 6 * t**2 + 4) * c1 + (-3 * t**3 + 3 * t**2 + 3 * t + 1) * c2 + t**3 * c3) / 6


class BetaQuantiles:
    """B-spline coefficients of the logits of beta laws with shapes in a box, tried on a sample at random scores."""

    def __init__(self, a, b):
        rows = np.flatnonzero(self.fits(a, b))
        self.surface = None
        if len(rows) == 0:
            return
        a, b = a[rows], b[rows]
        rng = np.random.default_rng(1)
        sample = np.unique([*rng.integers(0, len(a), 400), a.argmin(), a.argmax(), b.argmin(), b.argmax()])
        score = rng.uniform(-RANGE, RANGE, len(sample))
        exact = logit_of_quantile(a[sample], b[sample], score)
        for nodes in (10, 12, 16, 24, 32):
            surface = LogitSurface(a, b, nodes)
            found = spline_at(surface.coefficients(a[sample], b[sample]), (score + RANGE) / STEP)
            if np.abs(found - exact).max() <= LARGEST_ERROR:
                self.surface = surface
                return

    @staticmethod
    def fits(a, b):
        # Small shapes bend sharply and large ones are SciPy's slowest; both are rare.
        return (np.minimum(a, b) >= 0.1) & (np.maximum(a, b) >= 0.5) & (np.maximum(a, b) <= 1e7)

    def coefficients(self, a, b):
        """Coefficients of rows, and which of them may be used."""
        coefficients = np.zeros((len(a), COEFFICIENTS))
        if self.surface is None:
            return coefficients, np.zeros(len(a), dtype=bool)
        fit = self.fits(a, b)
        coefficients[fit] = self.surface.coefficients(a[fit], b[fit])
        return coefficients, fit


class RowQuantiles:
    """Losses of a table's rows at normal scores: size / (offset + exp(−spline)), which is a beta's quantile at offset 1, a
    lognormal's at offset 0 with a straight spline, and certain with a spline so high that its exponential vanishes."""

    def __init__(self, table, laws, betas):
        """`laws` of the table; `betas` for shapes in whose box those of the table are."""
        kind, self.p, self.q = laws
        rows = len(kind)
        self.exposed = table.exposed
        self.coefficients = np.empty((rows, COEFFICIENTS))
        self.size, self.offset = table.mean.copy(), np.ones(rows)
        self.coefficients[kind == CERTAIN] = 800
        log, beta = kind == LOGNORMAL, np.flatnonzero(kind == BETA)
        steps = np.arange(-1, COEFFICIENTS - 1) * STEP - RANGE
        self.coefficients[log] = self.p[log, None] + self.q[log, None] * steps
        self.size[log], self.offset[log] = 1, 0
        self.coefficients[beta], fit = betas.coefficients(self.p[beta], self.q[beta])
        self.size[beta] = table.exposed[beta]
        self.beta, self.alone = kind == BETA, np.zeros(rows, dtype=bool)
        self.alone[beta[~fit]] = True
        self.any_alone = bool(self.alone.any())
        self.flat = self.coefficients.reshape(-1)

    def score_not_above(self, loss):
        """Of each row a score at and below which it cannot lose more than `loss`; −Infinity where none is known."""
        c = self.coefficients
        at_knots = self.size[:, None] / (self.offset[:, None] + np.exp(-(c[:, :-2] + 4 * c[:, 1:-1] + c[:, 2:]) / 6))
        # A thousandth less than the loss, so that the error of the table does not matter.
        below = (at_knots <= loss * 0.999).sum(axis=1)
        score = np.where(below > 0, (below - 1) * STEP - RANGE, -np.inf)
        score[self.alone] = -np.inf
        return score

    def losses(self, row, score):
        """Loss of each row at each score; consumes the scores."""
        place = score * (1 / STEP)
        place += RANGE / STEP
        i = place.astype(np.intp)
        np.maximum(i, 0, out=i)
        np.minimum(i, KNOTS - 2, out=i)
        t = place
        t -= i
        i += row * COEFFICIENTS
        flat = self.flat
        c0, c1, c2, c3 = flat.take(i), flat[1:].take(i), flat[2:].take(i), flat[3:].take(i)
        # c1 + ((c2 − c0)/2 + ((c0 + c2)/2 − c1 + (c3 − c0 + 3(c1 − c2))/6 · t) · t) · t + (c0 − 2·c1 + c2)/6
        c3 -= c0
        c0 += c2
        c2 -= c1
        c3 -= 3 * c2
        c3 *= 1 / 6
        c0 *= 0.5
        c0 -= c1
        rise = c2
        rise -= c0
        c1 += c0 * (1 / 3)
        c3 *= t
        c3 += c0
        c3 *= t
        c3 += rise
        c3 *= t
        c3 += c1
        np.negative(c3, out=c3)
        np.exp(c3, out=c3)
        c3 += self.offset.take(row)
        np.divide(self.size.take(row), c3, out=c3)
        far = np.flatnonzero(np.abs(score) > RANGE)
        if self.any_alone:
            far = np.union1d(far, np.flatnonzero(self.alone.take(row)))
        if len(far) > 0:
            far = far[self.beta[row[far]]]
            at, s = row[far], score[far]
            c3[far] = self.exposed[at] * special.expit(logit_of_quantile(self.p[at], self.q[at], s))
        return c3
