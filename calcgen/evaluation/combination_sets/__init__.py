"""Combination sets of design standards, generated from the kinds of load cases."""
