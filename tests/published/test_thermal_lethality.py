"""Kill against published kinetics, measured survivors and closed forms."""

from __future__ import annotations

from math import log

import numpy as np
import pytest
from scipy.special import exp1

from models.thermal.lethality import ORGANISMS, Organism, log_reduction

F0 = Organism("F0", 1.0, 121.1, 10, "")
"""One reduction is one minute at 121.1 °C, z 10 °C: the reductions are F0 in minutes."""
BY_NAME = {organism.name: organism for organism in ORGANISMS}


def test_bigelow_of_bioinactivation() -> None:
    """Test suite of the R package bioinactivation: D 5 min at 90 °C, z 10 °C, 2 min at 100 °C: 4 reductions."""
    assert log_reduction([100.0] * 3, 1.0, Organism("x", 5, 90, 10, "")) == pytest.approx(4.0, abs=1e-4)


@pytest.mark.parametrize(
    ("start", "end", "minutes", "reference", "expected"),
    [(20, 100, 240, 121.1, 0.101136), (20, 100, 240, 100, 13.02883), (100, 121.1, 30, 121.1, 6.126871)],
)
def test_linear_ramp(start: float, end: float, minutes: int, reference: float, expected: float) -> None:
    """F = t z / (ln 10 dT) (L2 - L1), with L = 10^((T - T_ref) / z) and z 10 °C."""
    ramp = np.linspace(start, end, minutes + 1).tolist()
    lethal = [10 ** ((temp - reference) / 10) for temp in (start, end)]
    assert minutes * 10 / (log(10) * (end - start)) * (lethal[1] - lethal[0]) == pytest.approx(expected, rel=1e-5)
    assert log_reduction(ramp, 1.0, Organism("F", 1.0, reference, 10, "")) == pytest.approx(expected, rel=3e-3)


@pytest.mark.parametrize(("lag", "slope", "minutes", "expected"), [(1, 180, 600, 2.544455), (1.6, 240, 720, 2.408103)])
def test_exponential_approach(lag: float, slope: float, minutes: int, expected: float) -> None:
    """T = 100 - 80 j 10^(-t / f): F = L(100) f / ln 10 (E1(c g2) - E1(c g1)), c = ln 10 / z, g = 80 j 10^(-t / f)."""
    first, last = 80 * lag, 80 * lag * 10 ** (-minutes / slope)
    c = log(10) / 10
    closed = 10 ** ((100 - 121.1) / 10) * slope / log(10) * float(exp1(c * last) - exp1(c * first))
    assert closed == pytest.approx(expected, abs=2e-6)
    temps = [100 - 80 * lag * 10 ** (-minute / slope) for minute in range(minutes + 1)]
    assert log_reduction(temps, 1.0, F0) == pytest.approx(expected, rel=1e-4)


@pytest.mark.parametrize(
    ("name", "temp", "minutes"),
    [
        ("sawdust bacteria", 99.4, 11.3),
        ("sawdust bacteria", 101, 7.8),
        ("sawdust bacteria", 103, 6.0),
        ("sawdust yeasts", 99.4, 11.5),
        ("sawdust yeasts", 101, 8.2),
        ("sawdust yeasts", 103, 5.1),
    ],
)
def test_measured_reductions_in_sawdust(name: str, temp: float, minutes: float) -> None:
    """Abdul, Rozainee and Mutahharah, Waste Mgmt and Bioresource Technol. 1 (2011) 1-11: measured D [min]."""
    assert 1 / log_reduction([temp, temp], 1.0, BY_NAME[name]) == pytest.approx(minutes, rel=0.1)


@pytest.mark.parametrize(
    ("name", "log_d"), [("B. cereus spores, pooled", -1.38), ("B. cereus spores, resistant", 0.53)]
)
def test_spores_of_van_asselt_and_zwietering(name: str, log_d: float) -> None:
    """Van Asselt and Zwietering, Int. J. Food Microbiol. 107 (2006) 73-82: log10 of D at 120 °C [min]."""
    assert 1 / log_reduction([120.0] * 2, 1.0, BY_NAME[name]) == pytest.approx(10**log_d)


def test_survivors_of_a_measured_heating() -> None:
    """R package bioinactivation, data sets laterosporus_iso and laterosporus_dyna (Brevibacillus laterosporus).

    Isothermal survivors fit D 4.900 min at 120 °C, z 8.201 °C. That predicts what was measured while the temperature
    rose: reductions at 15.38 to 24.46 min within half a power of ten.
    """
    fitted = Organism("laterosporus", 4.900, 120, 8.201, "")
    times = [0, 7.69, 15.38, 16.15, 16.92, 17.69, 18.46]
    temps = [75, 95, 115, 117, 119, 121, 123]
    moments = np.array([18.46, 20.46, 22.46, 24.46])
    predicted = [
        log_reduction(np.interp(np.arange(0, moment + 1e-9, 0.01), times, temps).tolist(), 0.01, fitted)
        for moment in moments
    ]
    measured = [0.840, 1.771, 2.683, 3.883]
    assert predicted == pytest.approx([0.650, 1.597, 2.545, 3.492], abs=0.01)
    assert predicted == pytest.approx(measured, abs=0.5)
