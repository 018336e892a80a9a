"""The saved model says the same as the model that is searched: another reader finds the same best value."""

from __future__ import annotations

from pathlib import Path

import pytest
from ortools.linear_solver.python import model_builder

from models.calendar import Week
from scheduler.planning import SolveLimits, plan_weeks
from scheduler.planning.save_model import model_text
from tests.planning.tiny import friday, strain, tiny

START = Week.parse("2027-W03")


@pytest.mark.parametrize("changes", [{}, {"strain": [strain(loss_pct=10, ready_wait_days=3)]}])
def test_another_reader_finds_the_same_best(tmp_path: Path, changes: dict[str, object]) -> None:
    farm, orders = tiny(**changes), [friday(7.0), friday(4.0, price=8.0, part=False)]
    file = tmp_path / "model.mps"
    file.write_text(model_text(farm, orders, [], START, 4), encoding="ascii")
    model = model_builder.Model()
    assert model.import_from_mps_file(str(file))
    solver = model_builder.Solver("highs")
    assert solver.solve(model) == model_builder.SolveStatus.OPTIMAL
    plan = plan_weeks(farm, orders, [], START, 4, limits=SolveLimits(gap=1e-6, seconds=30))
    assert abs(solver.objective_value) <= plan.report.bound + 0.01
    assert solver.objective_value == pytest.approx(plan.report.bound, abs=0.5)


def test_names_tell_what_is_decided() -> None:
    text = model_text(tiny(), [friday(7.0)], [], START, 4)
    assert text.startswith("NAME bagweek\nOBJSENSE\n    MAX\n")
    assert text.endswith("ENDATA\n")
    for word in (" run_", " fill_0_", " inoculate_0_0_", " open_0_0_", "_places-shelf_", "_labour-pick_"):
        assert word in text, word
