r"""Growth in one flight, for laws that no single cycle can stand for.

.. math:: \frac{da}{dF} = \frac1{n_f}\sum_i n_i\,
          \frac{da}{dN}\bigl(K_1\,\Delta S_i,\; R_i\bigr)

with :math:`K_1` the K of 1 MPa. Like the equivalent cycle of a power law it is exact
while the crack grows little in a block; the order of cycles has no part in it.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from repairs.analysis.growth.blocks import CycleTable
from repairs.analysis.growth.laws import Floats, GrowthLaw, StressCycle
from repairs.analysis.types import GrossStress, Reference

UNIT_CYCLE = StressCycle(GrossStress(1.0), 0.0)
"""The cycle that a flight's law is asked with: K of 1 MPa, from zero."""


@dataclass(frozen=True, eq=False)
class FlightLaw:
    """Growth per flight as a law of the K of 1 MPa.

    A cycle counts from zero where it goes below, as it does in the laws of Walker and
    Forman.
    """

    law: GrowthLaw
    table: CycleTable

    @property
    def reference(self) -> Reference:
        """Source of the law's constants."""
        return self.law.reference

    def rate(self, delta_k: float, ratio: float) -> float:
        """Return growth in a flight [mm] at the K of 1 MPa [sqrt(mm)]."""
        return float(self.rates(np.array([delta_k]), np.array([ratio]))[0])

    def rates(self, delta_k: Floats, ratio: Floats) -> Floats:
        """Return growth in a flight at each K of 1 MPa; the ratio is the flight's."""
        ratios = np.maximum(self.table.ratio, 0.0)
        spans = self.table.maximum * (1 - ratios)
        each = np.multiply.outer(np.asarray(delta_k, dtype=np.float64), spans)
        rates = self.law.rates(each, np.broadcast_to(ratios, each.shape))
        grown: Floats = rates @ self.table.counts / self.table.flights
        return grown
