"""The empty book: its columns as data, and the one writer of it."""
