"""Packages made of calcs given as text, for the tests of the site."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from html.parser import HTMLParser

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.display import Style
from calcgen.site.compose import compose
from calcgen.site.facts import (
    ChangeView,
    HistoryView,
    PackageInput,
    PreviousValue,
    ProjectFacts,
    ReferenceFacts,
)
from calcgen.site.figure import FigureSvg
from calcgen.site.render import render
from calcgen.text import SourceFile

STRINGER = """\
# Walkway stringer

```sheet
purpose    = Confirm the stringer
conclusion = It carries {M_Ed}
revision   = P2
```
```assumptions
A1 | The grating holds nothing sideways | to be confirmed: survey
A2 | Both trestles settle alike         | agreed at review
```
Between [trestles](F-02.md), see {M_Ed} and $\\sigma = M/W$.

```inputs
L     = 6.0 m    | span            | [DWG p. 3]
q_k   = 5.0 kPa  | imposed load    |
s     = 0.9 m    | spacing         | [DWG]
f_y   = 275 MPa  | yield strength  | EN 1993-1-1 Table 3.1
grade = "S275"   | steel grade     | [DWG]
```
```section main
shape = rolled("IPE 240")
```
```working
w              = 1.5*q_k        | design load
M_Ed           = w*s*L^2/8      | midspan moment     | statics
M_c_Rd [kN·m]  = main.W_pl_y*f_y | resistance
M_Ed <= M_c_Rd                  | bending at midspan | EN 1993-1-1 6.2.5
M_Ed <= 20 kN·m                 | a limit too low    | [DWG]
```
```beam stringer
span = L
section = main
E = 210 GPa
load Q uniform w*s
```
```stress midspan
section = main
M = M_Ed
limit = f_y | stress at midspan
```
"""

FED = """\
# Trestle

```inputs
R = stringer.R_1 of C-1 | reaction of the stringer
```
"""

FAULTY = """\
# In error

```inputs
a = 3 m  | length
b = 4 kN | force
```
```working
c = a + b | does not add
d = 2*c   | follows
e = 2*a   | stands
```
"""

DRAWN = FigureSvg(
    "IPE 240",
    "The outline with its dimensions",
    '<svg viewBox="0 0 90 90" role="img" style="max-width: 90px"><text y="50">zeroline</text></svg>',
    '<svg viewBox="0 0 50 90" role="img" style="max-width: 50px"><text y="50">zeroline</text></svg>',
)

CHANGED = HistoryView(
    "2026-12-01T09:30:00Z",
    "A. Mason",
    "heavier load",
    (ChangeView("C-1#q_k", "C-1 q_k", "input edited", "4.000 kPa", "5.000 kPa"),),
    "Entry 2",
)


def package(*texts: str, **more: object) -> PackageInput:
    """Return what a package of these calcs is made of; they are numbered C-1, C-2, …"""
    sources = (SourceFile(f"calcs/C-{n}.md", text) for n, text in enumerate(texts, start=1))
    setting = Setting("eurocode", Style(), builtin_catalogue(), frozenset({"DWG"}))
    whole = PackageInput(
        project=ProjectFacts("Heron <Lock>", "eurocode", "HL-7", originator="A. Mason"),
        calcs=evaluate_all([calc_from(source) for source in sources], setting),
        references={"DWG": ReferenceFacts("General arrangement", "HL/201", "C")},
        figures={("C-1", "main"): (DRAWN,)},
        conventions=(replace(DRAWN, title="Axes and signs"),),
        previous={"C-1#q_k": PreviousValue("4.000 kPa", "at P1")},
        history=(CHANGED,),
        version="9.9.9",
    )
    return replace(whole, **more)  # type: ignore[arg-type]


def pages(whole: PackageInput) -> Mapping[str, str]:
    """Return the text of each page of a package by its path."""
    files = render(compose(whole))
    return {path: data.decode() for path, data in files.items() if path.endswith(".html")}


class Outline(HTMLParser):
    """Reads a page: its ids, its links, its headings; complains about tags that do not match."""

    VOID = frozenset({"meta", "link", "input", "br", "img", "col", "hr", "wbr"})

    def __init__(self, text: str) -> None:
        super().__init__(convert_charrefs=True)
        self.ids: list[str] = []
        self.links: list[str] = []
        self.headings: list[int] = []
        self.words: list[str] = []
        self._open: list[str] = []
        self.feed(text)
        self.close()
        assert self._open == []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        given = dict(attrs)
        if given.get("id"):
            self.ids.append(str(given["id"]))
        if tag == "a":
            self.links.append(str(given["href"]))
        if len(tag) == 2 and tag[0] == "h" and tag[1].isdigit():
            self.headings.append(int(tag[1]))
        if tag not in self.VOID:
            self._open.append(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.handle_starttag(tag, attrs)
        if tag not in self.VOID:
            self.handle_endtag(tag)

    def handle_endtag(self, tag: str) -> None:
        assert self._open.pop() == tag, f"</{tag}> closes something else"

    def handle_data(self, data: str) -> None:
        self.words.append(data)
