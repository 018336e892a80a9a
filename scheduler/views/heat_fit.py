"""How the fit of a logged run looks."""

from __future__ import annotations

from typing import Any

from rich.console import Console

from models.thermal.fit import Estimate
from scheduler.heating.fitted import FitAnswer
from scheduler.views.chart import Series, draw
from scheduler.views.heat import SAFETY, question_document
from scheduler.views.screen import Screen

NAMES = {
    "conductivity_w_m_k": "conductivity of the substrate",
    "surface_w_m2_k": "steam to bag surface",
    "loss_w_per_k": "loss of the vessel",
}
APART = {"diffusivity": "conductivity", "surface": "surface coefficient", "loss": "vessel loss"}


def fit_document(answer: FitAnswer, *, written: bool) -> dict[str, Any]:
    """The fit as one JSON document, ``bagweek/heat/1`` with ``fit``."""
    fit, log = answer.fit, answer.log
    return {
        **question_document(answer.question),
        "fit": {
            "rows": len(log.minutes),
            "power_logged": log.kw is not None,
            "power_blocks": fit.power_blocks,
            "rms_k": round(fit.rms_k, 3),
            "worst_k": round(fit.worst_k, 3),
            "before_rms_k": round(fit.before_rms_k, 3),
            "estimates": [
                {"key": ".".join(answer.place(one)), "unit": one.unit, "before": round(one.before, 6),
                 "value": round(one.value, 6), "low": round(one.low, 6), "high": round(one.high, 6),
                 "determined": one.determined}
                for one in fit.estimates
            ],
            "not_told_apart": [[APART[name] for name in pair] for pair in fit.not_told_apart],
            "lines": [{"key": ".".join(place), "value": value} for place, value in answer.lines()],
            "written": written,
        },
        "curve": [
            {"minutes": minutes, "steam_c": steam, "core_c": core, "modelled_core_c": round(modelled, 2)}
            for minutes, steam, core, modelled in zip(log.minutes, log.steam_c, log.core_c, fit.core_c, strict=True)
        ],
        "cautions": list(SAFETY[-1:]),
    }  # fmt: skip


def show_fit(console: Console, answer: FitAnswer, *, written: bool) -> None:
    """Print a fit: what the log gives, how well it agrees, what it cannot tell, and the lines for the farm file."""
    screen, fit, log = Screen(console), answer.fit, answer.log
    question = answer.question
    screen.wrapped(
        f"{question.farm.site.name}: a logged run of {question.load_words} in {question.steriliser.code}", style="bold"
    )
    screen.wrapped(
        f"{len(log.minutes)} rows from minute {log.minutes[0]:g} to {log.minutes[-1]:g},"
        + (" power logged." if log.kw is not None else " power not logged: taken to be full while steam is short.")
    )
    screen.heading("What the log gives")
    screen.line(f"{'':<37}{'farm file':>10}{'the log':>10}{'95 % range':>20}", "dim")
    for one in fit.estimates:
        _estimate(screen, one)
    screen.line()
    screen.line(f"{'modelled less measured core':<34}{fit.rms_k:.2f} K root mean square, {fit.worst_k:.2f} K at most")
    screen.line(f"{'with the farm file as it is':<34}{fit.before_rms_k:.2f} K")
    for note in _notes(answer):
        screen.wrapped(note, "- ")
    screen.heading("Measured and modelled core")
    times = [minutes / 60 for minutes in log.minutes]
    draw(
        screen,
        (
            Series("steam, logged", times, log.steam_c, ("·", ".")),
            Series("core, modelled", times, fit.core_c, ("─", "-")),
            Series("core, logged", times, log.core_c, ("●", "o")),
        ),
        unit="°C",
    )
    _lines(screen, answer, written=written)
    screen.line()
    screen.wrapped("An estimate from one run: no safety control and no validated sterilisation record.")


def _estimate(screen: Screen, one: Estimate) -> None:
    name = f"{NAMES[one.name]}, {one.unit}"
    if one.determined:
        span = f"{one.low:.3g} to {one.high:.3g}"
        screen.line(f"{name:<37}{one.before:>10.3g}{one.value:>10.3g}{span:>20}")
    else:
        screen.line(f"{name:<37}{one.before:>10.3g}{'kept':>10}{'not determined':>20}")


def _notes(answer: FitAnswer) -> list[str]:
    fit, notes = answer.fit, []
    for first, second in fit.not_told_apart:
        notes.append(
            f"This log cannot tell {APART[first]} and {APART[second]} apart: one was kept, and the range of the other"
            " holds for it as kept. More rows while the core warms fastest would help."
        )
    loss = next(one for one in fit.estimates if one.name == "loss_w_per_k")
    if not loss.determined and answer.log.kw is None:
        notes.append("Vessel loss needs a kw column: the meter's mean since the row before, through the hold.")
    if fit.rms_k > 2:
        notes.append("More than 2 K off: look at the place of the probe, the size of the bag and the number of bags.")
    return notes


def _lines(screen: Screen, answer: FitAnswer, *, written: bool) -> None:
    lines = answer.lines()
    if not lines:
        screen.heading("Nothing for farm.toml: the log determines none of the three")
        return
    screen.heading("Written into farm.toml" if written else "Lines for farm.toml (--write puts them there)")
    last = ""
    for (section, code, key), value in lines:
        head = f'[[{section}]]  code = "{code}"'
        if head != last:
            screen.line(head)
            last = head
        screen.line(f"  {key} = {value:g}")
