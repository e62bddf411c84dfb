"""Weights that turn a simulation made with decay tables of Couplet into one made with a replica of them.

A replica is another set of numbers: drawn within the errors, another minimum of the fit, or another width model. The
weight of a decay is the fraction of its row in the replica over that in the table, at the parent's mass; a chain's weight
is the product over its decays. An antiparticle without rows of its own has the weights of its particle.
"""

import math

from couplet_widths import Damaged, ParentWidths

__all__ = ["ReplicaWeights", "chain_weights"]


class ReplicaWeights:
    """Weights of the decays of one parent, made ready once."""

    def __init__(self, tables, parent):
        """Raises Damaged for a row whose ratios are not one for each replica, finite and >= 0."""
        self.count = len(tables.replicas)
        self._name = parent.hadron.name
        self._mass = parent.hadron.mass
        self._widths = ParentWidths(tables, parent)
        self._ratios = {}
        for row in parent.rows:
            ratios = list(row.replica_ratios)
            if ratios and not (len(ratios) == self.count and all(0 <= ratio < math.inf for ratio in ratios)):
                raise Damaged(f"{row.id}: expected one finite ratio >= 0 for each of {self.count} replicas, got others")
            self._ratios[row.id] = ratios

    def of(self, row, mass=None):
        """The weights of a decay by a row, in the order of tables.replicas; mass in MeV, the nominal one by default.

        0 where a replica leaves no width. Raises ValueError for a row of another parent, and as ParentWidths does.
        """
        if row.id not in self._ratios:
            raise ValueError(f'expected a row of {self._name}, got "{row.id}"')
        widths = self._widths.widths(self._mass if mass is None else mass)
        total = sum(widths)
        sums = [0.0] * self.count
        for width, ratios in zip(widths, self._ratios.values()):
            for k in range(self.count):
                sums[k] += (ratios[k] if ratios else 1.0) * width
        own = self._ratios[row.id] or [1.0] * self.count
        return [ratio * total / s if s > 0 else 0.0 for ratio, s in zip(own, sums)]


def chain_weights(*decays):
    """The weights of a chain, replica by replica: the products of those of its decays."""
    return [math.prod(weights) for weights in zip(*decays, strict=True)]
