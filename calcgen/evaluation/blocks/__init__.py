"""One file a block kind: quantities to SI arrays, to mechanics, and back."""
