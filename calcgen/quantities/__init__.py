"""Units, display units, significant figures, symbols and subscripts."""
