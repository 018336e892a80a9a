"""The temperature response against values printed elsewhere.

Sources
-------
Response: reference page of the function ``T_lim`` of the R package macrogrow,
http://drtreimer.com/macrogrow/reference/T_lim.html, which prints the model of Rosso, Lobry and Flandrois (1993) for
cardinal temperatures 5, 20 and 30 °C at each whole degree from 1 to 30.
Growth: Soylu, Boztok and Esiyok (2016), Acta Hort. 1123:207-214, mean of 28 strains of Pleurotus eryngii: 0.90, 2.84,
3.35 and 2.39 mm a day at 15, 20, 25 and 30 °C.
Optimum: the same species grows best at 24 to 30 °C (Zagrean et al., plates at 18, 24 and 30 °C) and at 25 °C (Zervakis
et al. 2001, Folia Microbiol. 46:231-234).
"""

from __future__ import annotations

import numpy as np
import pytest
from scipy.optimize import least_squares

from models.growth import temperature_response
from scheduler.folder.presets import presets

PRINTED = (
    0.00000000, 0.00000000, 0.00000000, 0.00000000, 0.00000000, 0.02000000,
    0.07215686, 0.14666667, 0.23578947, 0.33333333, 0.43428571, 0.53454545,
    0.63072464, 0.72000000, 0.80000000, 0.86871795, 0.92444444, 0.96571429,
    0.99126437, 1.00000000, 0.99096774, 0.96333333, 0.91636364, 0.84941176,
    0.76190476, 0.65333333, 0.52324324, 0.37122807, 0.19692308, 0.00000000,
)  # fmt: skip


@pytest.mark.parametrize(("temp_c", "printed"), list(enumerate(PRINTED, start=1)))
def test_printed_response(temp_c: int, printed: float):
    assert temperature_response(float(temp_c), 5.0, 20.0, 30.0) == pytest.approx(printed, abs=5.1e-9)


def test_thirty_values_are_printed():
    assert len(PRINTED) == 30


ERYNGII = {15.0: 0.90, 20.0: 2.84, 25.0: 3.35, 30.0: 2.39}
"""Growth of Pleurotus eryngii by temperature [mm/d]."""


def growth(fastest: float, t_min_c: float, t_opt_c: float, t_max_c: float) -> np.ndarray:
    return np.array([fastest * temperature_response(temp, t_min_c, t_opt_c, t_max_c) for temp in ERYNGII])


def fitted(t_min_c: float) -> tuple[np.ndarray, float]:
    """Fastest growth, optimum and maximum for a given minimum by least squares, and the root mean square left."""

    def residuals(free: np.ndarray) -> np.ndarray:
        fastest, t_opt_c, above = free
        return growth(fastest, t_min_c, t_opt_c, t_opt_c + above) - np.array(list(ERYNGII.values()))

    found = least_squares(residuals, [3.4, 25.5, 7.0], bounds=([1.0, 23.0, 1.0], [6.0, 29.0, 10.0]))
    fastest, t_opt_c, above = found.x
    return np.array([fastest, t_opt_c, t_opt_c + above]), float(np.sqrt(np.mean(found.fun**2)))


def test_four_temperatures_are_met_by_four_parameters():
    """As many parameters as points: the curve passes through all, and the optimum lies where others saw it."""
    assert growth(3.367, 13.02, 24.24, 34.93) == pytest.approx(list(ERYNGII.values()), abs=0.01)


@pytest.mark.parametrize(
    ("t_min_c", "fastest", "t_opt_c", "t_max_c", "left"),
    [(8.0, 3.456, 25.33, 33.11, 0.18), (5.0, 3.498, 25.99, 32.18, 0.25)],
)
def test_fit_of_four_temperatures_with_a_given_minimum(t_min_c, fastest, t_opt_c, t_max_c, left):
    parameters, rms = fitted(t_min_c)
    assert parameters == pytest.approx([fastest, t_opt_c, t_max_c], abs=0.02)
    assert rms == pytest.approx(left, abs=0.01)
    assert 24 <= parameters[1] <= 30


def test_the_king_oyster_preset_is_that_fit():
    strain = presets()["king-oyster"].strain()
    parameters, _ = fitted(strain.t_min_c)
    assert [strain.t_opt_c, strain.t_max_c] == pytest.approx(list(parameters[1:]), abs=0.05)
