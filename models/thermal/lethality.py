"""Kill by moist heat: Bigelow's law over a temperature record."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Organism:
    """D [min] at a reference temperature [°C], z [°C], and where they were published."""

    name: str
    d_min: float
    at_c: float
    z_c: float
    source: str


ORGANISMS = (
    Organism(
        "sawdust bacteria", 11.3, 99.4, 13.3,
        "Abdul, Rozainee and Mutahharah, Waste Mgmt and Bioresource Technol. 1 (2011) 1-11",
    ),
    Organism(
        "sawdust yeasts", 11.5, 99.4, 10.2,
        "Abdul, Rozainee and Mutahharah, Waste Mgmt and Bioresource Technol. 1 (2011) 1-11",
    ),
    Organism(
        "B. cereus spores, pooled", 10**-1.38, 120.0, 12.8,
        "van Asselt and Zwietering, Int. J. Food Microbiol. 107 (2006) 73-82",
    ),
    Organism(
        "B. cereus spores, resistant", 10**0.53, 120.0, 12.1,
        "van Asselt and Zwietering, Int. J. Food Microbiol. 107 (2006) 73-82",
    ),
)  # fmt: skip


def log_reduction(temps_c: Sequence[float], step_min: float, organism: Organism) -> float:
    """Decimal reductions over a temperature record.

    Parameters
    ----------
    temps_c : sequence of float
        Temperatures at equal steps [°C].
    step_min : float
        Length of a step [min]; at most one minute, since the sum is by trapezoids.
    organism : Organism
        Kinetics.

    Returns
    -------
    float
        log10 (N0 / N) [-].

    Notes
    -----
    Integral of dt / D(T) with D(T) = D_ref 10^((T_ref - T) / z). A constant z over-credits temperatures below about
    105 °C (van Doornmalen and Kopinga, J. Appl. Microbiol. 107 (2009), doi 10.1111/j.1365-2672.2009.04290.x):
    indicative only.

    Examples
    --------
    The test suite of the R package bioinactivation: D 5 min at 90 °C, z 10 °C, 2 min at 100 °C make 4 reductions.

    >>> round(log_reduction([100.0, 100.0, 100.0], 1.0, Organism("x", 5.0, 90.0, 10.0, "")), 6)
    4.0
    """
    return equivalent_minutes(temps_c, step_min, organism.at_c, organism.z_c) / organism.d_min


def equivalent_minutes(temps_c: Sequence[float], step_min: float, at_c: float, z_c: float = 10.0) -> float:
    """Minutes at a reference temperature that weigh as much as a temperature record.

    Parameters
    ----------
    temps_c : sequence of float
        Temperatures at equal steps of at most one minute [°C].
    step_min : float
        Length of a step [min].
    at_c, z_c : float
        Reference temperature and z [°C]; 121.1 and 10 give what is called F0.

    Returns
    -------
    float
        Integral of 10^((T - T_ref) / z) dt [min]; indicative only below 105 °C, as for `log_reduction`.

    Examples
    --------
    An hour at 100 °C weighs as much as 0.466 minutes at 121.1 °C:

    >>> round(equivalent_minutes([100.0] * 61, 1.0, 121.1), 3)
    0.466
    """
    weights = [10 ** ((temp - at_c) / z_c) for temp in temps_c]
    return step_min * (sum(weights) - (weights[0] + weights[-1]) / 2) if weights else 0.0
