"""Every mark that a value can carry, as text and in JSON, with its exit code."""

from __future__ import annotations

import json

import pytest
from facts.marks import MARKS

from registry.cli.app import main


def _run(capsys, *arguments: str) -> tuple[int, str]:
    with pytest.raises(SystemExit) as stopped:
        main(list(arguments))
    return int(stopped.value.code or 0), capsys.readouterr().out


@pytest.mark.parametrize(("shelf", "arguments", "code", "mark", "line", "beneath"), [row[1:] for row in MARKS],
                         ids=[row[0] for row in MARKS])  # fmt: skip
def test_a_value_carries_its_mark(shelf, arguments, code, mark, line, beneath, request, capsys):
    """The line of the value, what is said beneath it, the mark in JSON, and the exit code."""
    place = str(request.getfixturevalue(f"{shelf}_path"))
    found, out = _run(capsys, *arguments, "--library", place)
    plain = " ".join(out.split())
    assert found == code
    assert line in plain
    assert beneath in plain
    found, out = _run(capsys, *arguments, "--json", "--library", place)
    assert found == code
    assert json.loads(out)["answers"][0]["mark"] == mark


def test_json_says_what_stands_behind_a_mark(published_path, capsys):
    """An extrapolation names its distance and neighbours, an estimate its method and constants."""
    place = str(published_path)
    _, out = _run(capsys, "lookup", "ethanol", "210K", "--beyond", "10K", "--json", "--library", place)
    (answer,) = json.loads(out)["answers"]
    assert answer["distance_K"] == pytest.approx(6.15, abs=1e-9)
    assert answer["neighbours"] == []
    assert answer["uncertainty_percent"] is None
    _, out = _run(capsys, "lookup", "acetylene", "250K", "--estimate", "lee-kesler", "--json", "--library", place)
    (answer,) = json.loads(out)["answers"]
    assert answer["correlation"] is None
    assert answer["method"]["reference"] == "B. I. Lee, M. G. Kesler, AIChE J. 21, 510 (1975)"
    assert [i["quantity"] for i in answer["inputs"]] == ["critical-temperature", "critical-pressure", "acentric-factor"]


def test_json_says_how_a_temperature_was_read(published_path, capsys):
    """Scale, shift and uncertainty of the temperature stand in the answer, and the parts of the value's uncertainty."""
    place = str(published_path)
    _, out = _run(capsys, "lookup", "water", "100+/-0.1C (k=2) (IPTS-68)", "--json", "--library", place)
    (answer,) = json.loads(out)["answers"]
    assert answer["temperature_scale"] == "IPTS-68"
    assert answer["scale_shift_K"] == pytest.approx(-0.0256, abs=1e-4)
    assert (answer["temperature_uncertainty_K"], answer["temperature_coverage_factor"]) == (0.1, 2.0)
    parts = answer["uncertainty"]
    assert parts["temperature_percent"] == pytest.approx(0.357, abs=5e-4)
    assert parts["expanded_percent"] == pytest.approx((0.025**2 + parts["temperature_percent"] ** 2) ** 0.5, rel=1e-12)
    assert 0.0 < parts["rounding_percent"] < parts["rounding_bound_percent"] < 1e-9
