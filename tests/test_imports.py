"""Imports point one way; mechanics needs numpy alone, and scipy and shapely where it says so."""

from __future__ import annotations

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parent.parent / "calcgen"

# Each room with the rooms that it may import, itself apart.
ALLOWED = {
    "text": set(),
    "quantities": {"text"},
    "mechanics": set(),
    "profiles": set(),
    "language": {"quantities", "text"},
    "evaluation": {"language", "mechanics", "profiles", "quantities", "text"},
    "figures": {"evaluation", "language", "mechanics", "quantities", "text"},
    "site": {"evaluation", "language", "mechanics", "quantities", "text"},
    "trail": {"disk", "evaluation", "language", "quantities", "text"},
    "publishing": {"disk"},
    "disk": set(),
    "project": {"language", "quantities", "text"},
    "pipeline": {
        *("catalogues", "current", "evaluation", "figures", "language", "outcome", "profiles", "project"),
        *("publishing", "quantities", "site", "text", "trail", "views"),
    },
    "outcome": {"text"},
    "current": {"outcome", "publishing"},
    "views": {"quantities", "site", "trail"},
    "watch": set(),
    "preview": set(),
    "start": set(),
    "catalogues": {"mechanics", "profiles", "text"},
    "cli": {
        *("catalogues", "current", "outcome", "pipeline", "preview", "profiles", "project", "start"),
        *("text", "watch"),
    },
    "__main__": {"cli"},
    "__init__": set(),
}  # fmt: skip

# What modules and packages of mechanics import besides numpy.
HEAVY = {
    "boolean.py": {"shapely"},
    "delaunay.py": {"scipy"},
    "mesh.py": {"scipy"},
    "saint_venant": {"scipy", "shapely"},
    "second_route/influence.py": {"scipy"},
}

MODULES = sorted(PACKAGE.rglob("*.py"))


def imported(path: Path) -> set[str]:
    names: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            names.update(alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom) and node.module:
            names.add(node.module)
            if node.module == "calcgen":
                names.update(f"calcgen.{alias.name}" for alias in node.names)
    return names


def room(path: Path) -> str:
    return path.relative_to(PACKAGE).parts[0].removesuffix(".py")


@pytest.mark.parametrize("path", MODULES, ids=lambda p: p.relative_to(PACKAGE).as_posix())
def test_imports_point_one_way(path: Path) -> None:
    here = room(path)
    rooms = {
        n.split(".")[1] for n in imported(path) if n.startswith("calcgen.") and n != "calcgen.__version__"
    }
    assert rooms - {here, "__version__"} <= ALLOWED[here]


@pytest.mark.parametrize(
    "path", [p for p in MODULES if room(p) == "mechanics"], ids=lambda p: p.relative_to(PACKAGE).as_posix()
)
def test_mechanics_needs_numpy_alone(path: Path) -> None:
    import sys

    outside = {n.split(".")[0] for n in imported(path)} - set(sys.stdlib_module_names) - {"calcgen"}
    here = path.relative_to(PACKAGE / "mechanics")
    assert outside <= {"numpy"} | HEAVY.get(here.parts[0], set()) | HEAVY.get(here.as_posix(), set())


@pytest.mark.parametrize("path", MODULES, ids=lambda p: p.relative_to(PACKAGE).as_posix())
def test_heavy_libraries_are_imported_where_they_are_used(path: Path) -> None:
    """A build that needs neither scipy nor shapely does not wait for them."""
    tree = ast.parse(path.read_text(encoding="utf-8"))
    at_once = [node for node in tree.body if isinstance(node, ast.Import | ast.ImportFrom)]
    names = {alias.name for node in at_once if isinstance(node, ast.Import) for alias in node.names}
    names |= {node.module or "" for node in at_once if isinstance(node, ast.ImportFrom)}
    assert not {name.split(".")[0] for name in names} & {"scipy", "shapely"}


def test_calc_text_is_never_executed() -> None:
    for path in MODULES:
        calls = {
            node.func.id
            for node in ast.walk(ast.parse(path.read_text(encoding="utf-8")))
            if isinstance(node, ast.Call) and isinstance(node.func, ast.Name)
        }
        assert not calls & {"eval", "exec", "compile", "__import__"}, path
