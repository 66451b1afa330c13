"""Figures of a calc: frozen drawings in the units shown, composed for their place, rendered as SVG."""
