"""A table on its page: as typed, values looked up marked, who looks them up, its reference."""

from __future__ import annotations

import re

from calcgen.site.search import entries
from tests.site.helpers import Outline, package, pages

TABLE = """\
# Factors

```table k_mod | EN 1995-1-1, [DWG Table 3.1]
        | medium | short
class <1> | 0.80   | 0.90
class 3 | 0.65   |
```
```table k_t
       | k
20 mm  | 1.0 kN
40 mm  | 8e2 N
```
The least is {k_t(40 mm)}.

```inputs
d = 35 mm | depth | [DWG]
```
```working
k = k_mod("class <1>", "medium")       | factor
F = 2*k*k_t(d)                       | force
F <= 2*k_t(30 mm)                    | at 30 mm
```
"""


def page() -> str:
    return pages(package(TABLE))["C-1.html"]


def test_the_table_stands_as_typed_with_what_is_looked_up_marked() -> None:
    text = page()
    assert re.findall(r'<th scope="col">([^<]*)</th>', text.split('class="lookup"')[1])[:2] == [
        "medium",
        "short",
    ]
    assert '<th scope="row">class &lt;1&gt;</th><td><strong>0.80</strong></td><td>0.90</td>' in text
    assert '<th scope="row">class 3</th><td>0.65</td><td></td>' in text
    assert "<td><strong>1.0\u00a0kN</strong></td>" in text
    assert "values in bold and underlined are looked up" in text


def test_the_reference_leads_to_the_register_and_back() -> None:
    whole = pages(package(TABLE))
    block = whole["C-1.html"].split('aria-label="table k_mod"')[1].split("</section>")[0]
    assert '<a href="references.html#DWG">HL/201 Table 3.1</a>' in block
    assert "C-1.html#k_mod" in Outline(whole["references.html"]).links
    assert "unreferenced" not in block
    assert "unreferenced" in whole["C-1.html"].split('aria-label="table k_t"')[1].split("</section>")[0]


def test_each_lookup_is_listed_with_its_user_and_the_heads_beside_it() -> None:
    text = page()
    rows = re.findall(r'<tr id="k_t-lookup-\d">(.*?)</tr>', text, re.DOTALL)
    said = [re.sub(r"<[^>]*>|\s+", " ", row.rsplit("</math>", 1)[1]) for row in rows]
    assert [" ".join(words.replace("#", "").split()) for words in said] == [
        "for text , line 13",
        "for F , line 20 between the rows 20 mm and 40 mm",
        "for at 30 mm , line 21 between the rows 20 mm and 40 mm",
    ]
    outline = Outline(text)
    assert len(outline.ids) == len(set(outline.ids))
    assert {link[1:] for link in outline.links if link.startswith("#")} <= set(outline.ids)


def test_a_line_says_what_was_looked_up_unless_it_is_that_alone() -> None:
    text = page()
    line = {name: text.split(f'<tr id="{name}"')[1].split("</tr>")[0] for name in ("k", "F")}
    assert "aside" not in line["k"]
    aside = line["F"].split('class="aside"')[1]
    assert ", between the rows 20\u00a0mm and 40\u00a0mm" in aside
    assert aside.count("<math") == 1


def test_a_table_is_found_by_its_name_and_its_heads() -> None:
    found = [e for e in entries(package(TABLE)) if e.kind == "table"]
    assert [(e.heading, e.href) for e in found] == [("k_mod", "C-1.html#k_mod"), ("k_t", "C-1.html#k_t")]
    assert "class 3" in found[0].words
    assert "EN 1995-1-1" in found[0].words
