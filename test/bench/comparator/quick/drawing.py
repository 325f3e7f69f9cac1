"""Occurrences and their losses, a few thousand states at a time."""
import math

import numpy as np

import common
from quick.alias import CHUNK, Alias, Counts
from quick.quantiles import BETA, BetaQuantiles, RowQuantiles

DAY_BITS = 24
DAY_PARTS = 1 << 15
"""Parts of a day that are told apart: 365 days of them fit into the bits."""


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
