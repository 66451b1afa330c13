"""project.toml, references.toml and the files of a project."""

from __future__ import annotations

from pathlib import Path

import pytest

from calcgen.project import Project, load_project, project_from, references_from
from calcgen.text import SourceFile

MINIMAL = 'title = "Heron lock"\naxes = "eurocode"\n'


def project(text: str) -> tuple[Project | None, list[str]]:
    found, diagnostics = project_from(SourceFile("project.toml", text))
    return found, [f"{d.line}:{d.column} {d.code}" for d in diagnostics]


def test_what_is_not_written_has_its_default() -> None:
    found, diagnostics = project(MINIMAL)
    assert not diagnostics
    assert found == Project(title="Heron lock", axes="eurocode")
    assert found is not None
    assert (found.units, found.depth, found.digits, found.preferred_units) == ("SI", "down", 4, ())


def test_every_key() -> None:
    found, diagnostics = project(
        'title = "Mill loft"\naxes = "american"\nnumber = "P-7"\nclient = "M"\noriginator = "A. Mason"\n'
        'checker = "B. Wright"\nunits = "US"\ndepth = "up"\ndigits = 3\n'
        '[preferred_units]\nmoment = "kip-in"\n'
        'section_modulus = "mm^3"\n"line load" = "plf"\n'
    )
    assert not diagnostics
    assert found == Project(
        title="Mill loft",
        axes="american",
        number="P-7",
        client="M",
        originator="A. Mason",
        checker="B. Wright",
        units="US",
        depth="up",
        digits=3,
        preferred_units=(("line load", "plf"), ("moment", "kip-in"), ("section modulus", "mm³")),
    )


@pytest.mark.parametrize(
    ("text", "diagnostics"),
    [
        ("", ["1:1 key-missing", "1:1 key-missing"]),
        ('title = "x"', ["1:1 key-missing"]),
        (MINIMAL + 'orginator = "x"', ["3:1 unknown-key"]),
        ('title = ""\naxes = "eurocode"', ["1:1 wrong-value"]),
        ('title = 3\naxes = "eurocode"', ["1:1 wrong-value"]),
        ('title = "x"\naxes = "euro"', ["2:1 wrong-value"]),
        (MINIMAL + 'units = "imperial"', ["3:1 wrong-value"]),
        (MINIMAL + '  depth = "left"', ["3:3 wrong-value"]),
        (MINIMAL + "digits = 0", ["3:1 wrong-value"]),
        (MINIMAL + "digits = true", ["3:1 wrong-value"]),
        (MINIMAL + 'digits = "4"', ["3:1 wrong-value"]),
        (MINIMAL + "preferred_units = 3", ["3:1 wrong-value"]),
        (MINIMAL + '[preferred_units]\nstres = "MPa"', ["4:1 unknown-key"]),
        (MINIMAL + '[preferred_units]\nstress = "Mpa"', ["4:1 unknown-unit"]),
        (MINIMAL + '[preferred_units]\nstress = "kN"', ["4:1 wrong-value"]),
        (MINIMAL + "[preferred_units]\nstress = 3", ["4:1 unknown-unit"]),
        (MINIMAL + 'preferred_units.stress = "kN"', ["3:1 wrong-value"]),
        (MINIMAL + "number = ", ["3:10 toml-syntax"]),
        (MINIMAL + 'title = "y"', ["3:12 toml-syntax"]),
        (MINIMAL + "x = " + "9" * 5000, ["3:5005 toml-syntax"]),
    ],
)
def test_faults(text: str, diagnostics: list[str]) -> None:
    assert project(text) == (None, diagnostics)


def test_an_unknown_key_names_the_nearest() -> None:
    _, (fault,) = project_from(SourceFile("project.toml", MINIMAL + 'orginator = "x"'))
    assert fault.hint == "the nearest is 'originator'"


def test_references() -> None:
    source = SourceFile(
        "references.toml",
        '[EN1993-1-1]\ntitle = "Design of steel structures"\nnumber = "EN 1993-1-1"\nedition = 1\n'
        "year = 2005\n"
        '["DWG 201"]\ntitle = "Stringers"\n[LOADS]\ntitel = "Loads"\nyear = true\n',
    )
    found, diagnostics = references_from(source)
    steel = found["EN1993-1-1"]
    assert (steel.title, steel.number, steel.edition, steel.year) == (
        "Design of steel structures",
        "EN 1993-1-1",
        "1",
        "2005",
    )
    assert source.slice(steel.span) == "EN1993-1-1"
    assert [f"{d.line}:{d.column} {d.code}" for d in diagnostics] == [
        "6:2 bad-reference-key",
        "8:2 key-missing",
        "9:1 unknown-key",
        "10:1 wrong-value",
    ]


def test_references_that_are_no_tables() -> None:
    found, (fault,) = references_from(SourceFile("references.toml", 'EN1990 = "Basis"\n'))
    assert not found
    assert (fault.code, fault.line, fault.column) == ("wrong-value", 1, 1)


def write(root: Path, **files: str) -> None:
    for name, text in files.items():
        path = root / name.replace("__", "/").replace("_dot_", ".")
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text, encoding="utf-8")


def test_the_files_of_a_project(tmp_path: Path) -> None:
    write(
        tmp_path,
        project_dot_toml=MINIMAL,
        references_dot_toml='[A]\ntitle = "a"\n',
        calcs__W2_dot_md="# b\n",
        calcs__W1_dot_md="# a\n",
        calcs___dot_hidden_dot_md="# no\n",
        calcs__notes_dot_txt="no",
        profiles__own_dot_csv="x\n",
        reviews__one_dot_toml="",
    )
    files, diagnostics = load_project(tmp_path)
    assert not diagnostics
    assert files.project is not None
    assert [s.path for s in files.calcs] == ["calcs/W1.md", "calcs/W2.md"]
    assert [s.path for s in (*files.profiles, *files.methods, *files.reviews)] == [
        "profiles/own.csv",
        "reviews/one.toml",
    ]
    assert [*files.references] == ["A"]


def test_a_folder_that_is_no_project(tmp_path: Path) -> None:
    files, diagnostics = load_project(tmp_path / "none")
    assert files.project is None
    assert [d.code for d in diagnostics] == ["no-project", "no-calcs"]


def test_a_file_that_is_not_utf_8_does_not_hide_the_others(tmp_path: Path) -> None:
    write(tmp_path, project_dot_toml=MINIMAL, calcs__A_dot_md="# a\n")
    (tmp_path / "calcs" / "B.md").write_bytes(b"# \xff\n")
    files, (fault,) = load_project(tmp_path)
    assert [s.path for s in files.calcs] == ["calcs/A.md"]
    assert (fault.source.path, fault.code, fault.column) == ("calcs/B.md", "not-utf-8", 3)
