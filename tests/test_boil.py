"""`boil` and `temperature_at`: what they answer, what they refuse and in which words."""

from __future__ import annotations

import json
import subprocess
import sys

import numpy as np
import pytest
from facts.bad_inversions import BAD, REFUSED

from registry import Refused, open_library
from registry.cli.app import main
from registry.errors import BadInput
from registry.inverse.refusals import InverseRefusal
from registry.opening import start_library
from registry.records import Correlation
from tests.benchmarks.invented import MARK, SOURCE, write_package


def _invent(compound: str, number: int, low: str, high: str, scale: str = "ITS-90", **coefficients: str) -> Correlation:
    """Invented: ln p is a polynomial in T."""
    return Correlation(
        key=f"{compound}-{number}", compound=compound, property="vapor-pressure", phase="liquid", form="polynomial-ln",
        coefficients=coefficients, temperature_unit="K", value_unit="Pa", window_min=low, window_max=high,
        window_unit="K", window_basis="printed", temperature_scale=scale, evidence="compiled", source=SOURCE.key,
        locator="invented", obtained="seen", note=MARK,
    )  # fmt: skip


PLANTED = {
    "gapane": (_invent("gapane", 1, "300", "350", a0="-5", a1="0.05"), _invent("gapane", 2, "400", "450", a0="-6",
                                                                               a1="0.05")),
    # ln p = 10 - ((T - 400)/50)^2
    "turnane": (_invent("turnane", 1, "300", "500", a0="-54", a1="0.32", a2="-0.0004"),),
    # IPTS-48 ends at 250 degC with 20.7 mK
    "scalane": (_invent("scalane", 1, "450", "580", scale="IPTS-48", a0="-5", a1="0.03"),),
}  # fmt: skip


@pytest.fixture(scope="session")
def planted_path(tmp_path_factory):
    """A library of invented compounds, each with what the shelves have not."""
    folder = tmp_path_factory.mktemp("planted")
    with start_library(folder / "planted.db", "none") as library:
        for name, correlations in PLANTED.items():
            package = write_package(folder / name, correlations)
            library.load(package, author="steward", reason="Invented; not data.", accept=True)
    return folder / "planted.db"


def _run(capsys, *words: str) -> tuple[int, str, str]:
    with pytest.raises(SystemExit) as stopped:
        main(list(words))
    captured = capsys.readouterr()
    return int(stopped.value.code or 0), captured.out, captured.err


@pytest.mark.parametrize(("shelf", "words", "reason", "message"), [row[1:] for row in REFUSED],
                         ids=[row[0] for row in REFUSED])  # fmt: skip
def test_a_refusal_says_why_with_both_sides(shelf, words, reason, message, request, capsys):
    """Reason and message exactly, exit code 3, nothing on stdout; with --json the same with its sides."""
    place = str(request.getfixturevalue(f"{shelf}_path"))
    code, out, err = _run(capsys, "boil", *words, "--library", place)
    assert (code, out, err) == (3, "", f"Refused ({reason}): {message}\n")
    code, out, err = _run(capsys, "boil", *words, "--json", "--library", place)
    assert (code, err) == (3, "")
    (refusal,) = json.loads(out)["refusals"]
    assert (refusal["reason"], refusal["explanation"]) == (reason, message)
    for side in refusal["sides"]:
        assert side["correlation"] in message
        assert f"{side['temperature_K']:.9g} K" in message


@pytest.mark.parametrize(("words", "message"), [row[1:] for row in BAD], ids=[row[0] for row in BAD])
def test_bad_input_is_said_exactly(words, message, published_path, capsys):
    """Exit code 2, the message exactly, nothing on stdout; with --json the message as an object."""
    code, out, err = _run(capsys, "boil", *words, "--library", str(published_path))
    assert (code, out, err) == (2, "", f"{message}\n")
    code, out, _ = _run(capsys, "boil", *words, "--json", "--library", str(published_path))
    assert code == 2
    assert json.loads(out)["error"]["message"] == message


def test_sides_of_a_seam_stand_at_the_seam(published):
    """In a jump upwards the sides are the values that lookup gives just below and above; none in between."""
    with pytest.raises(Refused) as caught:
        published.temperature_at("ethanol", 5790.0)
    refusal = caught.value.refusal
    assert isinstance(refusal, InverseRefusal)
    below, above = refusal.sides
    assert below.temperature == above.temperature == published.coverage("ethanol").seams[0].temperature
    assert below.value < refusal.value < above.value
    assert above.value == published.lookup("ethanol", 293.0).value
    assert below.value == pytest.approx(published.lookup("ethanol", 293.0 - 2e-9).value, rel=1e-9)


def test_sides_of_a_jump_down_have_the_pressure(scenario):
    """In a jump downwards both temperatures have the pressure, each by the correlation told."""
    with pytest.raises(Refused) as caught:
        scenario.temperature_at("tallowane", 160.5)
    below, above = caught.value.refusal.sides
    assert below.temperature < 233.15 < above.temperature
    for side in (below, above):
        answer = scenario.lookup("tallowane", side.temperature)
        assert answer.correlation.key == side.correlation
        assert answer.value == pytest.approx(160.5, rel=1e-12)


# answers


def test_an_answer_is_that_of_the_lookup_at_its_temperature(published):
    """What stands behind the answer is what stands behind the lookup at the temperature found."""
    answer = published.temperature_at("ammonia", 1e6)
    assert answer.value == 1e6
    looked = published.lookup("ammonia", answer.temperature)
    assert looked.value == pytest.approx(1e6, rel=1e-12)
    assert (answer.correlation, answer.chosen_because) == (looked.correlation, looked.chosen_because)
    assert answer.cautions == looked.cautions


def test_json_has_the_promised_shape(published_path, capsys):
    """Answers and refusals in the order asked; pressures in pascal, temperatures in the unit asked and in kelvin."""
    code, out, err = _run(
        capsys, "boil", "water", "1atm", "300bar", "10", "bar", "-u", "degC", "--json", "--library", str(published_path)
    )
    document = json.loads(out)
    assert (code, err) == (3, "")
    assert list(document) == ["compound", "property", "answers", "refusals", "position", "as_of"]
    assert [a["pressure_Pa"] for a in document["answers"]] == [101325.0, 1e6]
    first = document["answers"][0]
    assert first["temperature_K"] == pytest.approx(373.1243, abs=5e-5)
    assert (first["temperature"], first["temperature_unit"]) == (pytest.approx(99.9743, abs=5e-5), "degC")
    assert first["kelvin_per_percent"] == pytest.approx(1.0 / first["percent_per_kelvin"], rel=1e-12)
    # 0.025 % of the pressure, by the slope
    assert first["stated_uncertainty_K"] == pytest.approx(0.025 * first["kelvin_per_percent"], rel=1e-12)
    assert first["correlation"] == "water-if97"
    (refusal,) = document["refusals"]
    assert set(refusal) == {"pressure_Pa", "reason", "explanation", "sides"}
    assert refusal["pressure_Pa"] == 3e7
    assert refusal["sides"] == [{"correlation": "water-if97", "temperature_K": 647.096,
                                 "pressure_Pa": pytest.approx(22.064e6, rel=1e-6)}]  # fmt: skip


def test_text_tells_the_temperature_and_what_stands_behind_it(published_path, capsys):
    """One line a pressure, then the story of the correlation; a refusal goes to stderr."""
    place = str(published_path)
    code, out, err = _run(capsys, "boil", "water", "1atm", "14.7psi", "300bar", "--unit", "degF", "--library", place)
    plain = " ".join(out.split())
    assert code == 3
    assert plain.startswith("water: temperature at a vapour pressure asked is temperature stated per 1 % obtained")
    assert "1atm 101.325 kPa 211.9537 degF 0.007 K +0.28 K memory water-if97" in plain
    assert "14.7psi 101.352932 kPa 211.9676 degF" in plain
    assert "form IAPWS-IF97 region 4" in plain
    assert err.startswith("Refused (above-all): 30 MPa lies above")


def test_why_tells_every_candidate(published_path, capsys):
    """--why lists each candidate at the temperature found."""
    _, out, _ = _run(capsys, "boil", "water", "1atm", "--why", "--library", str(published_path))
    assert "Candidates at 1atm" in out
    assert "passed-over" in out
    assert "not-covering" in out


def test_a_draft_is_marked(scenario_path, capsys):
    """With --drafts a draft may answer, and the temperature says so."""
    words = ("boil", "brindovane", "20kPa", "--drafts", "--library", str(scenario_path))
    code, out, _ = _run(capsys, *words)
    assert code == 0
    assert " K (DRAFT) " in out
    _, out, _ = _run(capsys, *words, "--json")
    assert json.loads(out)["answers"][0]["mark"] == "draft"


def test_the_metastable_liquid_answers_only_when_asked(published_path, capsys):
    """100 Pa is below the triple point of water: refused, but with --metastable supercooled water has it."""
    words = ("boil", "water", "100Pa", "--json", "--library", str(published_path))
    code, _, _ = _run(capsys, *words)
    assert code == 3
    code, out, _ = _run(capsys, *words, "--metastable")
    (answer,) = json.loads(out)["answers"]
    assert code == 0
    assert 250.0 < answer["temperature_K"] < 255.0
    assert any("metastable" in caution for caution in answer["cautions"])


@pytest.mark.parametrize(
    ("words", "pascal"),
    [
        (("1atm",), [101325.0]),
        (("1", "atm", "760", "mmHg"), [101325.0, 101325.0144354]),
        (("101.325kPa", "0.101325 MPa"), [101325.0, 101325.0]),
        (("1", "barg", "--atmosphere", "1bar"), [200000.0]),
        (("-0.2barg", "--atmosphere", "1bar"), [80000.0]),
        (("\u22120.2 barg", "--atmosphere", "1bar"), [80000.0]),
    ],
)
def test_pressures_as_people_type_them(words, pascal, published_path, capsys):
    """A unit may be a word of its own; gauge pressures, also below the atmosphere, with the atmosphere stated."""
    code, out, _ = _run(capsys, "boil", "water", *words, "--json", "--library", str(published_path))
    assert code == 0
    assert [a["pressure_Pa"] for a in json.loads(out)["answers"]] == pascal


def test_pressures_come_from_stdin(published_path):
    """`-` reads one pressure a line, passes over empty lines and remarks, and names the line of a bad one."""
    code = "from registry.cli.entry import main; main()"
    command = [sys.executable, "-c", code, "boil", "water", "-", "--json", "--library", str(published_path)]
    done = subprocess.run(command, input="1 atm\n# remark\n\n2bar\n", capture_output=True, text=True, timeout=60)
    assert [a["pressure_Pa"] for a in json.loads(done.stdout)["answers"]] == [101325.0, 2e5]
    done = subprocess.run(command, input="1 atm\n5\n", capture_output=True, text=True, timeout=60)
    assert done.returncode == 2
    assert "stdin, line 2: '5' cannot be read: a pressure needs its unit" in done.stderr


# from Python


def test_arrays_give_what_scalars_give(published):
    """Each element of an array is what it is alone, bit for bit; refusals carry the same explanation."""
    pascal = np.array([[1e5, 1e6], [4e7, -1.0], [np.nan, 5.0]])
    batch = published.temperature_at("water", pascal)
    assert batch.temperatures.shape == batch.chosen.shape == pascal.shape
    assert batch.refused.tolist() == [[False, False], [True, True], [True, True]]
    assert [batch.temperatures[0, i] for i in (0, 1)] == [
        published.temperature_at("water", p).temperature for p in (1e5, 1e6)
    ]
    with pytest.raises(Refused) as caught:
        published.temperature_at("water", 4e7)
    assert batch.refusal((1, 0)) == caught.value.refusal or batch.refusal((1, 0)).explanation == str(caught.value)
    assert batch.refusal((1, 1)).explanation == "-1.0 Pa is no pressure; a finite number of pascal above 0 is allowed."
    assert [batch.refusal(i).reason for i in ((1, 0), (1, 1), (2, 0), (2, 1))] == [
        "above-all", "not-a-pressure", "not-a-pressure", "below-all",
    ]  # fmt: skip
    with pytest.raises(BadInput, match=r"The pressure at \(0, 0\) was answered: 372\.7559"):
        batch.refusal((0, 0))
    with pytest.raises(ValueError, match="read-only"):
        batch.temperatures[0, 0] = 0.0


@pytest.mark.parametrize(
    ("pressure", "settings", "message"),
    [
        (0.0, {}, "0.0 Pa is no pressure; a finite number of pascal above 0 is allowed."),
        (-5, {}, "-5.0 Pa is no pressure; a finite number of pascal above 0 is allowed."),
        (np.inf, {}, "inf Pa is no pressure; a finite number of pascal above 0 is allowed."),
        (np.nan, {"property": "melting-pressure"}, "nan Pa is no pressure; a finite number of pascal is allowed."),
        ("1atm", {}, "'1atm' is no pressure; numbers in pascal are allowed."),
        ([True], {}, "'[True]' is no pressure; numbers in pascal are allowed."),
        (1e5, {"property": "saturated-liquid-density"},
         "A temperature is found at a pressure: saturated-liquid-density is none. "
         "Ask for vapor-pressure, sublimation-pressure or melting-pressure."),
    ],
)  # fmt: skip
def test_bad_pressures_in_python(pressure, settings, message, published):
    """What is no pressure is bad input, said exactly."""
    with pytest.raises(BadInput) as caught:
        published.temperature_at("water", pressure, **settings)
    assert str(caught.value) == message


def test_a_melting_pressure_may_be_negative(published):
    """Below its triple point a melting curve has no pressures on the shelf: refused, not bad input."""
    with pytest.raises(Refused, match="lies below every melting-pressure of nitrogen"):
        published.temperature_at("nitrogen", -1e5, property="melting-pressure")


def test_a_temperature_follows_what_is_recorded(own_path):
    """After a withdrawal the next temperature is by what answers now."""
    with open_library(own_path) as library:
        before = library.temperature_at("water", 101325.0)
        library.withdraw("water-if97", author="reader", reason="To see what answers then.")
        library.review("water-if97", accept=True, author="steward", note="Withdrawn.")
        after = library.temperature_at("water", 101325.0)
        assert (before.correlation.key, after.correlation.key) == ("water-if97", "water-sr1-86")
        assert library.at(before.position).temperature_at("water", 101325.0).temperature == before.temperature
