"""The temperature response against values printed elsewhere.

Source: reference page of the function ``T_lim`` of the R package macrogrow,
http://drtreimer.com/macrogrow/reference/T_lim.html, which prints the model of Rosso, Lobry and Flandrois (1993) for
cardinal temperatures 5, 20 and 30 °C at each whole degree from 1 to 30.
"""

from __future__ import annotations

import pytest

from models.growth import temperature_response

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
