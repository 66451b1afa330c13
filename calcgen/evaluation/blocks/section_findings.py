"""What is found of a section before it is put into the words and units of its page."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field

from calcgen.mechanics.second_route.residual import Residual
from calcgen.mechanics.section import Inertia


@dataclass(frozen=True)
class Findings:
    """Properties of a section in SI, by the keys of `conventions.PROPERTIES`.

    Attributes
    ----------
    computed : area, centroid and second moments of the outlines.
    values : the values in force.
    provenance : by which route each was found.
    beside : the same by another route: its label and value.
    absent : keys of properties that the section does not have -> the reason.
    published, own, tolerances : what a catalogue gives, the outline's own, and how far they may differ.
    residuals : of the second route.
    """

    computed: Inertia
    values: Mapping[str, float]
    provenance: Mapping[str, str]
    beside: Mapping[str, tuple[str, float]] = field(default_factory=dict)
    absent: Mapping[str, str] = field(default_factory=dict)
    published: Mapping[str, float] = field(default_factory=dict)
    own: Mapping[str, float] = field(default_factory=dict)
    tolerances: Mapping[str, float] = field(default_factory=dict)
    residuals: tuple[Residual, ...] = ()
