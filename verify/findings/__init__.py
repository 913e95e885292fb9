"""Where a fault stands, what it is, and the result of a record or a run."""
