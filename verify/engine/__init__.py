"""Running many records: serial or in a pool of processes, same result."""
