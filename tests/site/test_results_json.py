"""results.json: its structure is agreed, so it is compared with a file, value by value."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from calcgen.site.results_json import results_file
from tests.site.helpers import FAULTY, FED, STRINGER, package

GOLDEN = Path(__file__).parent / "golden" / "results.json"
WHOLE = package(STRINGER, FED, FAULTY)


def test_golden() -> None:
    assert json.loads(results_file(WHOLE)) == json.loads(GOLDEN.read_text(encoding="utf-8"))


def test_the_golden_values_are_right() -> None:
    """Hand calculation: M = 7.5·0.9·6²/8 kN·m, R = 7.5·0.9·6/2 kN; IPE 240 W_pl,y from EN 10365 tables."""
    calc = json.loads(GOLDEN.read_text(encoding="utf-8"))["calcs"]["C-1"]
    assert calc["values"]["M_Ed"]["value"] == 30.375
    assert calc["beams"]["stringer"]["R_1"] == {"value": 20.25, "unit": "kN"}
    assert calc["sections"]["main"]["W_pl_y"] == {"value": 366.6, "unit": "cm³"}
    assert calc["checks"][0]["utilisation"] == pytest.approx(30.375 / (0.3666 * 275), rel=1e-11)


def test_text_is_utf_8_sorted_and_ends_with_a_line_feed() -> None:
    data = results_file(WHOLE)
    assert "kN·m".encode() in data
    assert data.endswith(b"}\n")
    assert data == results_file(package(STRINGER, FED, FAULTY))


def test_a_beam_without_combinations_holds_its_results_itself() -> None:
    beams = json.loads(results_file(WHOLE))["calcs"]["C-1"]["beams"]
    assert "M_max" in beams["stringer"]


def test_what_has_no_value_is_left_out_or_null_never_nan() -> None:
    faulty = json.loads(results_file(WHOLE))["calcs"]["C-3"]
    assert faulty["standing"] == "in error"
    assert faulty["values"].keys() == {"e"}
    assert b"NaN" not in results_file(WHOLE)
    against_zero = package("# Z\n\n```working\n2 kN >= 0 kN\n```\n")
    assert json.loads(results_file(against_zero))["calcs"]["C-1"]["checks"][0]["utilisation"] is None


if __name__ == "__main__":  # python -m tests.site.test_results_json writes the file anew; read the difference
    GOLDEN.write_bytes(results_file(WHOLE))
