"""The command `slope`: what it prints, its JSON, its refusals."""

from __future__ import annotations

import json

import pytest
from facts import bad_slopes
from test_bad_input import empty_path, ids, run, small_path, snapshot  # noqa: F401 - two are fixtures

from registry.cli.app import main, protect_minus
from registry.opening import start_library

KEYS = {
    "temperature_K", "pressure", "slope_per_K", "unit", "pressure_Pa", "slope_Pa_per_K", "percent_per_kelvin",
    "enthalpy", "ideal_enthalpy", "energy_unit", "enthalpy_J_per_mol", "ideal_enthalpy_J_per_mol",
    "enthalpy_per_volume_J_per_m3", "method", "carried_from_K", "vapour", "condensed", "compressibility_change",
    "fixed_points", "correlated", "correlation", "revision", "standing", "mark", "cautions",
}  # fmt: skip

WATER = """\
water: slope of the vapour pressure, enthalpy of vaporization

  asked        is   p, kPa  dp/dT, kPa/K    per K  dH, kJ/mol  ideal gas      dZ  dH by
    25C  298.15 K  3.16975      0.188956  +5.96 %       44.00      44.06  0.9987  Clapeyron
   100C  373.15 K  101.418       3.61919  +3.57 %       40.76      41.31  0.9867  Clapeyron
   300C  573.15 K  8587.71       120.980  +1.41 %       25.96      38.48  0.6748  Watson

  water-if97, revision 1, accepted
    enthalpy   Clapeyron: dH = T dV dp/dT
    enthalpy   above 530.9 K, up to where the truncated virial series holds: Watson's relation,
               exponent 0.38
    vapour     second virial coefficient, Tsonopoulos; 781108 cm3/mol at 25C, B -959.05 cm3/mol
    liquid     recorded: water-density-sr1-86; 18.069 cm3/mol at 25C
    constants  water-critical-temperature-iapws, water-critical-pressure-iapws,
               water-acentric-factor-iapws
    caution    The coefficients are from memory; 26 independent values confirm them.
    caution    The window is from memory.

Check the source and measured data before decisions on relief, storage, transport or exposure; local
codes and licensed practice come first.
"""


@pytest.fixture
def ask(published_path, capsys, monkeypatch):
    """Run `slope` on the published shelf: exit code, stdout, stderr."""
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(published_path))
    monkeypatch.setenv("COLUMNS", "100")
    return lambda *words: run(capsys, "slope", *words)


def rows_of(out: str) -> list[list[str]]:
    """The cells of the table, its header left out."""
    table = out.split("\n\n")[1].splitlines()[1:]
    return [[cell for cell in line.split("  ") if cell] for line in table]


def test_the_table_reads_as_it_should(ask):
    """Three temperatures, two methods, one story."""
    assert ask("water", "25C", "100C", "300C") == (0, WATER, "")


def test_units_are_chosen(ask):
    """Benzene at its boiling point, 80.09 degC: 760 mmHg less 0.12 %, 393.3 J/g (CRC Handbook: 394 J/g, 7.34 kcal)."""
    _, out, _ = ask("benzene", "80.09C", "-u", "mmHg", "--energy-unit", "J/g")
    assert "p, mmHg  dp/dT, mmHg/K" in out
    row = rows_of(out)[0]
    assert float(row[2]) == pytest.approx(760.0 * (1.0 - 0.0012), abs=0.05)
    assert float(row[5]) == pytest.approx(394.0, rel=0.002)
    _, out, _ = ask("benzene", "80.09C", "--energy-unit", "kcal/mol")
    assert float(rows_of(out)[0][5]) == pytest.approx(7.34, abs=0.005)
    assert "compare    benzene-enthalpy-majer-svoboda-1985 gives 7.342 kcal/mol; dH lies" in out


def test_one_unit_serves_a_column(ask):
    """Ammonia from 71.6 kPa to 10 MPa: all in MPa, so that a column can be compared."""
    _, out, _ = ask("ammonia", "-40C", "400K")
    assert [row[0].strip() for row in rows_of(out)] == ["-40C", "400K"]
    assert "p, MPa  dp/dT, MPa/K" in out


def test_the_table_fits_eighty_columns(ask, monkeypatch):
    """Where Clapeyron's equation alone served, no column says so, and nothing wraps."""
    monkeypatch.setenv("COLUMNS", "80")
    _, out, _ = ask("water", "25C", "100C")
    assert max(map(len, out.splitlines())) <= 80
    assert len(rows_of(out)) == 2
    assert "dH by" not in out


def test_a_temperature_has_a_scale_and_an_uncertainty(ask):
    """100 degC of IPTS-68 is 99.974 degC; what is not carried is said."""
    code, out, _ = ask("water", "100 degC (IPTS-68)")
    assert code == 0
    assert float(rows_of(out)[0][1].split()[0]) == pytest.approx(373.1244, abs=1e-4)
    assert "uncertainty of the temperature" not in out
    _, out, _ = ask("water", "100+/-0.1C")
    assert "caution    The uncertainty of the temperature is not carried to slope and enthalpy.\n" in out
    _, out, _ = ask("water", "260+/-0.1K", "-p", "melting-pressure", "--phase", "ice Ih")
    assert "The uncertainty of the temperature is not carried to slope and enthalpy.\n" in out


def test_negative_temperatures_need_no_quotes():
    """-40C is no option of slope either."""
    assert protect_minus(["slope", "ammonia", "-40C", "-u", "bar"]) == ["slope", "ammonia", "\u221240C", "-u", "bar"]


def test_ground_that_is_lacking_is_told(ask):
    """What could not be had better, and why."""
    _, out, _ = ask("beryllium", "1600K")
    plain = " ".join(out.split())
    assert "vapour ideal gas (no critical temperature, critical pressure or acentric factor is recorded);" in plain
    assert "liquid neglected (no saturated liquid density is recorded, nor is any critical temperature," in plain
    assert "caution The vapour is taken as an ideal gas" in plain
    assert "constants" not in out
    _, out, _ = ask("carbon dioxide", "-78.5C", "-p", "sublimation-pressure")
    assert "solid      neglected (it is a solid)\n" in out


def test_a_melting_line_has_its_own_columns(ask):
    """Ice Ih: the slope falls, the ratio of enthalpy and volume is told, the enthalpy is not known."""
    code, out, err = ask("water", "260K", "-p", "melting-pressure", "--phase", "ice Ih")
    assert (code, err) == (0, "")
    assert "  dH/dV, J/cm3\n" in out
    assert [cell.strip() for cell in rows_of(out)[0]] == [
        "260K", "260 K", "138.268", "-8.65282", "-6.26 %", "-2249.7",
    ]  # fmt: skip
    assert "enthalpy  not stated in the record; dH/dV is T dp/dT" in out


def test_answers_and_refusals_stand_apart(ask):
    """The table on stdout, the refusal on stderr, exit code 3."""
    code, out, err = ask("water", "100C", "700K")
    assert code == 3
    assert len(rows_of(out)) == 1
    assert err.startswith("Refused (above-critical): 700 K")


def test_json_has_the_promised_shape(ask):
    """Every field, in SI and in the units asked for."""
    code, out, err = ask("water", "100C", "300C", "700K", "-u", "bar", "--energy-unit", "J/g", "--json")
    document = json.loads(out)
    assert (code, err) == (3, "")
    assert list(document) == ["compound", "property", "slopes", "refusals", "position", "as_of"]
    low, high = document["slopes"]
    assert set(low) == KEYS
    assert low["unit"] == "bar"
    assert low["pressure"] == pytest.approx(low["pressure_Pa"] / 1e5)
    assert low["slope_per_K"] == pytest.approx(low["slope_Pa_per_K"] / 1e5)
    assert low["enthalpy"] == pytest.approx(low["enthalpy_J_per_mol"] / 18.015268, rel=1e-5)
    assert low["enthalpy_J_per_mol"] < low["ideal_enthalpy_J_per_mol"]
    assert low["vapour"]["method"] == "second virial coefficient, Tsonopoulos"
    assert low["vapour"]["because"] is None
    assert low["carried_from_K"] is None
    assert high["method"] == "Watson from 530.9 K"
    assert high["carried_from_K"] == pytest.approx(530.94, abs=0.005)
    assert [refusal["reason"] for refusal in document["refusals"]] == ["above-critical"]


def test_json_says_how_a_temperature_was_read(ask):
    """Scale, shift and uncertainty stand beside a slope as beside a value."""
    _, out, _ = ask("water", "100+/-0.1C (k=2) (IPTS-68)", "--json")
    found = json.loads(out)["slopes"][0]
    assert set(found) - KEYS == {
        "temperature_scale", "scale_shift_K", "temperature_uncertainty_K", "temperature_coverage_factor",
    }  # fmt: skip
    assert found["temperature_scale"] == "IPTS-68"
    assert found["scale_shift_K"] == pytest.approx(0.0256, abs=1e-4)


def test_json_of_a_melting_line_has_nulls(ask):
    """What a melting line has not is null, not zero."""
    _, out, _ = ask("water", "260K", "-p", "melting-pressure", "--phase", "ice Ih", "--json")
    found = json.loads(out)["slopes"][0]
    assert set(found) == KEYS
    for name in ("enthalpy", "ideal_enthalpy", "method", "compressibility_change", "correlated"):
        assert found[name] is None
    assert set(found["vapour"].values()) == {None}
    assert found["enthalpy_per_volume_J_per_m3"] == pytest.approx(260.0 * found["slope_Pa_per_K"])


def test_a_draft_is_marked(tmp_path, capsys, monkeypatch):
    """A draft answers where it is asked for, and every such row says so."""
    start_library(tmp_path / "own.db", "scenario", "ann").close()
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(tmp_path / "own.db"))
    monkeypatch.setenv("RANGEBOOK_AUTHOR", "ann")
    code, _, _ = run(capsys, "revise", "brindovane-antoine-low", "--set", "note=once more", "--reason", "invented")
    assert code == 0
    code, out, _ = run(capsys, "slope", "brindovane", "300K", "--drafts")
    assert code == 0
    assert "Clapeyron (DRAFT)" in out
    _, out, _ = run(capsys, "slope", "brindovane", "300K")
    assert "DRAFT" not in out


def test_a_past_position_is_named(ask):
    """--as-of stands in the heading and in the JSON."""
    _, out, _ = ask("water", "100C", "--as-of", "1")
    assert out.startswith("water: slope of the vapour pressure, enthalpy of vaporization, as of change 1\n")
    _, out, _ = ask("water", "100C", "--as-of", "1", "--json")
    assert json.loads(out)["as_of"] == "change 1"


def test_help_has_an_example_that_runs(capsys, ask):
    """The example of the help is one that answers."""
    with pytest.raises(SystemExit):
        main(["slope", "--help"])
    assert "Example: rangebook slope water 100C" in capsys.readouterr().out
    assert ask("water", "100C")[0] == 0


# refusals and bad input


@pytest.mark.parametrize(("shelf", "arguments", "code", "message"), [r[1:] for r in bad_slopes.REQUESTS],
                         ids=ids(bad_slopes.REQUESTS))  # fmt: skip
def test_bad_slopes_are_answered_with_one_exact_message(shelf, arguments, code, message, request, capsys):
    """Exit code 2 or 3, the message on stderr, nothing on stdout, the library as it was."""
    path = request.getfixturevalue(f"{shelf}_path")
    before = snapshot(path.parent)
    assert run(capsys, *arguments, "--library", str(path)) == (code, "", message + "\n")
    assert snapshot(path.parent) == before


@pytest.mark.parametrize(("arguments", "message"), [r[1:] for r in bad_slopes.USAGE], ids=ids(bad_slopes.USAGE))
def test_bad_usage_ends_in_one_sentence(arguments, message, capsys):
    """Exit code 2; the last line on stderr says what is wrong, stdout is empty."""
    code, out, err = run(capsys, *arguments)
    assert (code, out, err.splitlines()[-1]) == (2, "", message)


def test_the_table_has_every_case_once():
    """Each case under a name of its own."""
    names = [*ids(bad_slopes.REQUESTS), *ids(bad_slopes.USAGE)]
    assert len(set(names)) == len(names)
