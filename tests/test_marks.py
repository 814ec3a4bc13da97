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
    assert answer["scale_shift_K"] == pytest.approx(0.0256, abs=1e-4)
    assert (answer["temperature_uncertainty_K"], answer["temperature_coverage_factor"]) == (0.1, 2.0)
    parts = answer["uncertainty"]
    assert parts["temperature_percent"] == pytest.approx(0.357, abs=5e-4)
    assert parts["expanded_percent"] == pytest.approx((0.025**2 + parts["temperature_percent"] ** 2) ** 0.5, rel=1e-12)
    assert 0.0 < parts["rounding_percent"] < parts["rounding_bound_percent"] < 1e-9


def test_a_shift_is_the_number_on_the_scale_less_its90_wherever_it_stands(published_path, capsys):
    """Of a temperature read on IPTS-68 it is that of a correlation on IPTS-68: 0.013 K at 50 degC.

    CRC Handbook, table of the differences between the scales: t90 - t68 = -0.013.
    """
    asked = ("lookup", "ethanol", "50 degC (IPTS-68)", "--json", "--library", str(published_path))
    _, out = _run(capsys, *asked)
    (answer,) = json.loads(out)["answers"]
    shifts = {effect["scale"]: effect["shift_K"] for effect in answer["scale_effects"]}
    assert answer["scale_shift_K"] == pytest.approx(0.013, abs=5e-4)
    assert answer["scale_shift_K"] == pytest.approx(shifts["IPTS-68"], rel=1e-9)


def test_a_value_of_zero_is_told_with_all_that_stands_behind_it(published_path, capsys):
    """Where a percent of the value says nothing, words say so, and JSON has null."""
    asked = ("lookup", "hydrogen-normal", "14.025+/-1K", "-p", "melting-pressure", "--library", str(published_path))
    found, out = _run(capsys, *asked, "--why")
    plain = " ".join(out.split())
    assert found == 0
    assert "14.025+/-1K 14.025 K 0 Pa none infinite none infinite seen" in plain
    assert "leaves open what no percent can say here" in plain
    assert "by what +0.0056 K make (no percent: one of both values is zero or missing) were it IPTS-68" in plain
    assert "nan" not in plain
    assert "inf " not in plain
    found, out = _run(capsys, *asked, "--json")
    (answer,) = json.loads(out)["answers"]
    assert found == 0
    assert answer["scale_effects"][0]["percent"] is None
    found, out = _run(capsys, "lookup", "hydrogen-normal", "14.025K", *asked[3:])
    assert "0 Pa none infinite none seen" in " ".join(out.split())


def test_the_uncertainty_of_a_temperature_reaches_an_estimate(published_path, capsys):
    """An estimate states none of its own, but the slope carries that of the temperature: 3.12 % per kelvin."""
    asked = ("lookup", "acetylene", "250+/-0.1K", "--estimate", "ambrose-walton", "--library", str(published_path))
    _, out = _run(capsys, *asked)
    assert "kPa (ESTIMATE) none 0.312 % none +3.12 %" in " ".join(out.split())
    _, out = _run(capsys, *asked, "--json")
    (answer,) = json.loads(out)["answers"]
    assert answer["uncertainty"]["temperature_percent"] == pytest.approx(0.1 * answer["percent_per_kelvin"], rel=1e-12)


def test_a_scale_is_told_where_its_shift_is_nothing(published_path, capsys):
    """IPTS-68 and ITS-90 agree at 0 degC; what was asked for is still told."""
    place = str(published_path)
    _, out = _run(capsys, "lookup", "water", "0C (IPTS-68)", "--json", "--library", place)
    (answer,) = json.loads(out)["answers"]
    assert (answer["temperature_scale"], answer["scale_shift_K"]) == ("IPTS-68", 0.0)


def test_a_draft_is_not_called_accepted(scenario_path, capsys):
    """The sentence of the choice says that drafts were let in; a slope carries the mark in JSON too."""
    place = str(scenario_path)
    _, out = _run(capsys, "lookup", "brindovane", "330K", "--drafts", "--json", "--library", place)
    (answer,) = json.loads(out)["answers"]
    told = "It is the only correlation, drafts among them, that covers this temperature."
    assert answer["chosen_because"] == told
    _, out = _run(capsys, "slope", "brindovane", "330K", "--drafts", "--json", "--library", place)
    assert json.loads(out)["slopes"][0]["mark"] == "draft"
