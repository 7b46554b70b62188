"""A workbook of loans in, exact dated schedules out."""

__version__ = "0.1.0"
