"""Calc -> EvaluatedCalc: scope, formulas, checks, sections, beams, stresses."""
