"""Results found again by a route that shares no code with the first, and the residuals between the two."""
