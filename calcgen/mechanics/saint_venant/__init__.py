"""Saint-Venant's torsion and shear of the real outline, by finite elements."""

from calcgen.mechanics.delaunay import MeshError
from calcgen.mechanics.saint_venant.solution import SaintVenant, Shear, TorsionalStress, saint_venant

__all__ = ["MeshError", "SaintVenant", "Shear", "TorsionalStress", "saint_venant"]
