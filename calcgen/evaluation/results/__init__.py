"""What evaluation finds: the frozen types that figures, pages and the trail read, by block kind."""
