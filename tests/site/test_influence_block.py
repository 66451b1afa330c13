"""Influence lines on a calc's page, in results.json, in the search and in the trail."""

from __future__ import annotations

import json
import re

from calcgen.quantities.display import Style
from calcgen.site.results_json import results_file
from calcgen.site.search import entries
from calcgen.trail.state import state_of
from tests.evaluation.helpers import evaluated
from tests.site.helpers import package, pages

TEXT = """\
# Bridge

```beam deck
span = 8 m
EI = 40000 kN·m²
load G uniform 3 kN/m
combination U = 1.35*G
influence η_M = M at 3 m | at the <splice> | as drawn
influence η_V = V at 3 m
```
"""


def block(text: str = TEXT) -> str:
    page = pages(package(text))["C-1.html"]
    return page.split('id="deck" aria-label=')[1].split("</section>")[0]


def plain(html: str) -> str:
    return " ".join(re.sub(r"<[^>]*>", "", html).replace("\u00a0", " ").split())


def test_the_line_is_shown_as_read_with_its_columns() -> None:
    text = plain(block())
    assert "influence ηM = M at 3 m" in text
    assert "at the &lt;splice&gt;" in text


def test_results_stand_in_a_table_with_their_addresses() -> None:
    html = block()
    assert 'id="deck.η_M_max"' in html
    assert "largest ordinate: M at 3 m for a unit load down" in plain(html)
    assert "load just right of 3 m" in plain(html)


def test_ordinates_stand_in_a_table_to_be_copied() -> None:
    table = block().split('class="lookup ordinates"')[1]
    heads = [plain(head) for head in re.findall(r'<th scope="col">(.*?)</th>', table)]
    assert heads[:3] == ["unit load at", "ηM, m", "ηV"]
    rows = [
        [plain(cell) for cell in re.findall(r"<t[hd][^>]*>(.*?)</t[hd]>", row)]
        for row in table.split("<tbody>")[1].split("</tbody>")[0].split("<tr>")[1:]
    ]
    assert rows[0] == ["0 m", "0", "0"]
    assert ["just left of 3 m", "1.875", "−0.3750"] in rows
    assert ["just right of 3 m", "1.875", "0.6250"] in rows
    assert len(rows) == 11 + 2


def test_they_are_in_the_results_file() -> None:
    beam = json.loads(results_file(package(TEXT)))["calcs"]["C-1"]["beams"]["deck"]
    assert beam["η_M_max"] == {"unit": "m", "value": 1.875}
    assert beam["x_η_M_max"] == {"unit": "m", "value": 3.0}
    assert beam["η_V_left(3 m)"] == {"unit": "", "value": -0.375}
    assert beam["U"]["M_max"]["unit"] == "kN·m"
    residuals = json.loads(results_file(package(TEXT)))["calcs"]["C-1"]["residuals"]
    assert {"of": "deck", "residual": 0.0, "tolerance": 1e-8, "what": "η_M"} in residuals


def test_they_are_found_by_name() -> None:
    found = [entry for entry in entries(package(TEXT)) if "η_M_max" in f"{entry}"]
    assert found


def test_a_changed_ordinate_is_seen_by_the_trail() -> None:
    def results(text: str) -> dict[str, object]:
        item = state_of(evaluated(text), {}, {}, Style())["C-1#deck"]
        held = item["results"]
        assert isinstance(held, dict)
        return held

    before = results(TEXT)
    after = results(
        TEXT.replace("EI = 40000 kN·m²", "EI = 40000 kN·m²\nsupport fixed at 0 m\nsupport pin at 8 m")
    )
    assert before["η_M(4 m)"] == [1.5, "m"]
    assert after["η_M(4 m)"] != before["η_M(4 m)"]


def test_a_beam_without_load_has_its_influence_lines_on_the_page() -> None:
    html = block(TEXT.replace("load G uniform 3 kN/m\ncombination U = 1.35*G\n", ""))
    assert 'id="deck.η_M_max"' in html
    assert "no load is written" in html
