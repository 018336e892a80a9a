"""What a logged run says about the farm file: a fit, and the lines that it offers."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path

from models.thermal.cycle import Surroundings, setting_of
from models.thermal.errors import ThermalError
from models.thermal.fit import Estimate, Fit, RunLog, fit_run
from scheduler.errors import UsageError
from scheduler.folder.edit import Place, set_values
from scheduler.heating.question import Question

SECTIONS = {"conductivity_w_m_k": "recipe", "surface_w_m2_k": "steriliser", "loss_w_per_k": "steriliser"}


@dataclass(frozen=True, slots=True)
class FitAnswer:
    """A fit with the question and the log it came from."""

    question: Question
    log: RunLog
    fit: Fit

    def lines(self) -> tuple[tuple[Place, float], ...]:
        """The places of the farm file that the fit would change, with their new values to three figures."""
        return tuple(
            (self.place(one), rounded(one.value)) for one in self.fit.estimates if one.determined and one.value > 0
        )

    def place(self, estimate: Estimate) -> Place:
        """Where an estimate stands in the farm file."""
        section = SECTIONS[estimate.name]
        recipe = self.question.load[0].recipe.code
        return (section, recipe if section == "recipe" else self.question.steriliser.code, estimate.name)


def rounded(value: float) -> float:
    """A value to three significant figures.

    Examples
    --------
    >>> rounded(0.34249), rounded(143.7)
    (0.342, 144.0)
    """
    return float(f"{value:.3g}")


def fit_answer(question: Question, log: RunLog) -> FitAnswer:
    """Fit a logged run.

    Raises
    ------
    UsageError
        The load is mixed, or the log does not hold a run that warms.
    """
    if len(question.load) != 1:
        raise UsageError("--fit: a load of one kind was expected, as a log has one core.")
    steriliser = question.steriliser
    try:
        setting = setting_of(
            Surroundings.of(question.farm), steriliser, question.programme, month=question.month,
            start_c=question.start_c,
        )  # fmt: skip
        fit = fit_run(log, setting, question.load[0], steriliser.surface_w_m2_k, steriliser.stack_factor)
    except ThermalError as error:
        raise UsageError(f"--fit: {error}") from error
    return FitAnswer(question, log, fit)


def write(answer: FitAnswer, folder: Path) -> None:
    """Put the lines of a fit into the farm file; its comments stay.

    Raises
    ------
    InputError
        The file cannot be changed, or would not be sound any more.
    """
    set_values(folder / "farm.toml", dict(answer.lines()))
