"""Tables to files: workbooks, CSV, Parquet, whole or not at all. Knows no loan."""
