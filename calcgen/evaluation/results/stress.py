"""The stress of a section under given forces."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from calcgen.evaluation.results.common import Premise, Result, SecondRoute
from calcgen.evaluation.results.lines import CheckResult
from calcgen.evaluation.results.section import SectionResult
from calcgen.mechanics.arrays import FloatArray, Point
from calcgen.mechanics.combined_stress import CombinedExtremes
from calcgen.mechanics.curved import CurvedStress
from calcgen.mechanics.field import StressField
from calcgen.mechanics.shear import Cuts
from calcgen.mechanics.stress import Forces, StressPlane
from calcgen.mechanics.wall_shear import WallFlow, WallTorsion
from calcgen.mechanics.walls import WallSection
from calcgen.quantities.display import Shown
from calcgen.text import Span


@dataclass(frozen=True, eq=False)
class PlasticResult:
    """What a section carries when it yields throughout, under the axial force given.

    Attributes
    ----------
    M, M_lat : plastic moments, N·m, in the proportion and with the signs of those given.
    M_el : moment at first yield without axial force, N·m, signed where one moment acts alone; None where a
        part carries no tension, so that nothing is elastic throughout.
    M_0 : the plastic moment without axial force, N·m, never negative.
    utilisation : the moment given over the plastic one.
    field : the stress blocks. interaction : axial force, N, and moment, N·m, (n, 2), around the limit about
        the axis of the moment given; None where both moments act.
    """

    M: float
    M_lat: float
    M_el: float | None
    M_0: float
    utilisation: float
    field: StressField
    forces: Forces
    interaction: FloatArray | None


@dataclass(frozen=True, eq=False)
class ShearResult:
    """Shear stress under V, V_lat and T.

    Attributes
    ----------
    level, upright : flow across level and upright cuts.
    walls : mid-line properties of a thin-walled shape, and `flow` and `torsion` along it; None for others.
    torsion_method : how the stress of the torque was found, '' without one.
    largest_torsion : stress of the torque alone, Pa, its place, m, and its direction; None along walls.
    joints : flow that the joints of each part carry, N/m; contacts : the lines along which it touches
        others, m; connected : whether all parts hang together.
    at : shear stress at a point, m -> Pa.
    """

    level: Cuts
    upright: Cuts
    walls: WallSection | None
    flow: WallFlow | None
    torsion: WallTorsion | None
    torsion_method: str
    largest_torsion: tuple[float, Point, Point] | None
    combined: CombinedExtremes
    joints: Mapping[str, float]
    contacts: Mapping[str, tuple[tuple[Point, ...], ...]]
    connected: bool
    at: Callable[[Point], float]


@dataclass(frozen=True)
class StressResult:
    """The stress of a section under given forces.

    Attributes
    ----------
    model : word of the language.
    forces, V, V_lat, T : in SI; forces_shown has those written, in the unit given.
    field : normal stress; of the straight bar where `curved` is set.
    unloaded : what an elastic unloading leaves, for the elastic-plastic model.
    modulus : of the reference stress, Pa, None where strains are not known.
    results : of the section; parts : of each part, line of bars and point, by its name.
    shear : None where no shear force or torque acts.
    """

    name: str
    section: SectionResult
    model: str
    forces: Forces
    V: float
    V_lat: float
    T: float
    forces_shown: Mapping[str, Shown]
    field: StressField
    curved: CurvedStress | None
    unloaded: StressField | None
    plastic: PlasticResult | None
    shear: ShearResult | None
    modulus: float | None
    results: tuple[Result, ...]
    parts: Mapping[str, tuple[Result, ...]]
    points: Mapping[str, Point]
    check: CheckResult | None
    premises: tuple[Premise, ...]
    second_route: tuple[SecondRoute, ...]
    line: int
    span: Span

    @property
    def plane(self) -> StressPlane:
        """The plane of reference stress."""
        return self.field.plane
