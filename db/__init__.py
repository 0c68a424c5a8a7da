"""The shelf file: SQLite, and nothing but."""
