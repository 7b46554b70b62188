"""Files to plain cells, within limits. Knows file formats, and nothing about loans."""
