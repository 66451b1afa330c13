"""The catalogues of a project, its own beside the program's; and what their rows leave to the outline."""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from calcgen.mechanics.outline import OutlineError
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shape import ShapeError
from calcgen.mechanics.shapes import form_for
from calcgen.profiles import Catalogue, Profile, builtin_catalogue, read_catalogue
from calcgen.text import Diagnostic, SourceFile, Span, error


def joined_catalogue(sources: Iterable[SourceFile]) -> tuple[Catalogue, tuple[Diagnostic, ...]]:
    """Return the program's catalogue joined by the files of an office, and the faults of the latter."""
    catalogue = builtin_catalogue()
    faults: list[Diagnostic] = []
    for source in sources:
        profiles, in_text = read_catalogue(source.path, source.text)
        catalogue, in_joining = catalogue.joined(profiles)
        for fault in (*in_text, *in_joining):
            place = source.line_starts[fault.line - 1] + fault.column - 1
            faults.append(error("catalogue", source, Span(place, place), fault.message, hint=fault.hint))
    return catalogue, tuple(faults)


def of_outline(profile: Profile) -> Mapping[str, float]:
    """Return A, I, W_el and W_pl (m², m⁴, m³; h horizontal axis, v vertical) of the section's outline.

    Nothing where the nominal sizes make no outline.
    """
    form = form_for(profile.shape, frozenset(profile.dimensions))
    try:
        shape = form.build(**{k: v for k, v in profile.dimensions.items() if k in form.names})
        own = section_properties(shape.outline)
    except (ShapeError, OutlineError):
        return {}
    return {name: getattr(own, name) for name in ("A", "I_h", "I_v", "W_el_h", "W_el_v", "W_pl_h", "W_pl_v")}
