"""The command line; the only part of the program that prints."""
