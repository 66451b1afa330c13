"""A repeated calc on its page: figure, a row for each run, what is marked in words."""

from __future__ import annotations

import re

from calcgen.site.search import entries
from tests.site.helpers import package, pages

VARIED = """\
# Choice

```inputs
profile = "IPE 240" | as drawn
L = 6 m | span
```
```section main
shape = rolled(profile)
```
```working
M_Ed = 8 kN/m*L^2/8
below = sqrt(7 m - L)
M_Ed <= main.W_pl_y*235 MPa | bending
```
```vary
L = 3 steps from 6 m to 8 m | how <wide> | [DWG p. 2]
show M_Ed
```
```vary
profile over "IPE 1?0"
show M_Ed, main.h
```
"""


def block(name: str, text: str = VARIED) -> str:
    page = pages(package(text))["C-1.html"]
    return page.split(f'id="{name}" aria-label=')[1].split("</section>")[0]


def rows(text: str) -> list[list[str]]:
    """Return the cells of each run without their marks."""
    table = text.split('class="lookup runs"')[1].split("<tbody>")[1]
    cells = (re.findall(r"<t[hd][^>]*>(.*?)</t[hd]>", row, re.DOTALL) for row in table.split("<tr>")[1:])
    return [[re.sub(r"<[^>]*>", "", cell).strip() for cell in row] for row in cells]


def test_steps_stand_in_a_table_with_their_checks() -> None:
    text = block("vary-L")
    assert re.findall(r'<th scope="col">([^<]*)</th>', text)[-5:] == [
        "L, m",
        "M_Ed, kN·m",
        "every check",
        "governing check",
        "remark",
    ]
    assert rows(text) == [
        ["6.000", "36.00", "satisfied", "bending 0.418", "present value"],
        ["7.000", "49.00", "satisfied", "bending 0.569", ""],
        ["8.000", "—", "", "", "in error: the root of a negative value"],
    ]


def test_the_lightest_section_is_marked_in_words() -> None:
    text = block("vary-profile")
    found = {row[0]: row for row in rows(text)}
    assert list(found) == ["IPE 100", "IPE 120", "IPE 140", "IPE 160", "IPE 180"]
    assert found["IPE 160"][4] == "exceeded"
    assert found["IPE 180"][1:5] == ["18.80", "36.00", "180.0", "satisfied"]
    assert found["IPE 180"][6] == "the lightest that satisfies every check"
    assert "The lightest of these sections that satisfies every check of this calc: IPE 180." in text


def test_it_is_said_where_no_section_satisfies_every_check() -> None:
    assert "None of these sections satisfies" in block("vary-profile", VARIED.replace("235", "23"))
    without = VARIED.replace("M_Ed <= main.W_pl_y*235 MPa | bending\n", "")
    assert "this calc has no checks" in block("vary-profile", without)
    assert "every check</th>" not in block("vary-profile", without)


def test_lines_stand_as_typed_with_their_citations() -> None:
    text = block("vary-L")
    assert "<code>L = 3 steps from 6 m to 8 m</code>" in text
    assert "how &lt;wide&gt;" in text
    assert '<a href="references.html#DWG">' in text
    whole = pages(package(VARIED))
    assert 'href="C-1.html#vary-L"' in whole["references.html"]


def test_a_repeated_calc_is_found_by_its_input_and_what_it_shows() -> None:
    found = [e for e in entries(package(VARIED)) if e.kind == "vary"]
    assert [(e.href, e.heading) for e in found] == [
        ("C-1.html#vary-L", "vary L"),
        ("C-1.html#vary-profile", "vary profile"),
    ]
    assert "M_Ed" in found[0].words
