"""A case and occurrences as files: a folder of raw little-endian columns and case.json; README.md gives the names and the form."""
import dataclasses
import json

import numpy as np


@dataclasses.dataclass(frozen=True)
class Layer:
    """Terms of a layer for 100%; `premium` is that of a layer of the book."""

    limit: float
    attachment: float
    annual_deductible: float
    reinstatements: tuple
    line: float
    brokerage: float
    premium: float = 0.0

    @property
    def cover(self):
        """Most that the layer pays in a year."""
        return (len(self.reinstatements) + 1) * self.limit

    def scaled(self, factor):
        return dataclasses.replace(self, limit=self.limit * factor, attachment=self.attachment * factor)


def layer_of(terms):
    known = {"key", "limit", "attachment", "annualDeductible", "reinstatements", "line", "brokerage", "premium"}
    if not set(terms) <= known:
        raise SystemExit(f"terms that are not compared: {sorted(set(terms) - known)}")
    return Layer(
        terms["limit"], terms["attachment"], terms["annualDeductible"], tuple(terms["reinstatements"]),
        terms["line"], terms["brokerage"], terms.get("premium", 0.0),
    )


@dataclasses.dataclass(frozen=True)
class LossTable:
    """Rows of a loss table, with the law of each: 0 certain, 1 lognormal (p location, q scale), 2 beta (p, q its shapes)."""

    event: np.ndarray
    mean: np.ndarray
    sd: np.ndarray
    common_share: np.ndarray
    exposed: np.ndarray
    events: int

    def laws(self):
        mean, sd, exposed = self.mean, self.sd, self.exposed
        kind = np.where(sd == 0, 0, np.where(np.isnan(exposed), 1, 2))
        p, q = np.zeros_like(mean), np.zeros_like(mean)
        log = kind == 1
        variance = np.log1p((sd[log] / mean[log]) ** 2)
        p[log], q[log] = np.log(mean[log]) - variance / 2, np.sqrt(variance)
        beta = kind == 2
        m, s = mean[beta] / exposed[beta], sd[beta] / exposed[beta]
        total = m * (1 - m) / s**2 - 1
        p[beta], q[beta] = m * total, (1 - m) * total
        return kind, p, q


@dataclasses.dataclass(frozen=True)
class Case:
    states: int
    seed: int
    inception_day: float
    rate: np.ndarray
    season_day: np.ndarray
    peril: np.ndarray
    region: np.ndarray
    perils: list
    regions: list
    programme: LossTable
    layers: tuple
    book: LossTable
    book_layers: tuple
    basis: dict


def read_case(folder):
    terms = json.loads((folder / "case.json").read_text(encoding="utf-8"))
    column = lambda name, kind: np.fromfile(folder / name, dtype=np.dtype(kind).newbyteorder("<"))
    rate = column("catalogue.rate.f64", np.float64)

    def table(name):
        names = ("mean", "sd", "common_share", "exposed")
        return LossTable(column(f"{name}.event.i32", np.int32), *(column(f"{name}.{one}.f64", np.float64) for one in names), len(rate))

    seed = terms["seed"]
    return Case(
        int(terms["states"]), int(seed, 16) if isinstance(seed, str) else int(seed), terms["inceptionDay"],
        rate, column("catalogue.season_day.f64", np.float64),
        column("catalogue.peril.u16", np.uint16), column("catalogue.region.u16", np.uint16), terms["perils"], terms["regions"],
        table("programme"), tuple(map(layer_of, terms["programme"]["layers"])),
        table("book"), tuple(map(layer_of, terms["book"]["layers"])), terms["basis"],
    )


@dataclasses.dataclass
class Occurrences:
    """In order of state and day; losses are filled after drawing. Columns of one length."""

    state: np.ndarray
    event: np.ndarray
    day: np.ndarray
    score: np.ndarray = None
    programme_loss: np.ndarray = None
    book_loss: np.ndarray = None


def read_occurrences(folder):
    """Occurrences and losses that another program drew. States and events become NumPy's index type."""
    column = lambda name, kind: np.fromfile(folder / name, dtype=np.dtype(kind).newbyteorder("<"))
    return Occurrences(
        column("state.u32", np.uint32).astype(np.intp), column("event.u32", np.uint32).astype(np.intp), column("day.f64", np.float64),
        None, column("programme_loss.f64", np.float64), column("book_loss.f64", np.float64),
    )
