"""What layers pay in the states in which they pay."""
import numpy as np


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
