"""Evaluated calcs -> pages -> the files of the package."""
