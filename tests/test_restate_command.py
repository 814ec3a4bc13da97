"""`rangebook restate`: what it prints, what it refuses, and that it records nothing."""

from __future__ import annotations

import hashlib
import json

import pytest
from facts import bad_restatements

from registry import open_library
from registry.cli.app import main
from registry.errors import BadInput


@pytest.fixture
def run(published_path, capsys, monkeypatch):
    """Run `restate` on the published shelf: exit code, stdout, stderr."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(published_path))
    monkeypatch.delenv("COLUMNS", raising=False)

    def call(*words: str) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as stopped:
            main(["restate", *words])
        captured = capsys.readouterr()
        return int(stopped.value.code or 0), captured.out, captured.err

    return call


WATER = """\
water-antoine-1-100 restated: vapor-pressure of water, liquid
  equation  ln p = A - B/(T + C)
  form      antoine-ln (Antoine, base e)
  units     T in K, value in kPa

    A =  16.5698929686341
    B =  3984.9228394883
    C = -39.724

  window     274.15 to 373.15 K (printed)
  scale      not-stated, as recorded; a temperature scale is never converted
  check      at 298.15 K: 3.1579292042 kPa; as recorded, at 25 degC: 23.686413553 mmHg
"""


def test_a_restatement_as_a_person_reads_it(run):
    """Equation, coefficients one below the other, units, window, scale, a value of both, source, and from what."""
    code, out, err = run("water-antoine-1-100", "--pressure", "kPa", "--temperature", "K", "--log", "ln")
    assert (code, err) == (0, "")
    assert out.startswith(WATER)
    rest = " ".join(out.removeprefix(WATER).split())
    assert rest.startswith("agreement the digits kept change the value by 8.5e-14 of itself at most; both in double")
    assert 'source Wikipedia "Vapour pressure of water"; two-window Antoine set' in rest
    assert rest.endswith(
        "restated from water-antoine-1-100, revision 1, accepted, which has antoine-log10, T in degC, value in mmHg; "
        "nothing was recorded"
    )


def test_an_exact_restatement_says_so(run):
    """Where no digit was rounded, the agreement is told as exact."""
    _, out, _ = run("ammonia-antoine-lange", "--pressure", "bar")
    assert "every coefficient is exact; both in double precision" in " ".join(out.split())


def test_what_is_restated_as_it_stands_agrees_to_the_last_bit(run):
    """In its own units a set gives its own values, and no difference of nothing is told."""
    _, out, _ = run("water-sr1-86", "--pressure", "MPa")
    assert "agree to the last bit" in " ".join(out.split())


def test_what_else_must_be_said(run):
    """The molar mass between two units, another form, and units that stay."""
    _, out, _ = run("argon-density-tegeler-1999", "--value", "mol/dm3")
    assert "molar mass  39.948 g/mol lies between the units" in out
    _, out, _ = run("lithium-alcock-1984", "--temperature", "degC")
    assert "remark" in out
    assert "August's equation counts from absolute zero" in out


def test_json_has_the_promised_shape(run):
    """One object: the numbers as text, what they come from, and how well they agree."""
    code, out, err = run("water-antoine-1-100", "--pressure", "kPa", "--temperature", "degF", "--json")
    assert (code, err) == (0, "")
    document = json.loads(out)
    assert list(document) == [
        "correlation", "revision", "standing", "compound", "property", "phase", "form", "equation", "coefficients",
        "temperature_unit", "value_unit", "window_min", "window_max", "window_unit", "temperature_scale", "remark",
        "molar_mass_g_per_mol", "check", "largest_difference_by_digits", "largest_difference_in_doubles", "recorded",
        "obtained", "source", "cautions", "position", "as_of",
    ]  # fmt: skip
    assert document["form"] == "antoine-log10"
    # 1.8 x 1730.63, and 1.8 x 233.426 less 32
    assert (document["coefficients"]["B"], document["coefficients"]["C"]) == ("3115.134", "388.1668")
    assert (document["window_min"], document["window_max"], document["window_unit"]) == ("33.8", "212", "degF")
    assert document["check"]["temperature"] == "77"
    assert document["recorded"]["coefficients"] == {"A": "8.07131", "B": "1730.63", "C": "233.426"}
    assert document["largest_difference_by_digits"] <= 1e-12
    assert document["largest_difference_in_doubles"] <= 1e-12


def test_what_is_not_accepted_or_from_memory_is_told(run, scenario_path):
    """Coefficients leave for another tool: what the record says of them goes along, as text and in JSON."""
    words = ("dunmarane-august-slip", "--log", "ln", "--library", str(scenario_path))
    _, out, _ = run(*words)
    assert out.rstrip().endswith("caution    The correlation is declined, not accepted.")
    _, out, _ = run(*words, "--json")
    assert json.loads(out)["cautions"] == ["The correlation is declined, not accepted."]
    _, out, _ = run("argon-density-tegeler-1999", "--value", "mol/dm3", "--json")
    found = json.loads(out)
    assert (found["obtained"], found["cautions"]) == ("memory", ["The coefficients are from memory."])
    _, out, _ = run("water-antoine-1-100", "--log", "ln")
    assert "caution" not in out


def test_no_line_is_wider_than_the_screen(run):
    """The equation of IF97 is broken like any other text."""
    _, out, _ = run("water-if97", "--temperature", "degR")
    assert all(len(line) <= 100 for line in out.splitlines())


@pytest.mark.parametrize(("words", "message"), [row[1:] for row in bad_restatements.RESTATEMENTS],
                         ids=[row[0] for row in bad_restatements.RESTATEMENTS])  # fmt: skip
def test_what_cannot_be_restated_is_told_with_the_reason(words, message, run, published_path):
    """Exit code 2, one message on stderr, nothing on stdout, the library as it was."""
    before = hashlib.sha256(published_path.read_bytes()).hexdigest()
    assert run(*words) == (2, "", message + "\n")
    code, out, _ = run(*words, "--json")
    assert code == 2
    assert json.loads(out)["error"]["message"] == message
    assert hashlib.sha256(published_path.read_bytes()).hexdigest() == before


def test_nothing_is_recorded(run, published_path):
    """A restatement leaves the file byte for byte as it was."""
    before = hashlib.sha256(published_path.read_bytes()).hexdigest()
    assert run("water-antoine-1-100", "--pressure", "kPa")[0] == 0
    assert hashlib.sha256(published_path.read_bytes()).hexdigest() == before


def test_a_past_position_restates_its_own_revision(own_path, capsys):
    """A revision that came later does not reach an edition or a change before it."""
    import dataclasses

    with open_library(own_path) as library:
        position = library.position
        entry = library.entry("water-antoine-1-100")
        other = dataclasses.replace(entry.record, coefficients={**entry.record.coefficients, "A": "8.07132"})
        library.revise(other, author="a test", reason="invented")
        library.review("water-antoine-1-100", accept=True, author="another", note="invented")
        assert library.restate("water-antoine-1-100", value_unit="kPa").revision == 2
        past = library.at(position).restate("water-antoine-1-100", value_unit="kPa")
        assert (past.revision, past.recorded.coefficients["A"]) == (1, "8.07131")
    with pytest.raises(SystemExit):
        main(["restate", "water-antoine-1-100", "--pressure", "kPa", "--as-of", str(position), "--library",
              str(own_path)])  # fmt: skip
    out = " ".join(capsys.readouterr().out.split())
    assert f"as of change {position}" in out
    assert "from water-antoine-1-100, revision 1, accepted" in out


def test_the_library_takes_the_molar_mass_of_the_compound(published):
    """Between a molar and a mass basis it is that of the record of the compound."""
    found = published.restate("benzene-enthalpy-majer-svoboda-1985", value_unit="J/g")
    mass = published.dossier("benzene").compound.record.grams_per_mole()
    assert found.molar_mass == repr(mass)
    assert found.standing == "accepted"
    with pytest.raises(BadInput, match="only a correlation can be restated"):
        published.restate("benzene", value_unit="J/g")
