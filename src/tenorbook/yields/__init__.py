"""Rates that are derived from a loan, one published definition a file."""
