"""calcgen: checked HTML calc packages for bending, from plain-text calc files."""

__version__ = "0.1.0"
