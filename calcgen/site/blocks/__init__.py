"""Results of blocks -> what their templates show: one file a block kind."""
