"""The typed record, its schema, and the place of every value in its file."""
