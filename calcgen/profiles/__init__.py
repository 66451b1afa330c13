"""Catalogues of sections: data in CSV files, a source per row, and their reader."""

from calcgen.profiles.catalogue import Catalogue, builtin_catalogue
from calcgen.profiles.profile import CatalogueFault, Profile, designation_key
from calcgen.profiles.reader import read_catalogue

__all__ = ["Catalogue", "CatalogueFault", "Profile", "builtin_catalogue", "designation_key", "read_catalogue"]
