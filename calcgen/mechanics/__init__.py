"""Mechanics of sections and beams: SI floats in, SI floats out; numpy alone.

A section is seen looking along the beam, x to the right and y up. The suffix `h` means about the horizontal
axis, `v` about the vertical one: I_h = ∫y² dA, I_v = ∫x² dA, I_hv = ∫xy dA, about the centroid.
"""
