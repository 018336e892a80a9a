"""How fast mycelium grows at a temperature, as a share of its fastest."""

from __future__ import annotations


def temperature_response(temp_c: float, t_min_c: float, t_opt_c: float, t_max_c: float) -> float:
    """Growth rate at a temperature over the rate at the optimum.

    Parameters
    ----------
    temp_c : float
        Temperature of the substrate [°C].
    t_min_c, t_opt_c, t_max_c : float
        Temperatures below which nothing grows, of fastest growth, and above which nothing grows [°C].

    Returns
    -------
    float
        Relative growth rate, 0 to 1 [-].

    Raises
    ------
    ValueError
        The three are not in rising order, or the optimum does not lie above the middle of the other two, where the
        denominator has a zero inside the range of growth.

    Notes
    -----
    Cardinal temperature model with inflection [1]_. Between ``T_min`` and ``T_max``::

                             (T - T_max) (T - T_min)²
        γ(T) = ─────────────────────────────────────────────────────────────────────────────
               (T_opt - T_min) [(T_opt - T_min)(T - T_opt) - (T_opt - T_max)(T_opt + T_min - 2T)]

    and 0 elsewhere. The bracket is linear in T: (T_opt - T_min)(T_min + T_max - 2 T_opt) at T_min and
    -2 (T_max - T_opt)² at T_max, so it keeps one sign exactly when T_opt > (T_min + T_max) / 2.

    References
    ----------
    .. [1] L. Rosso, J. R. Lobry and J. P. Flandrois (1993), An unexpected correlation between cardinal temperatures
       of microbial growth highlighted by a new model, J. Theor. Biol. 162:447-463, doi:10.1006/jtbi.1993.1099.

    Examples
    --------
    The reference page of the R package macrogrow prints 0.8 at 15 °C for (5, 20, 30):

    >>> round(temperature_response(15.0, 5.0, 20.0, 30.0), 7)
    0.8
    """
    if not t_min_c < t_opt_c < t_max_c:
        raise ValueError(f"t_min_c < t_opt_c < t_max_c was expected; found {t_min_c:g}, {t_opt_c:g}, {t_max_c:g}")
    middle = (t_min_c + t_max_c) / 2
    if t_opt_c <= middle:
        raise ValueError(
            f"t_opt_c above the middle of t_min_c and t_max_c ({middle:g}) was expected,"
            f" else the growth curve has a pole; found {t_opt_c:g}"
        )
    if not t_min_c < temp_c < t_max_c:
        return 0.0
    rise, fall = t_opt_c - t_min_c, t_opt_c - t_max_c
    bracket = rise * (temp_c - t_opt_c) - fall * (t_opt_c + t_min_c - 2 * temp_c)
    return (temp_c - t_max_c) * (temp_c - t_min_c) ** 2 / (rise * bracket)
