"""Results to tables: one report a file. Knows no file format."""
